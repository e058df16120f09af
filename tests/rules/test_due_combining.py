"""Combining: by whichever interval ends first or last, the bound of waiting, and the trigger that decides."""

from dataclasses import replace

import pytest

from fleetcare.domain.lines import DueLine, State
from fleetcare.domain.quantities import Kind, parse_span
from fleetcare.domain.schedules import Combine, Task, Trigger
from fleetcare.rules.due.states import combine, worst
from tests.builders import a_task, day, days_from, every, last_done, line

OVER, DUE, NEAR, UNSET, CLEAR = State.OVERDUE, State.DUE, State.NEAR, State.UNSET, State.CLEAR


@pytest.mark.parametrize(
    ("states", "first", "last"),
    [
        ([CLEAR], CLEAR, CLEAR),
        ([CLEAR, CLEAR], CLEAR, CLEAR),
        ([CLEAR, NEAR], NEAR, CLEAR),
        ([NEAR, DUE], DUE, NEAR),
        ([DUE, OVER], OVER, DUE),
        ([CLEAR, OVER], OVER, CLEAR),
        ([OVER, OVER], OVER, OVER),
        ([UNSET, CLEAR], UNSET, UNSET),
        ([UNSET, NEAR], NEAR, UNSET),
        ([UNSET, DUE], DUE, UNSET),
        ([UNSET, OVER], OVER, UNSET),
        ([UNSET, UNSET], UNSET, UNSET),
        ([CLEAR, NEAR, DUE, OVER], OVER, CLEAR),
    ],
)
def test_first_takes_the_worst_state_and_last_the_mildest_unless_one_is_unset(
    states: list[State], first: State, last: State
) -> None:
    assert combine(Combine.FIRST, states) is first
    assert combine(Combine.LAST, states) is last
    assert combine(Combine.FIRST, states[::-1]) is first
    assert combine(Combine.LAST, states[::-1]) is last


def test_unset_hides_an_all_clear_and_never_a_warning() -> None:
    assert [worst([State.UNSET, other]) for other in State] == [OVER, DUE, NEAR, UNSET, UNSET]


# The bound of a line that waits for its last interval


def waiting(*triggers: Trigger, not_later_than: str = "5y", hours: float = 1000, on: str = "2025-11-10") -> Task:
    return a_task(
        *(triggers or (every("500h"), every("6mo"))),
        combine=Combine.LAST,
        not_later_than=parse_span(not_later_than),
        origin=last_done(on, hours=hours),
    )


@pytest.mark.parametrize(
    ("on", "hours", "state", "decides"),
    [
        ("2026-05-10", 1000, CLEAR, Kind.HOURS),
        ("2026-05-11", 1501, OVER, Kind.HOURS),
        ("2026-05-09", 1501, NEAR, Kind.CALENDAR),
        ("2026-05-12", 1500, DUE, Kind.HOURS),
    ],
)
def test_a_waiting_line_falls_due_only_when_every_interval_has_ended(
    on: str, hours: int, state: State, decides: Kind
) -> None:
    due = line(waiting(), on=on, hours=hours)
    assert due.state is state
    assert due.deciding.kind is decides


@pytest.mark.parametrize(
    ("on", "state", "is_bound"),
    [
        ("2026-10-10", CLEAR, False),
        ("2026-10-11", NEAR, True),
        ("2026-11-10", DUE, True),
        ("2026-11-11", OVER, True),
    ],
)
def test_the_bound_counts_from_the_same_day_with_the_default_ahead_and_no_grace(
    on: str, state: State, is_bound: bool
) -> None:
    task = waiting(every("500h"), every("6mo", grace=20), not_later_than="1y")
    due = line(task, on=on, hours=1000)
    assert (due.state, due.not_later_than) == (state, day("2026-11-10"))
    assert (due.deciding not in due.triggers) is is_bound


def test_where_the_bound_is_no_worse_the_triggers_decide() -> None:
    due = line(waiting(not_later_than="6mo"), on="2026-05-12", hours=1501)
    assert due.state is State.OVERDUE
    assert due.deciding in due.triggers


def test_an_unset_waiting_line_still_warns_by_its_bound() -> None:
    task = waiting(every("500h"), every("5000km"), not_later_than="1y")
    assert line(task, on="2026-05-01", hours=1000).state is State.UNSET
    assert line(task, on="2026-10-20", hours=1000).state is State.NEAR


def test_without_a_day_to_count_from_there_is_no_bound() -> None:
    task = replace(waiting(every("500h"), every("5000km")), origin=last_done(hours=1000, distance=0))
    due = line(task, on="2036-05-01", hours=1000, km=0)
    assert (due.state, due.not_later_than) == (State.CLEAR, None)


# The deciding trigger

FIVE_A_DAY = [(days_from("2026-01-01", 10 * n), 500 + 50 * n) for n in range(13)]
"""Last read 1100 on 2026-05-01."""
TEN_KM_A_DAY = [(on, 10 * hours) for on, hours in FIVE_A_DAY]


def decides(due: DueLine) -> Kind:
    return due.deciding.kind


@pytest.mark.parametrize(("combined", "expected"), [(Combine.FIRST, Kind.CALENDAR), (Combine.LAST, Kind.HOURS)])
def test_within_one_state_the_likely_dates_decide_before_the_shares(combined: Combine, expected: Kind) -> None:
    # 1500 h likely on 2026-07-20 with 80 % left, a day of 2026-07-10 with 10 % of 5 y left
    task = a_task(every("500h"), every("5y", ahead=1), combine=combined, origin=last_done("2021-07-10", hours=1000))
    due = line(task, on="2026-05-01", hours=FIVE_A_DAY)
    assert due.state is State.CLEAR
    assert decides(due) is expected


@pytest.mark.parametrize(("combined", "expected"), [(Combine.FIRST, Kind.HOURS), (Combine.LAST, Kind.CALENDAR)])
def test_where_a_date_is_missing_the_share_of_the_interval_left_decides(combined: Combine, expected: Kind) -> None:
    task = a_task(every("500h"), every("6mo"), combine=combined, origin=last_done("2026-01-10", hours=800))
    assert decides(line(task, on="2026-05-01", hours=1200)) is expected


@pytest.mark.parametrize(("combined", "expected"), [(Combine.FIRST, Kind.DISTANCE), (Combine.LAST, Kind.HOURS)])
def test_on_the_same_likely_date_the_share_decides(combined: Combine, expected: Kind) -> None:
    task = a_task(
        every("500h"), every("6000km"), combine=combined, origin=last_done("2026-01-10", hours=1000, distance=9000)
    )
    due = line(task, on="2026-05-01", hours=FIVE_A_DAY, km=TEN_KM_A_DAY)
    likely = {t.forecast.likely for t in due.triggers if t.forecast is not None}
    assert likely == {day("2026-07-20")}
    assert decides(due) is expected


@pytest.mark.parametrize("combined", list(Combine))
def test_where_all_is_equal_the_first_in_option_order_decides(combined: Combine) -> None:
    hours, km = every("500h"), every("5000km")
    origin = last_done("2026-01-10", hours=1000, distance=10000)
    for one, other in ((hours, km), (km, hours)):
        task = a_task(one, other, combine=combined, origin=origin)
        assert decides(line(task, on="2026-05-01", hours=1100, km=11000)) is one.kind


def test_a_trigger_in_another_state_never_decides() -> None:
    task = a_task(every("500h"), every("6mo"), origin=last_done("2025-10-20", hours=700))
    due = line(task, on="2026-05-01", hours=1190)
    assert [t.state for t in due.triggers] == [NEAR, OVER]
    assert decides(due) is Kind.CALENDAR


def test_an_unset_line_is_decided_by_the_trigger_that_lacks_something() -> None:
    due = line(a_task(every("6mo"), every("500h"), origin=last_done("2026-04-01")), on="2026-05-01", hours=10)
    assert (due.state, decides(due)) == (State.UNSET, Kind.HOURS)
