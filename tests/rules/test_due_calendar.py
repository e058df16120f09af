"""Calendar triggers: months, chains that do not creep, month ends, and the anchors in days."""

from dataclasses import replace
from datetime import date
from decimal import Decimal

import pytest

from fleetcare.domain.lines import NextPoint
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Anchor, Task
from fleetcare.rules.due.calendar import Chain
from tests.builders import a_task, an_item, day, done, every, last_done, line, new_at, trigger

NO_START = an_item(in_service_on=None, as_new=False)


def next_point(task: Task, *done_on: str, on: str = "2030-01-01", in_service: str | None = None) -> NextPoint:
    """The next point after work on some days."""
    entries = [done(when, entry=n) for n, when in enumerate(done_on, 1)]
    item = replace(NO_START, in_service_on=day(in_service) if in_service else None)
    found = trigger(task, on=on, done=entries, item=item)
    assert found.next is not None
    return found.next


def next_day(task: Task, *done_on: str, in_service: str | None = None) -> str:
    point = next_point(task, *done_on, in_service=in_service).point
    assert isinstance(point, date)
    return point.isoformat()


# Months and days


@pytest.mark.parametrize(
    ("start", "interval", "next_on"),
    [
        ("2026-01-31", "1mo", "2026-02-28"),
        ("2028-01-31", "1mo", "2028-02-29"),
        ("2026-01-30", "1mo", "2026-02-28"),
        ("2026-01-28", "1mo", "2026-02-28"),
        ("2026-05-31", "1mo", "2026-06-30"),
        ("2026-12-31", "2mo", "2027-02-28"),
        ("2024-02-29", "1y", "2025-02-28"),
        ("2024-02-29", "4y", "2028-02-29"),
        ("2026-03-28", "1w", "2026-04-04"),
        ("2026-01-31", "90d", "2026-05-01"),
        ("2026-01-31", "3mo", "2026-04-30"),
    ],
)
def test_months_end_on_the_last_day_of_a_shorter_month_and_days_are_counted(
    start: str, interval: str, next_on: str
) -> None:
    assert next_day(a_task(every(interval), origin=last_done(start))) == next_on


def test_the_first_interval_is_owed_once_from_the_start() -> None:
    first = every("1y", first=Span(1, "mo"))
    task = a_task(first, origin=new_at(on=day("2026-01-31")))
    assert next_point(task).is_first
    assert next_day(task) == "2026-02-28"
    assert next_day(task, "2026-02-28") == "2027-02-28"


# Chains


def test_from_due_an_unbroken_chain_counts_months_from_its_first_day() -> None:
    task = a_task(every("1mo"), anchor=Anchor.FROM_DUE, origin=last_done("2026-01-31"))
    days = ["2026-02-28", "2026-04-02", "2026-04-30", "2026-06-01", "2026-07-02"]
    seen = [next_day(task, *days[:n]) for n in range(len(days) + 1)]
    assert seen == ["2026-02-28", "2026-03-31", "2026-04-30", "2026-05-31", "2026-06-30", "2026-07-31"]


def test_from_due_early_work_begins_a_new_chain_on_its_day() -> None:
    task = a_task(every("1mo"), anchor=Anchor.FROM_DUE, origin=last_done("2026-01-31"))
    assert next_day(task, "2026-02-27") == "2026-03-27"
    assert next_day(task, "2026-02-28", "2026-03-30") == "2026-04-30"
    assert next_day(task, "2026-02-28", "2026-03-30", "2026-04-30") == "2026-05-30"


@pytest.mark.parametrize(
    ("done_on", "next_on", "missed"),
    [
        ("2026-03-30", "2026-03-31", []),
        ("2026-03-31", "2026-04-30", ["2026-03-31"]),
        ("2026-05-30", "2026-05-31", ["2026-03-31", "2026-04-30"]),
    ],
)
def test_from_due_whole_intervals_missed_are_counted_along_the_chain(
    done_on: str, next_on: str, missed: list[str]
) -> None:
    task = a_task(every("1mo"), anchor=Anchor.FROM_DUE, origin=last_done("2026-01-31"))
    assert next_day(task, done_on) == next_on
    assert next_point(task, done_on).passed == tuple(day(one) for one in missed)


def test_from_due_days_make_a_chain_too() -> None:
    task = a_task(every("90d"), anchor=Anchor.FROM_DUE, origin=last_done("2026-01-01"))
    assert next_day(task, "2026-04-10") == "2026-06-30"


def test_a_chain_goes_on_through_a_change_from_months_to_days_and_back() -> None:
    mixed = Chain(day("2026-01-31")).plus(Span(1, "mo")).plus(Span(10, "d"))
    assert mixed.day == day("2026-03-10")
    assert mixed.plus(Span(1, "mo")).day == day("2026-04-10")


def test_from_done_creeps_to_the_28th_as_each_interval_counts_from_its_own_work() -> None:
    task = a_task(every("1mo"), origin=last_done("2026-01-31"))
    assert next_day(task, "2026-02-28") == "2026-03-28"


# The grid


def on_grid(interval: str = "1mo", *, origin: str | None = None, ahead: int | None = None) -> Task:
    grid = every(interval, ahead=ahead, grid_origin=day(origin) if origin else None)
    return a_task(grid, anchor=Anchor.ON_GRID)


@pytest.mark.parametrize(
    ("done_on", "next_on"),
    [
        ("2026-02-10", "2026-02-28"),
        ("2026-02-24", "2026-02-28"),
        ("2026-02-25", "2026-03-31"),
        ("2026-02-28", "2026-03-31"),
        ("2026-03-31", "2026-04-30"),
        ("2025-11-15", "2025-11-30"),
    ],
)
def test_grid_days_count_months_from_the_origin_and_work_a_little_early_serves_the_next(
    done_on: str, next_on: str
) -> None:
    assert next_day(on_grid(origin="2026-01-31"), done_on) == next_on


@pytest.mark.parametrize("origin", ["1996-01-31", "2026-01-31", "2056-01-31"])
@pytest.mark.parametrize(("interval", "next_on"), [("1mo", "2026-02-28"), ("1y", "2027-01-31")])
def test_a_grid_reaches_as_far_back_and_ahead_as_its_origin_lies(origin: str, interval: str, next_on: str) -> None:
    assert next_day(on_grid(interval, origin=origin), "2026-02-10") == next_on


@pytest.mark.parametrize(
    ("interval", "ahead", "credit"),
    [
        ("12mo", None, 30),
        ("12mo", 60, 60),
        ("12mo", 100, 90),
        ("2w", None, 1),
        ("2w", 10, 3),
        ("3d", None, 0),
        ("1d", None, 0),
    ],
)
def test_the_early_credit_is_ahead_in_days_but_at_most_a_quarter_of_the_interval(
    interval: str, ahead: int | None, credit: int
) -> None:
    task = on_grid(interval, origin="2026-06-30", ahead=ahead)
    served, missed = (
        date.fromordinal(day("2026-06-30").toordinal() - days).isoformat() for days in (credit, credit + 1)
    )
    assert next_day(task, missed) == "2026-06-30"
    assert next_day(task, served) > "2026-06-30"


def test_grid_days_skipped_are_named() -> None:
    found = next_point(on_grid(origin="2026-01-31"), "2026-02-10", "2026-05-10")
    assert (found.point, found.passed) == (day("2026-05-31"), (day("2026-03-31"), day("2026-04-30")))
    assert next_point(on_grid(origin="2026-01-31"), "2026-02-10", "2026-03-01").passed == ()


@pytest.mark.parametrize(
    ("start", "next_on"), [("2026-01-31", "2026-02-28"), ("2026-02-27", "2026-02-28"), ("2026-02-28", "2026-03-31")]
)
def test_the_first_grid_day_is_the_first_after_the_start_without_early_credit(start: str, next_on: str) -> None:
    task = replace(on_grid(origin="2026-01-31"), origin=new_at(on=day(start)))
    assert next_day(task) == next_on


def test_the_first_grid_day_is_the_first_interval_where_one_is_stated() -> None:
    trigger = every("1y", first=Span(1, "mo"))
    task = a_task(trigger, anchor=Anchor.ON_GRID, origin=new_at(on=day("2026-01-31")))
    assert next_day(task, in_service="2026-01-31") == "2026-02-28"
    assert next_day(task, "2026-02-28", in_service="2026-01-31") == "2027-01-31"


def test_the_grid_begins_on_the_stated_day_else_the_in_service_day_else_when_it_was_first_done() -> None:
    work = ("2026-04-10", "2026-05-12")
    assert next_day(on_grid(origin="2026-01-31"), *work, in_service="2026-01-05") == "2026-05-31"
    assert next_day(on_grid(), *work, in_service="2026-01-05") == "2026-06-05"
    assert next_day(replace(on_grid(), origin=last_done("2026-03-20")), *work) == "2026-05-20"
    assert next_day(on_grid(), *work) == "2026-06-10"


def test_a_grid_of_a_task_known_only_by_a_figure_begins_with_the_first_entry() -> None:
    task = replace(on_grid(), origin=last_done(hours=100))
    assert next_day(task, "2026-04-10") == "2026-05-10"


# Through month end


@pytest.mark.parametrize(
    ("done_on", "next_on"),
    [
        ("2025-07-15", "2026-07-31"),
        ("2025-07-31", "2026-07-31"),
        ("2025-08-01", "2026-08-31"),
        ("2024-02-29", "2025-02-28"),
    ],
)
def test_through_month_end_the_whole_month_is_permitted(done_on: str, next_on: str) -> None:
    task = a_task(every("12mo", month_end=True))
    assert next_day(task, done_on) == next_on


def test_through_month_end_from_due_work_on_the_last_day_keeps_the_chain_and_work_before_it_restarts() -> None:
    task = a_task(every("3mo", month_end=True), anchor=Anchor.FROM_DUE)
    assert next_day(task, "2026-01-15", "2026-04-30") == "2026-07-31"
    assert next_day(task, "2026-01-15", "2026-04-10") == "2026-07-31"
    assert next_day(task, "2026-01-15", "2026-03-31") == "2026-06-30"
    found = next_point(task, "2026-01-15", "2026-08-01")
    assert (found.point, found.passed) == (day("2026-10-31"), (day("2026-07-31"),))


def test_through_month_end_on_the_grid_work_after_its_day_serves_the_month() -> None:
    task = a_task(every("3mo", month_end=True, grid_origin=day("2026-01-10")), anchor=Anchor.ON_GRID)
    assert next_day(task, "2026-01-20", "2026-04-20") == "2026-07-31"
    assert next_point(task, "2026-01-20", "2026-11-20").passed == (day("2026-07-31"), day("2026-10-31"))


def test_the_history_says_by_how_many_days_work_was_over() -> None:
    task = a_task(every("6mo", grace=5), origin=last_done("2026-01-10"))
    over = line(task, on="2026-08-01", done=[done("2026-07-16")]).past[0].over
    assert over == {Kind.CALENDAR: (Decimal(6), Decimal(5))}
