"""The lash points of many engines at once, as what wears: their sheets, limits and valves with one query each."""

from collections.abc import Mapping, Sequence
from datetime import date
from itertools import groupby
from operator import itemgetter
from typing import TYPE_CHECKING

from fleetcare.domain.engines import Bridged, ValveTrain
from fleetcare.domain.quantities import Kind
from fleetcare.domain.sheets import LASH, LashPoint, Phase, Sheet, SheetValue, spec_on
from fleetcare.domain.wear import Wear
from fleetcare.operations.lash_specs import USUAL_VALVES, specs_of
from fleetcare.operations.rows import fetch, figure, known_day
from fleetcare.rules.lash_past import lash_past, places_of
from fleetcare.rules.lash_points import lash_points
from fleetcare.rules.lash_wear import lash_wears
from fleetcare.rules.meters import CounterHistory

if TYPE_CHECKING:
    from sqlalchemy import Connection


def load_lash_wears(
    connection: "Connection", counters: Mapping[int, Mapping[Kind, CounterHistory]], on: date
) -> dict[int, tuple[Wear, ...]]:
    """Load what the lash of some engines showed over their hours up to a day, by engine; `counters` are theirs."""
    ids = list(counters)
    specs, sheets = specs_of(connection, ids), _load_sheets(connection, ids, on)
    wears = {}
    for engine, points in _load_points(connection, ids).items():
        own = specs.get(engine, ())
        at = places_of(sheets.get(engine, ()), counters[engine][Kind.HOURS])
        pasts = lash_past(points, sheets.get(engine, ()), own, at, on)
        wears[engine] = tuple(lash_wears(pasts, spec_on(own, on)))
    return wears


def _load_points(connection: "Connection", ids: Sequence[int]) -> dict[int, tuple[LashPoint, ...]]:
    """Give the lash points of the engines whose cylinders are known and whose adjusters leave a gap."""
    rows = fetch(
        connection,
        "select item_id, cylinders, valves_per_cylinder, bridged from engine where item_id in :ids"
        " and cylinders is not null and (adjuster is null or adjuster <> 'hydraulic')",
        ids=ids,
    )
    return {
        item: lash_points(ValveTrain(cylinders, valves or USUAL_VALVES, Bridged(bridged or Bridged.NONE)))
        for item, cylinders, valves, bridged in rows
    }


def _load_sheets(connection: "Connection", ids: Sequence[int], on: date) -> dict[int, list[Sheet]]:
    """Give the gaps of every sheet that counts, oldest first."""
    rows = fetch(
        connection,
        "select sheet.item_id, sheet.id, sheet.entry_id, sheet.taken_on, sheet.conditions, one.point, one.phase, one.value,"
        " one.low, one.high, one.unit, one.qualifier from sheet join log_entry entry on entry.id = sheet.entry_id"
        " join sheet_value one on one.sheet_id = sheet.id and one.quantity = 'lash'"
        " where sheet.item_id in :ids and sheet.kind = 'lash' and sheet.taken_on <= :on and not entry.is_void"
        " and not exists (select 1 from log_entry later where later.supersedes_id = entry.id)"
        " order by sheet.taken_on, sheet.entry_id, sheet.id, one.id",
        ids=ids,
        on=on.isoformat(),
    )
    sheets: dict[int, list[Sheet]] = {}
    for (item, _, entry, taken_on, condition), values in groupby(rows, key=itemgetter(slice(0, 5))):
        gaps = tuple(
            SheetValue(LASH, point, Phase(phase), figure(value), figure(low), figure(high), unit, qualifier)
            for *_, point, phase, value, low, high, unit, qualifier in values
        )
        sheets.setdefault(item, []).append(Sheet(entry, LASH, known_day(taken_on), gaps, condition))
    return sheets
