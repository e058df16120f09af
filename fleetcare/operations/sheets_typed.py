"""A lash sheet while it is typed: all of it read and judged again at each key, and which cell is wanted next."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal

from fleetcare.domain.quantities import plain
from fleetcare.domain.sheets import LASH, SHIM, CellKey, Phase, Place, Sheet, SheetValue
from fleetcare.drafts.sheets import SheetIn, SheetRow
from fleetcare.errors import FleetError, Refused
from fleetcare.operations.findings import EngineFinding
from fleetcare.operations.sheet_ahead import SheetAhead, resting_on_it
from fleetcare.operations.sheets_judge import JudgedRow, JudgedSheet, judge
from fleetcare.operations.sheets_load import LashForm
from fleetcare.operations.sheets_values import SaidDoubt, doubt_of, read_value
from fleetcare.rules.explain_lash import say_stop
from fleetcare.rules.lash_points import side_of

Typed = Mapping[CellKey, str]
"""What stands in the cells of a sheet, as typed; empty where nothing does."""

_OUT = (Place.BELOW, Place.ABOVE)


@dataclass(frozen=True, slots=True)
class TypedSheet:
    """What is typed so far, judged; `wrong` cells are no values and are left out of it, `doubts` are more likely slips."""

    judged: JudgedSheet
    values: Mapping[CellKey, SheetValue]
    wrong: Mapping[CellKey, FleetError]
    doubts: Mapping[CellKey, SaidDoubt]

    def row(self, key: CellKey) -> JudgedRow | None:
        """Give the flat row of a cell, None where no value stands in it."""
        rows = self.judged.rows
        return next((row for row in rows if (row.quantity, row.point, row.phase) == key), None)

    def is_out(self, point: str, phase: Phase) -> bool:
        """Whether the gap of a point lies outside its range."""
        row = self.row(CellKey(LASH, point, phase))
        return row is not None and row.place in _OUT


def read_typed(
    form: LashForm, typed: Typed, condition: str = "", gauge: str = "", unit: str | None = None
) -> TypedSheet:
    """Read and judge what stands in the cells of an engine's sheet; gaps are in `unit`, else in that of the engine's limits.

    Nothing typed raises.
    """
    values: dict[CellKey, SheetValue] = {}
    wrong: dict[CellKey, FleetError] = {}
    for key, text in typed.items():
        if text.strip():
            try:
                values[key] = read_value(form, *key, text.strip(), unit)
            except FleetError as error:
                wrong[key] = error
    doubts = {key: found for key, value in values.items() if (found := doubt_of(form, value)) is not None}
    sheet = Sheet(0, LASH, form.on, tuple(values.values()), condition, gauge)
    return TypedSheet(judge(form, sheet), values, wrong, doubts)


def findings_on(ahead: SheetAhead, typed: TypedSheet) -> tuple[EngineFinding, ...]:
    """Give what the rules find by what is typed so far, gravest first, beside all else that was measured on the engine."""
    return resting_on_it(ahead.judge(typed.judged.sheet, typed.judged.judgements))


def cells_of(form: LashForm) -> tuple[CellKey, ...]:
    """Give the cells of a sheet in the order in which they are filled in: stop by stop, point by point, found and left.

    Engines set by shims have the thickness of the shim behind each gap.
    """
    quantities = (LASH, SHIM) if form.train.adjuster.kind == SHIM else (LASH,)
    return tuple(
        CellKey(quantity, point.name, phase)
        for stop in form.stops
        for point in stop.points
        for phase in (Phase.FOUND, Phase.LEFT)
        for quantity in quantities
    )


def is_wanted(form: LashForm, typed: TypedSheet, key: CellKey) -> bool:
    """Tell whether whoever fills in a sheet is led to a cell. Every gap is; a shim only where the gap was found out.

    The one found in is wanted where no sheet before told it, the one left where the gap was set.
    """
    if key.quantity == LASH:
        return True
    if not typed.is_out(key.point, Phase.FOUND):
        return False
    if key.phase is Phase.FOUND:
        return key.point not in form.shims
    return CellKey(LASH, key.point, Phase.LEFT) in typed.values


def say_cell(form: LashForm, typed: TypedSheet, key: CellKey) -> list[str]:
    """Say of a cell what stands in it and what that means, or what was there last and what belongs there."""
    row, error, doubt = typed.row(key), typed.wrong.get(key), typed.doubts.get(key)
    parts = []
    if error is not None:
        parts.append("; ".join(error.lines()))
    elif row is not None:
        parts += [f"{row.value} {row.unit} {row.verdict}", row.note, row.mending if doubt is None else "likely a slip"]
    else:
        parts += _asked(form, typed, key)
    return [part for part in parts if part]


def say_here(form: LashForm, key: CellKey) -> str:
    """Say where the crank must stand for a cell."""
    return say_stop(form.stops, _stop_of(form, key))


def points_here(form: LashForm, key: CellKey) -> frozenset[str]:
    """Give the points that are measured with the crank where it must stand for a cell."""
    return frozenset(point.name for point in form.stops[_stop_of(form, key)].points)


def last_shown(form: LashForm, key: CellKey) -> str:
    """Give what a cell of found gaps or shims showed last, in its unit; empty where nothing did, or for what is left."""
    if key.phase is not Phase.FOUND:
        return ""
    if key.quantity == SHIM:
        return plain(form.shims[key.point]) if key.point in form.shims else ""
    last = form.last.get(key.point)
    return str(last.value) if last is not None else ""


def sheet_in(order: Sequence[CellKey], typed: Typed, sure: frozenset[CellKey], unit: str | None = None) -> SheetIn:
    """Give what is typed as the rows of a sheet, numbered by the place of their cells; `sure` ones are right as they look."""
    rows = []
    for number, key in enumerate(order):
        if text := typed.get(key, "").strip():
            cells = {"quantity": key.quantity, "point": key.point, "phase": key.phase, "value": text}
            gauged_in = {"unit": unit} if unit and key.quantity == LASH else {}
            rows.append(SheetRow(number, {**cells, **gauged_in}, key in sure))
    return SheetIn(tuple(rows))


def typed_of(sheet: Sheet) -> tuple[Typed, str]:
    """Give what would be typed to get the values of a stored sheet, and the unit of its gaps.

    Refuses a sheet with gaps in two units: its cells have one.
    """
    units = {value.unit for value in sheet.values if value.quantity == LASH}
    if len(units) > 1:
        raise Refused(f"the sheet of entry {sheet.entry} has gaps in mm and in inches", "give it anew from a file")
    texts = {CellKey(value.quantity, value.point, value.phase): str(value) for value in sheet.values}
    return texts, next(iter(units), "")


def _stop_of(form: LashForm, key: CellKey) -> int:
    return next(n for n, stop in enumerate(form.stops) if any(point.name == key.point for point in stop.points))


def _asked(form: LashForm, typed: TypedSheet, key: CellKey) -> list[str]:
    """Say what belongs in an empty cell, and what is known about it."""
    if key.quantity == SHIM:
        known = last_shown(form, key)
        return ["thickness of the shim, mm", f"last {known}" if known else ""]
    if key.phase is Phase.LEFT:
        found = typed.row(CellKey(LASH, key.point, Phase.FOUND))
        nothing = "empty: left as found" if found is not None else "empty: not measured"
        return [nothing, found.note if found else "", found.mending if found else "", _setting(form, key.point)]
    last = form.last.get(key.point)
    told = f"last {last.value} {last.value.unit} on {last.on.isoformat()}" if last else "never measured before"
    return [told, _range(form, key.point), _setting(form, key.point)]


def _range(form: LashForm, point: str) -> str:
    spec = form.spec
    limits = spec.ranges.get(side_of(point)) if spec else None
    return f"{limits[0]:f} to {limits[1]:f} {spec.unit} is in" if spec and limits else "no check range is known"


def _setting(form: LashForm, point: str) -> str:
    setting: Decimal | None = form.spec.settings.get(side_of(point)) if form.spec else None
    return f"set to {setting:f}" if setting is not None else ""
