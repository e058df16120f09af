"""The screens, as far as a command line has to do with them: whether they can be shown, and on which database."""

import argparse
import sys
from collections.abc import Callable
from contextlib import AbstractContextManager, nullcontext

from fleetcare.cli.shop import context_of
from fleetcare.context import Context
from fleetcare.errors import Misread

OpenScreens = Callable[[Context], int]
"""Shows the screens on a database until they are left, and gives the exit status."""


def shop_screens(given: argparse.Namespace) -> AbstractContextManager[Context]:
    """Give the shop's database to show; what a command line without a command asks for."""
    require_terminal()
    context = context_of(given)
    context.path  # noqa: B018 - an address that is no file is refused before the screen is taken over
    return nullcontext(context)


def require_terminal() -> None:
    """Raise Misread unless keys can be read and screens shown; they are drawn on stderr."""
    if not all(stream is not None and stream.isatty() for stream in (sys.stdin, sys.stdout, sys.stderr)):
        raise Misread(
            "the screens need a terminal for input, output and errors", "name a command, see fleetcare --help"
        )
