"""Correct or void an entry: a new entry that supersedes the old one, both readable ever after."""

from collections.abc import Sequence
from datetime import date
from typing import TYPE_CHECKING

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import Item, LogEntry, LogPart, LogTask, Reading
from fleetcare.domain.quantities import Figure
from fleetcare.drafts.work import CorrectionDraft
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem, find_task
from fleetcare.operations.load import item_facts
from fleetcare.operations.log import Logged, close_tasks, refuse_future, store_figures
from fleetcare.operations.names import person_id
from fleetcare.operations.sheets import carried_sheet, check_received, keep_sheet
from fleetcare.operations.sheets_closing import Sheets, came_along

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


def correct_entry(session: "Session", draft: CorrectionDraft, today: date) -> Logged:
    """Supersede an entry by one that says what it should have said, or by a void.

    Refuses an entry corrected already, so that two corrections at once never fork its history: the later one waits
    for the lock of the earlier, and then sees what that did.
    """
    old = _current(session, draft.entry)
    refuse_future(draft.on or old.on, today)
    check_received(draft, draft.on or old.on, today)
    new = _void(session, old, draft) if draft.void else _restated(session, old, draft)
    session.add(new)
    session.flush()
    item = item_of_entry(session, old.id)
    logged = Logged(item, entries=[(new.id, new.kind)])
    if not draft.void:
        _carry_over(session, item, old, new, draft, logged, today)
    return logged


def _void(session: "Session", old: LogEntry, draft: CorrectionDraft) -> LogEntry:
    """Give the entry that takes an old one back: who says so, and why."""
    return LogEntry(
        item_id=old.item_id,
        on=old.on,
        kind=old.kind,
        person_id=person_id(session, draft.by),
        supersedes_id=old.id,
        is_void=True,
        why=draft.why,
    )


def _restated(session: "Session", old: LogEntry, draft: CorrectionDraft) -> LogEntry:
    """Give the entry that says what an old one should have said."""
    return LogEntry(
        item_id=old.item_id,
        on=draft.on or old.on,
        kind="scheduled" if draft.task and old.kind == "other" else old.kind,
        person_id=person_id(session, draft.by) or old.person_id,
        title=_title(old, draft),
        note=old.note if draft.note is None else draft.note,
        component=draft.component or old.component,
        downtime_hours=old.downtime_hours if draft.downtime is None else draft.downtime,
        litres=draft.top_up.value if draft.top_up else old.litres,
        litres_unit=draft.top_up.unit if draft.top_up else old.litres_unit,
        supersedes_id=old.id,
        why=draft.why,
    )


def item_of_entry(session: "Session", number: int) -> FoundItem:
    """Give whose entry a number is, withdrawn or not; refuses a number that is no entry."""
    row = session.get_one(Item, _entry(session, number).item_id)
    return FoundItem(row.id, row.tag, row.is_engine)


def _entry(session: "Session", number: int) -> LogEntry:
    entry = session.get(LogEntry, number)
    if entry is None:
        raise Refused(f"there is no entry {number}", "see fleetcare show TAG for the numbers of its entries")
    return entry


def _current(session: "Session", number: int) -> LogEntry:
    """Give an entry that is neither corrected nor void; refuse any other, naming the one that stands."""
    old = _entry(session, number)
    later = session.scalars(select(LogEntry).where(col(LogEntry.supersedes_id) == number)).one_or_none()
    if later is not None:
        raise Refused(f"entry {number} was superseded by entry {later.id}", f"correct entry {later.id} instead")
    if old.is_void:
        raise Refused(f"entry {number} voids entry {old.supersedes_id}", "log the work anew")
    return old


def _title(old: LogEntry, draft: CorrectionDraft) -> str:
    for kind, title in (("repair", draft.repair), ("defect", draft.defect)):
        if title is not None and old.kind != kind:
            raise Refused(f"entry {old.id} is no {kind}", f"leave out --{kind}")
    if draft.top_up is not None and old.kind != "top-up":
        raise Refused(f"entry {old.id} is no top-up", "leave out --top-up")
    return draft.repair or draft.defect or old.title


def _carry_over(
    session: "Session",
    item: FoundItem,
    old: LogEntry,
    new: LogEntry,
    draft: CorrectionDraft,
    logged: Logged,
    today: date,
) -> None:
    """Give the new entry the figures, parts and tasks of the old one, save those restated."""
    store_figures(session, item, new, [*draft.at, *_kept_figures(session, old, draft.at)])
    stored = session.scalars(select(LogPart).where(col(LogPart.entry_id) == old.id).order_by(col(LogPart.id)))
    for name, quantity in draft.part or [(part.name, part.quantity) for part in stored]:
        session.add(LogPart(entry_id=new.id, name=name, quantity=quantity))
    rows = session.scalars(
        select(LogTask)
        .where(col(LogTask.entry_id) == old.id, col(LogTask.covered_by_id).is_(None))
        .order_by(col(LogTask.id))
    ).all()
    tasks = [find_task(session.connection(), item, name) for name in draft.task] or [row.task_id for row in rows]
    was_part = any(row.part_done for row in rows)
    part_done = was_part if draft.part_done is None else draft.part_done
    facts = item_facts(session.connection(), today, [item.id], with_wears=False)[0]
    came = _carry_sheet(session, item, old, new, draft, logged)
    if not draft.sheet and not draft.task and not was_part:
        came = dict.fromkeys(came, "")  # its own sheet closed these tasks before
    close_tasks(session, facts, new, tasks, part_done=part_done, logged=logged, sheets=came)
    session.flush()
    logged.note_still_open(facts, new, came)


def _carry_sheet(
    session: "Session", item: FoundItem, old: LogEntry, new: LogEntry, draft: CorrectionDraft, logged: Logged
) -> Sheets:
    """Give the new entry the sheet of the old one, or the one restated, and say what it closes."""
    sheet = carried_sheet(session, item, old, draft, new.on)
    if sheet is not None:
        logged.sheet = keep_sheet(session, new, sheet.sheet)
    return came_along(sheet, sure=draft.sure)


def _kept_figures(session: "Session", old: LogEntry, restated: Sequence[Figure]) -> list[Figure]:
    """Give the old entry's figures that the correction does not restate."""
    rows = session.scalars(select(Reading).where(col(Reading.entry_id) == old.id).order_by(col(Reading.id))).all()
    kinds = {figure.kind for figure in restated}
    if None in kinds and len(rows) <= 1:
        return []
    kept = [Figure(row.value, row.unit) for row in rows]
    return [figure for figure in kept if figure.kind not in kinds]
