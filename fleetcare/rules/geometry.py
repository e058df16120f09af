"""Engine geometry: what bore, stroke and speed make of each other."""

from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum

from fleetcare.rules.bounds import check_within

PI = Decimal("3.141592653589793238462643383")

# Limits of sense, not of taste: the largest four-stroke engines stay well inside them.
MOST_MM = 2000
MOST_RPM = 50_000
MOST_CYLINDERS = 64

# What still counts as square: common practice, no published source.
SQUARE_TOLERANCE = Decimal("0.01")


class BoreStroke(StrEnum):
    """How bore and stroke compare."""

    SQUARE = "square"
    OVERSQUARE = "oversquare"
    UNDERSQUARE = "undersquare"


@dataclass(frozen=True, slots=True)
class Displacement:
    """The volume all pistons sweep, in litres, and the shape of the cylinder."""

    litres: Decimal
    bore_stroke_ratio: Decimal
    shape: BoreStroke


def mean_piston_speed(stroke: Decimal, rpm: Decimal) -> Decimal:
    """Give the mean piston speed in m/s from the stroke in mm and the speed in rpm.

    2 S N with S in m and N in rev/s, hence stroke * rpm / 30 000 (SI definition; two strokes a turn).
    Raises Refused for a figure that cannot be right.
    """
    check_within("stroke", stroke, MOST_MM, "mm")
    check_within("speed", rpm, MOST_RPM, "rpm")
    return stroke * rpm / 30_000


def displacement(bore: Decimal, stroke: Decimal, cylinders: int) -> Displacement:
    """Give the displacement in litres from bore and stroke in mm and the number of cylinders.

    pi/4 * B^2 * S * n. The cylinder is square while bore/stroke is within 1 % of 1, both ends counted
    (common practice). Raises Refused for a figure that cannot be right.
    """
    check_within("bore", bore, MOST_MM, "mm")
    check_within("stroke", stroke, MOST_MM, "mm")
    check_within("number of cylinders", Decimal(cylinders), MOST_CYLINDERS)
    cubic_mm = PI / 4 * bore**2 * stroke * cylinders
    ratio = bore / stroke
    return Displacement(litres=cubic_mm / 1_000_000, bore_stroke_ratio=ratio, shape=_shape(ratio))


def _shape(ratio: Decimal) -> BoreStroke:
    if abs(ratio - 1) <= SQUARE_TOLERANCE:
        return BoreStroke.SQUARE
    return BoreStroke.OVERSQUARE if ratio > 1 else BoreStroke.UNDERSQUARE
