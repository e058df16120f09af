"""Windows: work counts from the opening to the last day, nominal days are counted from what counted."""

from dataclasses import replace

import pytest

from fleetcare.domain.lines import State
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Anchor, Combine, Task
from tests.builders import a_task, day, days_from, done, every, last_done, line, new_at, trigger

# Last done 2026-01-10 every 6 months: nominal 2026-07-10, window 2026-06-30 to 2026-07-20.
OVERHAUL = a_task(every("6mo", window_days=10), origin=last_done("2026-01-10"))


def nominal_after(task: Task, *done_on: str) -> str:
    entries = [done(when, entry=n) for n, when in enumerate(done_on, 1)]
    found = trigger(task, on="2027-12-31", done=entries).next
    assert found is not None
    return str(found.nominal)


def test_the_due_day_is_the_last_of_the_window_with_opening_and_nominal_day_in_the_working() -> None:
    found = trigger(OVERHAUL, on="2026-05-01").next
    assert found is not None
    assert (found.opens, found.nominal, found.point) == (day("2026-06-30"), day("2026-07-10"), day("2026-07-20"))


@pytest.mark.parametrize(
    ("on", "state"),
    [
        ("2026-06-11", State.CLEAR),
        ("2026-06-12", State.NEAR),
        ("2026-06-29", State.NEAR),
        ("2026-06-30", State.DUE),
        ("2026-07-10", State.DUE),
        ("2026-07-20", State.DUE),
        ("2026-07-21", State.OVERDUE),
    ],
)
def test_a_window_is_near_ahead_of_its_opening_due_inside_and_overdue_after_its_last_day(on: str, state: State) -> None:
    assert line(OVERHAUL, on=on).state is state


def test_a_stated_ahead_counts_back_from_the_opening() -> None:
    task = a_task(every("6mo", window_days=10, ahead=5), origin=last_done("2026-01-10"))
    assert [line(task, on=on).state for on in ("2026-06-24", "2026-06-25")] == [State.CLEAR, State.NEAR]


@pytest.mark.parametrize(
    ("done_on", "nominal"),
    [
        ("2026-06-29", "2026-07-10"),
        ("2026-06-30", "2026-12-30"),
        ("2026-07-10", "2027-01-10"),
        ("2026-07-20", "2027-01-20"),
        ("2026-07-25", "2027-01-25"),
    ],
)
def test_by_default_nominal_days_are_counted_from_the_last_work_that_counted(done_on: str, nominal: str) -> None:
    assert nominal_after(OVERHAUL, done_on) == nominal


def test_work_before_the_window_neither_closes_nor_re_bases_the_line_and_says_from_when_it_counts() -> None:
    due = line(OVERHAUL, on="2026-07-21", done=[done("2026-06-29")])
    assert (due.state, due.last_done_on, due.last_done_number) == (State.OVERDUE, day("2026-01-10"), None)
    assert not due.past[0].counted
    assert due.past[0].note == "before its window opened on 2026-06-30"


def test_work_after_the_last_day_counts_and_is_over() -> None:
    due = line(OVERHAUL, on="2026-08-01", done=[done("2026-07-25")])
    assert {kind: by for kind, (by, _) in due.past[0].over.items()} == {Kind.CALENDAR: 5}


@pytest.mark.parametrize(
    ("done_on", "nominal"), [("2026-07-05", "2027-01-05"), ("2026-07-10", "2027-01-10"), ("2026-07-18", "2027-01-10")]
)
def test_from_due_early_work_in_the_window_restarts_and_late_work_keeps_the_chain(done_on: str, nominal: str) -> None:
    task = replace(OVERHAUL, versions=(replace(OVERHAUL.versions[0], anchor=Anchor.FROM_DUE),))
    assert nominal_after(task, done_on) == nominal


@pytest.mark.parametrize(
    ("done_on", "nominal"),
    [
        (["2026-06-30"], "2027-01-10"),
        (["2026-07-20"], "2027-01-10"),
        (["2026-06-29"], "2026-07-10"),
        (["2027-01-20"], "2027-07-10"),
    ],
)
def test_on_the_grid_work_anywhere_in_its_window_serves_the_grid_day(done_on: list[str], nominal: str) -> None:
    grid = every("6mo", window_days=10, grid_origin=day("2026-01-10"))
    assert nominal_after(a_task(grid, anchor=Anchor.ON_GRID, origin=last_done("2026-01-10")), *done_on) == nominal


def test_the_first_window_lies_around_the_first_interval_from_the_start() -> None:
    task = a_task(every("6mo", first=Span(1, "mo"), window_days=5), origin=new_at(on=day("2026-01-10")))
    found = trigger(task, on="2026-01-11").next
    assert found is not None
    assert (found.opens, found.point) == (day("2026-02-05"), day("2026-02-15"))
    assert found.ahead == 3


def test_without_a_start_the_first_entry_counts_whenever_it_was() -> None:
    assert nominal_after(a_task(every("6mo", window_days=10)), "2026-02-01") == "2026-08-01"


# A window beside a counted trigger

BOTH = a_task(every("500h"), every("6mo", window_days=10), origin=last_done("2026-01-10", hours=1000))


@pytest.mark.parametrize(("at", "counts"), [("1449.9", False), ("1450", True), ("1600", True)])
def test_work_before_the_window_counts_where_the_hours_called_for_it(at: str, counts: bool) -> None:
    due = line(BOTH, on="2026-05-01", done=[done("2026-04-01", hours=at)], hours=1700)
    assert due.past[0].counted is counts
    assert due.triggers[1].next is not None
    assert due.triggers[1].next.nominal == day("2026-10-01" if counts else "2026-07-10")


def test_work_before_the_window_without_a_figure_does_not_count() -> None:
    assert not line(BOTH, on="2026-05-01", done=[done("2026-04-01")], hours=1700).past[0].counted


def test_on_a_task_that_waits_for_its_last_trigger_hours_do_not_open_the_window() -> None:
    waits = replace(BOTH, versions=(replace(BOTH.versions[0], combine=Combine.LAST),))
    assert not line(waits, on="2026-05-01", done=[done("2026-04-01", hours=1600)], hours=1700).past[0].counted


def test_work_before_the_window_does_not_re_base_the_hours_either() -> None:
    due = line(BOTH, on="2026-05-01", done=[done("2026-04-01", hours=1100)], hours=1150)
    assert due.triggers[0].point == 1500


def test_a_window_never_moves_by_early_work_however_often_it_is_done() -> None:
    early = [days_from("2026-02-01", 14 * n) for n in range(8)]
    assert nominal_after(OVERHAUL, *early) == "2026-07-10"
