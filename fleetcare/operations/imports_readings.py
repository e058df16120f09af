"""Readings out of a file: each meter's held against its past and each other, whatever their order."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.quantities import Kind
from fleetcare.drafts.import_rows import ReadingRow
from fleetcare.exchange.csv_in import RowRefused
from fleetcare.operations.due import watch_items
from fleetcare.operations.imports_rows import (
    Finder,
    Imported,
    PlacedFigure,
    Row,
    day_come,
    hold_together,
    keys_stored,
    try_cell,
)
from fleetcare.operations.load import load_counters
from fleetcare.operations.readings import NewReading, insert_readings

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session


@dataclass(slots=True)
class _Found:
    """A reading of the file, and the notes of all rows that say the same."""

    figure: PlacedFigure
    notes: set[str]

    @property
    def key(self) -> str:
        return f"reading {self.figure.on} {self.figure.key}"


def store_readings(
    session: "Session", rows: Sequence[Row[ReadingRow]], today: date, faults: list[RowRefused]
) -> Imported:
    """Store the readings that are not there yet; what is wrong with a row goes to `faults`, and nothing is stored."""
    finder = Finder(session.connection())
    found: dict[str, _Found] = {}
    for row in rows:
        figure = _place(finder, row, today, faults)
        if figure is None:
            continue
        new = _Found(figure, {row.draft.note} - {""})
        found.setdefault(new.key, new).notes.update(new.notes)
    known = _known(session.connection(), found)
    fresh = [one for key, one in found.items() if key not in known]
    faults.extend(hold_together(session, [one.figure for one in fresh], "value"))
    if faults:
        return Imported()
    fresh.sort(key=lambda one: (one.figure.on, one.figure.item.tag, one.figure.meter.id, one.figure.dial))
    with watch_items(session, sorted({one.figure.item.id for one in fresh}), today) as moves:
        insert_readings(session, [(one.figure.meter, _as_new(one)) for one in fresh])
    stored = [f"{one.figure.item.tag}  {one.figure} on {one.figure.on}" for one in fresh]
    return Imported(stored, known=len(rows) - len(fresh), moved=moves.moved)


def _place(finder: Finder, row: Row[ReadingRow], today: date, faults: list[RowRefused]) -> PlacedFigure | None:
    number, draft = row.number, row.draft
    item = try_cell(faults, number, "engine", lambda: finder.item(draft.engine))
    on = try_cell(faults, number, "on", lambda: day_come(draft.on, today))
    if item is None:
        return None
    column = "value" if draft.meter is None else "meter"
    figure = try_cell(faults, number, column, lambda: finder.place(number, item, draft.on, draft.figure, draft.meter))
    return None if on is None else figure


def _as_new(found: _Found) -> NewReading:
    note = "; ".join(sorted(found.notes))
    return NewReading(found.figure.on, found.figure.figure, note=note, import_key=found.key)


def _known(connection: "Connection", found: dict[str, _Found]) -> set[str]:
    """Give the keys of what is there already: imported before, whatever became of it, or entered with the same words."""
    known = keys_stored(connection, "reading", list(found))
    owners = sorted({one.figure.meter.owner_id for one in found.values()})
    entered: dict[tuple[int, Kind], set[tuple[date, Decimal]]] = {
        (owner, kind): {(reading.on, reading.value) for reading in history.counter.readings if reading.accepted}
        for owner, counters in load_counters(connection, owners, date.max).items()
        for kind, history in counters.items()
    }
    for key, one in found.items():
        meter = one.figure.meter
        if (one.figure.on, one.figure.dial) in entered.get((meter.owner_id, meter.kind), ()):
            known.add(key)
    return known
