"""`import`: whole files of engines, readings or work done."""

import argparse
from collections.abc import Sequence
from pathlib import Path
from typing import TYPE_CHECKING

from fleetcare.cli import output
from fleetcare.cli.parser import Commands
from fleetcare.cli.shop import context_of, say_moved

if TYPE_CHECKING:
    from fleetcare.operations.imports_rows import Imported

_MOST_SHOWN = 20
_KINDS = {
    "engines": "tag and any option of engine add, with underscores; several values in a cell are joined by ;",
    "readings": "engine, on and value, or meter, unit and note besides",
    "log": "engine, task and on, or at, by and note besides; one task a row",
}


def add_commands(commands: Commands) -> None:
    """Add `import`."""
    kinds = commands.add_parser("import", help="bring in a CSV file, every row or none").add_subparsers(
        metavar="KIND", required=True
    )
    for kind, columns in _KINDS.items():
        parser = kinds.add_parser(kind, help=f"columns {columns}", description=f"Columns: {columns}.")
        parser.add_argument("file", metavar="FILE", help="CSV in UTF-8, its first line the names of the columns")
        parser.add_argument("--dry-run", action="store_true", help="only say what would be stored")
        parser.set_defaults(run=_import, kind=kind)


def _import(given: argparse.Namespace) -> None:
    from fleetcare.operations.imports import read_import, store_import

    file = read_import(given.kind, Path(given.file))
    context = context_of(given)
    with context.write() as session:
        imported = store_import(session, given.kind, file, context.today())
        if given.dry_run:
            session.rollback()
    would = "would be " if given.dry_run else ""
    output.say(f"{given.file}: {len(imported.stored)} {would}new, {imported.known} already there.")
    if given.dry_run:
        output.say("This was a dry run, nothing is stored.")
        _say_some(imported.stored)
    _say_rest(imported)


def _say_rest(imported: "Imported") -> None:
    _say_some([f"Note: {note}." for note in imported.notes])
    say_moved(imported.moved[:_MOST_SHOWN])
    more = len(imported.moved) - _MOST_SHOWN
    if more > 0:
        output.say(f"and {more} more {'line' if more == 1 else 'lines'} moved.")


def _say_some(texts: Sequence[str]) -> None:
    """Print as many as can be read, and how many more there are."""
    for text in texts[:_MOST_SHOWN]:
        output.say(text)
    if len(texts) > _MOST_SHOWN:
        output.say(f"and {len(texts) - _MOST_SHOWN} more.")
