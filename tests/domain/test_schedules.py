"""Tasks and their versions."""

from datetime import date
from decimal import Decimal

from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Anchor, CalendarTrigger, CountedTrigger, Task, TaskVersion

HOURS = CountedTrigger(Kind.HOURS, Decimal(250))
KILOMETRES = CountedTrigger(Kind.DISTANCE, Decimal(20000))
YEARLY = CalendarTrigger(Span(1, "y"))


def test_a_version_tells_its_calendar_trigger_from_its_counted_ones() -> None:
    version = TaskVersion(date(2026, 1, 1), (HOURS, YEARLY, KILOMETRES))
    assert version.calendar is YEARLY
    assert version.counted == (HOURS, KILOMETRES)
    assert YEARLY.kind is Kind.CALENDAR


def test_a_version_without_a_calendar_trigger_has_none() -> None:
    assert TaskVersion(date(2026, 1, 1), (HOURS,)).calendar is None


def test_work_is_counted_from_the_last_done_unless_an_anchor_is_given() -> None:
    assert TaskVersion(date(2026, 1, 1), (HOURS,)).effective_anchor is Anchor.FROM_DONE
    assert TaskVersion(date(2026, 1, 1), (HOURS,), anchor=Anchor.ON_GRID).effective_anchor is Anchor.ON_GRID


def test_the_first_version_holds_on_every_earlier_day_and_each_later_one_from_its_own_day() -> None:
    first, second = TaskVersion(date(2026, 1, 1), (HOURS,)), TaskVersion(date(2026, 6, 1), (YEARLY,))
    task = Task(1, "Oil and filter", (first, second))
    days = (date(2020, 1, 1), date(2026, 5, 31), date(2026, 6, 1))
    assert [task.version_on(day) for day in days] == [first, first, second]
