"""Deferrals: which trigger moves, how long it holds, and what is left after its end."""

from decimal import Decimal

import pytest

from fleetcare.domain.lines import State
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Anchor, Call, Combine, Deferral, Task
from tests.builders import a_deferral, a_task, day, days_from, done, every, last_done, line, lines, trigger

EVERY_TEN_DAYS = [(days_from("2026-01-01", 10 * n), 500 + 50 * n) for n in range(13)]
"""5 h a day from 500 on, last read 1100 on 2026-05-01."""


def oil(*deferrals: Deferral, anchor: Anchor | None = None) -> Task:
    """Due at 1000 h."""
    origin = last_done("2026-01-01", hours=750)
    return a_task(every("250h", grace=10), origin=origin, deferrals=deferrals, anchor=anchor)


def inspection(*deferrals: Deferral) -> Task:
    """Due on 2026-05-10."""
    return a_task(every("6mo", grace=5), origin=last_done("2025-11-10"), deferrals=deferrals)


# A figure


@pytest.mark.parametrize(
    ("now", "state", "remaining"),
    [
        ("974", State.CLEAR, "126"),
        ("975", State.CLEAR, "125"),
        ("1000", State.NEAR, "100"),
        ("1005", State.NEAR, "95"),
        ("1075", State.NEAR, "25"),
        ("1099.9", State.NEAR, "0.1"),
        ("1100", State.DUE, "0"),
        ("1100.1", State.OVERDUE, "-100.1"),
    ],
)
def test_a_figure_moves_the_point_near_at_best_past_the_own_one_and_without_grace_after_it(
    now: str, state: State, remaining: str
) -> None:
    found = trigger(oil(a_deferral(hours=1100)), on="2026-05-01", hours=now)
    assert (found.state, found.remaining) == (state, Decimal(remaining))
    assert found.own == 1000


@pytest.mark.parametrize(("now", "state"), [("1000", State.DUE), ("1010", State.DUE), ("1010.1", State.OVERDUE)])
def test_without_a_deferral_the_same_line_has_its_grace(now: str, state: State) -> None:
    assert line(oil(), on="2026-05-01", hours=now).state is state


@pytest.mark.parametrize(("now", "ended", "point"), [("1004", False, "1004"), ("1004.1", True, "1000")])
def test_after_its_end_the_own_point_is_in_force_again_without_grace(now: str, ended: bool, point: str) -> None:
    due = line(oil(a_deferral(hours=1004)), on="2026-05-01", hours=now)
    assert (due.deferral_ended, due.triggers[0].point) == (ended, Decimal(point))
    assert due.state is (State.OVERDUE if ended else State.DUE)
    assert due.triggers[0].next is not None
    assert due.triggers[0].next.grace == 0


# A day


@pytest.mark.parametrize(
    ("on", "state"),
    [
        ("2026-05-09", State.NEAR),
        ("2026-05-10", State.NEAR),
        ("2026-05-12", State.NEAR),
        ("2026-05-19", State.NEAR),
        ("2026-05-20", State.DUE),
        ("2026-05-21", State.OVERDUE),
    ],
)
def test_a_day_moves_the_calendar_trigger_and_is_the_last_permitted_one(on: str, state: State) -> None:
    assert line(inspection(a_deferral("2026-05-20")), on=on).state is state


def test_a_day_leaves_the_counted_trigger_of_a_task_with_a_calendar_one_where_it_is() -> None:
    task = a_task(
        every("250h"), every("6mo"), origin=last_done("2025-11-10", hours=750), deferrals=(a_deferral("2026-07-01"),)
    )
    due = line(task, on="2026-05-20", hours=1005)
    hours, months = due.triggers
    assert (hours.deferred, hours.point, hours.state) == (False, Decimal(1000), State.OVERDUE)
    assert (months.deferred, months.point, months.state) == (True, day("2026-07-01"), State.NEAR)
    assert due.state is State.OVERDUE


def test_a_figure_leaves_the_calendar_trigger_where_it_is() -> None:
    task = a_task(
        every("250h"), every("6mo"), origin=last_done("2025-11-10", hours=750), deferrals=(a_deferral(hours=1100),)
    )
    due = line(task, on="2026-05-20", hours=1005)
    assert [t.state for t in due.triggers] == [State.NEAR, State.OVERDUE]


@pytest.mark.parametrize(
    ("on", "now", "state"),
    [
        ("2026-05-01", 1005, State.NEAR),
        ("2026-05-31", 1150, State.NEAR),
        ("2026-06-01", 1150, State.DUE),
        ("2026-06-02", 1150, State.OVERDUE),
        ("2026-05-01", 980, State.NEAR),
        ("2026-05-01", 970, State.CLEAR),
        ("2026-06-01", 970, State.CLEAR),
        ("2026-06-02", 970, State.CLEAR),
    ],
)
def test_on_a_task_without_a_calendar_trigger_a_day_holds_the_counted_one_back(on: str, now: int, state: State) -> None:
    assert line(oil(a_deferral("2026-06-01")), on=on, hours=now).state is state


@pytest.mark.parametrize(
    ("on", "now", "state"),
    [
        ("2026-05-01", 1005, State.NEAR),
        ("2026-05-01", 1180, State.DUE),
        ("2026-05-01", "1180.1", State.OVERDUE),
        ("2026-06-01", 1100, State.DUE),
        ("2026-06-02", 1100, State.OVERDUE),
    ],
)
def test_the_likely_figure_fixed_on_the_day_of_deferral_caps_it_when_the_engine_runs_hard(
    on: str, now: float, state: State
) -> None:
    assert line(oil(a_deferral("2026-06-01", cap=1180)), on=on, hours=now).state is state


# Two ends


@pytest.mark.parametrize(
    ("on", "now", "ended"),
    [
        ("2026-05-20", 1100, False),
        ("2026-05-21", 1100, True),
        ("2026-05-20", "1100.1", True),
        ("2026-05-20", None, False),
    ],
)
def test_a_deferral_with_two_ends_ends_for_both_triggers_at_the_first(on: str, now: float | None, ended: bool) -> None:
    task = a_task(
        every("250h"),
        every("6mo"),
        origin=last_done("2025-11-10", hours=750),
        deferrals=(a_deferral("2026-05-20", hours=1100),),
    )
    due = line(task, on=on, hours=now)
    assert due.deferral_ended is ended
    assert [t.deferred for t in due.triggers if t.point is not None] == [not ended] * (1 if now is None else 2)


@pytest.mark.parametrize(("figure", "cap"), [(1050, 1200), (1200, 1050)])
def test_of_a_figure_and_a_cap_the_lower_one_ends_a_a_deferral(figure: int, cap: int) -> None:
    task = oil(a_deferral("2026-06-01", hours=figure, cap=cap))
    assert trigger(task, on="2026-05-01", hours=1050).state is State.DUE
    due = line(task, on="2026-05-01", hours="1050.1")
    assert (due.deferral_ended, due.triggers[0].point, due.state) == (True, Decimal(1000), State.OVERDUE)


def test_an_end_that_comes_before_the_own_point_of_the_other_trigger_only_takes_its_grace_away() -> None:
    task = a_task(
        every("250h"),
        every("6mo", grace=5),
        origin=last_done("2025-12-10", hours=750),
        deferrals=(a_deferral("2026-07-01", hours=1100),),
    )
    months = line(task, on="2026-06-11", hours=1101).triggers[1]
    assert (months.point, months.state) == (day("2026-06-10"), State.OVERDUE)
    assert line(task, on="2026-06-09", hours=1101).triggers[1].state is State.NEAR


# Bound to one due point


def test_a_deferral_is_gone_when_the_task_is_done() -> None:
    due = line(oil(a_deferral(hours=1100)), on="2026-05-01", done=[done("2026-04-20", hours=1040)], hours=1050)
    assert (due.deferral, due.triggers[0].point) == (None, Decimal(1290))


def test_a_deferral_belongs_to_the_point_that_counts_from_its_entry() -> None:
    task = oil(a_deferral(hours=1400, on="2026-04-25", counts_from=7))
    work = done("2026-04-20", entry=7, hours=1040)
    assert line(task, on="2026-05-01", done=[work], hours=1050).triggers[0].point == 1400
    again = done("2026-04-28", entry=8, hours=1045)
    assert line(task, on="2026-05-01", done=[work, again], hours=1050).triggers[0].point == 1295


def test_of_two_deferrals_of_one_point_the_newest_holds_and_a_later_one_is_not_known_yet() -> None:
    task = oil(a_deferral(hours=1100), a_deferral(hours=1050, on="2026-04-20", number=2))
    assert trigger(task, on="2026-05-01", hours=900).point == 1050
    assert trigger(task, on="2026-04-19", hours=900).point == 1100
    assert trigger(task, on="2026-04-20", hours=900).point == 1050
    assert trigger(task, on="2026-03-31", hours=900).point == 1000


def test_work_stated_as_done_after_a_deferral_was_made_ends_it() -> None:
    stated = a_task(every("250h"), origin=last_done("2026-04-10", hours=1010), deferrals=(a_deferral(hours=1100),))
    due = line(stated, on="2026-05-01", hours=1020)
    assert (due.deferral, due.triggers[0].point) == (None, Decimal(1260))


def test_a_deferral_never_enters_the_point_that_the_next_interval_is_counted_from() -> None:
    task = oil(a_deferral(hours=1100), anchor=Anchor.FROM_DUE)
    due = line(task, on="2026-05-01", done=[done("2026-04-20", hours=1080)], hours=1090)
    assert due.triggers[0].point == 1250
    assert due.past[0].over == {Kind.HOURS: (Decimal(80), Decimal(10))}


# Other lines


def test_a_follow_up_is_deferred_by_its_day() -> None:
    call = Call(1, day("2026-04-01"), day("2026-04-10"), "weeping gasket")
    task = a_task(on_condition=True, calls=(call,), deferrals=(a_deferral("2026-05-01"),))
    states = [line(task, on=on).state for on in ("2026-04-09", "2026-04-10", "2026-05-01", "2026-05-02")]
    assert states == [State.CLEAR, State.NEAR, State.DUE, State.OVERDUE]


def test_a_window_is_deferred_past_its_last_day() -> None:
    task = a_task(every("6mo", window_days=10), origin=last_done("2025-11-10"), deferrals=(a_deferral("2026-06-30"),))
    on = ("2026-05-11", "2026-05-20", "2026-05-21", "2026-06-30", "2026-07-01")
    states = [line(task, on=one).state for one in on]
    assert states == [State.CLEAR, State.NEAR, State.NEAR, State.DUE, State.OVERDUE]


def test_a_last_line_waits_on_for_the_trigger_that_is_not_deferred() -> None:
    task = a_task(
        every("250h"),
        every("6mo"),
        combine=Combine.LAST,
        origin=last_done("2026-01-01", hours=750),
        deferrals=(a_deferral(hours=1100),),
    )
    assert line(task, on="2026-05-01", hours=1050).state is State.CLEAR
    assert line(task, on="2026-07-01", hours=1050).state is State.NEAR


def test_the_estimate_too_is_held_against_the_deferred_point() -> None:
    found = lines(oil(a_deferral(hours=1400)), on="2026-06-01", hours=EVERY_TEN_DAYS, is_future=True)
    assert found["Oil and filter"].estimated is State.NEAR
    assert (
        lines(oil(), on="2026-06-01", hours=EVERY_TEN_DAYS, is_future=True)["Oil and filter"].estimated is State.OVERDUE
    )
