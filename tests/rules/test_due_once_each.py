"""Once each week, month, quarter or year: which period an entry serves, and which is due next."""

from decimal import Decimal

import pytest

from fleetcare.domain.engines import Status, StatusSpell
from fleetcare.domain.lines import DueLine, PastWork, State
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Anchor, CalendarTrigger, Combine, Deferral, Origin, Period, Task
from fleetcare.rules.due.calendar import period_of, period_span, say_period
from tests.builders import a_deferral, a_task, an_item, day, days_from, done, every, last_done, line, new_at

START = new_at(on=day("2026-01-10"))


def each(period: Period, grace: int = 0, *deferrals: Deferral, origin: Origin | None = START) -> Task:
    return a_task(
        CalendarTrigger(period_span(period), once_each=period, grace=grace), origin=origin, deferrals=deferrals
    )


def after(task: Task, *done_on: str, on: str = "2030-01-01", **kwargs: object) -> DueLine:
    """The line after work on some days."""
    return line(task, on=on, done=[done(when, entry=n) for n, when in enumerate(done_on, 1)], **kwargs)


def said(works: tuple[PastWork, ...]) -> list[str]:
    """What each entry served, with the last days of the periods missed before it."""
    return [
        " ".join([work.served, *(f"missed {point}" for point in work.missed.get(Kind.CALENDAR, ()))]) for work in works
    ]


# Periods


@pytest.mark.parametrize(
    ("period", "on", "first", "last", "name"),
    [
        (Period.WEEK, "2026-03-05", "2026-03-02", "2026-03-08", "week to 2026-03-08"),
        (Period.WEEK, "2026-03-02", "2026-03-02", "2026-03-08", "week to 2026-03-08"),
        (Period.WEEK, "2026-03-08", "2026-03-02", "2026-03-08", "week to 2026-03-08"),
        (Period.WEEK, "2026-01-01", "2025-12-29", "2026-01-04", "week to 2026-01-04"),
        (Period.MONTH, "2028-02-29", "2028-02-01", "2028-02-29", "2028-02"),
        (Period.MONTH, "2026-12-31", "2026-12-01", "2026-12-31", "2026-12"),
        (Period.QUARTER, "2026-03-31", "2026-01-01", "2026-03-31", "2026-Q1"),
        (Period.QUARTER, "2026-12-01", "2026-10-01", "2026-12-31", "2026-Q4"),
        (Period.YEAR, "2026-01-01", "2026-01-01", "2026-12-31", "2026"),
    ],
)
def test_a_day_lies_in_one_period_with_its_first_and_last_day_and_a_name(
    period: Period, on: str, first: str, last: str, name: str
) -> None:
    found = period_of(period, day(on))
    assert (found.first, found.last) == (day(first), day(last))
    assert say_period(period, found) == name


@pytest.mark.parametrize(
    ("period", "next_on"),
    [
        (Period.WEEK, "2026-01-18"),
        (Period.MONTH, "2026-02-28"),
        (Period.QUARTER, "2026-06-30"),
        (Period.YEAR, "2027-12-31"),
    ],
)
def test_the_first_period_is_the_one_after_the_start_points(period: Period, next_on: str) -> None:
    assert after(each(period), on="2026-01-10").triggers[0].point == day(next_on)
    assert after(each(period, origin=last_done("2026-01-10")), on="2026-01-10").triggers[0].point == day(next_on)


@pytest.mark.parametrize(
    ("period", "done_on", "next_on"),
    [
        (Period.WEEK, "2026-01-12", "2026-01-25"),
        (Period.WEEK, "2026-01-18", "2026-01-25"),
        (Period.MONTH, "2026-02-01", "2026-03-31"),
        (Period.MONTH, "2026-02-28", "2026-03-31"),
        (Period.QUARTER, "2026-04-01", "2026-09-30"),
        (Period.QUARTER, "2026-06-30", "2026-09-30"),
        (Period.YEAR, "2027-01-01", "2028-12-31"),
        (Period.YEAR, "2027-12-31", "2028-12-31"),
    ],
)
def test_work_early_or_late_in_its_period_serves_it_and_the_next_one_is_due(
    period: Period, done_on: str, next_on: str
) -> None:
    due = after(each(period), done_on)
    assert due.triggers[0].point == day(next_on)
    assert due.past[0].missed == {}


@pytest.mark.parametrize(
    ("period", "ahead"), [(Period.WEEK, 1), (Period.MONTH, 3), (Period.QUARTER, 9), (Period.YEAR, 30)]
)
def test_a_period_is_near_a_tenth_of_its_length_before_its_last_day(period: Period, ahead: int) -> None:
    last = after(each(period), on="2026-01-10").triggers[0].point
    states = [after(each(period), on=days_from(str(last), days)).state for days in (-ahead - 1, -ahead, 0, 1)]
    assert states == [State.CLEAR, State.NEAR, State.DUE, State.OVERDUE]


# Which period an entry serves


@pytest.mark.parametrize(
    ("grace", "done_on", "served", "next_on"),
    [
        (0, ["2026-03-01"], ["2026-03 missed 2026-02-28"], "2026-04-30"),
        (5, ["2026-03-05"], ["2026-02"], "2026-03-31"),
        (5, ["2026-03-06"], ["2026-03 missed 2026-02-28"], "2026-04-30"),
        (5, ["2026-03-03", "2026-03-04"], ["2026-02", "2026-03"], "2026-04-30"),
        (
            0,
            ["2026-06-15"],
            ["2026-06 missed 2026-02-28 missed 2026-03-31 missed 2026-04-30 missed 2026-05-31"],
            "2026-07-31",
        ),
        (5, ["2026-06-04"], ["2026-05 missed 2026-02-28 missed 2026-03-31 missed 2026-04-30"], "2026-06-30"),
        (0, ["2026-02-10", "2026-04-02"], ["2026-02", "2026-04 missed 2026-03-31"], "2026-05-31"),
    ],
)
def test_an_entry_serves_the_earliest_unserved_month_still_open_by_grace_else_its_own(
    grace: int, done_on: list[str], served: list[str], next_on: str
) -> None:
    due = after(each(Period.MONTH, grace), *done_on)
    assert said(due.past) == served
    assert due.triggers[0].point == day(next_on)


def test_where_grace_is_longer_than_the_period_the_earliest_of_several_open_ones_is_served() -> None:
    weekly = each(Period.WEEK, 10, origin=last_done("2026-03-01"))
    due = after(weekly, "2026-03-17", "2026-03-18", "2026-03-19")
    assert said(due.past) == ["week to 2026-03-08", "week to 2026-03-15", "week to 2026-03-22"]
    assert said(after(weekly, "2026-03-19").past) == ["week to 2026-03-15 missed 2026-03-08"]


@pytest.mark.parametrize("done_on", [["2026-02-10", "2026-02-20"], ["2026-02-20", "2026-02-20"]])
def test_a_second_entry_in_a_period_serves_none_and_takes_none_from_the_next(done_on: list[str]) -> None:
    due = after(each(Period.MONTH), *done_on)
    assert said(due.past) == ["2026-02", ""]
    assert due.past[1].note == "its period was already served"
    assert due.past[1].counted
    assert due.triggers[0].point == day("2026-03-31")


def test_work_in_the_start_points_own_period_serves_none() -> None:
    due = after(each(Period.MONTH), "2026-01-20")
    assert said(due.past) == [""]
    assert due.triggers[0].point == day("2026-02-28")


def test_without_a_start_point_the_first_entry_serves_its_own_period() -> None:
    due = after(each(Period.MONTH, origin=None), "2026-03-20")
    assert said(due.past) == ["2026-03"]
    assert due.triggers[0].point == day("2026-04-30")
    assert after(each(Period.MONTH, origin=None)).state is State.UNSET


def test_a_missed_period_stays_overdue_until_the_next_entry_and_then_stands_in_the_history() -> None:
    task = each(Period.MONTH)
    waiting = after(task, on="2026-05-20")
    assert (waiting.state, waiting.triggers[0].point) == (State.OVERDUE, day("2026-02-28"))
    served = after(task, "2026-05-20", on="2026-05-20")
    assert (served.state, served.triggers[0].point) == (State.CLEAR, day("2026-06-30"))
    missed = (day("2026-02-28"), day("2026-03-31"), day("2026-04-30"))
    assert served.past[0].missed == {Kind.CALENDAR: missed}


def test_work_in_grace_is_over_by_its_days_and_work_in_the_next_period_is_not_late_for_its_own() -> None:
    in_grace = after(each(Period.MONTH, 5), "2026-03-04").past[0]
    assert in_grace.over == {Kind.CALENDAR: (Decimal(4), Decimal(5))}
    assert after(each(Period.MONTH), "2026-03-04").past[0].over == {}


# Deferrals


@pytest.mark.parametrize(
    ("done_on", "served"),
    [("2026-04-05", "2026-03"), ("2026-04-06", "2026-04 missed 2026-03-31")],
)
def test_a_period_stays_open_through_the_day_it_is_deferred_to(done_on: str, served: str) -> None:
    task = each(Period.MONTH, 0, a_deferral("2026-04-05", on="2026-03-30"), origin=last_done("2026-02-10"))
    assert said(after(task, done_on).past) == [served]
    states = [after(task, on=on).state for on in ("2026-03-31", "2026-04-05", "2026-04-06")]
    assert states == [State.NEAR, State.DUE, State.OVERDUE]


def test_a_deferral_made_after_the_work_did_not_keep_the_period_open() -> None:
    task = each(Period.MONTH, 0, a_deferral("2026-04-05", on="2026-04-05"), origin=last_done("2026-02-10"))
    assert said(after(task, "2026-04-04").past) == ["2026-04 missed 2026-03-31"]


def test_a_deferral_that_ended_by_its_figure_does_not_keep_the_period_open() -> None:
    monthly = CalendarTrigger(period_span(Period.MONTH), once_each=Period.MONTH)
    until = a_deferral("2026-04-05", hours=1100, on="2026-03-30")
    task = a_task(monthly, every("500h"), origin=last_done("2026-02-10", hours=500), deferrals=(until,))
    served = [
        line(task, on="2026-05-01", done=[done("2026-04-04", hours=at)], hours=1200).past[0].served
        for at in (1100, "1100.1")
    ]
    assert served == ["2026-03", "2026-04"]


def test_a_figure_alone_does_not_keep_a_period_open() -> None:
    monthly = CalendarTrigger(period_span(Period.MONTH), once_each=Period.MONTH)
    until = a_deferral(hours=1100, on="2026-03-30")
    task = a_task(monthly, every("500h"), origin=last_done("2026-02-10", hours=500), deferrals=(until,))
    work = done("2026-04-04", hours=1050)
    assert line(task, on="2026-05-01", done=[work], hours=1200).past[0].served == "2026-04"


def test_extra_work_leaves_the_period_still_owed_and_its_deferral_as_they_were() -> None:
    until = a_deferral("2026-04-05", on="2026-02-20", counts_from=1)
    task = each(Period.MONTH, 0, until)
    due = after(task, "2026-02-10", "2026-02-25", on="2026-03-01")
    assert due.triggers[0].point == day("2026-04-05")
    assert said(after(task, "2026-02-10", "2026-02-25", "2026-04-04").past) == ["2026-02", "", "2026-03"]


# Together with other triggers, versions and pauses


def test_points_of_a_counted_trigger_that_went_by_are_named_beside_the_periods() -> None:
    monthly = CalendarTrigger(period_span(Period.MONTH), once_each=Period.MONTH)
    task = a_task(every("50h"), monthly, origin=new_at(0, day("2026-01-10")), anchor=Anchor.FROM_DUE)
    due = line(task, on="2026-03-21", done=[done("2026-03-20", hours=120)], hours=121)
    assert due.past[0].missed == {Kind.HOURS: (Decimal(100),), Kind.CALENDAR: (day("2026-02-28"),)}


def test_extra_work_re_bases_a_counted_trigger_of_the_same_task() -> None:
    monthly = CalendarTrigger(period_span(Period.MONTH), once_each=Period.MONTH)
    task = a_task(every("50h"), monthly, origin=new_at(0, day("2026-01-10")), combine=Combine.FIRST)
    works = [done("2026-02-10", entry=1, hours=40), done("2026-02-20", entry=2, hours=60)]
    due = line(task, on="2026-02-21", done=works, hours=61)
    assert [t.point for t in due.triggers] == [110, day("2026-03-31")]


@pytest.mark.parametrize(
    ("done_on", "served", "point"),
    [
        ("2026-03-25", "2026-03", "2026-05-04"),
        ("2026-04-20", "2026-03", "2026-05-31"),
        ("2026-04-21", "2026-04 missed 2026-04-20", "2026-05-31"),
        ("2026-05-02", "2026-05 missed 2026-04-20 missed 2026-04-30", "2026-06-30"),
    ],
)
def test_laid_up_days_make_the_owed_period_longer_and_work_until_then_serves_it(
    done_on: str, served: str, point: str
) -> None:
    spells = (
        StatusSpell(Status.LAID_UP, day("2026-03-10")),
        StatusSpell(Status.IN_SERVICE, day("2026-03-30")),
    )
    monthly = CalendarTrigger(period_span(Period.MONTH), once_each=Period.MONTH)
    task = a_task(monthly, origin=last_done("2026-02-10"), pause_while_laid_up=True)
    waiting = line(task, on="2026-04-10", item=an_item(spells=spells))
    assert waiting.triggers[0].point == day("2026-04-20")
    due = line(task, on="2026-05-05", done=[done(done_on)], item=an_item(spells=spells))
    assert said(due.past) == [served]
    assert due.triggers[0].point == day(point)
