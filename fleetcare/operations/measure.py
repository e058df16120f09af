"""Measurements taken without any work: stored with an entry of their own, once however often they come."""

from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.drafts.work import LogDraft
from fleetcare.operations.find import find_item
from fleetcare.operations.log import record_work, refuse_future
from fleetcare.operations.sheet_report import SheetReport, report_sheet
from fleetcare.operations.sheets import check_received, known_entry, take_sheet

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

    Raises Refused for a day to come, Refusals with everything that is wrong with the sheet.
    """
    refuse_future(draft.on, today)
    check_received(draft, draft.on, today)
    item = find_item(session.connection(), draft.tag)
    sheet = take_sheet(session.connection(), item, draft, draft.on)
    assert sheet is not None
    known = known_entry(session, item, sheet.sheet)
    if known is not None:
        return Measured(report_sheet(session.connection(), item, known, today), is_new=False)
    logged = record_work(session, draft, today)
    entry, _ = logged.entries[0]
    return Measured(report_sheet(session.connection(), item, entry, today), is_new=True, notes=tuple(logged.notes))
