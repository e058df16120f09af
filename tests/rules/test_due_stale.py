"""Stale meters and days to come: the state stays by what was read, an estimate stands beside it."""

from dataclasses import replace

import pytest

from fleetcare.domain.engines import Status, StatusSpell
from fleetcare.domain.lines import DueLine, State
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Combine
from fleetcare.rules.due.outlook import outlooks, stale_after
from tests.builders import a_task, an_item, day, days_from, every, facts, last_done, line

FIVE_A_DAY = [(days_from("2026-01-01", 10 * n), 500 + 50 * n) for n in range(13)]
"""Read every ten days, last 1100 on 2026-05-01."""
OIL = a_task(every("250h"), origin=last_done("2026-01-01", hours=900))


def read_on(*gaps: int) -> list[str]:
    """Days of readings, so many days apart."""
    days = ["2026-01-01"]
    for gap in gaps:
        days.append(days_from(days[-1], gap))
    return days


@pytest.mark.parametrize(
    ("gaps", "age"),
    [
        ([], 60),
        ([5], 60),
        ([5, 5], 60),
        ([5, 5, 5], 10),
        ([1, 30, 7], 14),
        ([1, 2, 3, 10], 5),
        ([90] * 5 + [7] * 10, 14),
        ([90] * 6 + [7] * 5, 97),
        ([90] * 6 + [7] * 4, 180),
        ([0, 5, 0, 5, 0], 60),
    ],
)
def test_a_reading_is_stale_after_twice_the_median_of_the_last_ten_gaps_and_60_days_under_three(
    gaps: list[int], age: float
) -> None:
    assert stale_after([day(on) for on in read_on(*gaps)], None) == age


def test_a_set_number_of_days_replaces_the_engines_own_rhythm() -> None:
    assert stale_after([day(on) for on in read_on(5, 5, 5)], 45) == 45


@pytest.mark.parametrize(("on", "stale"), [("2026-05-20", False), ("2026-05-21", False), ("2026-05-22", True)])
def test_a_reading_exactly_as_old_as_that_is_not_stale_yet(on: str, stale: bool) -> None:
    assert (line(OIL, on=on, hours=FIVE_A_DAY).estimated is not None) is stale


@pytest.mark.parametrize(("days", "stale"), [(20, True), (21, False)])
def test_the_set_number_of_days_decides_where_there_is_one(days: int, stale: bool) -> None:
    due = line(OIL, on="2026-05-22", hours=FIVE_A_DAY, stale_days=days)
    assert (due.estimated is not None) is stale


def test_each_meter_is_stale_by_its_own_rhythm() -> None:
    weekly = [(on, 10 * n) for n, on in enumerate(read_on(*[7] * 8))]
    monthly = [(on, 900 * n) for n, on in enumerate(read_on(28, 28, 28)[:3])]
    found = outlooks(facts(OIL, on="2026-03-14", hours=weekly, km=monthly), is_future=False)
    assert [look.likely_now is not None for look in found.values()] == [True, False]


# State by record, estimate beside it


@pytest.mark.parametrize(
    ("on", "state", "estimated"),
    [
        ("2026-05-22", State.CLEAR, State.CLEAR),
        ("2026-05-27", State.CLEAR, State.NEAR),
        ("2026-06-15", State.CLEAR, State.OVERDUE),
    ],
)
def test_the_state_is_by_recorded_readings_and_the_estimate_by_the_likely_value(
    on: str, state: State, estimated: State
) -> None:
    due = line(replace(OIL, origin=last_done("2026-01-01", hours=1000)), on=on, hours=FIVE_A_DAY)
    assert (due.state, due.estimated) == (state, estimated)
    assert due.triggers[0].now == 1100


def test_the_likely_value_on_a_day_is_the_figure_whose_likely_date_is_that_day() -> None:
    look = outlooks(facts(OIL, on="2026-06-15", hours=FIVE_A_DAY), is_future=False)[Kind.HOURS]
    assert look.likely_now is not None
    assert look.reach(look.likely_now).likely == day("2026-06-15")


def test_a_day_to_come_carries_the_estimate_though_the_reading_is_not_stale() -> None:
    due = line(OIL, on="2026-05-15", hours=FIVE_A_DAY, is_future=True)
    assert (due.state, due.estimated) == (State.CLEAR, State.OVERDUE)


def test_on_a_day_to_come_the_calendar_moves_on() -> None:
    task = a_task(every("6mo"), origin=last_done("2026-01-10"))
    assert [line(task, on=on, is_future=True).state for on in ("2026-06-01", "2026-07-11")] == [
        State.CLEAR,
        State.OVERDUE,
    ]
    assert line(task, on="2026-07-11", is_future=True).estimated is None


def test_readings_after_the_day_asked_about_are_ignored() -> None:
    assert line(OIL, on="2026-01-12", hours=FIVE_A_DAY).triggers[0].now == 550


def no_estimate(due: DueLine) -> bool:
    return due.estimated is None and due.triggers[0].likely_now is None


def test_without_a_forecast_there_is_no_estimate() -> None:
    due = line(OIL, on="2026-08-01", hours=[("2026-01-01", 500), ("2026-02-01", 700)])
    assert no_estimate(due)
    assert due.state is State.CLEAR


def test_a_laid_up_engine_has_no_estimate_however_old_its_reading() -> None:
    laid_up = an_item(spells=(StatusSpell(Status.LAID_UP, day("2026-05-02")),))
    assert no_estimate(line(OIL, on="2026-09-01", hours=FIVE_A_DAY, item=laid_up))
    assert not no_estimate(line(OIL, on="2026-09-01", hours=FIVE_A_DAY))


def test_recorded_only_leaves_the_estimate_out() -> None:
    assert no_estimate(line(OIL, on="2026-09-01", hours=FIVE_A_DAY, is_future=True, recorded_only=True))


# Estimates of lines with several triggers

BOTH = a_task(every("250h"), every("6mo"), origin=last_done("2026-04-01", hours=1000))


@pytest.mark.parametrize(("combined", "estimated"), [(Combine.FIRST, State.OVERDUE), (Combine.LAST, State.CLEAR)])
def test_the_estimate_combines_like_the_state_with_the_calendar_as_it_is(combined: Combine, estimated: State) -> None:
    task = replace(BOTH, versions=(replace(BOTH.versions[0], combine=combined),))
    due = line(task, on="2026-06-20", hours=FIVE_A_DAY)
    assert (due.state, due.estimated) == (State.CLEAR, estimated)


@pytest.mark.parametrize(("on", "estimated"), [("2026-05-25", State.CLEAR), ("2026-07-01", State.NEAR)])
def test_the_bound_of_a_waiting_line_counts_in_its_estimate(on: str, estimated: State) -> None:
    waits = replace(BOTH.versions[0], combine=Combine.LAST, not_later_than=Span(100, "d"))
    assert line(replace(BOTH, versions=(waits,)), on=on, hours=FIVE_A_DAY).estimated is estimated


def test_an_unset_trigger_stays_unset_in_the_estimate() -> None:
    task = replace(BOTH, origin=last_done(hours=1000))
    due = line(task, on="2026-05-28", hours=FIVE_A_DAY)
    assert (due.state, due.estimated) == (State.UNSET, State.NEAR)
    later = replace(BOTH, origin=last_done(hours=1100))
    assert line(later, on="2026-05-28", hours=FIVE_A_DAY).estimated is State.UNSET
