"""What every command on the shop's database shares: its context, its options as a draft, lines that moved."""

import argparse
from collections.abc import Callable, Iterable, Mapping
from datetime import date
from typing import TYPE_CHECKING, Any

from fleetcare.cli import output
from fleetcare.context import Context
from fleetcare.domain.quantities import tenth as tenth
from fleetcare.errors import Misread

if TYPE_CHECKING:
    from fleetcare.operations.due import Moved
    from fleetcare.operations.entering import Entered

_SOON_DONE = 100  # engines that are judged before anybody begins to wonder
# What parsing leaves beside the options themselves.
_NOT_OPTIONS = frozenset({"db", "as_of", "run", "json"})


def context_of(given: argparse.Namespace) -> Context:
    """Give the context a command line asks for: its database, and the day it works on."""
    return Context(getattr(given, "db", None), getattr(given, "as_of", None))


def options_of(given: argparse.Namespace, *but: str) -> dict[str, object]:
    """Give the options a person gave, by name, to read a draft from."""
    return {name: value for name, value in vars(given).items() if name not in _NOT_OPTIONS and name not in but}


def changes_of(given: argparse.Namespace, *but: str) -> dict[str, object]:
    """Give the options of an edit: only those given. Raises Misread for an empty one, which would change nothing."""
    changes = {name: value for name, value in options_of(given, *but).items() if value not in (None, False)}
    for name, value in changes.items():
        if isinstance(value, str) and not value.strip():
            raise Misread(f"{option_label(name)} is empty", "give it a value, or leave it out")
    return changes


def null(value: object) -> object:
    """Give a value for JSON, where nothing to say is null."""
    return None if value == "" else value


def option_label(field: str) -> str:
    """Name a draft's field as the command line does."""
    return field.upper() if field in {"tag", "value", "entry"} else "--" + field.replace("_", "-")


def label_with(**positional: str) -> Callable[[str], str]:
    """Give `option_label` for a command that takes more fields by their place, each with what stands for it."""
    return lambda field: positional.get(field) or option_label(field)


def say_moved(moves: "Iterable[Moved]") -> None:
    """Print each line whose due point moved, old and new."""
    from fleetcare.operations.stored_words import moved_words

    for line in moved_words(moves):
        output.say(line)


def say_entered(entered: "Entered") -> None:
    """Print what was stored, the lines it moved, and what it is good to know now; warn of what to beware of."""
    for line in (*entered.said, *entered.moved, *entered.notes):
        output.say(line)
    if entered.warnings:
        output.complain(*entered.warnings)


def today_of(given: argparse.Namespace) -> date:
    """Give the day a command works on."""
    return context_of(given).today()


def add_options(parser: argparse.ArgumentParser, options: Mapping[str, tuple[str, str]], **settings: Any) -> None:
    """Add plain options that take one text each: name to (what stands for the value, help)."""
    for name, (metavar, text) in options.items():
        parser.add_argument(name, metavar=metavar, help=text, **settings)


def say_progress(done: int, of: int) -> None:
    """Say on stderr how far long work has come, where there is enough of it to wait for."""
    if of > _SOON_DONE:
        output.complain(f"Judged {100 * done // of} % of what is to be judged.")
