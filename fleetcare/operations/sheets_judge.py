"""A lash sheet judged: flat rows for table, JSON and screen, what it says of the engine, and what to do about it."""

import shlex
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.sheets import LASH, SHIM, Judgement, LashStand, Phase, Sheet
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem
from fleetcare.operations.sheets_load import LashForm, lash_form, load_sheets
from fleetcare.rules.explain_lash import JudgedRow as JudgedRow
from fleetcare.rules.explain_lash import judged_row, say_spec
from fleetcare.rules.judge_lash import judge_sheet, stand_of
from fleetcare.rules.lash import ANY
from fleetcare.rules.lash_mending import mend
from fleetcare.rules.lash_points import side_of

if TYPE_CHECKING:
    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class JudgedSheet:
    """A sheet with a flat row for each of its values, in the order of the points, and what it says of the engine."""

    form: LashForm
    sheet: Sheet
    rows: tuple[JudgedRow, ...]
    stand: LashStand
    judgements: tuple[Judgement, ...]

    @property
    def limits(self) -> str:
        """What the sheet was held against."""
        return say_spec(self.form.spec)

    def notes(self) -> tuple[str, ...]:
        """Give what was assumed and what could not be judged, a sentence each."""
        spec, taken = self.form.spec, self.sheet.condition
        notes = [*self.form.notes]
        if spec is not None and spec.condition != ANY and not taken:
            notes.append(
                f"nobody said whether the engine was cold or hot; it is taken to be {spec.condition}, as the limits ask"
            )
        if self.stand.untold:
            notes.append(f"not judged as they stand: {', '.join(self.stand.untold)}")
        if self.stand.missing:
            notes.append(f"not measured: {', '.join(self.stand.missing)}")
        return tuple(notes)

    def why_open(self) -> str:
        """Say why the sheet closes no task, empty where it does: a point without a value, or out and not set."""
        stand = self.stand
        out = [name for name in stand.unset if name in stand.found_out]
        untold = [name for name in stand.unset if name not in stand.found_out]
        told = ((stand.missing, "not measured"), (out, "found out and not set"), (untold, "not told by the blades"))
        return ", ".join(f"{' '.join(names)} {what}" for names, what in told if names)

    def defect(self) -> str:
        """Name the defect there is as the valves now stand, empty where all that was judged is in."""
        if not self.stand.left_out:
            return ""
        now = {row.point: row for row in self.rows if row.quantity == LASH}  # left comes after found
        told = ", ".join(f"{point} {now[point].value} {now[point].unit}" for point in self.stand.left_out)
        return f"Valve lash left out of limits: {told}"

    def raise_command(self) -> str:
        """Give the command that raises a follow-up from that defect, empty where there is none."""
        if not self.defect():
            return ""
        words = ["fleetcare", "log", self.form.tag, "--on", self.form.on.isoformat(), "--defect", self.defect()]
        return shlex.join([*words, "--follow-up"])


def judge(form: LashForm, sheet: Sheet) -> JudgedSheet:
    """Judge a sheet of the form's engine by the spec in force on its day."""
    judged = judge_sheet(sheet.values, form.points, form.spec, sheet.condition)
    now = {one.value.point: one for one in judged if one.value.quantity == LASH}
    shims = _fitted(form, sheet)
    rows = tuple(_row(form, one, shims, is_now=now.get(one.value.point) is one) for one in judged)
    return JudgedSheet(form, sheet, rows, stand_of(judged, form.points), judged)


def last_sheet(connection: "Connection", item: FoundItem, on: date) -> JudgedSheet | None:
    """Load an engine's newest lash sheet up to a day and judge it, None where it has none."""
    sheets = load_sheets(connection, item.id, on)
    return judge_stored(connection, item, sheets[-1]) if sheets else None


def sheet_of_entry(connection: "Connection", item: FoundItem, entry: int) -> JudgedSheet:
    """Load the lash sheet an entry stands with, and judge it. Refuses an entry that stands with none."""
    sheet = next((sheet for sheet in load_sheets(connection, item.id, date.max) if sheet.entry == entry), None)
    if sheet is None:
        raise Refused(f"entry {entry} of {item.tag} has no lash sheet", "choose one that has")
    return judge_stored(connection, item, sheet)


def judge_stored(connection: "Connection", item: FoundItem, sheet: Sheet) -> JudgedSheet:
    """Judge a stored lash sheet by the spec of its day, beside what the sheets before it said."""
    return judge(lash_form(connection, item, sheet.on, but_from=sheet.entry), sheet)


def _row(form: LashForm, judged: Judgement, shims: Mapping[tuple[str, Phase], Decimal], *, is_now: bool) -> JudgedRow:
    """Flatten a judgement; only the gap as it now stands is to be mended, and only the found one is told the last."""
    point = judged.value.point
    fitted = shims.get((point, judged.value.phase))
    mending = mend(judged, side_of(point), form.spec, form.train.adjuster, fitted) if is_now else None
    is_first = judged.value.quantity == LASH and judged.value.phase is Phase.FOUND
    return judged_row(judged, form.spec, mending, form.last.get(point) if is_first else None)


def _fitted(form: LashForm, sheet: Sheet) -> dict[tuple[str, Phase], Decimal]:
    """Give the shim (mm) in at each point before the work and after it, as far as this sheet or one before says."""
    told = {(value.point, value.phase): value.ends[1] for value in sheet.values if value.quantity == SHIM}
    before = dict(form.shims) | {point: thickness for (point, phase), thickness in told.items() if phase is Phase.FOUND}
    after = before | {point: thickness for (point, phase), thickness in told.items() if phase is Phase.LEFT}
    return {(point, Phase.FOUND): shim for point, shim in before.items()} | {
        (point, Phase.LEFT): shim for point, shim in after.items()
    }
