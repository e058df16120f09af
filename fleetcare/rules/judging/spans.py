"""Figures that may be known only from and to, as exact fractions: "<1" and blades around a gap are spans."""

from dataclasses import dataclass
from decimal import Decimal
from enum import Enum
from fractions import Fraction

from fleetcare.domain.rule_book import Limit


class Side(Enum):
    """Where a span lies against a limit: past it for certain, not past it for certain, or neither."""

    PAST = "past"
    INSIDE = "inside"
    UNTOLD = "untold"


@dataclass(frozen=True, slots=True)
class Span:
    """A figure from `low` to `high`: the same twice where it is known, else the high end itself is not reached."""

    low: Fraction
    high: Fraction

    @property
    def is_known(self) -> bool:
        """Whether it is a plain figure."""
        return self.low == self.high

    def __add__(self, other: "Span") -> "Span":
        return Span(self.low + other.low, self.high + other.high)

    def __sub__(self, other: "Span") -> "Span":
        return Span(self.low - other.high, self.high - other.low)

    def times(self, factor: Fraction | int) -> "Span":
        """Multiply by a factor above 0."""
        return Span(self.low * factor, self.high * factor)

    def over(self, other: "Span") -> "Span":
        """Divide by a span that lies above 0, whatever the sign of this one."""
        ends = [end / divisor for end in (self.low, self.high) for divisor in (other.low, other.high)]
        return Span(min(ends), max(ends))

    def past_high(self, limit: Limit) -> Side:
        """Say whether it lies beyond a high limit, or has reached it where that is enough."""
        at = Fraction(limit.value)
        if self.low > at or (limit.reach and self.low == at):
            return Side.PAST
        stays_below = self.high < at or (self.high == at and (not limit.reach or not self.is_known))
        return Side.INSIDE if stays_below else Side.UNTOLD

    def past_low(self, limit: Limit) -> Side:
        """Say whether it lies beyond a low limit, or has reached it where that is enough."""
        at = Fraction(limit.value)
        if self.high < at or (self.high == at and (limit.reach or not self.is_known)):
            return Side.PAST
        stays_above = self.low > at or (self.low == at and not limit.reach)
        return Side.INSIDE if stays_above else Side.UNTOLD


def known(figure: Fraction | Decimal | int) -> Span:
    """Give a plain figure as a span."""
    return Span(Fraction(figure), Fraction(figure))


def decimal(figure: Fraction) -> Decimal:
    """Give a fraction as a decimal: exact where it ends, else to 28 digits."""
    return Decimal(figure.numerator) / Decimal(figure.denominator)
