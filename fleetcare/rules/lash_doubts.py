"""Gaps that are more likely a slip of the key than a gap: a decimal point in the wrong place, inches for millimetres.

A gap far wider than its check range is doubted, one far narrower only where it was left: valves do close, but nobody
leaves them so. A gap found thinner than any blade is doubted too. What was likely meant is the same figures ten times
smaller or larger, or in the other unit, where that comes near the check range; a doubt stands without it. Without a
check range the clearances published for other engines stand in (TM 5-3895-385-23-2 WP 0326 table 1, 0.152 to 0.762 mm;
TM 10-4320-318-14 para 4-30, 0.10 mm). Factors and the thinnest blade: common practice.
"""

from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal

from fleetcare.domain.quantities import plain
from fleetcare.domain.sheets import Phase, SheetValue
from fleetcare.rules.lash import MM_PER, ends_in_mm

PUBLISHED_MM = (Decimal("0.10"), Decimal("0.762"))
THINNEST_BLADE_MM = Decimal("0.02")
WIDEST_MM = Decimal(5)
"""What is wider is no valve lash of any engine."""

_FAR_OUT = 3  # times past an end of the check range
_FAR_OUT_OF_OTHERS = 2  # times past what was published for any engine
_NEAR = 2  # what was meant lies within the range, or past an end by this factor


@dataclass(frozen=True, slots=True)
class Doubt:
    """Why a gap is doubted, what was likely meant (figure and unit, the likeliest first), and whether it can be at all."""

    why: str
    meant: tuple[tuple[Decimal, str], ...]
    is_possible: bool


def doubt(value: SheetValue, limits: tuple[Decimal, Decimal] | None, unit: str) -> Doubt | None:
    """Give the doubt about a gap, None where there is none; `limits` are its check range in `unit`."""
    goes, stops = ends_in_mm(value)
    shown = (*limits, unit) if limits else (*PUBLISHED_MM, "mm")
    least, most = (end * MM_PER[shown[2]] for end in shown[:2])
    factor, whose = (_FAR_OUT, "its check range") if limits else (_FAR_OUT_OF_OTHERS, "what is known of other engines")
    if goes > WIDEST_MM:
        why = f"no valve lash is wider than {plain(WIDEST_MM)} mm"
    elif goes >= most * factor:
        why = f"it is {factor} times the {plain(shown[1])} {shown[2]} where {whose} ends, or more"
    elif value.phase is Phase.LEFT and stops <= least / factor:
        why = f"nobody leaves a valve {factor} times as tight as the {plain(shown[0])} {shown[2]} where {whose} begins"
    elif 0 < goes == stops < THINNEST_BLADE_MM:
        why = f"no blade is thinner than {plain(THINNEST_BLADE_MM)} mm"
    else:
        return None
    near = [meant for meant in _others(value) if least / _NEAR <= _mm(meant) <= most * _NEAR]
    near.sort(key=lambda meant: not least <= _mm(meant) <= most)
    return Doubt(why, tuple(near), goes <= WIDEST_MM)


def _others(value: SheetValue) -> Iterator[tuple[Decimal, str]]:
    """Give what the same figures could be: in the other unit, ten times smaller, ten times larger."""
    figure = value.ends[0]
    yield figure, "in" if value.unit == "mm" else "mm"
    yield figure / 10, value.unit
    yield figure * 10, value.unit


def _mm(meant: tuple[Decimal, str]) -> Decimal:
    figure, unit = meant
    return figure * MM_PER[unit]
