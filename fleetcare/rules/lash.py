"""Valve lash: what the feeler gauge says, and where it lies against the check range.

Exact decimal arithmetic in one unit. A check range says when to leave a valve alone, both ends counted as in
(TM 5-3805-290-23-2 WP 0155 00 steps 6 and 7, TM 5-3895-383-24 p. 6-60).
"""

import re
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.sheets import Place, SheetValue
from fleetcare.errors import Misread, Refused

if TYPE_CHECKING:
    from fleetcare.rules.nameplate import LashUnit

# NIST SP 811 (2008), Appendix B: 1 in = 25.4 mm exactly.
MM_PER: Mapping[str, Decimal] = {"mm": Decimal(1), "in": Decimal("25.4")}

ANY = "any"
"""A gap that may be taken cold or hot."""

_RANGE_MARK = ".."
_DIGITS = re.compile(r"[0-9]{1,3}", re.ASCII)
_POINTED = re.compile(r"[0-9]{0,6}[.,][0-9]{1,9}", re.ASCII)


@dataclass(frozen=True, slots=True)
class Gap:
    """A gap as gauged: the blade that goes, and the next one that does not; both the same for a plain figure."""

    goes: Decimal
    stops: Decimal

    @property
    def is_interval(self) -> bool:
        """Whether only two blades around the gap are known: goes <= gap < stops."""
        return self.goes < self.stops

    @property
    def best(self) -> Decimal:
        """The best estimate of the gap: half way between the two blades."""
        return (self.goes + self.stops) / 2


@dataclass(frozen=True, slots=True)
class Standing:
    """Where a gap lies, and how far outside the check range it is: at least and at most, equal for a plain figure."""

    place: Place
    off_least: Decimal
    off_most: Decimal


def ends_in_mm(value: SheetValue) -> tuple[Decimal, Decimal]:
    """Give the least and the most a gap of a sheet can be, in mm."""
    goes, stops = value.ends
    return goes * MM_PER[value.unit], stops * MM_PER[value.unit]


def compare(condition: str, other: str) -> bool:
    """Whether gaps taken in two conditions, cold, hot or any, can be held beside each other."""
    return ANY in {condition, other} or condition == other


def read_gap(text: str, unit: "LashUnit") -> Gap:
    """Read what was gauged, in `unit`: "0.25", "0,25", bare blade digits, or a go / no-go range "0.25..0.30".

    Bare digits are blade markings: in mm one or two are hundredths and three thousandths (5 is 0.05, 30 is 0.30, 152
    is 0.152), in inches thousandths (8 is 0.008). Raises Misread for anything else, Refused for a range whose second
    blade is not the thicker.
    """
    goes, mark, stops = text.strip().partition(_RANGE_MARK)
    first = _blade(goes, unit, text)
    if not mark:
        return Gap(first, first)
    second = _blade(stops, unit, text)
    if second <= first:
        raise Refused(f"range {text.strip()} runs backwards", "put the blade that goes first, then a thicker one")
    return Gap(first, second)


def judge(gap: Gap, least: Decimal, most: Decimal) -> Standing:
    """Hold a gap against a check range in the same unit; touching a limit is in.

    The blade that stops is itself thicker than the gap, so an interval that ends on the lower limit is below it.
    """
    off_least = max(least - gap.stops, gap.goes - most, Decimal(0))
    off_most = max(least - gap.goes, gap.stops - most, Decimal(0))
    if off_most == 0:
        place = Place.IN
    elif gap.stops < least or (gap.is_interval and gap.stops == least):
        place = Place.BELOW
    elif gap.goes > most:
        place = Place.ABOVE
    else:
        place = Place.UNDECIDED
    return Standing(place, off_least, off_most)


def _blade(text: str, unit: "LashUnit", typed: str) -> Decimal:
    text = text.strip()
    if _POINTED.fullmatch(text):
        return Decimal(text.replace(",", "."))
    if not _DIGITS.fullmatch(text):
        raise Misread(
            f"{typed.strip()!r} is not a gap", "write it like 0.25, the digits on the blade, or a range like 0.25..0.30"
        )
    return Decimal(text).scaleb(-3 if unit == "in" or len(text) == 3 else -2)
