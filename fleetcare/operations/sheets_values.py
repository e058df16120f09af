"""One value of a lash sheet: what was typed at a point, read in its unit, and whether it is likely a slip."""

from dataclasses import dataclass
from decimal import Decimal
from typing import cast

from fleetcare.domain.numbers import parse_number
from fleetcare.domain.sheets import LASH, SHIM, Phase, SheetValue
from fleetcare.errors import Misread
from fleetcare.operations.sheets_load import LashForm
from fleetcare.rules.bounds import check_within
from fleetcare.rules.explain_lash import say_doubt
from fleetcare.rules.lash import read_gap
from fleetcare.rules.lash_doubts import doubt
from fleetcare.rules.lash_points import side_of
from fleetcare.rules.lash_setting import MOST_SHIM_MM
from fleetcare.rules.nameplate import LashUnit


@dataclass(frozen=True, slots=True)
class SaidDoubt:
    """A value that is more likely a slip: why, in words that name the point, and what was likely meant, as one types it."""

    text: str
    is_possible: bool
    meant: tuple[str, ...] = ()

    @property
    def remedy(self) -> str:
        """What to do about it."""
        return "correct it, or give --sure if it is right" if self.is_possible else "correct it, or its unit"


def doubt_of(form: LashForm, value: SheetValue) -> SaidDoubt | None:
    """Give the doubt about a value of a form, None where there is none."""
    if value.quantity != LASH:
        return None
    ranges = form.spec.ranges if form.spec else {}
    found = doubt(value, ranges.get(side_of(value.point)), form.spec.unit if form.spec else "mm")
    if found is None:
        return None
    meant = tuple(f"{figure:f}" for figure, unit in found.meant if unit == value.unit)
    return SaidDoubt(say_doubt(value, found), found.is_possible, meant)


def read_value(form: LashForm, quantity: str, point: str, phase: Phase, text: str, unit: str | None) -> SheetValue:
    """Read what was gauged at a point, in the unit given, else that of the engine's limits, else mm.

    Raises Misread for what is no gap or thickness, Refused for one that cannot be.
    """
    if quantity == SHIM:
        thickness = check_within("shim", parse_number(text.replace(",", ".")), MOST_SHIM_MM, "mm")
        return _plain_value(SHIM, point, phase, thickness, "mm")
    read_in = cast("LashUnit", unit or (form.spec.unit if form.spec else "mm"))
    bound, text = text.startswith("<"), text.removeprefix("<")
    gap = read_gap(text, read_in)
    if bound and (gap.is_interval or gap.stops == 0):
        raise Misread(f"'<{text}' is not a gap", "write < and the thinnest blade, which does not go")
    if gap.is_interval:
        return SheetValue(LASH, point, phase, None, gap.goes, gap.stops, read_in)
    return _plain_value(LASH, point, phase, gap.goes, read_in, "<" if bound else "")


def _plain_value(quantity: str, point: str, phase: Phase, value: Decimal, unit: str, qualifier: str = "") -> SheetValue:
    return SheetValue(quantity, point, phase, value, None, None, unit, qualifier)
