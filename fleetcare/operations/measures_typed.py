"""A sheet other than the lash sheet while it is typed: all of it read and judged again at each key.

A figure is taken in the unit written behind it, else in the one written behind another of its quantity, else in that of
the last sheet, else in the quantity's own.
"""

import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.measured import COMPRESSION, LEAKDOWN, RUN, SPOT
from fleetcare.domain.measures import QUANTITIES, read_unit
from fleetcare.domain.quantities import plain
from fleetcare.domain.sheet_kinds import At, Column, SheetKind, WordColumn
from fleetcare.domain.sheets import CellKey, Phase, Sheet, SheetValue, Verdict
from fleetcare.drafts.sheets import SheetIn, SheetRow
from fleetcare.errors import FleetError, Refusals, Refused
from fleetcare.operations.entries import NOT_YET
from fleetcare.operations.find import FoundItem
from fleetcare.operations.findings import EngineFinding
from fleetcare.operations.measures_cells import MeasureForm, measure_form
from fleetcare.operations.measures_read import read_measures
from fleetcare.operations.sheet_ahead import NEW_ENTRY, EntryAhead, SheetAhead, resting_on_it, sheet_ahead
from fleetcare.operations.sheets_load import load_sheets
from fleetcare.operations.sheets_values import SaidDoubt
from fleetcare.rules.explain_measured import MeasuredRow as MeasuredRow
from fleetcare.rules.explain_measured import measured_rows
from fleetcare.rules.sheet_complete import why_incomplete
from fleetcare.rules.sheet_doubts import say_measure_doubt

if TYPE_CHECKING:
    from sqlalchemy import Connection

_STAGED = ("supplemental", "36-month")  # purposes of a run in two stages (NFPA 110, 8.4.2.3)
_STAGES = ("1", "2")
_PARTS = re.compile(r"\s*(?P<figure>(?:<\s*)?[-+]?[0-9][0-9.,]*|nd)\s*(?P<unit>[^0-9\s.,].*)?", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class OpenMeasures:
    """What a sheet of an engine is filled in and judged by: its form, all it is judged beside, units and values before it."""

    form: MeasureForm
    ahead: SheetAhead
    last: Mapping[CellKey, str]
    units: Mapping[str, str]
    stored: Sheet | None = None


@dataclass(frozen=True, slots=True)
class TypedMeasures:
    """What is typed so far, judged; `wrong` cells are left out of it, `doubts` are more likely slips.

    `findings` are those that rest on a value of this sheet, `why_open` is why it would close no work.
    """

    rows: Mapping[CellKey, MeasuredRow]
    findings: tuple[EngineFinding, ...]
    wrong: Mapping[CellKey, FleetError]
    doubts: Mapping[CellKey, SaidDoubt]
    why_open: str

    def is_flagged(self, key: CellKey) -> bool:
        """Whether a rule calls a cell out."""
        row = self.rows.get(key)
        return row is not None and row.verdict in {Verdict.ALERT, Verdict.ALARM}


def open_measures(
    connection: "Connection", item: FoundItem, kind: str, on: date, today: date, entry: EntryAhead = NEW_ENTRY
) -> OpenMeasures:
    """Load what a sheet of an engine on a day is filled in by; of an entry stored already what that one holds.

    Refuses a machine, and one whose cylinders nobody stated where they are measured one by one.
    """
    form = measure_form(connection, item, kind, on)
    if not form.engine.cylinders and kind in {COMPRESSION, LEAKDOWN}:
        raise Refused(
            f"the number of cylinders of {item.tag} is not known",
            f"give it with fleetcare engine edit {item.tag} --cylinders N",
        )
    sheets = load_sheets(connection, item.id, on, kind)
    stored = next((sheet for sheet in sheets if sheet.entry == entry.number), None)
    before = [sheet for sheet in sheets if (sheet.on, sheet.entry) < (on, entry.number or NOT_YET)]
    values = [value for sheet in before for value in sheet.values]
    return OpenMeasures(
        form=form,
        ahead=sheet_ahead(connection, item, kind, on, today, entry),
        last={key_of(value): text_of(value) for value in values},
        units={value.quantity: value.unit for value in values if value.unit},
        stored=stored,
    )


def key_of(value: SheetValue) -> CellKey:
    """Give the cell a value stands in."""
    return CellKey(value.quantity, value.point, value.phase)


def text_of(value: SheetValue) -> str:
    """Give a value as one types it, a word as itself."""
    return str(value) if value.value is not None or not value.qualifier else value.qualifier


def typed_of(sheet: Sheet) -> dict[CellKey, str]:
    """Give what would be typed to get the values of a stored sheet, each with its unit."""
    return {key_of(value): f"{text_of(value)} {value.unit}".strip() for value in sheet.values}


def cells_of(form: MeasureForm) -> tuple[CellKey, ...]:
    """Give the cells of a sheet in the order in which they are filled in: words that decide others first."""
    kind = form.kind
    words_first = kind.name == RUN
    every: list[Column | WordColumn] = [*kind.word_columns, *kind.columns] if words_first else [*kind.every_column]
    inner = [column for column in every if points_of(form, column) != ("",)]
    outer = [column for column in every if "" in points_of(form, column)]
    engine = [CellKey(one.quantity, "", phase) for one in outer for phase in _phases(one)]
    points = [*(_by_cylinder(form, inner) if kind.name == LEAKDOWN else _by_phase(form, inner))]
    return (*points, *engine) if kind.name == COMPRESSION else (*engine, *points)


def points_of(form: MeasureForm, column: Column | WordColumn) -> tuple[str, ...]:
    """Give the points a quantity has a cell for; the whole engine is an empty one."""
    cylinders = tuple(map(str, range(1, form.engine.cylinders + 1)))
    if column.at is At.STAGE:
        return ("", *_STAGES)
    if column.at is At.CYLINDER and not (isinstance(column, Column) and column.shared):
        return cylinders
    return cylinders if column.at is At.EITHER and form.kind.name == SPOT and cylinders else ("",)


def is_wanted(opened: OpenMeasures, typed: TypedMeasures, texts: Mapping[CellKey, str], key: CellKey) -> bool:
    """Tell whether whoever fills in a sheet is led to a cell; all others can be gone to.

    A wet test only where a dry one is called out; a leak or a pair of pressures, whichever was begun, and what is heard
    only where it is too much; the stages of a run only of one that has them. Fresh oil is not asked for.
    """

    def has(quantity: str) -> bool:
        return any(one.quantity == quantity and text.strip() for one, text in texts.items())

    if key.phase is Phase.NEW:
        return False
    if key.phase is Phase.WET:
        return any(typed.is_flagged(one) for one in typed.rows if one.phase is Phase.DRY)
    if key.quantity == "leak":
        return not has("supply")
    if key.quantity == "held":
        return has("supply")
    if key.quantity == "heard":
        return any(typed.is_flagged(CellKey(one, key.point, Phase.NONE)) for one in ("leak", "held"))
    if opened.form.kind.name == RUN and key.quantity in {"minutes", "load"}:
        is_staged = texts.get(CellKey("purpose", "", Phase.NONE), "").strip().lower() in _STAGED
        return bool(key.point) == is_staged
    return True


def read_typed(
    opened: OpenMeasures, texts: Mapping[CellKey, str], gauge: str = "", received: date | None = None
) -> TypedMeasures:
    """Read and judge what stands in the cells; nothing typed raises."""
    order = cells_of(opened.form)
    rows = {row.number: row for row in rows_of(opened, order, texts, frozenset(order)).rows}
    wrong: dict[CellKey, FleetError] = {}
    values: tuple[SheetValue, ...] = ()
    while rows:
        try:
            values = read_measures(opened.form, SheetIn(tuple(rows.values())), sure=True)
            break
        except Refusals as refused:
            for error in refused.errors:
                number = getattr(error, "number", next(iter(rows)))
                wrong.setdefault(order[number], error)
                rows.pop(number, None)
    sheet = Sheet(NOT_YET, opened.form.kind.name, opened.form.on, values, gauge=gauge, received_on=received)
    judged = opened.ahead.judge(sheet)
    told = measured_rows(judged.sheets[NOT_YET], opened.form.kind.quantities)
    doubts = {key_of(value): doubt for value in values if (doubt := _doubt(opened, value)) is not None}
    return TypedMeasures(
        rows={CellKey(row.quantity, row.point, Phase(row.phase)): row for row in told},
        findings=resting_on_it(judged),
        wrong=wrong,
        doubts=doubts,
        why_open=why_incomplete(opened.form.kind.name, values, opened.form.engine),
    )


def rows_of(
    opened: OpenMeasures, order: Sequence[CellKey], texts: Mapping[CellKey, str], sure: frozenset[CellKey]
) -> SheetIn:
    """Give what is typed as the rows of a sheet, numbered by the place of their cells; `sure` ones are right as they look."""
    units = {**opened.units, **_units_typed(opened.form.kind, texts)}
    return SheetIn(
        tuple(
            SheetRow(number, _cells(opened.form.kind, key, text, units), key in sure)
            for number, key in enumerate(order)
            if (text := texts.get(key, "").strip())
        )
    )


def unit_of(opened: OpenMeasures, texts: Mapping[CellKey, str], key: CellKey) -> str:
    """Give the unit a bare figure in a cell is taken in; empty for a word."""
    if opened.form.kind.word_column(key.quantity) is not None:
        return ""
    units = {**opened.units, **_units_typed(opened.form.kind, texts)}
    return units.get(key.quantity, QUANTITIES[key.quantity].unit)


def _doubt(opened: OpenMeasures, value: SheetValue) -> SaidDoubt | None:
    doubt = opened.form.doubt(value)
    if doubt is None:
        return None
    meant = tuple(f"{plain(figure)} {unit}".strip() for figure, unit in doubt.meant)
    return SaidDoubt(say_measure_doubt(value, doubt), doubt.is_possible, meant)


def _by_phase(form: MeasureForm, columns: Sequence[Column | WordColumn]) -> Iterator[CellKey]:
    """Give the cells of one quantity after the other, of each the phases one after the other."""
    for column in columns:
        for phase in _phases(column):
            yield from (CellKey(column.quantity, point, phase) for point in points_of(form, column) if point)


def _by_cylinder(form: MeasureForm, columns: Sequence[Column | WordColumn]) -> Iterator[CellKey]:
    """Give the cells of one cylinder after the other."""
    for cylinder in map(str, range(1, form.engine.cylinders + 1)):
        yield from (CellKey(column.quantity, cylinder, Phase.NONE) for column in columns)


def _phases(column: Column | WordColumn) -> tuple[Phase, ...]:
    return column.phases if isinstance(column, Column) else (Phase.NONE,)


def _cells(kind: SheetKind, key: CellKey, text: str, units: Mapping[str, str]) -> dict[str, str]:
    """Give the cells of a row: a word written out, a figure apart from its unit."""
    cells = {"quantity": key.quantity, "point": key.point, "phase": key.phase}
    word = kind.word_column(key.quantity)
    if word is not None:
        begun = [one for one in word.words if one.startswith(text.casefold())]
        return {**cells, "value": begun[0] if len(begun) == 1 else text}
    parts = _PARTS.fullmatch(text)
    figure, unit = (parts["figure"], parts["unit"]) if parts else (text, None)
    return {**cells, "value": figure, "unit": unit or units.get(key.quantity, "")}


def _units_typed(kind: SheetKind, texts: Mapping[CellKey, str]) -> dict[str, str]:
    """Give the unit first written behind a figure of each quantity, where it is one."""
    units: dict[str, str] = {}
    for key, text in texts.items():
        parts = _PARTS.fullmatch(text)
        if parts is None or not parts["unit"] or kind.column(key.quantity) is None:
            continue
        try:
            units.setdefault(key.quantity, read_unit(key.quantity, parts["unit"]))
        except FleetError:  # said beside its cell
            continue
    return units
