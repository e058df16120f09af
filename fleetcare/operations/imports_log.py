"""Work out of a file: one task done on one day a row, applied in the order it was done."""

import shlex
from collections.abc import Sequence
from dataclasses import replace
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.db.tables import LogEntry
from fleetcare.domain.log import Done
from fleetcare.drafts.import_rows import LogRow
from fleetcare.errors import Refused
from fleetcare.exchange.csv_in import RowRefused
from fleetcare.operations.due import watch_items
from fleetcare.operations.imports_rows import Imported, Row, hold_together, in_columns
from fleetcare.operations.imports_work import Day, Work, fresh_work, place_work
from fleetcare.operations.load import entry_lives, item_facts, own_readings
from fleetcare.operations.log import Logged, close_tasks
from fleetcare.operations.names import person_id
from fleetcare.operations.readings import NewReading, insert_readings
from fleetcare.operations.sheets_closing import NONE_CAME, why_open
from fleetcare.rules.due.facts import ItemFacts

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session


def store_log(session: "Session", rows: Sequence[Row[LogRow]], today: date, faults: list[RowRefused]) -> Imported:
    """Store the work that is not there yet, an entry a row; what is wrong with a row goes to `faults`."""
    works = place_work(session.connection(), rows, today, faults)
    fresh = fresh_work(session.connection(), works, faults)
    faults.extend(_without_sheets(session.connection(), fresh, today))
    faults.extend(hold_together(session, [figure for work in fresh for figure in work.figures], "at"))
    if faults:
        return Imported()
    imported = Imported([str(work) for work in fresh], known=len(rows) - len(fresh))
    with watch_items(session, sorted({work.item.id for work in fresh}), today) as moves:
        _apply(session, works, fresh, today, imported, faults)
    imported.moved = moves.moved
    return imported


def _without_sheets(connection: "Connection", fresh: Sequence[Work], today: date) -> list[RowRefused]:
    """Refuse the work that closes only with a sheet, which no file of work brings."""
    facts = item_facts(connection, today, sorted({work.item.id for work in fresh}), with_wears=False)
    tasks = {task.id: task for each in facts for task in each.tasks}
    faults = []
    for work in fresh:
        task = tasks[work.task_id]
        why = why_open(task, work.on, NONE_CAME)
        if why:
            words = ["fleetcare", "log", work.item.tag, task.name, "--on", work.on.isoformat(), "--sheet", "FILE"]
            remedy = f"leave the row out, and log it with its sheet: {shlex.join(words)}"
            faults.append(RowRefused(work.number, "task", f"{task.name} {why}", remedy))
    return faults


def _apply(
    session: "Session",
    works: Sequence[Work],
    fresh: Sequence[Work],
    today: date,
    imported: Imported,
    faults: list[RowRefused],
) -> None:
    """Store entries and figures first, as work may need the figure of a later row; then let each close its task."""
    named: dict[Day, list[int]] = {}
    for work in works:
        named.setdefault((work.item.id, work.on), []).append(work.task_id)
    entries = _insert(session, fresh)
    touched = sorted({work.item.id for work in fresh})
    known = item_facts(session.connection(), today, touched, with_wears=False)
    facts = {each.item.id: each for each in known}
    for work, entry in zip(fresh, entries, strict=True):
        logged = Logged(work.item)
        try:
            close_tasks(
                session,
                facts[work.item.id],
                entry,
                [work.task_id],
                part_done=False,
                logged=logged,
                elsewhere=named[work.item.id, work.on],
            )
        except Refused as error:
            faults.append(in_columns(work.number, error, LogRow, otherwise="task"))
        facts[work.item.id] = _after(facts[work.item.id], entry, logged)
        imported.notes.extend(f"row {work.number}: {note}" for note in logged.notes)
        imported.notes.extend(f"row {work.number}: done along with {big}: {small}" for small, big in logged.covered)


def _insert(session: "Session", fresh: Sequence[Work]) -> list[LogEntry]:
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
