"""Calendar arithmetic of due work: spans, unbroken chains, month ends and periods."""

from dataclasses import dataclass
from datetime import date, timedelta
from decimal import Decimal

from dateutil.relativedelta import relativedelta

from fleetcare.domain.quantities import Span
from fleetcare.domain.schedules import Period

_MONTHS_IN = {Period.MONTH: 1, Period.QUARTER: 3, Period.YEAR: 12}


def add(start: date, months: int, days: int) -> date:
    """Add whole months, clamped to the last day of the month reached, then days."""
    return start + relativedelta(months=months, days=days)


def month_end(day: date) -> date:
    """Give the last day of a day's month."""
    return day + relativedelta(day=31)


def shorten(span: Span, factor: Decimal) -> Span:
    """Shorten a span by a duty factor: months down to whole months, days to whole days, at least 1."""
    if factor == 1:
        return span
    if span.months:
        return Span(max(1, int(span.months * factor)), "mo")
    return Span(max(1, int(span.days * factor)), "d")


@dataclass(frozen=True, slots=True)
class Chain:
    """A day reached from a first date by adding spans, so that repeated months never creep.

    31 January, then one month and one month: the last of February, then 31 March.
    """

    first: date
    months: int = 0
    days: int = 0

    @property
    def day(self) -> date:
        """The day reached."""
        return add(self.first, self.months, self.days)

    def plus(self, span: Span) -> "Chain":
        """The chain one span further on. Days after months begin a new chain where the months ended."""
        if span.months:
            if self.days:
                return Chain(self.day, months=span.months)
            return Chain(self.first, self.months + span.months)
        return Chain(self.first, self.months, self.days + span.days)


@dataclass(frozen=True, slots=True)
class CalendarPeriod:
    """One week (from Monday), month, quarter or year: its first and last day, the last one later after a pause."""

    first: date
    last: date


def period_of(period: Period, day: date) -> CalendarPeriod:
    """Give the period a day lies in."""
    if period is Period.WEEK:
        monday = day - timedelta(days=day.weekday())
        return CalendarPeriod(monday, monday + timedelta(days=6))
    months = _MONTHS_IN[period]
    first = date(day.year, (day.month - 1) // months * months + 1, 1)
    return CalendarPeriod(first, add(first, months, -1))


def period_after(period: Period, day: date) -> CalendarPeriod:
    """Give the period that follows the one a day lies in."""
    return period_of(period, period_of(period, day).last + timedelta(days=1))


def period_span(period: Period) -> Span:
    """Give a period as a span: what a once-each trigger repeats by."""
    if period is Period.WEEK:
        return Span(1, "w")
    return Span(_MONTHS_IN[period], "mo") if period is not Period.YEAR else Span(1, "y")


def say_period(period: Period, of: CalendarPeriod) -> str:
    """Name a period by the days it would have without a pause: "2026-03", "2026-Q1", "2026", "week to 2026-03-15"."""
    first = of.first
    if period is Period.WEEK:
        return f"week to {period_of(period, first).last.isoformat()}"
    months = {Period.MONTH: f"-{first:%m}", Period.QUARTER: f"-Q{(first.month + 2) // 3}", Period.YEAR: ""}
    return f"{first:%Y}{months[period]}"
