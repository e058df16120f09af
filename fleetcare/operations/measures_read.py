"""A sheet other than the lash sheet as typed becomes values and words: what is wrong is named cell by cell, slips doubted."""

from typing import cast

from fleetcare.domain.measured import LEAKDOWN
from fleetcare.domain.measures import in_base, read_unit
from fleetcare.domain.sheet_kinds import WordColumn
from fleetcare.domain.sheets import Phase, SheetValue
from fleetcare.drafts.sheets import MeasureRow, SheetIn
from fleetcare.errors import Refusals, Refused
from fleetcare.exchange.csv_in import CsvRow, RowRefused
from fleetcare.operations.imports_rows import read_row, try_cell
from fleetcare.operations.measures_cells import (
    MeasureForm,
    read_column,
    read_figure,
    read_phase,
    read_point,
    read_word,
)
from fleetcare.rules.sheet_doubts import say_measure_doubt


def read_measures(form: MeasureForm, sheet: SheetIn, *, sure: bool) -> tuple[SheetValue, ...]:
    """Read the values and words of a sheet. Raises Refusals with everything that is wrong with any cell, in the order of rows.

    A figure that is more likely a slip is refused too unless `sure`, of it or of the sheet; an impossible one even then.
    """
    faults = list(cast("tuple[RowRefused, ...]", sheet.faults))
    rows: dict[tuple[str, ...], int] = {}
    values: list[SheetValue] = []
    for plain in sheet.rows:
        row = read_row(CsvRow(plain.number, dict(plain.cells)), MeasureRow, faults)
        value = _read_row(form, plain.number, row.draft, faults) if row else None
        if value is None:
            continue
        key = _key(form, value)
        if key in rows:
            faults.append(RowRefused(plain.number, "point", _say_twice(value, rows[key]), "keep one of them"))
        rows.setdefault(key, plain.number)
        doubt = form.doubt(value)
        if doubt is not None and not ((sure or plain.is_sure) and doubt.is_possible):
            remedy = "correct it, or give --sure if it is right" if doubt.is_possible else "correct it, or its unit"
            faults.append(RowRefused(plain.number, "value", say_measure_doubt(value, doubt), remedy))
        values.append(value)
    values = _share(form, values)
    faults += _leaking_upwards(form, values, rows)
    if faults:
        faults.sort(key=lambda fault: fault.number)
        raise Refusals(faults)
    return tuple(values)


def _read_row(form: MeasureForm, number: int, row: MeasureRow, faults: list[RowRefused]) -> SheetValue | None:
    """Read the cells of a row, each by itself so that all that is wrong with them is said."""
    column = try_cell(faults, number, "quantity", lambda: read_column(form.kind, row.quantity))
    if column is None:
        return None
    point = try_cell(faults, number, "point", lambda: read_point(form, column, row.point))
    if isinstance(column, WordColumn):
        word = try_cell(faults, number, "value", lambda: read_word(column, row.value))
        bare = try_cell(faults, number, "unit" if row.unit.strip() else "phase", lambda: _check_bare(column, row))
        if point is None or word is None or bare is None:
            return None
        return SheetValue(column.quantity, point, Phase.NONE, None, None, None, "", word)
    phase = try_cell(faults, number, "phase", lambda: read_phase(column, row.phase))
    unit = try_cell(faults, number, "unit", lambda: read_unit(column.quantity, row.unit))
    figure = try_cell(faults, number, "value", lambda: read_figure(column, row.value))
    if point is None or phase is None or unit is None or figure is None:
        return None
    qualifier, value = figure
    return SheetValue(column.quantity, point, phase, value, None, None, unit, qualifier)


def _check_bare(column: WordColumn, row: MeasureRow) -> bool:
    if row.unit.strip() or row.phase.strip():
        raise Refused(f"{column.quantity} is said in a word", "leave phase and unit empty")
    return True


def _key(form: MeasureForm, value: SheetValue) -> tuple[str, ...]:
    """Give what may stand on a sheet once only; of words for one point each different one."""
    word = value.qualifier if form.kind.word_column(value.quantity) and value.point else ""
    return value.quantity, value.point, value.phase, word


def _say_twice(value: SheetValue, row: int) -> str:
    what = " ".join(part for part in (value.quantity, value.phase, value.point and f"at {value.point}") if part)
    return f"{what} stands in row {row} already"


def _share(form: MeasureForm, values: list[SheetValue]) -> list[SheetValue]:
    """Give what was said once for every cylinder to each one it belongs to: the supply to each pressure held."""
    shared = {one.quantity: one for one in values if not one.point and _is_shared(form, one)}
    own = {(one.quantity, one.point) for one in values}
    held = [one.point for one in values if one.quantity == "held"]
    if not shared or not held:
        return values
    return [
        *(one for one in values if shared.get(one.quantity) is not one),
        *(
            SheetValue(name, point, one.phase, one.value, None, None, one.unit, one.qualifier)
            for name, one in shared.items()
            for point in held
            if (name, point) not in own
        ),
    ]


def _is_shared(form: MeasureForm, value: SheetValue) -> bool:
    column = form.kind.column(value.quantity)
    return column is not None and column.shared


def _leaking_upwards(form: MeasureForm, values: list[SheetValue], rows: dict[tuple[str, ...], int]) -> list[RowRefused]:
    """Refuse a cylinder that holds more than it is given, and one without its supply."""
    if form.kind.name != LEAKDOWN:
        return []
    given = {one.point: one for one in values if one.quantity == "supply"}
    wrong = []
    for held in (one for one in values if one.quantity == "held"):
        supply, number = given.get(held.point), rows[_key(form, held)]
        if supply is None:
            detail = f"nothing says what cylinder {held.point} was supplied with"
            wrong.append(RowRefused(number, "quantity", detail, "add a row of supply for it, or one without a point"))
        elif in_base(held.ends[1], held.unit) > in_base(supply.ends[1], supply.unit):
            detail = f"cylinder {held.point} cannot hold {held} {held.unit} of {supply} {supply.unit}"
            wrong.append(RowRefused(number, "value", detail, "check supply and held"))
    return wrong
