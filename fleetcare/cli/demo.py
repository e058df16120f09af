"""`demo`: the demo fleet, on the screens or written to a file."""

import argparse
from collections.abc import Iterator
from contextlib import AbstractContextManager, contextmanager
from datetime import date
from pathlib import Path

from fleetcare.cli import output
from fleetcare.cli.parser import Commands, whole
from fleetcare.cli.screens import require_terminal
from fleetcare.cli.shop import context_of
from fleetcare.context import Context


def add_commands(commands: Commands) -> None:
    """Add `demo`."""
    demo = commands.add_parser("demo", help="look around in the demo fleet, an invented drainage board")
    demo.add_argument("--keep", metavar="FILE", help="write it to a new file, as of today or --as-of, and stop")
    demo.add_argument(
        "--engines",
        metavar="N",
        type=whole,
        help="a generated yard of N engines instead, 1 to 2000, to try long lists on",
    )
    demo.set_defaults(run=_demo)


def _demo(given: argparse.Namespace) -> AbstractContextManager[Context] | None:
    anchor = context_of(given).today()
    if given.keep is not None:
        _keep(Path(given.keep), anchor, given.engines)
        return None
    require_terminal()
    return _private_copy(anchor, given.engines)


def _keep(out: Path, anchor: date, engines: int | None) -> None:
    from fleetcare.demo.build import build

    build(out, anchor, engines)
    output.say(f"{_called(engines).capitalize()} as it stands on {anchor} is in {out}.")
    output.say(f"Look at it with fleetcare --db {out} --as-of {anchor} due")


@contextmanager
def _private_copy(anchor: date, engines: int | None) -> Iterator[Context]:
    """Give the demo fleet in a folder that is gone again afterwards."""
    from tempfile import TemporaryDirectory

    from fleetcare.demo.build import build

    output.complain(f"Making up {_called(engines)} for {anchor} ...")
    with TemporaryDirectory(prefix="fleetcare-demo-") as folder:
        path = Path(folder, "demo.db")
        build(path, anchor, engines)
        yield Context(str(path), anchor, drafts=Path(folder, "drafts"))


def _called(engines: int | None) -> str:
    return "the demo fleet" if engines is None else f"a generated yard of {engines}"
