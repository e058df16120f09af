"""Measurements taken without any work: stored with an entry of their own, once however often they come."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.db.tables import LogEntry
from fleetcare.domain.sheets import Sheet
from fleetcare.drafts.work import LogDraft
from fleetcare.operations.find import FoundItem, find_item
from fleetcare.operations.log import record_work, refuse_future
from fleetcare.operations.names import person_id
from fleetcare.operations.sheet_report import SheetReport, report_sheet
from fleetcare.operations.sheets import check_received, keep_sheets, known_entry, take_sheet

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


@dataclass(frozen=True, slots=True)
class Measured:
    """A sheet with the entry it stands with, whether that is new, and what is worth saying of the tasks."""

    report: SheetReport
    is_new: bool
    notes: tuple[str, ...] = ()


def measure(session: "Session", draft: LogDraft, today: date) -> Measured:
    """Store the sheet of a draft that names no task. The same values of the same day are stored once.

    It is of the engine that had the tag on its day: results may come after that was withdrawn. Raises Refused for a day to come, Refusals with everything that is wrong with the sheet.
    """
    refuse_future(draft.on, today)
    check_received(draft, draft.on, today)
    item = find_item(session.connection(), draft.tag, on=draft.on)
    sheet = _taken(session, item, draft)
    known = known_entry(session, item, sheet)
    if known is not None:
        return Measured(report_sheet(session.connection(), item, known, today), is_new=False)
    logged = record_work(session, draft, today, item)
    entry, _ = logged.entries[0]
    return Measured(report_sheet(session.connection(), item, entry, today), is_new=True, notes=tuple(logged.notes))


def measure_many(session: "Session", drafts: Sequence[LogDraft], today: date) -> int:
    """Store the sheets of drafts that name neither task nor dial figure, all in one go; give how many are new.

    What is refused is what `measure` refuses, and then nothing is stored; that a sheet came twice shows in stored ones alone.
    """
    asked = dict.fromkeys((draft.tag, draft.on) for draft in drafts)
    items = {(tag, on): find_item(session.connection(), tag, on=on) for tag, on in asked}
    fresh: list[tuple[LogDraft, Sheet]] = []
    for draft in drafts:
        refuse_future(draft.on, today)
        check_received(draft, draft.on, today)
        sheet = _taken(session, items[draft.tag, draft.on], draft)
        if known_entry(session, items[draft.tag, draft.on], sheet) is None:
            fresh.append((draft, sheet))
    people = {name: person_id(session, name) for name in dict.fromkeys(draft.by for draft, _ in fresh)}
    entries = [
        LogEntry(item_id=items[one.tag, one.on].id, on=one.on, kind="other", person_id=people[one.by], note=one.note)
        for one, _ in fresh
    ]
    session.add_all(entries)
    session.flush()
    keep_sheets(session, [(entry, sheet) for entry, (_, sheet) in zip(entries, fresh, strict=True)])
    return len(fresh)


def _taken(session: "Session", item: FoundItem, draft: LogDraft) -> Sheet:
    taken = take_sheet(session.connection(), item, draft, draft.on)
    assert taken is not None
    return taken.sheet
