"""What every bench sum shares: its command, and an answer as a sentence or as one JSON object."""

import argparse
from collections.abc import Callable
from dataclasses import dataclass
from decimal import Decimal
from typing import Any

from fleetcare.cli import output
from fleetcare.cli.parser import CommandParser, Commands
from fleetcare.domain.quantities import plain
from fleetcare.errors import Misread


@dataclass(frozen=True, slots=True)
class Answer:
    """What a sum prints: a sentence with the working, or with --json the object."""

    sentence: str
    keys: dict[str, Any]


def add_sum(sums: Commands, name: str, summary: str, answer: Callable[[argparse.Namespace], Answer]) -> CommandParser:
    """Add one sum to `calc` and give its parser, to which its options are then added."""
    parser = sums.add_parser(name, help=summary)
    parser.add_argument("--json", action="store_true", help="print one JSON object, figures unrounded")
    parser.set_defaults(run=lambda given: _print(answer(given), as_json=given.json))
    return parser


def all_or_none(given: argparse.Namespace, *options: str) -> bool:
    """Whether options that only make sense together were given. Raises Misread where some are missing."""
    missing = [option for option in options if getattr(given, option.replace("-", "_")) is None]
    if missing and len(missing) < len(options):
        raise Misread(
            f"missing: {', '.join(f'--{option}' for option in missing)}",
            f"give all of {', '.join(f'--{option}' for option in options)}, or none",
        )
    return not missing


def shown(value: Decimal) -> str:
    """Round for reading: four decimals at most, fewer where they are zeros."""
    return plain(round(value, 4))


def _print(answer: Answer, *, as_json: bool) -> None:
    if as_json:
        output.deliver(output.json_text(answer.keys))
    else:
        output.say(answer.sentence)
