"""What every command on the shop's database shares: its context, its options as a draft, lines that moved."""

import argparse
from collections.abc import Callable, Mapping, Sequence
from datetime import date
from typing import TYPE_CHECKING, Any

from fleetcare.cli import output
from fleetcare.context import Context
from fleetcare.domain.lines import State
from fleetcare.domain.quantities import plain
from fleetcare.domain.quantities import tenth as tenth
from fleetcare.errors import Misread

if TYPE_CHECKING:
    from fleetcare.operations.due import Moved
    from fleetcare.rules.due.row import DueRow

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


def say_moved(moves: "Sequence[Moved]") -> None:
    """Print each line whose due point moved, old and new; the own one where only that moved under a deferral."""
    for move in moves:
        row = move.after or move.before
        assert row is not None
        before, after = say_point(move.before), say_point(move.after)
        if before == after and move.before is not None and move.after is not None:
            before, after = f"own point {_say_own(move.before)}", f"{_say_own(move.after)}, deferred all the same"
        output.say(f"{row.engine}  {row.task}: {before} → {after}")


def _say_own(row: "DueRow") -> str:
    counted = f"{plain(tenth(row.own_due_at))} {row.meter_unit}" if row.own_due_at is not None else ""
    return " or ".join(part for part in (counted, row.own_due_on.isoformat() if row.own_due_on else "") if part)


def say_point(row: "DueRow | None") -> str:
    """Say a line's due point: on the dial first, then its day."""
    from fleetcare.operations.due_words import say_counted

    if row is None:
        return "no line"
    parts = [say_counted(row), row.next_due_on.isoformat() if row.next_due_on else ""]
    return " or ".join(part for part in parts if part) or f"{row.state}, {row.reason}"


def say_line(row: "DueRow") -> str:
    """Say how a line stands: its state, then its point or what to enter."""
    point = say_point(row)
    return point if row.state == State.UNSET else f"{row.state}, {point}"


def today_of(given: argparse.Namespace) -> date:
    """Give the day a command works on."""
    return context_of(given).today()


def add_options(parser: argparse.ArgumentParser, options: Mapping[str, tuple[str, str]], **settings: Any) -> None:
    """Add plain options that take one text each: name to (what stands for the value, help)."""
    for name, (metavar, text) in options.items():
        parser.add_argument(name, metavar=metavar, help=text, **settings)
