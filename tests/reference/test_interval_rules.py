"""Intervals of published rules, to the day and the tenth of an hour, and recurrences against dateutil.

interval_rules.csv names the clause beside each case; the days and figures of work are invented. Dates are worked by
hand from the clause; where two readings of it exist the case says which one was taken.
"""

import calendar
import csv
from collections.abc import Iterator
from datetime import date, datetime, timedelta
from decimal import Decimal
from itertools import islice
from pathlib import Path

import pytest
from dateutil.relativedelta import relativedelta
from dateutil.rrule import DAILY, MONTHLY, SU, WEEKLY, YEARLY, rrule

from fleetcare.domain.lines import State
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Anchor, Period, Task, Trigger
from fleetcare.rules.due.calendar import add
from tests.builders import a_task, day, days_from, done, every, last_done, line

CASES = list(csv.DictReader(Path(__file__).with_name("interval_rules.csv").read_text(encoding="utf-8").splitlines()))
FAR = "2030-01-01"


def trigger_of(row: dict[str, str]) -> Trigger:
    """The interval of a case with its calendar form and its grace."""
    form, _, size = row["form"].rpartition(" ")
    changes: dict[str, object] = {"grace": row["grace"]} if row["grace"] else {}
    if form == "month":
        changes["month_end"] = True
    if form == "window":
        changes["window_days"] = int(size)
    if form == "once each":
        changes["once_each"] = Period(size)
    return every(row["every"], **changes)


def task_of(row: dict[str, str]) -> Task:
    anchor = Anchor(row["anchor"]) if row["anchor"] else None
    origin = last_done(hours=row["last_done_at"]) if row["last_done_at"] else None
    return a_task(trigger_of(row), anchor=anchor, origin=origin)


def test_every_case_names_its_source() -> None:
    assert len(CASES) == 23
    assert all(row["source"] for row in CASES)


@pytest.mark.parametrize("row", CASES, ids=lambda row: row["case"])
def test_the_next_point_is_the_published_rules(row: dict[str, str]) -> None:
    work = done(row["done_on"], hours=row["done_at"]) if row["done_at"] else done(row["done_on"])
    due = line(task_of(row), on=FAR, done=[work], hours=row["done_at"] or None)
    (trigger,) = due.triggers
    assert trigger.point == (day(row["next_on"]) if row["next_on"] else Decimal(row["next_at"]))
    assert trigger.next is not None
    assert str(trigger.next.opens or "") == row["opens_on"]
    over = {Kind.HOURS: (Decimal(row["over"]), Decimal(row["grace"]))} if row["over"] else {}
    assert due.past[0].over == over


def test_a_100_hour_inspection_more_than_10_hours_over_is_flagged_and_not_before() -> None:
    """14 CFR 91.409(b)."""
    task = a_task(every("100h", grace=10), anchor=Anchor.FROM_DUE, origin=last_done(hours=1000))
    states = [line(task, on=FAR, hours=now).state for now in ("1100.0", "1110.0", "1110.1")]
    assert states == [State.DUE, State.DUE, State.OVERDUE]


def test_oil_is_overdue_by_date_though_20_hours_remain() -> None:
    """40 CFR 63 subpart ZZZZ Table 2d item 4: 500 hours or annually, whichever comes first."""
    task = a_task(every("500h"), every("1y"), origin=last_done("2025-02-10", hours=3120))
    due = line(task, on="2026-02-11", hours=3600)
    assert due.state is State.OVERDUE
    assert (due.deciding.kind, due.deciding.remaining) == (Kind.CALENDAR, Decimal(-1))
    assert due.triggers[0].remaining == 20


def test_8760_hours_are_a_year_of_running_day_and_night() -> None:
    """40 CFR 63 subpart ZZZZ Table 3: 8,760 hours or 3 years; 8,760 = 24 x 365."""
    task = a_task(every("8760h"), every("3y"), origin=last_done("2025-01-01", hours=0))
    day_and_night = [(days_from("2025-01-01", days), 24 * days) for days in range(0, 366, 73)]
    due = line(task, on="2026-01-01", hours=day_and_night)
    assert (due.state, due.triggers[0].remaining) == (State.DUE, Decimal(0))
    assert line(task, on="2025-12-31", hours=[("2025-12-31", 8736)]).triggers[0].remaining == 24


# Month arithmetic


def every_day(first: date, last: date) -> Iterator[date]:
    return (first + timedelta(days=n) for n in range((last - first).days + 1))


DAYS = [*every_day(date(2023, 11, 28), date(2024, 3, 2)), *every_day(date(2099, 12, 29), date(2100, 3, 1))]


@pytest.mark.parametrize("months", [1, 2, 3, 6, 11, 12, 13, 24, 48, 60])
def test_adding_months_agrees_with_relativedelta_and_with_the_calendar(months: int) -> None:
    for start in DAYS:
        reached = add(start, months, 0)
        assert reached == start + relativedelta(months=months)
        years, month = divmod(start.year * 12 + start.month - 1 + months, 12)
        assert reached == date(years, month + 1, min(start.day, calendar.monthrange(years, month + 1)[1]))


# Recurrences

START = date(2023, 10, 31)


def days_of(rule: rrule, after: date, count: int) -> list[date]:
    """The days of a recurrence after a day."""
    moment = datetime.combine(after, datetime.min.time())
    return [found.date() for found in islice(rule.xafter(moment), count)]


def from_(start: date) -> datetime:
    return datetime.combine(start, datetime.min.time())


def points_kept(interval: Trigger, start: date, anchor: Anchor, count: int) -> list[date]:
    """The due days of a task that is done on each of them."""
    task = a_task(interval, anchor=anchor, origin=last_done(start.isoformat()))
    points: list[date] = []
    for _ in range(count):
        works = [done(point.isoformat(), entry=n) for n, point in enumerate(points, 1)]
        point = line(task, on=FAR, done=works).triggers[0].point
        assert isinstance(point, date)
        points.append(point)
    return points


@pytest.mark.parametrize("on", [28, 29, 30, 31])
@pytest.mark.parametrize("months", [1, 3, 6, 12])
def test_chains_and_grids_of_months_are_those_of_a_monthly_recurrence(on: int, months: int) -> None:
    start = date(2023, 10, on)
    up_to_day = tuple(range(28, on + 1))
    rule = rrule(MONTHLY, interval=months, dtstart=from_(start), bymonthday=up_to_day, bysetpos=-1)
    expected = days_of(rule, start, 10)
    assert points_kept(every(f"{months}mo"), start, Anchor.FROM_DUE, 10) == expected
    assert points_kept(every(f"{months}mo", grid_origin=start), start, Anchor.ON_GRID, 10) == expected


@pytest.mark.parametrize("anchor", list(Anchor))
@pytest.mark.parametrize(
    ("interval", "rule"),
    [
        ("90d", rrule(DAILY, interval=90, dtstart=from_(START))),
        ("2w", rrule(WEEKLY, interval=2, dtstart=from_(START))),
    ],
)
def test_chains_of_days_and_weeks_are_those_of_a_recurrence(interval: str, rule: rrule, anchor: Anchor) -> None:
    expected = days_of(rule, START, 8)
    changes = {"grid_origin": START} if anchor is Anchor.ON_GRID else {}
    assert points_kept(every(interval, **changes), START, anchor, 8) == expected


@pytest.mark.parametrize(
    ("period", "span", "rule"),
    [
        (Period.WEEK, "1w", rrule(WEEKLY, byweekday=SU, dtstart=from_(date(2023, 11, 6)))),
        (Period.MONTH, "1mo", rrule(MONTHLY, bymonthday=-1, dtstart=from_(date(2023, 11, 1)))),
        (Period.QUARTER, "3mo", rrule(MONTHLY, bymonthday=-1, bymonth=(3, 6, 9, 12), dtstart=from_(date(2024, 1, 1)))),
        (Period.YEAR, "1y", rrule(YEARLY, bymonth=12, bymonthday=31, dtstart=from_(date(2024, 1, 1)))),
    ],
)
def test_periods_end_on_the_days_of_a_recurrence(period: Period, span: str, rule: rrule) -> None:
    expected = days_of(rule, START, 12)
    assert points_kept(every(span, once_each=period), START, Anchor.FROM_DONE, 6) == expected[:6]


def test_month_ends_of_a_chain_are_those_of_a_recurrence() -> None:
    rule = rrule(MONTHLY, interval=3, bymonthday=-1, dtstart=from_(START))
    assert points_kept(every("3mo", month_end=True), START, Anchor.FROM_DUE, 10) == days_of(rule, START, 10)
