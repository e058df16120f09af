"""A counted history as a rising line: what the total was on a day, and when a total was reached."""

from bisect import bisect_left, bisect_right
from collections.abc import Sequence
from datetime import date
from decimal import Decimal
from itertools import accumulate


class UseCurve:
    """Straight lines between life totals: days as ordinals, totals as floats in the base unit.

    `figures` may come in any order; of several on one day the highest counts, and a fall
    from one day to the next counts as nothing used.
    """

    __slots__ = ("begin", "days", "end", "first", "last", "slack", "span", "totals", "used_from")

    def __init__(self, figures: Sequence[tuple[date, Decimal | float]]) -> None:
        highest = {on.toordinal(): float(total) for on, total in sorted(figures)}
        self.days = list(highest)
        self.totals = list(highest.values())
        if self.totals != sorted(self.totals):
            self.totals = list(accumulate(self.totals, max))
        self.first, self.last = (self.days[0], self.days[-1]) if highest else (0, 0)
        self.begin, self.end = (self.totals[0], self.totals[-1]) if highest else (0.0, 0.0)
        self.span = self.last - self.first
        # The last reading before any use.
        self.used_from = self.days[bisect_right(self.totals, self.begin) - 1] if highest else 0
        # Scaled figures differ in their last bits; what is reached in one unit must be reached in any.
        self.slack = 1e-10 * (self.end - self.begin)

    def total_on(self, day: float) -> float:
        """The life total on a day, one from the first reading to the last."""
        if day >= self.last:
            return self.end
        days, totals = self.days, self.totals
        i = bisect_right(days, day)
        day0, total0 = days[i - 1], totals[i - 1]
        return total0 + (totals[i] - total0) * (day - day0) / (days[i] - day0)

    def day_of(self, total: float) -> float:
        """The first day on which a total was reached, one between the first reading's and the last's."""
        days, totals = self.days, self.totals
        total -= self.slack
        i = bisect_left(totals, total)
        if i == 0:
            return self.first
        day0, total0 = days[i - 1], totals[i - 1]
        return day0 + (days[i] - day0) * (total - total0) / (totals[i] - total0)
