"""A lash sheet as typed becomes values: every cell that is wrong is named, and what is likely a slip is asked about."""

from typing import cast

from fleetcare.domain.sheets import SHIM, LashPoint, Phase, SheetValue
from fleetcare.drafts.sheets import LashRow, SheetIn
from fleetcare.errors import Refusals, Refused
from fleetcare.exchange.csv_in import CsvRow, RowRefused
from fleetcare.operations.imports_rows import read_row, try_cell
from fleetcare.operations.sheets_load import LashForm
from fleetcare.operations.sheets_values import doubt_of, read_value
from fleetcare.rules.lash_points import find_point


def read_values(form: LashForm, sheet: SheetIn, *, sure: bool) -> tuple[SheetValue, ...]:
    """Read the values of a sheet. Raises Refusals with everything that is wrong with any cell, in the order of rows.

    A gap that is more likely a slip is refused too unless `sure`, of it or of the sheet; one no engine has even then.
    """
    faults = list(cast("tuple[RowRefused, ...]", sheet.faults))
    rows: dict[tuple[str, str, Phase], int] = {}
    values: list[SheetValue] = []
    for plain in sheet.rows:
        row = read_row(CsvRow(plain.number, dict(plain.cells)), LashRow, faults)
        value = _read_row(form, plain.number, row.draft, faults) if row else None
        if value is None:
            continue
        key = (value.quantity, value.point, value.phase)
        if key in rows:
            detail = f"{value.quantity} {value.phase} at {value.point} stands in row {rows[key]} already"
            faults.append(RowRefused(plain.number, "point", detail, "keep one of them"))
        rows.setdefault(key, plain.number)
        doubted = doubt_of(form, value)
        if doubted is not None and not ((sure or plain.is_sure) and doubted.is_possible):
            faults.append(RowRefused(plain.number, "value", doubted.text, doubted.remedy))
        values.append(value)
    if faults:
        faults.sort(key=lambda fault: fault.number)
        raise Refusals(faults)
    return tuple(values)


def _read_row(form: LashForm, number: int, row: LashRow, faults: list[RowRefused]) -> SheetValue | None:
    point = try_cell(faults, number, "point", lambda: _point(form, row))
    name = point.name if point is not None else ""
    value = try_cell(
        faults, number, "value", lambda: read_value(form, row.quantity, name, row.phase, row.value, row.unit)
    )
    unit_fits = try_cell(faults, number, "unit", lambda: _check_unit(row))
    return value if point is not None and unit_fits else None


def _check_unit(row: LashRow) -> bool:
    if row.quantity == SHIM and row.unit == "in":
        raise Refused("shims are measured in mm", "write mm, or leave the unit empty")
    return True


def _point(form: LashForm, row: LashRow) -> LashPoint:
    if row.quantity == SHIM and form.train.adjuster.kind == "screw":
        raise Refused(f"the valves of {form.tag} are set by screws, not by shims", "leave this row out")
    return find_point(form.points, row.point, form.tag)
