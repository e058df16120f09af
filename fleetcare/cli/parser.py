"""The parser every command shares: options good in any place, one-line errors, typed values."""

import argparse
from collections.abc import Callable
from typing import Any, NoReturn, TypeAlias, TypeVar

from fleetcare.cli import output
from fleetcare.domain.days import parse_day
from fleetcare.domain.numbers import parse_number, parse_whole
from fleetcare.errors import FleetError, Misread

Value = TypeVar("Value")


class CommandParser(argparse.ArgumentParser):
    """A parser that takes --db and --as-of at every level and raises Misread instead of printing usage."""

    def __init__(self, **settings: Any) -> None:
        super().__init__(allow_abbrev=False, **settings)
        # SUPPRESS: a sub-command that was not given the option must not wipe out what its parent was given.
        everywhere = self.add_argument_group("options of every command")
        everywhere.add_argument(
            "--db",
            metavar="PATH|URL",
            type=typed(_parse_address),
            default=argparse.SUPPRESS,
            help="the shop's database, else FLEETCARE_DB",
        )
        everywhere.add_argument(
            "--as-of",
            metavar="DATE",
            type=typed(parse_day),
            default=argparse.SUPPRESS,
            help="answer as on this day, such as 2026-05-01",
        )

    def error(self, message: str) -> NoReturn:
        """Say in one line what is wrong and where the right form is shown."""
        raise Misread(message, f"see {self.prog} --help")

    def _print_message(self, message: str, file: Any = None) -> None:
        """Print help and version like any answer; argparse's own way hides a disk that is full."""
        output.say(message.rstrip("\n"))


# Handed to each group's add_commands; the class is generic for type checkers only.
Commands: TypeAlias = "argparse._SubParsersAction[CommandParser]"


def _parse_address(text: str) -> str:
    """Read where the database is. Raises Misread for nothing, which must not mean the person's own file."""
    if not text.strip():
        raise Misread("no database is named", "name a file, or leave --db out")
    return text


def typed(parse: Callable[[str], Value]) -> Callable[[str], Value]:
    """Make a parse function an argument type whose errors name the option they belong to."""

    def convert(text: str) -> Value:
        try:
            return parse(text)
        except FleetError as error:
            raise argparse.ArgumentTypeError(str(error)) from None

    return convert


number = typed(parse_number)
whole = typed(parse_whole)
day = typed(parse_day)
