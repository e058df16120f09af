"""Take, judge, store and carry over the lash sheet that comes with an entry."""

import hashlib
from collections.abc import Sequence
from dataclasses import replace
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import LogEntry
from fleetcare.db.tables import Sheet as SheetTable
from fleetcare.db.tables import SheetValue as ValueTable
from fleetcare.domain.quantities import plain
from fleetcare.domain.sheets import LASH, Sheet, SheetValue
from fleetcare.drafts.sheets import SheetOptions
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem
from fleetcare.operations.sheets_judge import JudgedSheet, judge
from fleetcare.operations.sheets_load import lash_form, load_values, open_form
from fleetcare.operations.sheets_read import read_values
from fleetcare.rules.lash import MM_PER

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session


def take_sheet(connection: "Connection", item: FoundItem, typed: SheetOptions, on: date) -> JudgedSheet | None:
    """Read a typed sheet of an engine and judge it by the spec in force on its day; None where none was typed.

    Nothing is stored. Raises Refusals with everything that is wrong with it.
    """
    if typed.sheet is None:
        return None
    form = open_form(connection, item, on)
    values = read_values(form, typed.sheet, sure=typed.sure)
    return judge(form, Sheet(0, LASH, on, values, typed.when or "", typed.gauge or ""))


def fresh_sheet(session: "Session", item: FoundItem, typed: SheetOptions, on: date) -> JudgedSheet | None:
    """Take a sheet as `take_sheet` does, and refuse one that is stored already."""
    sheet = take_sheet(session.connection(), item, typed, on)
    known = known_entry(session, item, sheet.sheet) if sheet is not None else None
    if known is not None:
        raise Refused(
            f"entry {known} of {item.tag} has this very sheet already",
            f"to close a task with it give fleetcare correct {known} --task NAME",
        )
    return sheet


def keep_sheet(session: "Session", entry: LogEntry, judged: JudgedSheet) -> JudgedSheet:
    """Store a judged sheet with its entry, under a key that tells it again; give it with the entry's number."""
    sheet = judged.sheet
    key = _key(entry.item_id, sheet)
    times = len(_rows_of(session, key))
    row = SheetTable(
        item_id=entry.item_id,
        entry_id=entry.id,
        kind=sheet.kind,
        taken_on=sheet.on,
        conditions=sheet.condition,
        gauge=sheet.gauge,
        import_key=f"{key} {times + 1}" if times else key,
    )
    session.add(row)
    session.flush()
    for value in sheet.values:
        session.add(
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
        )
    session.flush()
    return replace(judged, sheet=replace(sheet, entry=entry.id))


def known_entry(session: "Session", item: FoundItem, sheet: Sheet) -> int | None:
    """Give the entry a sheet with these values of that day stands with by now; None where none does, or it was voided."""
    for row in _rows_of(session, _key(item.id, sheet)):
        entry = session.get_one(LogEntry, row.entry_id)
        while (later := _later(session, entry)) is not None:
            entry = later
        if not entry.is_void:
            return entry.id
    return None


def carried_sheet(
    session: "Session", item: FoundItem, old: LogEntry, typed: SheetOptions, on: date
) -> JudgedSheet | None:
    """Give the sheet a correction leaves an entry with: the one typed, else its own with what was restated of it.

    Refuses to restate what a sheet was taken with where there is none.
    """
    restated = take_sheet(session.connection(), item, typed, on)
    rows = session.scalars(
        select(SheetTable).where(col(SheetTable.entry_id) == old.id, col(SheetTable.kind) == LASH)
    ).all()
    if restated is None and not rows and (typed.when or typed.gauge):
        raise Refused(f"entry {old.id} has no sheet", "give one with --sheet FILE")
    if restated is not None or not rows:
        return restated
    (row,) = rows
    values = load_values(session.connection(), [row.id]).get(row.id, ())
    kept = Sheet(0, row.kind, on, values, typed.when or row.conditions, typed.gauge or row.gauge)
    return judge(lash_form(session.connection(), item, on), kept)


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
    goes, stops = (plain(_mm(end, value.unit)) for end in value.ends)
    return f"{value.quantity},{value.point},{value.phase},{goes},{stops}"


def _mm(figure: Decimal, unit: str) -> Decimal:
    return figure * MM_PER[unit]
