"""Sheets as the rules see them, of one engine or of many at once: facts out of rows, with plain SQL."""

import sys
from collections.abc import Sequence
from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.engines import Adjuster, Bridged, Layout, ValveTrain
from fleetcare.domain.measured import LASH, OIL, MeasuredEngine, MeasuredSheet, SheetWord
from fleetcare.domain.meters import LifeFigure
from fleetcare.domain.quantities import Kind
from fleetcare.domain.sheet_kinds import GRADE, WORDS
from fleetcare.domain.sheets import Judgement, LashPoint, LashSpec, Phase, Sheet, SheetValue, spec_on
from fleetcare.operations.entries import SHEET_COUNTS
from fleetcare.operations.families import Families
from fleetcare.operations.lash_specs import USUAL_VALVES, specs_of
from fleetcare.operations.load import AS_STORED, Trial, entry_lives, load_counters, own_readings
from fleetcare.operations.rows import Row, day, fetch, figure, known_day
from fleetcare.operations.settings import holidays
from fleetcare.operations.sheets_load import load_values
from fleetcare.operations.top_ups import load_top_ups
from fleetcare.rules.j300 import grade_key
from fleetcare.rules.judge_engine import Background
from fleetcare.rules.judge_lash import judge_sheet
from fleetcare.rules.lash_points import banks, lash_points
from fleetcare.rules.nameplate import says_marine
from fleetcare.rules.oil_fills import top_up, with_logged

if TYPE_CHECKING:
    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class EngineSheets:
    """An engine as rules ask for it, with all its sheets up to a day, oldest first, and what is known beside them.

    `points` are its lash points, none where the number of cylinders is not known, `specs` their limits in date order.
    """

    item_id: int
    engine: MeasuredEngine
    sheets: tuple[MeasuredSheet, ...] = ()
    background: Background = field(default_factory=Background)
    points: tuple[LashPoint, ...] = ()
    specs: tuple[LashSpec, ...] = ()


def measured_sheet(sheet: Sheet, engine_hours: Decimal | None = None) -> MeasuredSheet:
    """Give a sheet as rules see it: its words apart from its values."""
    return MeasuredSheet(
        entry=sheet.entry,
        kind=sheet.kind,
        on=sheet.on,
        values=tuple(value for value in sheet.values if value.quantity not in WORDS),
        words=tuple(SheetWord(one.quantity, one.qualifier, one.point) for one in sheet.values if one.quantity in WORDS),
        gauge=sheet.gauge,
        engine_hours=engine_hours,
        received_on=sheet.received_on,
        condition=sheet.condition,
    )


def load_engine_sheets(
    connection: "Connection",
    on: date,
    ids: Sequence[int] | None = None,
    newest: tuple[date, int] | None = None,
    families: Families | None = None,
    trial: Trial = AS_STORED,
) -> list[EngineSheets]:
    """Load engines (all that have a sheet, or those of some ids) with their sheets, in the order of tags, seen on a day.

    Sheets after `newest`, the day and the entry of one, are left out. Whoever loads many engines in parts hands the same
    `families` of that day to each, so that no relative is loaded twice. Readings of a `trial` are looked at as if stored.
    """
    families = families or Families(connection, on)
    plates = _load_plates(connection, ids)
    last = newest or (on, sys.maxsize)
    sheets = _load_sheets(connection, [row[0] for row in plates], on, last, trial)
    fresh = load_fresh(connection, last[0])
    specs = specs_of(connection, [item for item, own in sheets.items() if any(one.kind == LASH for one in own)])
    silent = [item for item, own in sheets.items() if any(one.kind == OIL and top_up(one) is None for one in own)]
    top_ups = load_top_ups(connection, silent, last[0], on, trial)
    free = holidays(connection)
    found = []
    for row in plates:
        own = tuple(with_logged(sheet, top_ups.get(row[0], ())) for sheet in sheets.get(row[0], ()))
        if not own and ids is None:
            continue
        engine, train = _engine(row)
        points, limits = lash_points(train) if train else (), specs.get(row[0], ())
        background = Background(
            fresh=fresh.get(grade_in(own, engine), ()),
            family=families.of(row[0], max((sheet.on for sheet in own if sheet.kind == OIL), default=None)),
            lash=_judge_lash(own, points, limits),
            holidays=free,
        )
        found.append(EngineSheets(row[0], engine, own, background, points, limits))
    return found


def load_measured_engine(connection: "Connection", item_id: int) -> MeasuredEngine | None:
    """Load an engine as rules ask for it, None for a machine."""
    rows = _load_plates(connection, [item_id])
    return _engine(rows[0])[0] if rows else None


def _load_plates(connection: "Connection", ids: Sequence[int] | None) -> Sequence[Row]:
    chosen = "" if ids is None else " where item.id in :ids"
    return fetch(
        connection,
        "select item.id, item.tag, fuel, cylinders, layout, numbering, valves_per_cylinder, bridged, adjuster, duty,"
        f" oil_grade, sump_l, rated_kw, altitude_m from engine join item on item.id = engine.item_id{chosen} order by item.tag, item.id",
        **({} if ids is None else {"ids": list(ids)}),
    )


def _engine(row: Row) -> tuple[MeasuredEngine, ValveTrain | None]:
    """Give an engine, and its valves where the number of cylinders is known."""
    _, tag, fuel, cylinders, layout, numbering, valves, bridged, adjuster, duty, grade, sump, rated, altitude = row
    train = None
    if cylinders is not None:
        train = ValveTrain(
            cylinders=cylinders,
            valves_per_cylinder=valves or USUAL_VALVES,
            bridged=Bridged(bridged or Bridged.NONE),
            layout=Layout(layout) if layout else None,
            numbering=numbering,
            firing_order=(),
            adjuster=Adjuster(adjuster),
        )
    return MeasuredEngine(
        tag=tag,
        fuel=fuel,
        cylinders=cylinders or 0,
        banks=banks(train) if train else (),
        adjuster=adjuster,
        duty=duty,
        is_marine=says_marine(duty),
        oil_grade=grade,
        sump=figure(sump),
        rated_kw=figure(rated),
        altitude=figure(altitude),
    ), train


def _load_sheets(
    connection: "Connection", ids: Sequence[int], on: date, last: tuple[date, int], trial: Trial
) -> dict[int, list[MeasuredSheet]]:
    """Load the sheets of some engines up to the last, oldest first, by engine."""
    rows = fetch(
        connection,
        "select sheet.item_id, sheet.id, sheet.entry_id, sheet.kind, sheet.taken_on, sheet.conditions, sheet.gauge,"
        " sheet.received_on from sheet join log_entry entry on entry.id = sheet.entry_id"
        f" where sheet.item_id in :ids and {SHEET_COUNTS} and (sheet.taken_on, sheet.entry_id) <= (:on, :entry)"
        " order by sheet.taken_on, sheet.entry_id, sheet.id",
        ids=list(ids),
        on=last[0].isoformat(),
        entry=last[1],
    )
    values = load_values(connection, [row[1] for row in rows])
    owners = list(dict.fromkeys(row[0] for row in rows))
    counters = load_counters(connection, owners, on, trial)
    own = {item: own_readings(found) for item, found in counters.items()}
    sheets: dict[int, list[MeasuredSheet]] = {}
    for item, sheet_id, entry, kind, taken_on, condition, gauge, received in rows:
        taken = known_day(taken_on)
        life = entry_lives(counters.get(item, {}), own.get(item, {}), entry, taken).get(Kind.HOURS)
        sheet = Sheet(entry, kind, taken, values.get(sheet_id, ()), condition, gauge, received_on=day(received))
        sheets.setdefault(item, []).append(measured_sheet(sheet, life.value if life else None))
    return sheets


def load_hours(
    connection: "Connection", item_id: int, entry: int, on: date, today: date, trial: Trial = AS_STORED
) -> LifeFigure | None:
    """Load the life total (h) an engine had at an entry of a day, as its sheet is given it; None where nothing tells."""
    counters = load_counters(connection, [item_id], today, trial).get(item_id, {})
    return entry_lives(counters, own_readings(counters), entry, on).get(Kind.HOURS)


def load_fresh(connection: "Connection", on: date) -> dict[str, tuple[SheetValue, ...]]:
    """Load what new oil has, by grade: of each quantity the newest reference, whichever engine's sheet it came with."""
    rows = fetch(
        connection,
        "select coalesce((select qualifier from sheet_value word where word.sheet_id = sheet.id"
        f" and word.quantity = '{GRADE}'), engine.oil_grade), fresh.quantity, fresh.value, fresh.unit, fresh.qualifier"
        " from sheet_value fresh join sheet on sheet.id = fresh.sheet_id"
        " join log_entry entry on entry.id = sheet.entry_id join engine on engine.item_id = sheet.item_id"
        f" where fresh.phase = 'new' and {SHEET_COUNTS} order by sheet.taken_on, sheet.entry_id, fresh.id",
        on=on.isoformat(),
    )
    by_grade: dict[str, dict[str, SheetValue]] = {}
    for grade, quantity, value, unit, qualifier in rows:
        fresh = SheetValue(quantity, "", Phase.NEW, figure(value), None, None, unit, qualifier)
        by_grade.setdefault(grade_key(grade), {})[quantity] = fresh
    return {grade: tuple(values.values()) for grade, values in by_grade.items() if grade}


def load_grades(connection: "Connection", on: date) -> frozenset[str]:
    """Load every grade the shop knows up to a day, as grades compare: of nameplates, and of oil sheets."""
    rows = fetch(
        connection,
        "select oil_grade from engine union select qualifier from sheet_value word"
        " join sheet on sheet.id = word.sheet_id join log_entry entry on entry.id = sheet.entry_id"
        f" where word.quantity = '{GRADE}' and {SHEET_COUNTS}",
        on=on.isoformat(),
    )
    return frozenset(grade_key(grade) for (grade,) in rows if grade)


def grade_in(sheets: Sequence[MeasuredSheet], engine: MeasuredEngine) -> str:
    """Give the grade in the engine: what its newest oil sheet that names one says, else its nameplate."""
    said = (word.text for sheet in reversed(sheets) for word in sheet.words if word.quantity == GRADE)
    return grade_key(next(said, engine.oil_grade))


def _judge_lash(
    sheets: Sequence[MeasuredSheet], points: Sequence[LashPoint], specs: tuple[LashSpec, ...]
) -> dict[int, tuple[Judgement, ...]]:
    """Hold every lash sheet against the spec of its day, by entry."""
    return {
        one.entry: judge_sheet(one.values, points, spec_on(specs, one.on), one.condition)
        for one in sheets
        if one.kind == LASH
    }
