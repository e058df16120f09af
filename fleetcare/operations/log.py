"""Write down what was done: tasks with what they cover, repairs, defects with follow-ups, top-ups."""

from collections.abc import Sequence
from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.db.tables import LogEntry, LogPart, LogTask
from fleetcare.domain.log import Done
from fleetcare.domain.quantities import Figure, plain
from fleetcare.domain.schedules import Task
from fleetcare.domain.sheets import Sheet
from fleetcare.drafts.work import LogDraft
from fleetcare.errors import AlreadyStored, Refused
from fleetcare.operations.closing import closings, done_by, say_open
from fleetcare.operations.entries import stored_under
from fleetcare.operations.find import FoundItem, find_item, find_meters, find_task, pick_meter
from fleetcare.operations.follow_ups import on_condition, raise_follow_ups
from fleetcare.operations.load import item_facts
from fleetcare.operations.names import person_id
from fleetcare.operations.readings import NewReading, store_reading
from fleetcare.operations.sheets import check_received, fresh_sheet, keep_sheet
from fleetcare.operations.sheets_closing import (
    NONE_CAME,
    Sheets,
    came_along,
    refuse_without_sheet,
    say_still_open,
    why_open,
)
from fleetcare.rules.due.closing import Closing
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.row import unit_of
from fleetcare.rules.explain import say_amount

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


@dataclass(slots=True)
class Logged:
    """What a log command stored: entries by number and kind, tasks closed and covered, and what is worth saying."""

    item: FoundItem
    entries: list[tuple[int, str]] = field(default_factory=list)
    closed: list[str] = field(default_factory=list)
    covered: list[tuple[str, str]] = field(default_factory=list)
    part_done: list[str] = field(default_factory=list)
    raised: list[str] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)
    sheet: Sheet | None = None

    def note_still_open(self, facts: ItemFacts, entry: LogEntry, sheets: Sheets) -> None:
        """Note which tasks the sheet of an entry could close and did not."""
        named, covered = [*self.closed, *self.part_done], [small for small, _ in self.covered]
        self.notes += say_still_open(facts, entry.id, entry.on, named, covered, sheets)


def record_work(session: "Session", draft: LogDraft, today: date, item: FoundItem | None = None) -> Logged:
    """Store what was done on a day. Everything a draft says stands in one entry of each kind.

    It was done to the engine or machine in use under the tag of the draft, unless another `item` is given. Refuses what was stored before under the import key of the draft.
    """
    item = item or find_item(session.connection(), draft.tag)
    _refuse_known(session, draft)
    refuse_future(draft.on, today)
    check_received(draft, draft.on, today)
    sheet = fresh_sheet(session, item, draft, draft.on)
    tasks = [find_task(session.connection(), item, name) for name in draft.task]
    called = on_condition(session, tasks) if draft.follow_up else []
    done = [task for task in tasks if task not in called]
    logged = Logged(item)
    entry = _store_entries(session, draft, done, called, logged)
    for name, quantity in draft.part:
        session.add(LogPart(entry_id=entry.id, name=name, quantity=quantity))
    store_figures(session, item, entry, draft.at)
    facts = item_facts(session.connection(), today, [item.id], with_wears=False)[0]
    if facts.item.in_service_on is not None and entry.on < facts.item.in_service_on:
        logged.notes.append(
            f"{entry.on} is before {item.tag} came into service on {facts.item.in_service_on}: check the day"
        )
    if sheet is not None:
        logged.sheet = keep_sheet(session, entry, sheet.sheet)
    came = came_along(sheet, sure=draft.sure)
    close_tasks(
        session,
        facts,
        entry,
        done,
        part_done=draft.part_done,
        leave_open=draft.leave_open,
        logged=logged,
        sheets=came,
    )
    session.flush()
    logged.note_still_open(facts, entry, came)
    return logged


def _refuse_known(session: "Session", draft: LogDraft) -> None:
    key = draft.import_key
    if key is not None and (known := stored_under(session.connection(), [key])):
        raise AlreadyStored(f"that is stored already, as entry {known[key]}", "correct that entry if it is wrong", key)


def _store_entries(
    session: "Session", draft: LogDraft, done: Sequence[int], called: Sequence[int], logged: Logged
) -> LogEntry:
    """Store an entry of each kind a draft asks for, and give the first, which holds all that has no kind of its own."""
    item = logged.item
    first: LogEntry | None = None
    for kind, title in _kinds(draft, bool(done)):
        entry = LogEntry(item_id=item.id, on=draft.on, kind=kind, title=title, person_id=person_id(session, draft.by))
        if first is None:
            first = entry
            entry.note, entry.component, entry.downtime_hours = draft.note, draft.component, draft.downtime
            entry.import_key = draft.import_key
        if kind == "top-up" and draft.top_up is not None:
            entry.litres, entry.litres_unit = draft.top_up.value, draft.top_up.unit
        session.add(entry)
        session.flush()
        logged.entries.append((entry.id, kind))
        if kind == "defect" and draft.follow_up:
            logged.raised += raise_follow_ups(session, item, draft, entry.id, called)
    assert first is not None
    return first


def refuse_future(on: date, today: date) -> None:
    """Refuse a day after the day the program works on."""
    if on > today:
        raise Refused(f"{on} has not come yet, today counts as {today}", "give an earlier --on, or a later --as-of")


def store_figures(session: "Session", item: FoundItem, entry: LogEntry, figures: Sequence[Figure]) -> None:
    """Store the dial figures of an entry as readings that came with it."""
    meters = find_meters(session.connection(), item.id, entry.on)
    told: set[int] = set()
    for figure in figures:
        meter = pick_meter(meters, figure, item.tag)
        if meter.id in told:
            raise Refused(f"--at names two figures of the {meter.kind} meter", "give one of each meter")
        told.add(meter.id)
        reading = f"{item.tag} {plain(figure.value)}{figure.unit or meter.unit} --on {entry.on} --sure"
        store_reading(
            session,
            item,
            meter,
            NewReading(entry.on, figure, entry_id=entry.id),
            remedy=f"check --at; if it is right, first give fleetcare reading {reading}",
        )


def close_tasks(
    session: "Session",
    facts: ItemFacts,
    entry: LogEntry,
    task_ids: Sequence[int],
    *,
    part_done: bool,
    leave_open: bool = False,
    logged: Logged,
    elsewhere: Sequence[int] = (),
    sheets: Sheets = NONE_CAME,
) -> None:
    """Store which tasks an entry closes, and what they cover; part-done work closes nothing. Whoever calls flushes.

    `facts` are those of its item, this entry's figures among them. Tasks done `elsewhere`, by another entry of the
    same day, are not covered once more. `sheets` are the kinds that came along, each with why it closes nothing; with
    `leave_open` a task its sheet does not close is done in part.
    """
    tasks = {task.id: task for task in facts.tasks}
    in_part = [one for one in task_ids if part_done or (leave_open and why_open(tasks[one], entry.on, sheets))]
    _note_part_done(session, facts, entry, in_part, logged)
    task_ids = [one for one in task_ids if one not in in_part]
    done = done_by(facts, entry.id, entry.on)
    named: dict[int, LogTask] = {}
    for one in closings(facts, done, task_ids, sheets, "give the dial figure with --at", elsewhere):
        row = LogTask(entry_id=entry.id, task_id=one.task.id, served_period=one.work.served)
        if one.along_with is None:
            refuse_without_sheet(one.task, entry.on, sheets)
            named[one.task.id] = row
            session.add(row)
            logged.closed.append(one.task.name)
            logged.notes += [*_say_no_figure(facts, one.task, done), *_say_note(one)]
        elif one.closes:
            session.flush()  # only a stored row can be named by what it covers
            row.covered_by_id = named[one.along_with.id].id
            session.add(row)
            logged.covered.append((one.task.name, one.along_with.name))
        else:
            logged.notes.append(f"{one.task.name} stays open: {say_open(one)}")


def _note_part_done(
    session: "Session", facts: ItemFacts, entry: LogEntry, task_ids: Sequence[int], logged: Logged
) -> None:
    names = {task.id: task.name for task in facts.tasks}
    for task_id in dict.fromkeys(task_ids):
        session.add(LogTask(entry_id=entry.id, task_id=task_id, part_done=True))
        logged.part_done.append(names[task_id])


def _say_no_figure(facts: ItemFacts, task: Task, done: Done) -> list[str]:
    """Say what work counts from that has no figure, and no later reading yet to tell what the dial showed."""
    notes = []
    for trigger in task.version_on(done.on).counted:
        counter = facts.counters.get(trigger.kind)
        latest = counter.latest if counter is not None else None
        is_counting = counter is not None and counter.life_at(Decimal(0), done.on) is not None
        if latest is not None and is_counting and latest.on < done.on and done.life[trigger.kind].approximate:
            shown = say_amount(latest.life, unit_of(facts, trigger.kind))
            notes.append(
                f"{task.name} counts from ~{shown}, the reading of {latest.on}, until a later one is there;"
                " correct the entry and give --at if the dial was seen"
            )
    return notes


def _say_note(closing: Closing) -> list[str]:
    name, work = closing.task.name, closing.work
    if not work.counted:
        return [f"{name} stays open: {work.note}, so this work does not count"]
    return [f"{name}: {work.note}; the next period stays open"] if work.note else []


def _kinds(draft: LogDraft, has_tasks: bool) -> list[tuple[str, str]]:
    """Give the entries a draft asks for, as kind and title, in the order stored."""
    kinds = [
        ("scheduled", "") if has_tasks else None,
        ("repair", draft.repair) if draft.repair else None,
        ("defect", draft.defect) if draft.defect else None,
        ("top-up", "") if draft.top_up else None,
    ]
    found = [kind for kind in kinds if kind is not None]
    return found or [("other", "")]
