"""Bench sums: an answer with its working, no database needed. Each subject stands in a file of its own."""

from fleetcare.cli.calc import compression, lash, oil, shapes, valve_order
from fleetcare.cli.parser import Commands


def add_commands(commands: Commands) -> None:
    """Add `calc` and its sums."""
    calc = commands.add_parser("calc", help="bench sums, no database needed")
    sums = calc.add_subparsers(metavar="SUM", required=True)
    for subject in (valve_order, lash, compression, shapes, oil):
        subject.add_sums(sums)
