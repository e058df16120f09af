"""The command line as a tree of commands; each group stands in a file of its own and loads what it needs when run."""

import argparse
import re
from collections.abc import Mapping, Sequence
from functools import cache
from importlib import import_module

from fleetcare import __version__
from fleetcare.cli import output
from fleetcare.cli.parser import CommandParser
from fleetcare.cli.screens import OpenScreens, shop_screens
from fleetcare.errors import FleetError, Misread

# What Python makes of bytes that are not UTF-8: lone surrogates.
_OTHER_BYTES = re.compile("[\ud800-\udfff]")


_GROUPS: Mapping[str, tuple[str, ...]] = {
    "due": ("due", "show"),
    "items": ("engine", "machine"),
    "tasks": ("task",),
    "schedules": ("schedule",),
    "readings": ("reading",),
    "log": ("log", "correct"),
    "measure": ("measure",),
    "findings": ("findings", "answer"),
    "rules": ("rules",),
    "defer": ("defer",),
    "forecast": ("forecast",),
    "imports": ("import",),
    "settings": ("setting",),
    "upkeep": ("backup", "check", "upgrade"),
    "demo": ("demo",),
    "calc": ("calc",),
}
"""The files of this folder that hold commands, in the order of help, with the commands each adds."""


@cache
def build_parser(command: str | None = None) -> CommandParser:
    """Give the parser of the whole command line, made once; a parsed command carries its handler as `run`.

    With a command known here it knows that one and those of the same file: nobody waits for commands nobody named.
    """
    groups = [name for name, commands in _GROUPS.items() if command in commands] or [*_GROUPS]
    parser = CommandParser(
        prog="fleetcare",
        description="What each engine of a small fleet needs next, with the working shown.",
        epilog="Exit status: 0 done, 1 refused, 2 the command line is wrong, 3 no database, 130 interrupted.",
    )
    parser.add_argument("--version", action="version", version=f"fleetcare {__version__}")
    commands = parser.add_subparsers(title="commands", metavar="COMMAND")
    for group in groups:
        import_module(f"fleetcare.cli.{group}").add_commands(commands)
    return parser


def _parse(arguments: Sequence[str]) -> argparse.Namespace:
    """Parse a command line; one without a command does not need the parsers of them all."""
    _refuse_other_bytes(arguments)
    try:
        given, rest = CommandParser(prog="fleetcare", add_help=False).parse_known_args(arguments)
    except Misread:
        rest = [*arguments]  # what is wrong is said by the command it belongs to
    if rest:
        return build_parser(rest[0]).parse_args(arguments)
    given.run = shop_screens
    return given


def _refuse_other_bytes(arguments: Sequence[str]) -> None:
    """Refuse what is no UTF-8: no file keeps it and no terminal shows it."""
    for argument in arguments:
        if _OTHER_BYTES.search(argument):
            raise Misread(f"{argument!r} holds bytes that are not UTF-8 text", "type it in a terminal set to UTF-8")


def run(arguments: Sequence[str], open_screens: OpenScreens) -> int:
    """Run one command line and give its exit status. What is not a FleetError is a fault of ours and passes through.

    A command that wants the screens gives the database to show on them, to be held while they are open.
    """
    try:
        parsed = _parse(arguments)
        shown = parsed.run(parsed)
        if shown is None:
            return 0
        with shown as context:
            return open_screens(context)
    except FleetError as error:
        output.complain(*error.lines())
        return error.exit_code
    except SystemExit as end:  # --help and --version
        return int(end.code or 0)
