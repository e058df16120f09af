"""Work as the rows of a file tell it: which task of which item, and what of it is stored already."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.quantities import Figure, Kind, plain
from fleetcare.drafts.import_rows import LogRow
from fleetcare.errors import Refused
from fleetcare.exchange.csv_in import RowRefused
from fleetcare.operations.find import FoundItem, FoundMeter, find_task
from fleetcare.operations.imports_rows import (
    Finder,
    PlacedFigure,
    Row,
    day_come,
    figure_key,
    keys_stored,
    try_cell,
)
from fleetcare.operations.rows import fetch, known_day

if TYPE_CHECKING:
    from sqlalchemy import Connection

Day = tuple[int, date]


@dataclass(frozen=True, slots=True)
class Work:
    """A row that names a task of an item in use, with the figures its dials showed."""

    number: int
    item: FoundItem
    task_id: int
    figures: tuple[PlacedFigure, ...]
    draft: LogRow

    @property
    def on(self) -> date:
        """The day it was done."""
        return self.draft.on

    @property
    def shown(self) -> frozenset[str]:
        """The figures as keys."""
        return frozenset(figure.key for figure in self.figures)

    @property
    def key(self) -> str:
        """What makes it the same row whenever it comes again."""
        return f"task {self.task_id} {self.on} {' '.join(sorted(self.shown))}".rstrip()

    @property
    def place(self) -> tuple[object, ...]:
        """Where it comes in the order it was done, whatever its row."""
        dials = sorted((figure.meter.id, figure.dial) for figure in self.figures)
        return self.on, self.item.tag, dials, self.task_id

    def __str__(self) -> str:
        shown = f" at {', '.join(map(str, self.figures))}" if self.figures else ""
        return f"{self.item.tag}  {self.draft.task} on {self.on}{shown}"


def place_work(
    connection: "Connection", rows: Sequence[Row[LogRow]], today: date, faults: list[RowRefused]
) -> list[Work]:
    """Find the items, tasks and meters that rows name; what is wrong with a row goes to `faults`."""
    finder, tasks = Finder(connection), dict[tuple[int, str], int]()
    placed = (_place(connection, finder, tasks, row, today, faults) for row in rows)
    return [work for work in placed if work is not None]


def fresh_work(connection: "Connection", works: Sequence[Work], faults: list[RowRefused]) -> list[Work]:
    """Give the work that is not there yet, in the order it was done.

    A task on a day is one piece of work: other figures for it, in the file or stored, are refused. A row that says
    less than an entry says the same.
    """
    imported = keys_stored(connection, "log_entry", [work.key for work in works])
    stored = _stored(connection, sorted({work.item.id for work in works}))
    seen: dict[Day, Work] = {}
    fresh = []
    for work in works:
        there = stored.get((work.task_id, work.on), {})
        twin = seen.setdefault((work.task_id, work.on), work)
        if twin is not work:
            faults.extend(_unlike_twin(work, twin))
        elif work.key not in imported and not any(work.shown <= shown for shown in there.values()):
            if there:
                faults.append(_unlike_entry(work, min(there)))
            else:
                fresh.append(work)
    return sorted(fresh, key=lambda work: work.place)


def _unlike_twin(work: Work, twin: Work) -> list[RowRefused]:
    """Refuse a row that disagrees with another one about the same work."""
    remedy = f"keep one; what was done twice that day is logged with fleetcare log {work.item.tag}"
    return [
        RowRefused(
            work.number,
            column,
            f"{work.draft.task} of {work.item.tag} on {work.on} is in row {twin.number} too",
            remedy,
        )
        for column, said, other in (
            ("at", work.shown, twin.shown),
            ("by", (work.draft.by or "").casefold(), (twin.draft.by or "").casefold()),
            ("note", work.draft.note, twin.draft.note),
        )
        if said != other
    ][:1]


def _unlike_entry(work: Work, entry: int) -> RowRefused:
    """Refuse a row with figures that the entry about the same work does not have."""
    at = " ".join(f"--at {plain(figure.dial)}{figure.meter.unit}" for figure in work.figures)
    return RowRefused(
        work.number,
        "at",
        f"{work.draft.task} of {work.item.tag} on {work.on} is entry {entry} already, with other figures or none",
        f"leave the row out, or first give fleetcare correct {entry} {at}",
    )


def _place(
    connection: "Connection",
    finder: Finder,
    tasks: dict[tuple[int, str], int],
    row: Row[LogRow],
    today: date,
    faults: list[RowRefused],
) -> Work | None:
    number, draft = row.number, row.draft
    item = try_cell(faults, number, "engine", lambda: finder.item(draft.engine))
    on = try_cell(faults, number, "on", lambda: day_come(draft.on, today))
    if item is None:
        return None
    task = try_cell(
        faults, number, "task", lambda: tasks.get((item.id, draft.task)) or find_task(connection, item, draft.task)
    )
    figures = try_cell(faults, number, "at", lambda: _figures(finder, item, row))
    if on is None or task is None or figures is None:
        return None
    tasks[item.id, draft.task] = task
    return Work(number, item, task, figures, draft)


def _figures(finder: Finder, item: FoundItem, row: Row[LogRow]) -> tuple[PlacedFigure, ...]:
    figures = tuple(finder.place(row.number, item, row.draft.on, figure) for figure in row.draft.at)
    kinds = [figure.meter.kind for figure in figures]
    if twice := next((kind for kind in kinds if kinds.count(kind) > 1), None):
        raise Refused(f"it names two figures of {twice}", "give one of each meter")
    return figures


def _stored(connection: "Connection", item_ids: Sequence[int]) -> dict[Day, dict[int, frozenset[str]]]:
    """Give the entries that close each task on each day, neither superseded nor voided, with their figures as keys."""
    figures: dict[int, set[str]] = {}
    readings = fetch(
        connection,
        "select reading.entry_id, meter.id, meter.kind, meter.unit, meter.item_id, reading.value, reading.unit"
        " from reading join meter on meter.id = reading.meter_id join log_entry entry on entry.id = reading.entry_id"
        " where entry.item_id in :ids",
        ids=list(item_ids),
    )
    for entry, meter_id, kind, meter_unit, owner, value, unit in readings:
        meter = FoundMeter(meter_id, Kind(kind), meter_unit, owner)
        figures.setdefault(entry, set()).add(figure_key(meter, Figure(Decimal(value), unit)))
    stored: dict[Day, dict[int, frozenset[str]]] = {}
    entries = fetch(
        connection,
        'select log_task.task_id, entry."on", entry.id from log_task join log_entry entry on entry.id = log_task.entry_id'
        " where entry.item_id in :ids and not log_task.part_done and not entry.is_void"
        " and entry.id not in (select supersedes_id from log_entry where supersedes_id is not null)",
        ids=list(item_ids),
    )
    for task_id, on, entry in entries:
        stored.setdefault((task_id, known_day(on)), {})[entry] = frozenset(figures.get(entry, ()))
    return stored
