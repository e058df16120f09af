"""`calc`: bench sums, an answer with its working or one JSON object; no database needed."""

import argparse

from fleetcare.cli import output
from fleetcare.cli.parser import CommandParser, Commands, typed
from fleetcare.sums import SUMS
from fleetcare.sums.base import Given, Option, Sum


def add_commands(commands: Commands) -> None:
    """Add `calc` and its sums."""
    calc = commands.add_parser("calc", help="bench sums, no database needed")
    sums = calc.add_subparsers(metavar="SUM", required=True)
    for one in SUMS:
        _add_sum(sums, one)


def _add_sum(sums: Commands, wanted: Sum) -> None:
    """Add one sum to `calc`, with its options."""
    parser = sums.add_parser(wanted.name, help=wanted.summary)
    parser.add_argument("--json", action="store_true", help="print one JSON object, figures unrounded")
    parser.set_defaults(run=lambda given: _print(wanted, given))
    if wanted.is_one_of:
        group = parser.add_mutually_exclusive_group(required=True)
        for option in wanted.options:
            group.add_argument(
                f"--{option.name}", type=typed(option.takes.read), metavar=option.metavar, help=option.tells
            )
        return
    for option in wanted.options:
        _add_option(parser, option)


def _add_option(parser: CommandParser, option: Option) -> None:
    if option.words:
        parser.add_argument(f"--{option.name}", choices=option.words, default=option.default, help=option.tells)
        return
    parser.add_argument(
        f"--{option.name}",
        type=typed(option.takes.read),
        required=option.is_required,
        default=option.default,
        metavar=option.metavar,
        help=option.tells,
    )


def _print(wanted: Sum, given: argparse.Namespace) -> None:
    answer = wanted.answer(Given(**vars(given)))
    if given.json:
        output.deliver(output.json_text(answer.keys))
    else:
        output.say(answer.sentence)
