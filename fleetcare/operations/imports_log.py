"""Work out of a file: one task done on one day a row, applied in the order it was done."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.db.tables import LogEntry
from fleetcare.domain.log import Done
from fleetcare.domain.quantities import Figure, Kind, plain
from fleetcare.drafts.import_rows import LogRow
from fleetcare.errors import Refused
from fleetcare.exchange.csv_in import RowRefused
from fleetcare.operations.due import watch_items
from fleetcare.operations.find import FoundItem, FoundMeter, find_task
from fleetcare.operations.imports_rows import (
    Finder,
    Imported,
    PlacedFigure,
    Row,
    cell,
    figure_key,
    hold_together,
    in_columns,
    keys_stored,
    refuse_to_come,
)
from fleetcare.operations.load import entry_lives, item_facts, own_readings
from fleetcare.operations.log import Logged, close_tasks, refuse_without_sheet
from fleetcare.operations.names import person_id
from fleetcare.operations.readings import NewReading, insert_readings
from fleetcare.operations.rows import fetch, known_day
from fleetcare.rules.due.facts import ItemFacts

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session

_Day = tuple[int, date]


@dataclass(frozen=True, slots=True)
class _Work:
    """A row that names a task of an item in use, with the figures its dials showed."""

    number: int
    item: FoundItem
    task_id: int
    figures: tuple[PlacedFigure, ...]
    draft: LogRow

    @property
    def on(self) -> date:
        return self.draft.on

    @property
    def shown(self) -> frozenset[str]:
        """The figures as keys."""
        return frozenset(figure.key for figure in self.figures)

    @property
    def key(self) -> str:
        return f"task {self.task_id} {self.on} {' '.join(sorted(self.shown))}".rstrip()

    @property
    def place(self) -> tuple[object, ...]:
        """Where it comes in the order it was done, whatever its row."""
        dials = sorted((figure.meter.id, figure.dial) for figure in self.figures)
        return self.on, self.item.tag, dials, self.task_id

    def __str__(self) -> str:
        shown = f" at {', '.join(map(str, self.figures))}" if self.figures else ""
        return f"{self.item.tag}  {self.draft.task} on {self.on}{shown}"


def store_log(session: "Session", rows: Sequence[Row[LogRow]], today: date, faults: list[RowRefused]) -> Imported:
    """Store the work that is not there yet, an entry a row; what is wrong with a row goes to `faults`."""
    finder, tasks = Finder(session.connection()), dict[tuple[int, str], int]()
    works = []
    for row in rows:
        try:
            works.append(_place(session.connection(), finder, tasks, row, today))
        except RowRefused as fault:
            faults.append(fault)
    fresh = _fresh(session.connection(), works, faults)
    faults.extend(_without_sheets(session.connection(), fresh, today))
    faults.extend(hold_together(session, [figure for work in fresh for figure in work.figures], "at"))
    if faults:
        return Imported()
    imported = Imported([str(work) for work in fresh], known=len(rows) - len(fresh))
    with watch_items(session, sorted({work.item.id for work in fresh}), today) as moves:
        _apply(session, works, fresh, today, imported, faults)
    imported.moved = moves.moved
    return imported


def _place(
    connection: "Connection", finder: Finder, tasks: dict[tuple[int, str], int], row: Row[LogRow], today: date
) -> _Work:
    number, draft = row.number, row.draft
    with cell(number, "engine"):
        item = finder.item(draft.engine)
    with cell(number, "task"):
        if (item.id, draft.task) not in tasks:
            tasks[item.id, draft.task] = find_task(connection, item, draft.task)
    refuse_to_come(number, draft.on, today)
    with cell(number, "at"):
        figures = tuple(finder.place(number, item, draft.on, figure) for figure in draft.at)
        kinds = [figure.meter.kind for figure in figures]
        if twice := next((kind for kind in kinds if kinds.count(kind) > 1), None):
            raise Refused(f"it names two figures of {twice}", "give one of each meter")
    return _Work(number, item, tasks[item.id, draft.task], figures, draft)


def _fresh(connection: "Connection", works: Sequence[_Work], faults: list[RowRefused]) -> list[_Work]:
    """Give the work that is not there yet, in the order it was done; twice in the file is once.

    Work without a figure is the same as work on that day with one. The other way round it may be, so it is refused.
    """
    imported = keys_stored(connection, "log_entry", [work.key for work in works])
    stored = _stored(connection, sorted({work.item.id for work in works}))
    seen: dict[_Day, list[frozenset[str]]] = {}
    fresh = []
    for work in sorted(works, key=lambda work: (-len(work.figures), *work.place)):
        day = (work.task_id, work.on)
        if work.key in imported or any(work.shown <= other for other in seen.get(day, ())):
            continue
        there = stored.get(day, {})
        if any(work.shown <= shown for shown in there.values()):
            continue
        bare = next((entry for entry, shown in there.items() if not shown), None)
        if bare is not None:
            at = " ".join(f"--at {plain(figure.dial)}{figure.meter.unit}" for figure in work.figures)
            faults.append(
                RowRefused(
                    work.number,
                    "at",
                    f"{work.draft.task} of {work.item.tag} is logged on {work.on} without a figure, as entry {bare}",
                    f"leave the row out, or first give fleetcare correct {bare} {at}",
                )
            )
            continue
        seen.setdefault(day, []).append(work.shown)
        fresh.append(work)
    return sorted(fresh, key=lambda work: work.place)


def _without_sheets(connection: "Connection", fresh: Sequence[_Work], today: date) -> list[RowRefused]:
    """Refuse the work that closes only with a sheet, which no file of work brings."""
    facts = item_facts(connection, today, sorted({work.item.id for work in fresh}))
    tasks = {task.id: task for each in facts for task in each.tasks}
    faults = []
    for work in fresh:
        try:
            refuse_without_sheet(tasks[work.task_id], work.on)
        except Refused as error:
            faults.append(RowRefused(work.number, "task", error.detail, error.remedy))
    return faults


def _stored(connection: "Connection", item_ids: Sequence[int]) -> dict[_Day, dict[int, frozenset[str]]]:
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
    stored: dict[_Day, dict[int, frozenset[str]]] = {}
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


def _apply(
    session: "Session",
    works: Sequence[_Work],
    fresh: Sequence[_Work],
    today: date,
    imported: Imported,
    faults: list[RowRefused],
) -> None:
    """Store entries and figures first, as work may need the figure of a later row; then let each close its task."""
    named: dict[_Day, list[int]] = {}
    for work in works:
        named.setdefault((work.item.id, work.on), []).append(work.task_id)
    entries = _insert(session, fresh)
    facts = {each.item.id: each for each in item_facts(session.connection(), today, sorted({w.item.id for w in fresh}))}
    for work, entry in zip(fresh, entries, strict=True):
        logged = Logged(work.item)
        try:
            close_tasks(
                session,
                work.item,
                entry,
                [work.task_id],
                part_done=False,
                logged=logged,
                facts=facts[work.item.id],
                elsewhere=named[work.item.id, work.on],
            )
        except Refused as error:
            faults.append(in_columns(work.number, error, LogRow, otherwise="task"))
        facts[work.item.id] = _after(facts[work.item.id], entry, logged)
        imported.notes.extend(f"row {work.number}: {note}" for note in logged.notes)
        imported.notes.extend(f"row {work.number}: done along with {big}: {small}" for small, big in logged.covered)


def _insert(session: "Session", fresh: Sequence[_Work]) -> list[LogEntry]:
    """Store an entry for each work, and the readings that came with it."""
    people = {name: person_id(session, name) for name in dict.fromkeys(work.draft.by for work in fresh)}
    entries = [
        LogEntry(
            item_id=work.item.id,
            on=work.on,
            kind="scheduled",
            person_id=people[work.draft.by],
            note=work.draft.note,
            import_key=work.key,
        )
        for work in fresh
    ]
    session.add_all(entries)
    session.flush()
    insert_readings(
        session,
        [
            (figure.meter, NewReading(work.on, figure.figure, entry_id=entry.id))
            for work, entry in zip(fresh, entries, strict=True)
            for figure in work.figures
        ],
    )
    return entries


def _after(facts: ItemFacts, entry: LogEntry, logged: Logged) -> ItemFacts:
    """Give the facts with what an entry closed among the work done."""
    closed = {*logged.closed, *(small for small, _ in logged.covered)}
    lives = entry_lives(facts.counters, own_readings(facts.counters), entry.id, entry.on)
    done = Done(entry.id, entry.id, entry.on, lives)
    tasks = [task.id for task in facts.tasks if task.name in closed and task.removed_on is None]
    return replace(facts, done={**facts.done, **{task: (*facts.done.get(task, ()), done) for task in tasks}})
