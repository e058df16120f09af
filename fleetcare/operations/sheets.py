"""Take, judge, store and carry over the sheet that comes with an entry, of whatever kind."""

import hashlib
from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import date
from typing import TYPE_CHECKING, cast

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import LogEntry
from fleetcare.db.tables import Sheet as SheetTable
from fleetcare.db.tables import SheetValue as ValueTable
from fleetcare.domain.measures import in_base
from fleetcare.domain.quantities import plain
from fleetcare.domain.sheet_kinds import KINDS, WORDS
from fleetcare.domain.sheets import LASH, SHIM, Sheet, SheetValue
from fleetcare.drafts.sheets import SheetIn, SheetOptions
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem
from fleetcare.operations.measures_cells import MeasureForm, measure_form
from fleetcare.operations.measures_read import read_measures
from fleetcare.operations.sheets_closing import needed_sheets
from fleetcare.operations.sheets_judge import JudgedSheet, judge
from fleetcare.operations.sheets_load import lash_form, load_values, open_form
from fleetcare.operations.sheets_read import read_values
from fleetcare.rules.judging.spans import decimal
from fleetcare.rules.sheet_complete import why_incomplete

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session


@dataclass(frozen=True, slots=True)
class TakenSheet:
    """A sheet other than the lash sheet, as read; it is judged when it is stored, beside those before it."""

    form: MeasureForm
    sheet: Sheet

    def why_open(self) -> str:
        """Say why the sheet closes no task, empty where it does."""
        return why_incomplete(self.sheet.kind, self.sheet.values, self.form.engine)


AnySheet = JudgedSheet | TakenSheet
"""A sheet of whatever kind that comes with an entry."""


def take_sheet(
    connection: "Connection", item: FoundItem, typed: SheetOptions, on: date, was: Sheet | None = None
) -> AnySheet | None:
    """Read a typed sheet of an engine, and judge its lash by the spec in force on its day; None where none was typed.

    Where it takes the place of one that `was`, it is likely of that kind, and keeps what that was taken with where nothing
    else is said. Nothing is stored. Raises Refusals with everything that is wrong with it.
    """
    if typed.sheet is None:
        return None
    kind = typed.kind or _kind_of(connection, item, typed, typed.sheet, on, was.kind if was else "")
    empty = replace(was, on=on, values=()) if was is not None and was.kind == kind else Sheet(0, kind, on, ())
    if kind == LASH:
        form = open_form(connection, item, on)
        values = read_values(form, typed.sheet, sure=typed.sure)
        return judge(form, _restated(replace(empty, values=values), typed))
    measures = measure_form(connection, item, kind, on)
    values = read_measures(measures, typed.sheet, sure=typed.sure)
    return TakenSheet(measures, _restated(replace(empty, values=values), typed))


def check_received(typed: SheetOptions, on: date, today: date) -> None:
    """Refuse results that came before the sheet was taken, or have not come yet."""
    if typed.received is None:
        return
    if typed.received < on:
        raise Refused(f"results cannot have come on {typed.received}, before {on}", "correct --received or --on")
    if typed.received > today:
        raise Refused(
            f"results cannot have come on {typed.received}, today counts as {today}",
            "correct --received, or give a later --as-of",
        )


def _restated(sheet: Sheet, typed: SheetOptions) -> Sheet:
    """Give a sheet with what was said of it now, if only that there is none; what was not said stays as it was."""
    told = typed.model_fields_set
    return replace(
        sheet,
        condition=(typed.when or "") if "when" in told else sheet.condition,
        gauge=(typed.gauge or "") if "gauge" in told else sheet.gauge,
        lab_number=(typed.lab_no or "") if "lab_no" in told else sheet.lab_number,
        received_on=typed.received if "received" in told else sheet.received_on,
    )


def _kind_of(
    connection: "Connection", item: FoundItem, typed: SheetOptions, sheet: SheetIn, on: date, likely: str
) -> str:
    """Give the kind of a sheet: a likely one, or one a task of its entry needs, else that most of its rows belong to."""
    wanted = {likely} | needed_sheets(connection, item, cast("tuple[str, ...]", getattr(typed, "task", ())), on)
    quantities = [row.cells.get("quantity", "").casefold() for row in sheet.rows]
    known = {LASH: {LASH, SHIM}} | {kind.name: {one.casefold() for one in kind.quantities} for kind in KINDS.values()}
    rows = {kind: sum(quantity in names for quantity in quantities) for kind, names in known.items()}
    return max([kind for kind in rows if kind in wanted and rows[kind]] or rows, key=lambda kind: rows[kind])


def fresh_sheet(session: "Session", item: FoundItem, typed: SheetOptions, on: date) -> AnySheet | None:
    """Take a sheet as `take_sheet` does, and refuse one that is stored already."""
    sheet = take_sheet(session.connection(), item, typed, on)
    known = known_entry(session, item, sheet.sheet) if sheet is not None else None
    if known is not None:
        raise Refused(
            f"entry {known} of {item.tag} has this very sheet already",
            f"to close a task with it give fleetcare correct {known} --task NAME",
        )
    return sheet


def keep_sheet(session: "Session", entry: LogEntry, sheet: Sheet) -> Sheet:
    """Store a sheet with its entry, under a key that tells it again; give it with the entry's number."""
    keep_sheets(session, [(entry, sheet)])
    return replace(sheet, entry=entry.id)


def keep_sheets(session: "Session", sheets: Sequence[tuple[LogEntry, Sheet]]) -> None:
    """Store sheets, each with its entry as `keep_sheet` does, all of them in one go."""
    rows = [_row(session, entry, sheet) for entry, sheet in sheets]
    session.add_all(rows)
    session.flush()
    session.add_all(
        ValueTable(
            sheet_id=row.id,
            quantity=value.quantity,
            point=value.point,
            phase=value.phase,
            value=value.value,
            low=value.low,
            high=value.high,
            unit=value.unit,
            qualifier=value.qualifier,
        )
        for row, (_, sheet) in zip(rows, sheets, strict=True)
        for value in sheet.values
    )
    session.flush()


def _row(session: "Session", entry: LogEntry, sheet: Sheet) -> SheetTable:
    key = _key(entry.item_id, sheet)
    times = len(_rows_of(session, key))
    return SheetTable(
        item_id=entry.item_id,
        entry_id=entry.id,
        kind=sheet.kind,
        taken_on=sheet.on,
        conditions=sheet.condition,
        gauge=sheet.gauge,
        lab_number=sheet.lab_number,
        received_on=sheet.received_on,
        import_key=f"{key} {times + 1}" if times else key,
    )


def known_entry(session: "Session", item: FoundItem, sheet: Sheet) -> int | None:
    """Give the entry a sheet with these values of that day stands with by now; None where none does, or it was voided."""
    for row in _rows_of(session, _key(item.id, sheet)):
        entry = session.get_one(LogEntry, row.entry_id)
        while (later := _later(session, entry)) is not None:
            entry = later
        if not entry.is_void:
            return entry.id
    return None


def carried_sheet(session: "Session", item: FoundItem, old: LogEntry, typed: SheetOptions, on: date) -> AnySheet | None:
    """Give the sheet a correction leaves an entry with: its own, with what was restated of its values and of how it was taken.

    Refuses to restate what a sheet was taken with where there is none.
    """
    connection = session.connection()
    row = session.scalars(select(SheetTable).where(col(SheetTable.entry_id) == old.id)).one_or_none()
    if row is None:
        if typed.sheet is None and (typed.when or typed.gauge or typed.received or typed.lab_no):
            raise Refused(f"entry {old.id} has no sheet", "give one with --sheet FILE")
        return take_sheet(connection, item, typed, on)
    values = load_values(connection, [row.id]).get(row.id, ())
    was = Sheet(0, row.kind, on, values, row.conditions, row.gauge, "", "", row.lab_number, row.received_on)
    if typed.sheet is not None:
        return take_sheet(connection, item, typed, on, was)
    kept = _restated(was, typed)
    if kept.kind == LASH:
        return judge(lash_form(connection, item, on), kept)
    return TakenSheet(measure_form(connection, item, kept.kind, on), kept)


def _later(session: "Session", entry: LogEntry) -> LogEntry | None:
    return session.scalars(select(LogEntry).where(col(LogEntry.supersedes_id) == entry.id)).one_or_none()


def _rows_of(session: "Session", key: str) -> Sequence[SheetTable]:
    """Give the sheets stored under a key, and under it again: carried over by a correction, or after a void."""
    return session.scalars(
        select(SheetTable).where(col(SheetTable.import_key).startswith(key)).order_by(col(SheetTable.id))
    ).all()


def _key(item_id: int, sheet: Sheet) -> str:
    """Give what is the same for the same values of the same engine and day, in whatever unit and order."""
    lines = sorted(_line(value) for value in sheet.values)
    digest = hashlib.sha256("\n".join(lines).encode()).hexdigest()
    return f"{sheet.kind} {item_id} {sheet.on.isoformat()} {digest}"


def _line(value: SheetValue) -> str:
    if value.quantity in WORDS:
        return f"{value.quantity},{value.point},{value.qualifier}"
    goes, stops = (plain(decimal(in_base(end, value.unit))) for end in value.ends)
    return f"{value.quantity},{value.point},{value.phase},{goes},{stops}"
