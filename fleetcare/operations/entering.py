"""Everything that is written down about an item, each with what it stored and which lines it moved, in sentences."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.engines import Status
from fleetcare.domain.quantities import plain
from fleetcare.drafts.work import ReadingDraft
from fleetcare.errors import SheetWanted
from fleetcare.operations.against_past import NewReading, hold_against_past
from fleetcare.operations.correct import correct_entry, item_of_entry
from fleetcare.operations.deferrals import defer
from fleetcare.operations.due import DueRow, Filters, due_rows, watch_items, watch_moves
from fleetcare.operations.find import find_engine, find_item, find_machine, find_meters, pick_meter
from fleetcare.operations.items import fit_engine
from fleetcare.operations.listing import pausing_tasks
from fleetcare.operations.log import Logged, record_work, refuse_future
from fleetcare.operations.readings import item_of_reading, record_reading, restore_reading, void_reading
from fleetcare.operations.sheet_report import report_logged
from fleetcare.operations.spells import change_status, set_factor
from fleetcare.operations.stored_words import (
    logged_words,
    moved_words,
    pausing_words,
    recorded_words,
    suspect_words,
)

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

    from fleetcare.drafts.items import FactorDraft, FitDraft, StatusDraft
    from fleetcare.drafts.work import CorrectionDraft, DeferralDraft, LogDraft, MeasureDraft, RestoreDraft, VoidDraft


@dataclass(slots=True)
class Entered:
    """What was stored, said; then the lines that moved, said; then what it is good to know now, and what to beware of.

    `logged` is what an entry stored, `waiting` the lines of a returned engine as they stood before its return.
    """

    said: list[str] = field(default_factory=list)
    moved: list[str] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)
    warnings: list[str] = field(default_factory=list)
    logged: Logged | None = None
    waiting: Sequence[DueRow] = ()

    def sentences(self) -> list[str]:
        """Give all that is said, in order."""
        return [*self.said, *self.moved, *self.notes, *self.warnings]


def enter_work(
    session: "Session", draft: "LogDraft", today: date, explained: Mapping[str, bool] | None = None
) -> Entered:
    """Store what was done on a day.

    `explained` says of figures that break with their meter's past what a ReadingDraft says of them: sure, rolled_over.
    """
    with watch_moves(session, draft.tag, today) as moves:
        if explained:
            _explain_figures(session, draft, explained)
        logged = record_work(session, draft, today)
    return Entered([*logged_words(logged, f"on {draft.on}")], [*moved_words(moves.moved)], logged=logged)


def enter_measured(
    session: "Session", draft: "MeasureDraft", kind: str, today: date, explained: Mapping[str, bool] | None = None
) -> Entered:
    """Store measurements taken without any work; raises SheetWanted, when all else is right, while there is no sheet."""
    entered = enter_work(session, draft, today, explained)
    if draft.sheet is None:
        raise SheetWanted(f"what was measured on {draft.tag} is not written down yet", "fill in the sheet", kind)
    return entered


def note_findings(session: "Session", entered: Entered, today: date) -> Entered:
    """Add to what was stored what the rules find on the sheet that came along, a sentence each."""
    report = report_logged(session.connection(), entered.logged, today)
    for one in report.findings if report is not None else ():
        entered.notes.append(f"Found: {one.row.severity} {one.row.cause}, {one.row.subject}; 3 shows its working.")
    return entered


def _explain_figures(session: "Session", draft: "LogDraft", explained: Mapping[str, bool]) -> None:
    """Store those figures of an entry that break with the past as readings of their own first, as explained."""
    connection = session.connection()
    item = find_item(connection, draft.tag)
    for figure in draft.at:
        meter = pick_meter(find_meters(connection, item.id, draft.on), figure, item.tag)
        if hold_against_past(connection, item, meter, [NewReading(draft.on, figure)])[1]:
            told = {"tag": item.tag, "value": figure, "on": draft.on, "by": draft.by, **explained}
            record_reading(session, ReadingDraft.model_validate(told))


def enter_correction(session: "Session", draft: "CorrectionDraft", today: date) -> Entered:
    """Store what an entry should have said, or that nothing of it is true."""
    item = item_of_entry(session, draft.entry)
    with watch_items(session, [item.id], today) as moves:
        logged = correct_entry(session, draft, today)
    what = f"{'voids' if draft.void else 'corrects'} entry {draft.entry}"
    return Entered([*logged_words(logged, what)], [*moved_words(moves.moved)], logged=logged)


def enter_reading(session: "Session", draft: "ReadingDraft", today: date) -> Entered:
    """Store what a meter shows."""
    refuse_future(draft.on, today)
    with watch_moves(session, draft.tag, today) as moves:
        recorded = record_reading(session, draft)
    return Entered([*recorded_words(recorded, draft.on)], [*moved_words(moves.moved)])


def enter_round(session: "Session", drafts: Sequence[ReadingDraft], today: date) -> Entered:
    """Store the readings of a round, all or none."""
    entered = [enter_reading(session, draft, today) for draft in drafts]
    count = f"{len(entered)} {'reading' if len(entered) == 1 else 'readings'} stored."
    return Entered(
        [count, *(line for one in entered for line in one.said[1:])], [line for one in entered for line in one.moved]
    )


def enter_void(session: "Session", draft: "VoidDraft", today: date) -> Entered:
    """Let a reading count for nothing from now on."""
    item = item_of_reading(session, draft.reading)
    with watch_items(session, [item.id], today) as moves:
        void_reading(session, draft.reading, draft.why, today)
    return Entered([f"Reading {draft.reading} of {item.tag} is void."], [*moved_words(moves.moved)])


def enter_restored(session: "Session", draft: "RestoreDraft", today: date) -> Entered:
    """Let a suspect or voided reading count again."""
    item = item_of_reading(session, draft.reading)
    with watch_items(session, [item.id], today) as moves:
        restored = restore_reading(session, draft.reading, today, why=draft.why, sure=draft.sure)
    said = [f"Reading {draft.reading} of {item.tag} counts again.", *suspect_words(restored.suspects)]
    return Entered(said, [*moved_words(moves.moved)])


def enter_deferral(session: "Session", draft: "DeferralDraft", today: date) -> Entered:
    """Store a deferral of the due point a task has now."""
    with watch_moves(session, draft.tag, today) as moves:
        deferred = defer(session, draft)
    until = " or ".join(deferred.until)
    said = f"{deferred.task} of {deferred.item.tag} deferred until {until} by {draft.by}: {deferred.why}"
    warnings = [f"Beware: {deferred.beware}."] if deferred.beware else []
    return Entered([said], [*moved_words(moves.moved)], warnings=warnings)


def enter_status(session: "Session", draft: "StatusDraft", status: Status, today: date) -> Entered:
    """Begin a spell of a status."""
    refuse_future(draft.on, today)
    connection = session.connection()
    engine = find_engine(connection, draft.tag)
    waiting = due_rows(connection, today, Filters(engine=engine.tag))
    pausing = pausing_tasks(connection, engine.tag, today)
    with watch_moves(session, engine.tag, today) as moves:
        change_status(session, engine, status, draft.on, why=draft.why, by=draft.by)
    return Entered(
        [f"{engine.tag} is {status} from {draft.on}."],
        [*moved_words(moves.moved)],
        [pausing_words(name) for name in pausing] if status is Status.LAID_UP else [],
        waiting=waiting,
    )


def enter_factor(session: "Session", draft: "FactorDraft", today: date) -> Entered:
    """Shorten the intervals of a kind from a day on."""
    item = find_item(session.connection(), draft.tag)
    with watch_moves(session, item.tag, today) as moves:
        set_factor(session, item, draft.kind, draft.factor, draft.on, draft.why)
    said = f"{item.tag}: {draft.kind} intervals × {plain(draft.factor)} from {draft.on} ({draft.why})."
    return Entered([said], [*moved_words(moves.moved)])


def enter_move(session: "Session", draft: "FitDraft", today: date) -> Entered:
    """Fit an engine in a machine, or take it out of the one it is in."""
    refuse_future(draft.on, today)
    engine = find_engine(session.connection(), draft.tag)
    where = "taken out of its machine"
    if draft.machine is not None:
        where = f"fitted in {find_machine(session.connection(), draft.machine).tag}"
    with watch_moves(session, engine.tag, today) as moves:
        fit_engine(session, engine, draft.machine, draft.on, draft.position or "")
    return Entered([f"{engine.tag} {where} on {draft.on}."], [*moved_words(moves.moved)])
