"""Bring in a whole file: every row of it or none, and nothing a second time."""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING, Any

from fleetcare.drafts.import_rows import LogRow, ReadingRow
from fleetcare.drafts.items import EngineDraft
from fleetcare.drafts.reading_in import Draft
from fleetcare.errors import Refusals
from fleetcare.exchange.csv_in import CsvFile, RowRefused, read_file, read_rows
from fleetcare.operations.imports_engines import store_engines
from fleetcare.operations.imports_log import store_log
from fleetcare.operations.imports_readings import store_readings
from fleetcare.operations.imports_rows import Imported, Row, read_row

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


@dataclass(frozen=True, slots=True)
class _FileKind:
    """What a row of a file is read as, the columns it must have, and how rows are stored.

    `store` leaves what is wrong with a row in the list it is given.
    """

    draft: type[Draft]
    required: tuple[str, ...]
    store: Callable[["Session", Sequence[Row[Any]], date, list[RowRefused]], Imported]


_KINDS: Mapping[str, _FileKind] = {
    "engines": _FileKind(EngineDraft, ("tag",), store_engines),
    "readings": _FileKind(ReadingRow, ("engine", "on", "value"), store_readings),
    "log": _FileKind(LogRow, ("engine", "task", "on"), store_log),
}


def import_columns(kind: str) -> tuple[tuple[str, ...], tuple[str, ...]]:
    """Give the columns a file of a kind (engines, readings or log) must have, and those it may have besides."""
    found = _KINDS[kind]
    return found.required, tuple(name for name in found.draft.model_fields if name not in found.required)


def read_import(kind: str, path: Path) -> CsvFile:
    """Read a file of a kind. Refuses what is no such file as a whole."""
    return read_rows(read_file(path), *import_columns(kind))


def store_import(session: "Session", kind: str, file: CsvFile, today: date) -> Imported:
    """Store what a file says and was not stored before.

    Raises Refusals with all that is wrong with any of its rows, in the order of the file; the session is then
    not to be committed.
    """
    found = _KINDS[kind]
    faults = list(file.faults)
    rows = [row for plain in file.rows if (row := read_row(plain, found.draft, faults)) is not None]
    imported = found.store(session, rows, today, faults)
    if faults:
        faults.sort(key=lambda fault: fault.number)
        raise Refusals(faults)
    return imported
