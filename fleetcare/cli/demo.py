"""`demo`: the demo fleet, written to a file."""

import argparse

from fleetcare.cli import output
from fleetcare.cli.parser import Commands
from fleetcare.cli.shop import context_of


def add_commands(commands: Commands) -> None:
    """Add `demo`."""
    demo = commands.add_parser("demo", help="write the demo fleet, an invented drainage board, to a new file")
    demo.add_argument("--keep", required=True, metavar="FILE", help="new file to write it to, as of today or --as-of")
    demo.set_defaults(run=_demo)


def _demo(given: argparse.Namespace) -> None:
    from pathlib import Path

    from fleetcare.demo.build import build

    out, anchor = Path(given.keep), context_of(given).today()
    build(out, anchor)
    output.say(f"The demo fleet as it stands on {anchor} is in {out}.")
    output.say(f"Look at it with fleetcare --db {out} --as-of {anchor} due")
