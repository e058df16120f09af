"""States of a trigger from what remains, warnings ahead, and lines of engines that are not in service."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.engines import DutyFactor, Item, Status, StatusSpell
from fleetcare.domain.lines import State
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Trigger
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.states import state_of
from tests.builders import a_task, an_item, day, days_from, every, facts, last_done, line, new_at, trigger

# r = next - now


@pytest.mark.parametrize(
    ("remaining", "state"),
    [
        ("25.1", State.CLEAR),
        ("25", State.NEAR),
        ("0.1", State.NEAR),
        ("0.0000001", State.NEAR),
        ("0", State.DUE),
        ("-10", State.DUE),
        ("-10.0000001", State.OVERDUE),
        ("-11", State.OVERDUE),
    ],
)
def test_each_state_holds_up_to_its_limit_and_is_decided_unrounded(remaining: str, state: State) -> None:
    assert state_of(Decimal(remaining), ahead=Decimal(25), grace=Decimal(10)) is state
    task = a_task(every("250h", grace=10), origin=new_at(0))
    assert line(task, on="2026-05-01", hours=str(250 - Decimal(remaining))).state is state


@pytest.mark.parametrize(("now", "state"), [("249.9", State.NEAR), ("250", State.DUE), ("250.1", State.OVERDUE)])
def test_without_a_stated_grace_there_is_none(now: str, state: State) -> None:
    assert line(a_task(every("250h"), origin=new_at(0)), on="2026-05-01", hours=now).state is state


@pytest.mark.parametrize(
    ("on", "state"),
    [
        ("2026-06-21", State.CLEAR),
        ("2026-06-22", State.NEAR),
        ("2026-07-09", State.NEAR),
        ("2026-07-10", State.DUE),
        ("2026-07-15", State.DUE),
        ("2026-07-16", State.OVERDUE),
    ],
)
def test_a_calendar_day_is_the_last_permitted_one_and_its_grace_comes_after(on: str, state: State) -> None:
    assert line(a_task(every("6mo", grace=5), origin=last_done("2026-01-10")), on=on).state is state


def test_a_calendar_line_without_grace_is_overdue_the_day_after() -> None:
    task = a_task(every("6mo"), origin=last_done("2026-01-10"))
    assert [line(task, on=on).state for on in ("2026-07-10", "2026-07-11")] == [State.DUE, State.OVERDUE]


# Ahead


def ahead_of(interval: Trigger, *, as_new: bool = False, factor: str = "1") -> Decimal:
    """How far ahead a task warns."""
    duty = DutyFactor(interval.kind, Decimal(factor), day("2026-01-01"), "dust")
    origin = replace(new_at(0, day("2026-01-01")), as_new=as_new)
    found = trigger(a_task(interval, origin=origin), on="2026-01-02", hours=1, item=an_item(factors=(duty,)))
    assert found.next is not None
    return found.next.ahead


@pytest.mark.parametrize(
    ("interval", "as_new", "ahead"),
    [
        (every("250h"), False, "25"),
        (every("0.5h"), False, "0.05"),
        (every("250h", first=50), True, "5"),
        (every("250h", first=50), False, "25"),
        (every("250h", ahead=40), False, "40"),
        (every("250h", first=50, ahead=40), True, "40"),
        (every("250h", ahead=0), False, "0"),
    ],
)
def test_a_counted_trigger_warns_a_tenth_of_what_is_owed_ahead_unless_stated(
    interval: Trigger, as_new: bool, ahead: str
) -> None:
    assert ahead_of(interval, as_new=as_new) == Decimal(ahead)


@pytest.mark.parametrize(
    ("interval", "ahead"),
    [
        ("1d", 0),
        ("2d", 1),
        ("1w", 1),
        ("19d", 1),
        ("20d", 2),
        ("1mo", 3),
        ("90d", 9),
        ("3mo", 9),
        ("6mo", 18),
        ("10mo", 30),
        ("12mo", 30),
        ("299d", 29),
        ("1y", 30),
        ("5y", 30),
    ],
)
def test_a_calendar_trigger_warns_a_tenth_ahead_in_whole_days_from_1_to_30(interval: str, ahead: int) -> None:
    assert ahead_of(every(interval)) == ahead


def test_a_calendar_trigger_warns_by_its_first_interval_before_the_first_point() -> None:
    interval = every("1y", first=Span(2, "mo"))
    assert ahead_of(interval, as_new=True) == 6
    assert ahead_of(interval) == 30


@pytest.mark.parametrize(
    ("interval", "factor", "ahead"),
    [
        (every("250h", ahead=100), "0.5", "100"),
        (every("250h", ahead=125), "0.5", "62.5"),
        (every("250h", ahead=200), "0.5", "62.5"),
        (every("100d", ahead=49), "0.5", "49"),
        (every("100d", ahead=50), "0.5", "25"),
        (every("101d", ahead=60), "0.5", "25"),
        (every("250h"), "0.5", "12.5"),
        (every("100d"), "0.5", "5"),
    ],
)
def test_a_stated_ahead_not_below_an_interval_a_duty_factor_shortened_counts_as_half_of_it(
    interval: Trigger, factor: str, ahead: str
) -> None:
    assert ahead_of(interval, factor=factor) == Decimal(ahead)


# Engines that are not in service


def with_status(status: Status) -> Item:
    return an_item(spells=(StatusSpell(status, day("2026-04-01")),))


@pytest.mark.parametrize("status", [Status.STOOD_DOWN, Status.LAID_UP])
def test_lines_of_an_engine_stood_down_or_laid_up_stay_and_carry_its_status(status: Status) -> None:
    task = a_task(every("250h"), origin=new_at(0))
    due = line(task, on="2026-05-01", hours=300, item=with_status(status))
    assert (due.state, due.status) == (State.OVERDUE, status)


def test_a_withdrawn_engine_has_no_lines_from_its_day_on() -> None:
    task = a_task(every("250h"), origin=new_at(0))
    withdrawn = an_item(spells=(StatusSpell(Status.WITHDRAWN, day("2026-05-01")),))
    assert len(item_lines(facts(task, on="2026-04-30", hours=300, item=withdrawn))) == 1
    assert item_lines(facts(task, on="2026-05-01", hours=300, item=withdrawn)) == []


def test_a_laid_up_engine_counts_what_is_really_run() -> None:
    readings = [("2026-03-01", 100), ("2026-04-20", 251)]
    task = a_task(every("250h"), origin=new_at(0))
    assert line(task, on="2026-05-01", hours=readings, item=with_status(Status.LAID_UP)).state is State.OVERDUE


def test_the_calendar_goes_on_while_an_engine_is_laid_up() -> None:
    task = a_task(every("90d"), origin=last_done("2026-02-01"))
    ends = days_from("2026-02-01", 90)
    assert trigger(task, on="2026-05-01", item=with_status(Status.LAID_UP)).point == day(ends)
    assert trigger(task, on="2026-05-01", item=with_status(Status.LAID_UP)).kind is Kind.CALENDAR
