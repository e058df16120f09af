"""The worked cases the product promises, to the day and the tenth of an hour."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.domain.lines import State
from fleetcare.domain.meters import Counter, Meter, MeterFit, Reading
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Anchor, CalendarTrigger, Deferral, Period
from fleetcare.rules.meters import counter_history
from tests.builders import a_task, day, done, every, last_done, line, new_at


@pytest.mark.parametrize(("done_at", "next_at"), [(130, 250), (240, 500), (380, 500)])
def test_work_on_a_250_hour_grid_goes_to_the_next_multiple_with_early_credit(done_at: int, next_at: int) -> None:
    task = a_task(every("250h"), anchor=Anchor.ON_GRID, origin=new_at(0))
    due = line(task, on="2026-05-01", done=[done("2026-04-01", hours=done_at)], hours=done_at)
    assert due.triggers[0].point == next_at


@pytest.mark.parametrize(
    ("done_at", "next_at", "missed"), [("1108", "1200", 0), ("1093.4", "1193.4", 0), ("1215", "1300", 1)]
)
def test_from_due_charges_an_overrun_to_the_next_interval_and_restarts_after_early_work(
    done_at: str, next_at: str, missed: int
) -> None:
    task = a_task(every("100h"), anchor=Anchor.FROM_DUE, origin=last_done("2026-01-01", hours=1000))
    due = line(task, on="2026-05-01", done=[done("2026-04-01", hours=done_at)], hours=done_at)
    assert due.triggers[0].point == Decimal(next_at)
    assert len(due.past[0].missed.get(Kind.HOURS, ())) == missed


def deferred_to(hours: int) -> Deferral:
    return Deferral(1, day("2026-04-01"), None, "parts on order", "Fenn", until_life={Kind.HOURS: Decimal(hours)})


def test_a_line_past_its_own_point_and_deferred_is_near() -> None:
    task = a_task(every("250h"), origin=last_done("2026-01-01", hours=750), deferrals=(deferred_to(1100),))
    due = line(task, on="2026-05-01", hours=1005)
    assert due.state is State.NEAR
    assert due.triggers[0].point == Decimal(1100)
    assert due.triggers[0].own == Decimal(1000)


def test_covered_work_ends_the_deferral_and_counts_from_its_own_figure() -> None:
    task = a_task(every("250h"), origin=last_done("2026-01-01", hours=750), deferrals=(deferred_to(1100),))
    due = line(task, on="2026-05-01", done=[done("2026-04-20", hours=1040)], hours=1050)
    assert due.triggers[0].point == Decimal(1290)
    assert due.deferral is None


def test_a_replaced_meter_carries_the_life_total_and_the_next_point_shows_on_the_new_dial() -> None:
    old, new = Meter(1, Kind.HOURS, "h"), Meter(2, Kind.HOURS, "h")
    swap = day("2026-03-01")
    fits = (
        MeterFit(old, None, Decimal(0), swap, Decimal(4980), Decimal(150)),
        MeterFit(new, swap, Decimal(0)),
    )
    readings = (Reading(1, 1, day("2026-02-01"), Decimal(4900)), Reading(2, 2, swap, Decimal(0)))
    history = counter_history(Counter(Kind.HOURS, Decimal(0), fits, readings), date.max)
    assert history.readings[-1].life == 5130
    assert history.dial_of(Decimal(4900 + 250)) == 20


def test_a_march_test_deferred_and_done_in_april_serves_march() -> None:
    monthly = CalendarTrigger(Span(1, "mo"), once_each=Period.MONTH)
    deferral = Deferral(1, day("2026-03-30"), None, "pump in use", "Fenn", until_on=day("2026-04-05"))
    task = a_task(monthly, origin=last_done("2026-02-10"), deferrals=(deferral,))
    due = line(task, on="2026-04-10", done=[done("2026-04-04")])
    assert (due.past[0].served, due.triggers[0].point) == ("2026-03", day("2026-04-30"))


def test_a_weekly_task_done_on_thursday_is_next_due_on_sunday_of_the_following_week() -> None:
    weekly = CalendarTrigger(Span(1, "w"), once_each=Period.WEEK)
    due = line(a_task(weekly), on="2026-03-06", done=[done("2026-03-05")])
    assert due.triggers[0].point == day("2026-03-15")


def test_a_month_from_31_january_is_the_last_of_february_and_an_unbroken_chain_does_not_creep() -> None:
    task = a_task(every("1mo"), anchor=Anchor.FROM_DUE, origin=last_done("2026-01-31"))
    assert line(task, on="2026-02-01").triggers[0].point == day("2026-02-28")
    due = line(task, on="2026-03-01", done=[done("2026-02-28")])
    assert due.triggers[0].point == day("2026-03-31")
