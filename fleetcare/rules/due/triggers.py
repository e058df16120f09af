"""The next point of one trigger, from what it counts from.

Conventions: a counted point is a life total in the base unit; a calendar point is the last
permitted day. `from due` charges an overrun to the next interval and restarts after early work
(14 CFR 91.409(b)); `on the grid` takes the next multiple of the interval, with early credit.
"""

from dataclasses import dataclass
from datetime import date, timedelta
from decimal import Decimal

from fleetcare.domain.lines import NextPoint, Point
from fleetcare.domain.quantities import Span
from fleetcare.domain.schedules import Anchor, CalendarTrigger, CountedTrigger
from fleetcare.rules.due.calendar import Chain, add, month_end, shorten

_TENTH = Decimal("0.1")


@dataclass(frozen=True, slots=True)
class CountedMark:
    """What a counted trigger counts from: life total done, and the own point it had then.

    `is_start` for the start point of an item counted as new, which owes the first interval.
    """

    done: Decimal
    own: Decimal | None = None
    is_start: bool = False


@dataclass(frozen=True, slots=True)
class CalendarMark:
    """What a calendar trigger counts from: day done, the own (nominal) point then, and the chain it stood on."""

    done: date
    own: date | None = None
    chain: Chain | None = None
    is_start: bool = False


def counted_next(
    trigger: CountedTrigger, mark: CountedMark, anchor: Anchor, factor: Decimal, origin: Decimal
) -> NextPoint:
    """Give the next point of a counted trigger.

    `factor` shortens interval and first interval, except on a grid. `origin` is the grid's.
    """
    on_grid = anchor is Anchor.ON_GRID
    factor = Decimal(1) if on_grid else factor
    interval = trigger.interval * factor
    first = trigger.first if mark.is_start else None
    owed = interval if first is None else first * factor
    passed: list[Point] = []
    if on_grid and first is None:
        credit = Decimal(0) if mark.is_start else min(counted_ahead(trigger, interval, interval), interval / 4)
        point = next_multiple(origin, interval, mark.done + credit)
        if mark.own is not None:
            skipped = next_multiple(origin, interval, mark.own)
            while skipped < point:
                passed.append(skipped)
                skipped += interval
    elif anchor is Anchor.FROM_DUE and mark.own is not None:
        point = min(mark.done, mark.own) + owed
        while point <= mark.done:
            passed.append(point)
            point += owed
    else:
        point = mark.done + owed
    ahead = counted_ahead(trigger, interval, owed)
    return NextPoint(point, interval, ahead, trigger.grace, factor, first is not None, tuple(passed))


def next_multiple(origin: Decimal, interval: Decimal, after: Decimal) -> Decimal:
    """Give the smallest multiple of an interval, counted from an origin, strictly after a figure."""
    point = origin + (after - origin) // interval * interval
    while point <= after:
        point += interval
    return point


def counted_ahead(trigger: CountedTrigger, interval: Decimal, owed: Decimal) -> Decimal:
    """How far before its point a counted trigger is near: as stated, else a tenth of what is owed.

    `owed` is the interval or the first interval. A stated figure not below an interval that a duty
    factor has shortened counts as half of it.
    """
    if trigger.ahead is None:
        return owed * _TENTH
    return trigger.ahead if trigger.ahead < interval else interval / 2


def calendar_next(
    trigger: CalendarTrigger, mark: CalendarMark, anchor: Anchor, factor: Decimal, origin: date
) -> tuple[NextPoint, Chain]:
    """Give the next point of a calendar trigger (not once-each), and the chain it stands on."""
    on_grid = anchor is Anchor.ON_GRID
    factor = Decimal(1) if on_grid else factor
    interval = shorten(trigger.interval, factor)
    first = trigger.first if mark.is_start else None
    owed = interval if first is None else shorten(first, factor)
    passed: list[Point] = []
    if on_grid and first is None:
        credit = 0 if mark.is_start else _grid_credit(trigger, interval)
        chain = _next_on_grid(origin, interval, mark.done + timedelta(days=credit))
        skipped = _next_on_grid(origin, interval, mark.own or chain.day)
        while mark.own is not None and skipped.day < chain.day:
            passed.append(_extended(trigger, skipped))
            skipped = skipped.plus(interval)
    elif anchor is Anchor.FROM_DUE and mark.own is not None and mark.done >= mark.own:
        chain = (mark.chain or Chain(mark.own)).plus(owed)
        while _extended(trigger, chain) <= mark.done:
            passed.append(_extended(trigger, chain))
            chain = chain.plus(owed)
    else:
        chain = Chain(mark.done).plus(owed)
    nominal = _extended(trigger, chain)
    window = window_days(trigger, interval)
    next_point = NextPoint(
        point=nominal + timedelta(days=window or 0),
        interval=interval,
        ahead=Decimal(calendar_ahead(trigger, interval, owed)),
        grace=Decimal(trigger.grace),
        factor=factor,
        is_first=first is not None,
        passed=tuple(passed),
        nominal=nominal if window is not None else None,
        opens=nominal - timedelta(days=window) if window is not None else None,
    )
    return next_point, chain


def calendar_ahead(trigger: CalendarTrigger, interval: Span, owed: Span) -> int:
    """How many days before its point a calendar trigger is near: as stated, else a tenth of what is owed.

    The default is in whole days, rounded down, from 1 to 30, but 0 for an interval of one day.
    A stated figure not below a shortened interval counts as half of it, as in `counted_ahead`.
    """
    if trigger.ahead is not None:
        return trigger.ahead if trigger.ahead < interval.nominal_days else interval.nominal_days // 2
    days = owed.nominal_days
    return 0 if days <= 1 else max(1, min(30, days // 10))


def window_days(trigger: CalendarTrigger, interval: Span) -> int | None:
    """The days of a window either side of its nominal day, None where there is no window.

    One too wide for an interval that a duty factor has shortened is the widest that leaves a day between two.
    """
    if trigger.window_days is None:
        return None
    return min(trigger.window_days, (interval.nominal_days - 1) // 2)


def _grid_credit(trigger: CalendarTrigger, interval: Span) -> int:
    """How many days before a grid day work serves it: anywhere in its window, else by the early credit."""
    if trigger.window_days is not None:
        return trigger.window_days
    return min(calendar_ahead(trigger, interval, interval), interval.nominal_days // 4)


def _next_on_grid(origin: date, interval: Span, after: date) -> Chain:
    """The first day on the grid strictly after a day, counted as k spans from the origin."""
    k = (after - origin).days // interval.nominal_days
    while add(origin, k * interval.months, k * interval.days) > after:
        k -= 1
    while add(origin, k * interval.months, k * interval.days) <= after:
        k += 1
    return Chain(origin, k * interval.months, k * interval.days)


def _extended(trigger: CalendarTrigger, chain: Chain) -> date:
    return month_end(chain.day) if trigger.month_end else chain.day
