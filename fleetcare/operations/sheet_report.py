"""A stored sheet as its command shows it: every value judged, what the rules find, what is missing, and the cautions."""

from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.cautions import GENERAL, OF_SHEETS
from fleetcare.domain.meters import LifeFigure
from fleetcare.domain.sheet_kinds import KINDS, WordColumn
from fleetcare.domain.sheets import LASH, Sheet, SheetValue
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem
from fleetcare.operations.findings import EngineFinding, engine_findings, judge_sheets, known_findings
from fleetcare.operations.measured import load_engine_sheets, load_hours
from fleetcare.operations.rows import fetch, known_day
from fleetcare.operations.sheets_judge import JudgedSheet, judge_stored
from fleetcare.operations.sheets_load import load_sheets
from fleetcare.operations.shop_book import usable_book
from fleetcare.rules.explain_measured import MeasuredRow, measured_rows
from fleetcare.rules.sheet_complete import missing_cylinders, why_incomplete

if TYPE_CHECKING:
    from sqlalchemy import Connection

    from fleetcare.operations.log import Logged


@dataclass(frozen=True, slots=True)
class SheetReport:
    """A sheet with what the rules say of it; a lash sheet has `lash` in the place of `rows`.

    `findings` are those of the engine, as it stood with this sheet, that rest on a value of it. `engine_hours` are of life.
    `missing` are cylinders without a value, `incomplete` is why it closes no work, empty where it does.
    """

    tag: str
    title: str
    sheet: Sheet
    engine_hours: LifeFigure | None
    rows: tuple[MeasuredRow, ...]
    findings: tuple[EngineFinding, ...]
    missing: tuple[str, ...] = ()
    incomplete: str = ""
    notes: tuple[str, ...] = ()
    lash: JudgedSheet | None = None

    @property
    def words(self) -> tuple[tuple[WordColumn, SheetValue], ...]:
        """What the sheet says in words, each with what it is about."""
        columns = {column.quantity: column for kind in KINDS.values() for column in kind.word_columns}
        return tuple((columns[value.quantity], value) for value in self.sheet.values if value.quantity in columns)

    @property
    def cautions(self) -> tuple[str, ...]:
        """The cautions of the job, and that of all work."""
        return *OF_SHEETS[self.sheet.kind], GENERAL


def report_logged(connection: "Connection", logged: "Logged | None", on: date) -> SheetReport | None:
    """Give the sheet of what was just logged, judged; None where none came along."""
    if logged is None or logged.sheet is None:
        return None
    return report_sheet(connection, logged.item, logged.sheet.entry, on)


def last_report(connection: "Connection", item: FoundItem, on: date, kind: str) -> SheetReport | None:
    """Load an engine's newest sheet of a kind up to a day and judge it, None where it has none."""
    sheets = load_sheets(connection, item.id, on, kind)
    return report_sheet(connection, item, sheets[-1].entry, on) if sheets else None


def report_sheet(connection: "Connection", item: FoundItem, entry: int, on: date) -> SheetReport:
    """Load the sheet an entry stands with, and judge it beside those before it, meters as seen on a day.

    Refuses an entry without one.
    """
    sheet = _stored(connection, item, entry)
    (found,) = load_engine_sheets(connection, on, [item.id], newest=(sheet.on, entry))
    book, notes = usable_book(connection, on)
    judged = judge_sheets(found, book)
    known = known_findings(connection, found, book, on)
    findings = tuple(one for one in engine_findings(judged, known) if entry in one.sheets)
    hours = load_hours(connection, item.id, entry, sheet.on, on)
    if sheet.kind == LASH:
        lash = judge_stored(connection, item, sheet)
        return SheetReport(item.tag, "Valve lash", sheet, hours, (), findings, notes=notes, lash=lash)
    kind = KINDS[sheet.kind]
    return SheetReport(
        tag=item.tag,
        title=kind.title,
        sheet=sheet,
        engine_hours=hours,
        rows=measured_rows(judged.sheets[entry], kind.quantities),
        findings=findings,
        missing=missing_cylinders(sheet.kind, sheet.values, found.engine),
        incomplete=why_incomplete(sheet.kind, sheet.values, found.engine),
        notes=(*notes, *_unknown_cylinders(item.tag, sheet, found.engine.cylinders)),
    )


def _stored(connection: "Connection", item: FoundItem, entry: int) -> Sheet:
    rows = fetch(
        connection,
        "select kind, taken_on from sheet where entry_id = :entry and item_id = :item",
        entry=entry,
        item=item.id,
    )
    for kind, taken_on in rows:
        for sheet in load_sheets(connection, item.id, known_day(taken_on), kind):
            if sheet.entry == entry:
                return sheet
    raise Refused(f"entry {entry} of {item.tag} has no sheet", "choose one that has")


def _unknown_cylinders(tag: str, sheet: Sheet, cylinders: int) -> tuple[str, ...]:
    if cylinders or not any(value.point for value in sheet.values):
        return ()
    return (
        f"nobody stated how many cylinders {tag} has; whether all were measured cannot be told: give it with"
        f" fleetcare engine edit {tag} --cylinders N",
    )
