"""Duty factors: shorter intervals in dust, salt or short trips, by the factor in force on the day."""

from decimal import Decimal

import pytest

from fleetcare.domain.engines import DutyFactor, Item
from fleetcare.domain.lines import NextPoint
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Anchor, Combine, Period, Task
from fleetcare.rules.due.calendar import shorten
from tests.builders import a_task, an_item, day, done, every, last_done, line, new_at, trigger


def under(*factors: tuple[Kind, str, str]) -> Item:
    """An engine with factors: kind, factor, from when."""
    return an_item(factors=tuple(DutyFactor(kind, Decimal(f), day(on), "dust") for kind, f, on in factors))


HALF = under((Kind.HOURS, "0.5", "2026-01-01"), (Kind.CALENDAR, "0.5", "2026-01-01"))


def next_point(task: Task, item: Item = HALF, **kwargs: object) -> NextPoint:
    found = trigger(task, on="2026-05-01", hours=0, item=item, **kwargs).next
    assert found is not None
    return found


def test_interval_and_first_interval_are_shortened_and_the_factor_is_kept_for_the_working() -> None:
    task = a_task(every("250h", first=50), origin=new_at(0, day("2026-01-10")))
    first = next_point(task)
    assert (first.point, first.interval, first.factor) == (Decimal(25), Decimal(125), Decimal("0.5"))
    assert next_point(task, done=[done("2026-02-01", hours=30)]).point == 155


def test_from_due_counts_on_by_the_shortened_interval() -> None:
    task = a_task(every("100h"), anchor=Anchor.FROM_DUE, origin=last_done("2026-01-05", hours=1000))
    found = next_point(task, done=[done("2026-02-01", hours=1120)])
    assert (found.point, found.passed) == (Decimal(1150), (Decimal(1100),))


@pytest.mark.parametrize(
    ("span", "factor", "effective"),
    [
        (Span(12, "mo"), "1", Span(12, "mo")),
        (Span(1, "y"), "1", Span(1, "y")),
        (Span(12, "mo"), "0.5", Span(6, "mo")),
        (Span(12, "mo"), "0.99", Span(11, "mo")),
        (Span(1, "y"), "0.5", Span(6, "mo")),
        (Span(5, "mo"), "0.5", Span(2, "mo")),
        (Span(1, "mo"), "0.5", Span(1, "mo")),
        (Span(90, "d"), "0.8", Span(72, "d")),
        (Span(91, "d"), "0.5", Span(45, "d")),
        (Span(2, "w"), "0.5", Span(7, "d")),
        (Span(1, "d"), "0.1", Span(1, "d")),
    ],
)
def test_months_and_days_are_rounded_down_to_whole_ones_but_never_below_one(
    span: Span, factor: str, effective: Span
) -> None:
    assert shorten(span, Decimal(factor)) == effective


def test_counted_intervals_are_not_rounded() -> None:
    third = under((Kind.HOURS, "0.333", "2026-01-01"))
    assert next_point(a_task(every("100h"), origin=new_at(0)), third).point == Decimal("33.3")


def test_a_calendar_first_interval_is_shortened_too() -> None:
    task = a_task(every("12mo", first=Span(3, "mo")), origin=new_at(on=day("2026-01-10")))
    assert next_point(task).point == day("2026-02-10")


@pytest.mark.parametrize("first", [None, Decimal(50)])
def test_grids_are_not_shortened(first: Decimal | None) -> None:
    hours = every("250h") if first is None else every("250h", first=first)
    found = next_point(a_task(hours, anchor=Anchor.ON_GRID, origin=new_at(0)))
    assert (found.point, found.factor) == (first or Decimal(250), Decimal(1))
    months = a_task(every("12mo"), anchor=Anchor.ON_GRID, origin=new_at(on=day("2026-01-10")))
    assert next_point(months).point == day("2027-01-10")


def test_once_each_periods_are_not_shortened() -> None:
    monthly = a_task(every("1mo", once_each=Period.MONTH), origin=last_done("2026-04-10"))
    assert next_point(monthly).point == day("2026-05-31")


def test_a_factor_of_another_kind_does_not_count() -> None:
    assert next_point(a_task(every("250h"), origin=new_at(0)), under((Kind.CALENDAR, "0.5", "2026-01-01"))).point == 250


CHANGING = under(
    (Kind.HOURS, "0.5", "2026-03-01"), (Kind.HOURS, "0.8", "2026-04-15"), (Kind.HOURS, "0.1", "2026-06-01")
)


@pytest.mark.parametrize(
    ("on", "point"), [("2026-02-28", 1250), ("2026-03-01", 1125), ("2026-04-14", 1125), ("2026-04-15", 1200)]
)
def test_the_open_line_is_worked_out_with_the_factor_of_the_day_asked_about(on: str, point: int) -> None:
    task = a_task(every("250h"), origin=last_done("2026-01-01", hours=1000))
    assert trigger(task, on=on, hours=1000, item=CHANGING).point == point


@pytest.mark.parametrize(("on", "over"), [("2026-02-28", 0), ("2026-03-01", 75), ("2026-04-15", 0)])
def test_an_entry_is_held_against_the_point_by_the_factor_of_its_own_day(on: str, over: int) -> None:
    task = a_task(every("250h"), origin=last_done("2026-01-01", hours=1000))
    found = line(task, on="2026-05-01", done=[done(on, hours=1200)], hours=1300, item=CHANGING).past[0].over
    assert found == ({Kind.HOURS: (Decimal(over), Decimal(0))} if over else {})


def test_a_point_served_under_one_factor_stays_what_it_was_when_the_factor_changes() -> None:
    task = a_task(every("250h"), anchor=Anchor.FROM_DUE, origin=last_done("2026-01-01", hours=1000))
    work = done("2026-03-10", hours=1130)
    assert trigger(task, on="2026-03-11", done=[work], hours=1140, item=CHANGING).point == 1250
    assert trigger(task, on="2026-04-15", done=[work], hours=1140, item=CHANGING).point == 1325


def test_the_bound_of_a_waiting_line_is_no_trigger_and_is_not_shortened() -> None:
    task = a_task(
        every("250h"),
        every("6mo"),
        combine=Combine.LAST,
        not_later_than=Span(1, "y"),
        origin=last_done("2026-01-10", hours=0),
    )
    assert line(task, on="2026-05-01", hours=10, item=HALF).not_later_than == day("2027-01-10")


@pytest.mark.parametrize(
    ("factor", "opens", "last"),
    [("1", "2026-06-30", "2026-08-09"), ("0.5", "2026-03-26", "2026-05-05"), ("0.2", "2026-01-30", "2026-03-07")],
)
def test_a_window_too_wide_for_a_shortened_interval_is_the_widest_that_fits(factor: str, opens: str, last: str) -> None:
    task = a_task(every("191d", window_days=20), origin=last_done("2026-01-10"))
    found = next_point(task, under((Kind.CALENDAR, factor, "2026-01-01")))
    assert (found.opens, found.point) == (day(opens), day(last))
