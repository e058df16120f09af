"""`demo`: the demo fleet, on the screens or written to a file."""

import argparse
from collections.abc import Iterator
from contextlib import AbstractContextManager, contextmanager
from datetime import date
from pathlib import Path

from fleetcare.cli import output
from fleetcare.cli.parser import Commands
from fleetcare.cli.screens import require_terminal
from fleetcare.cli.shop import context_of
from fleetcare.context import Context


def add_commands(commands: Commands) -> None:
    """Add `demo`."""
    demo = commands.add_parser("demo", help="look around in the demo fleet, an invented drainage board")
    demo.add_argument("--keep", metavar="FILE", help="write it to a new file, as of today or --as-of, and stop")
    demo.set_defaults(run=_demo)


def _demo(given: argparse.Namespace) -> AbstractContextManager[Context] | None:
    anchor = context_of(given).today()
    if given.keep is not None:
        _keep(Path(given.keep), anchor)
        return None
    require_terminal()
    return _private_copy(anchor)


def _keep(out: Path, anchor: date) -> None:
    from fleetcare.demo.build import build

    build(out, anchor)
    output.say(f"The demo fleet as it stands on {anchor} is in {out}.")
    output.say(f"Look at it with fleetcare --db {out} --as-of {anchor} due")


@contextmanager
def _private_copy(anchor: date) -> Iterator[Context]:
    """Give the demo fleet in a folder that is gone again afterwards."""
    from tempfile import TemporaryDirectory

    from fleetcare.demo.build import build

    output.complain(f"Making up the demo fleet for {anchor} ...")
    with TemporaryDirectory(prefix="fleetcare-demo-") as folder:
        path = Path(folder, "demo.db")
        build(path, anchor)
        yield Context(str(path), anchor, drafts=Path(folder, "drafts"))
