"""A due line as one flat row: what each column holds, in the meter's own unit."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.engines import Status, StatusSpell
from fleetcare.domain.meters import Counter, Meter, MeterFit, Reading
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Call, Combine, Task
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.row import COLUMNS, DueRow, due_row, unit_of
from fleetcare.rules.meters import CounterHistory, counter_history
from tests.builders import a_deferral, a_task, an_item, day, days_from, done, every, facts, last_done, new_at

ON = "2026-05-01"


def row(
    *tasks: Task, is_future: bool = False, counters: dict[Kind, CounterHistory] | None = None, **kwargs: object
) -> DueRow:
    """The row of the first task given; arguments as for `facts`."""
    known = facts(*tasks, **{"on": ON, **kwargs})  # type: ignore[arg-type]
    if counters is not None:
        known = replace(known, counters=counters)
    found = next(one for one in item_lines(known, is_future) if one.task.id == tasks[0].id)
    return due_row(found, known)


def cells(found: DueRow, *names: str) -> list[object]:
    return [getattr(found, name) for name in names]


def test_the_columns_stand_in_the_order_of_the_csv() -> None:
    expected = (
        "engine,site,task,state,trigger,last_done_on,last_done_at,next_due_at,next_due_on,remaining,unit,"
        "estimated,early_date,likely_date,late_date,deferred_until,covered_by,reason,machine,engine_status,meter_unit,"
        "next_due_dial,own_due_at,own_due_on"
    )
    assert ",".join(COLUMNS) == expected


def test_a_line_with_a_counted_and_a_calendar_trigger_fills_both_points() -> None:
    task = a_task(every("250h"), every("12mo"), origin=last_done("2026-04-20", hours=1234))
    found = row(task, hours=1250)
    assert cells(found, "engine", "site", "task", "state") == ["P-01", "North Sluice", "Oil and filter", "clear"]
    assert cells(found, "last_done_on", "last_done_at") == [day("2026-04-20"), 1234]
    assert cells(found, "next_due_at", "next_due_on", "next_due_dial") == [1484, day("2027-04-20"), 1484]
    assert cells(found, "own_due_at", "own_due_on") == [1484, day("2027-04-20")]
    assert cells(found, "trigger", "remaining", "unit", "meter_unit") == ["hours", 234, "h", "h"]
    assert cells(found, "estimated", "deferred_until", "covered_by", "reason") == ["", "", "", ""]
    assert found.engine_status == "in service"


def test_a_line_decided_by_the_calendar_says_days_and_still_shows_its_counted_point() -> None:
    task = a_task(every("250h"), every("6mo"), origin=last_done("2025-10-28", hours=1240))
    found = row(task, hours=1250)
    assert cells(found, "trigger", "remaining", "unit") == ["calendar", -3, "d"]
    assert cells(found, "next_due_at", "meter_unit", "last_done_at") == [1490, "h", 1240]


def test_a_calendar_line_has_no_counted_columns() -> None:
    found = row(a_task(every("6mo"), origin=last_done("2026-01-10")))
    assert cells(found, "next_due_at", "next_due_dial", "own_due_at", "last_done_at") == [None, None, None, None]
    assert cells(found, "next_due_on", "meter_unit") == [day("2026-07-10"), ""]


def test_of_several_counted_triggers_the_columns_are_the_deciding_ones() -> None:
    task = a_task(every("250h"), every("5000km"), every("6mo"), origin=last_done("2025-10-28", hours=1200, distance=0))
    found = row(task, hours=1210, km=4900)
    assert cells(found, "trigger", "next_due_at", "meter_unit") == ["calendar", 5000, "km"]
    waits = replace(task, versions=(replace(task.versions[0], combine=Combine.LAST, not_later_than=Span(5, "y")),))
    assert row(waits, hours=1210, km=4900).next_due_at == 1450


def test_a_start_point_is_not_a_last_done() -> None:
    found = row(a_task(every("250h"), origin=new_at(0)), hours=10)
    assert cells(found, "last_done_on", "last_done_at", "next_due_at") == [None, None, 250]
    worked = row(a_task(every("250h"), origin=new_at(0)), hours=300, done=[done("2026-04-01", hours=240)])
    assert cells(worked, "last_done_on", "last_done_at") == [day("2026-04-01"), 240]


def test_an_unset_line_says_why_and_leaves_its_figures_empty() -> None:
    found = row(a_task(every("250h")), hours=10)
    assert cells(found, "state", "trigger") == ["unset", "hours"]
    assert found.reason == "not known when it was last done; log it, or enter a last-done"
    assert cells(found, "next_due_at", "next_due_dial", "remaining", "unit") == [None, None, None, "h"]


# Units and dials


def miles(reading: int, modulus: int | None = None) -> CounterHistory:
    meter = Meter(1, Kind.DISTANCE, "mi", Decimal(modulus) if modulus else None)
    fits = (MeterFit(meter, None, Decimal(0)),)
    return counter_history(
        Counter(Kind.DISTANCE, Decimal(0), fits, (Reading(1, 1, day(ON), Decimal(reading)),)), day(ON)
    )


def test_figures_come_out_in_the_unit_of_the_meter() -> None:
    task = a_task(every("3000mi"), origin=last_done("2026-01-01", distance="1609.344"))
    found = row(task, counters={Kind.DISTANCE: miles(3990)})
    assert cells(found, "last_done_at", "next_due_at", "remaining", "unit") == [1000, 4000, 10, "mi"]


def test_the_dial_shows_what_the_meter_will_after_it_rolls_over() -> None:
    task = a_task(every("3000mi"), origin=last_done("2026-01-01", distance="14484.096"))
    found = row(task, counters={Kind.DISTANCE: miles(9500, modulus=10_000)})
    assert cells(found, "next_due_at", "next_due_dial") == [12_000, 2_000]


def test_without_a_meter_a_kind_is_said_in_its_base_unit_and_has_no_dial() -> None:
    found = row(a_task(every("3000mi"), origin=last_done(distance=0)), counters={})
    assert cells(found, "state", "unit", "meter_unit", "next_due_dial") == ["unset", "km", "km", None]
    assert unit_of(facts(on=ON), Kind.CALENDAR) == ""


def test_a_remainder_is_never_rounded() -> None:
    found = row(a_task(every("250h"), origin=last_done(hours=0)), hours="250.001")
    assert cells(found, "state", "remaining") == ["overdue", Decimal("-0.001")]


# Deferred, called for, bound


def test_the_point_in_force_and_the_own_one_stand_apart_while_deferred() -> None:
    both = a_task(
        every("250h"),
        every("6mo"),
        origin=last_done("2025-11-10", hours=1000),
        deferrals=(a_deferral("2026-06-01", hours=1300),),
    )
    found = row(both, hours=1260)
    assert cells(found, "next_due_at", "own_due_at", "next_due_dial") == [1300, 1250, 1300]
    assert cells(found, "next_due_on", "own_due_on") == [day("2026-06-01"), day("2026-05-10")]
    assert cells(found, "deferred_until", "reason") == ["2026-06-01 / 1300 h", "parts on order"]


def deferred_to_life(km: str) -> Task:
    origin = last_done("2026-01-01", distance="14484.096")
    until = replace(a_deferral(), until_life={Kind.DISTANCE: Decimal(km)})
    return a_task(every("3000mi"), origin=origin, deferrals=(until,))


def test_a_figure_it_is_deferred_to_is_said_as_the_meter_shows_it() -> None:
    found = row(deferred_to_life("19795.735872"), counters={Kind.DISTANCE: miles(9500, modulus=10_000)})
    assert cells(found, "next_due_at", "next_due_dial", "deferred_until") == [
        Decimal("12300.5"),
        Decimal("2300.5"),
        "2300.5 mi",
    ]


def test_a_figure_it_is_deferred_to_is_a_life_total_where_no_meter_counts() -> None:
    assert row(deferred_to_life("19800"), counters={}).deferred_until == "19800 km"


def test_a_counted_line_held_back_to_a_day_shows_that_day_until_it_has_ended() -> None:
    task = a_task(every("250h"), origin=last_done("2026-01-01", hours=1000), deferrals=(a_deferral("2026-05-20"),))
    found = row(task, hours=1260)
    assert cells(found, "next_due_at", "next_due_on", "own_due_on") == [1250, day("2026-05-20"), None]
    assert row(task, hours=1260, on="2026-05-21").next_due_on is None
    assert row(task, hours=1260, on="2026-05-21").deferred_until == "2026-05-20"


def test_a_waiting_line_shows_the_earlier_of_its_day_and_its_bound() -> None:
    task = a_task(
        every("250h"),
        every("3y"),
        combine=Combine.LAST,
        not_later_than=Span(5, "y"),
        origin=last_done("2026-01-10", hours=0),
    )
    assert row(task, hours=10).next_due_on == day("2029-01-10")
    sooner = replace(task, versions=(replace(task.versions[0], not_later_than=Span(2, "y")),))
    assert (row(sooner, hours=10).next_due_on, row(sooner, hours=10).own_due_on) == (
        day("2028-01-10"),
        day("2029-01-10"),
    )
    bound = row(sooner, hours=10, on="2028-01-05")
    assert cells(bound, "state", "trigger", "remaining", "next_due_at") == ["near", "calendar", 5, 250]


def test_a_follow_up_shows_its_day() -> None:
    call = Call(1, day("2026-04-20"), day("2026-05-10"), "weeping gasket")
    found = row(a_task(on_condition=True, calls=(call,)))
    assert cells(found, "trigger", "next_due_on", "remaining") == ["calendar", day("2026-05-10"), 9]


# Standing of the item


def test_lines_of_a_laid_up_engine_wait_for_its_return() -> None:
    task = a_task(every("250h"), origin=new_at(0))
    spells = (StatusSpell(Status.LAID_UP, day("2026-04-01")),)
    assert row(task, hours=10, item=an_item(spells=spells)).is_before_return
    assert not row(task, hours=10).is_before_return


def test_a_machine_has_no_engine_status_and_is_its_own_machine() -> None:
    found = row(
        a_task(every("6mo"), origin=last_done("2026-01-10")), item=an_item(is_engine=False, machine="L-02", tag="L-02")
    )
    assert cells(found, "engine", "machine", "engine_status") == ["L-02", "L-02", ""]


@pytest.mark.parametrize(
    ("on", "done_at", "expected"),
    [
        ("2026-05-02", 1095, ["clear", "clear", False]),
        ("2026-06-01", 1010, ["clear", "near", False]),
        ("2026-06-10", 1010, ["clear", "overdue", True]),
        ("2026-05-02", 800, ["overdue", "overdue", False]),
    ],
)
def test_a_line_is_probably_due_where_only_the_estimate_says_so(on: str, done_at: int, expected: list[object]) -> None:
    readings = [(days_from("2026-01-01", 10 * n), 500 + 50 * n) for n in range(13)]
    task = a_task(every("250h"), origin=last_done("2026-01-01", hours=done_at))
    found = row(task, hours=readings, on=on, is_future=True)
    assert cells(found, "state", "estimated", "is_probably_due") == expected


def test_the_three_dates_are_the_lines() -> None:
    readings = [(days_from("2026-01-01", 10 * n), 500 + 50 * n) for n in range(13)]
    found = row(a_task(every("250h"), origin=last_done("2026-01-01", hours=1000)), hours=readings)
    assert found.likely_date == day("2026-05-31")
    assert found.early_date is not None
    assert found.late_date is not None
    assert found.early_date < found.likely_date < found.late_date
