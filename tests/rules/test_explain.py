"""A line's working, in words somebody can check with a pencil."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.engines import DutyFactor, Status, StatusSpell
from fleetcare.domain.lines import DueLine
from fleetcare.domain.log import Done
from fleetcare.domain.meters import Counter, LifeFigure, Meter, MeterFit, Reading
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Anchor, CalendarTrigger, Call, Combine, Deferral, Period, Task
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.explain import explain, say_amount, say_left, say_past, say_trigger
from fleetcare.rules.meters import counter_history
from tests.builders import a_task, an_item, day, done, every, facts, last_done, new_at


def working(given: ItemFacts) -> list[tuple[str, str]]:
    """The working of the first line of some facts."""
    return explain(item_lines(given)[0], given)


def said(given: ItemFacts, label: str) -> str:
    """What the working says under one label, "" where it says nothing."""
    return next((text for name, text in working(given) if name == label), "")


def past_of(given: ItemFacts) -> list[str]:
    """What is said of each past work of the first line."""
    line: DueLine = item_lines(given)[0]
    return [say_past(work, given) for work in line.past]


def test_the_working_begins_with_the_state_and_what_is_left_by_the_deciding_trigger() -> None:
    given = facts(a_task(every("250h"), origin=last_done("2026-01-01", hours=1000)), on="2026-05-01", hours=1262.5)
    assert said(given, "state") == "overdue; by hours, 12.5 h over"


def test_each_trigger_says_what_it_counts_from_its_sum_and_what_is_left_today() -> None:
    task = a_task(every("250h", ahead=25, grace=5), origin=last_done("2026-01-01", hours=1000))
    rows = working(facts(task, on="2026-05-01", hours=1230))
    place = [label for label, _ in rows].index("hours")
    assert rows[place][1] == "every 250 h, from 1000 h: due at 1250 h, 1250 h on the dial"
    assert rows[place + 1] == (
        "",
        "now 1230 h, read 2026-05-01: 20 h left; near from 25 h ahead, 5 h grace: near",
    )


def test_a_calendar_trigger_says_its_days() -> None:
    rows = working(facts(a_task(every("12mo"), origin=last_done("2026-01-01")), on="2026-05-01"))
    assert ("calendar", "every 12 mo, from 2026-01-01: due 2027-01-01") in rows
    assert ("", "today 2026-05-01: 245 d left; near from 30 d ahead, 0 d grace: clear") in rows


def test_an_unset_line_says_what_to_enter() -> None:
    assert said(facts(a_task(every("250h")), on="2026-05-01", hours=10), "state").startswith("unset; not known when")
    assert said(facts(a_task(every("250h")), on="2026-05-01", hours=10), "hours").startswith("every 250 h: unset, ")


@pytest.mark.parametrize(
    ("task", "text"),
    [
        (a_task(every("250h"), origin=new_at(0)), "never; counts from the start on 2024-01-10"),
        (a_task(every("250h"), origin=last_done(hours=5)), "not known"),
        (a_task(every("250h"), origin=last_done("2026-01-01", hours=5)), "2026-01-01 (before the log began)"),
    ],
)
def test_what_it_counts_from_without_an_entry_is_said(task: Task, text: str) -> None:
    assert said(facts(task, on="2026-05-01", hours=10), "last done") == text


def test_the_entry_it_counts_from_is_named() -> None:
    given = facts(a_task(every("250h")), on="2026-05-01", hours=10, done=[done("2026-04-01", 7, hours=5)])
    assert said(given, "last done") == "2026-04-01 (entry 7)"


def test_an_overrun_of_the_work_it_counts_from_is_said_on_the_line() -> None:
    task = a_task(every("250h", grace=10), origin=last_done("2025-01-01", hours=1000))
    given = facts(task, on="2026-05-01", hours=1300, done=[done("2026-04-20", hours=1261)])
    assert said(given, "last done") == "2026-04-20 (entry 1): done 11 h over, 10 h allowed"


def test_a_point_below_the_first_figure_of_the_meter_now_counting_is_not_said_on_the_dial() -> None:
    swap = day("2026-03-01")
    fits = (
        MeterFit(Meter(1, Kind.HOURS, "h"), None, Decimal(0), swap, Decimal(900)),
        MeterFit(Meter(2, Kind.HOURS, "h"), swap, Decimal(0)),
    )
    counter = Counter(Kind.HOURS, Decimal(0), fits, (Reading(1, 2, swap, Decimal(5)),))
    given = facts(a_task(every("250h"), origin=last_done("2026-01-01", hours=600)), on="2026-05-01")
    given = replace(given, counters={Kind.HOURS: counter_history(counter, given.on)})
    assert said(given, "hours") == "every 250 h, from 600 h: due at 850 h"


def test_a_fresh_reading_needs_no_estimate_beside_its_forecast() -> None:
    readings = [(f"2026-0{month}-01", 100 * month) for month in (1, 2, 3, 4)]
    given = facts(a_task(every("250h"), origin=last_done("2026-01-01", hours=300)), on="2026-04-02", hours=readings)
    assert [text.partition(" ")[0] for label, text in working(given) if not label] == ["now", "reached"]
    assert all("likely" not in text for _, text in working(given))


def test_several_triggers_say_how_they_combine() -> None:
    origin = last_done("2026-01-01", hours=0)
    first = a_task(every("250h"), every("12mo"), origin=origin)
    last = a_task(every("250h"), every("12mo"), combine=Combine.LAST, not_later_than=Span(5, "y"), origin=origin)
    assert said(facts(first, on="2026-05-01", hours=10), "combined") == "due by whichever interval ends first"
    assert said(facts(last, on="2026-05-01", hours=10), "combined") == "due only when every interval has ended"
    assert said(facts(last, on="2026-05-01", hours=10), "not later than") == "5 y from last done = 2031-01-01"


def test_a_grid_names_the_multiples_skipped_after_the_one_served_late() -> None:
    task = a_task(every("250h"), anchor=Anchor.ON_GRID, origin=new_at(0))
    given = facts(
        task, on="2026-05-01", hours=800, done=[done("2026-01-01", 1, hours=240), done("2026-04-01", 2, hours=790)]
    )
    assert said(given, "hours").endswith("on a fixed grid: the next multiple after the work; skipped 750 h")


def test_a_calendar_grid_names_the_days_it_skipped() -> None:
    task = a_task(every("1mo"), anchor=Anchor.ON_GRID, origin=last_done("2026-01-10"))
    given = facts(task, on="2026-05-01", done=[done("2026-04-12")])
    assert said(given, "calendar").endswith("skipped 2026-03-10, 2026-04-10")


@pytest.mark.parametrize(("at", "missed"), [("1215", "1 whole interval missed"), ("1330", "2 whole intervals missed")])
def test_from_due_counts_the_whole_intervals_missed(at: str, missed: str) -> None:
    task = a_task(every("100h"), anchor=Anchor.FROM_DUE, origin=last_done("2026-01-01", hours=1000))
    given = facts(task, on="2026-05-01", hours=at, done=[done("2026-04-01", hours=at)])
    assert said(given, "hours").endswith(missed)


def test_a_duty_factor_says_what_it_makes_of_the_interval() -> None:
    item = an_item(factors=(DutyFactor(Kind.HOURS, Decimal("0.8"), day("2024-01-10"), "dust"),))
    task = a_task(every("250h"), origin=last_done("2026-01-01", hours=0))
    assert "duty factor 0.8 makes the interval 200 h" in said(facts(task, on="2026-05-01", hours=1, item=item), "hours")


def test_a_calendar_duty_factor_says_the_span_it_makes() -> None:
    item = an_item(factors=(DutyFactor(Kind.CALENDAR, Decimal("0.5"), day("2024-01-10"), "salt"),))
    task = a_task(every("12mo"), origin=last_done("2026-01-01"))
    assert "duty factor 0.5 makes the interval 6 mo" in said(facts(task, on="2026-05-01", item=item), "calendar")


def test_a_window_says_its_nominal_and_first_day() -> None:
    task = a_task(CalendarTrigger(Span(12, "mo"), window_days=10), origin=last_done("2026-01-01"))
    assert said(facts(task, on="2026-05-01"), "calendar") == (
        "every 12 mo, within 10 d either side, from 2026-01-01: due 2027-01-11"
        " (nominal 2027-01-01, window opens 2026-12-22)"
    )


def test_laid_up_days_that_were_counted_on_are_said() -> None:
    spells = (StatusSpell(Status.LAID_UP, day("2026-02-01")), StatusSpell(Status.IN_SERVICE, day("2026-03-01")))
    task = a_task(every("12mo"), pause_while_laid_up=True, origin=last_done("2026-01-01"))
    assert said(facts(task, on="2026-05-01", item=an_item(spells=spells)), "calendar").endswith(
        "28 laid-up d counted on"
    )


def test_a_deferral_says_until_when_by_whom_and_why() -> None:
    deferral = Deferral(1, day("2026-04-28"), None, "parts on order", "Fenn", until_on=day("2026-06-01"))
    task = a_task(every("4mo"), origin=last_done("2026-01-01"), deferrals=(deferral,))
    given = facts(task, on="2026-05-02")
    assert said(given, "deferred") == "until 2026-06-01 by Fenn on 2026-04-28: parts on order"


def test_an_ended_deferral_says_that_no_grace_is_left() -> None:
    deferral = Deferral(1, day("2026-04-28"), None, "parts on order", "Fenn", until_on=day("2026-05-03"))
    task = a_task(every("4mo"), origin=last_done("2026-01-01"), deferrals=(deferral,))
    assert said(facts(task, on="2026-05-04"), "deferred").endswith("parts on order; ended, no grace after it")


def test_a_call_says_why_it_was_raised() -> None:
    task = a_task(on_condition=True, calls=(Call(1, day("2026-04-30"), day("2026-05-10"), "leaking pump"),))
    assert said(facts(task, on="2026-05-01"), "raised because") == "leaking pump"
    assert said(facts(task, on="2026-05-01"), "calendar") == "raised 2026-04-30: due 2026-05-10"


def test_demands_needs_parts_labour_caution_and_source_close_the_working() -> None:
    task = a_task(
        every("12mo"),
        origin=last_done("2026-01-01"),
        law=True,
        insurer=True,
        needs_sheet="lash",
        parts=(("Gasket", Decimal(2)),),
        labour_hours=Decimal("1.5"),
        caution="Hot oil.",
        source="workshop book",
    )
    assert working(facts(task, on="2026-05-01"))[-6:] == [
        ("demand", "required by law, required by the insurer"),
        ("needs", "its lash sheet"),
        ("parts", "2 × Gasket"),
        ("labour", "1.5 h"),
        ("caution", "Hot oil."),
        ("source", "workshop book"),
    ]


def test_the_status_of_an_engine_that_is_not_in_service_is_said() -> None:
    item = an_item(spells=(StatusSpell(Status.STOOD_DOWN, day("2026-04-01")),))
    task = a_task(every("12mo"), origin=last_done("2026-01-01"))
    assert said(facts(task, on="2026-05-01", item=item), "engine") == "stood down"


def test_a_stale_meter_says_the_estimate_and_what_the_forecast_rests_on() -> None:
    readings = [(f"2025-{month:02}-01", month * 100) for month in range(1, 13)]
    task = a_task(every("250h"), origin=last_done("2025-12-01", hours=1200))
    given = facts(task, on="2026-05-01", hours=readings)
    assert said(given, "state") == "clear; by hours, 250 h left; by estimate overdue"
    assert "h by now, overdue" in " ".join(text for label, text in working(given) if not label)


def test_without_a_forecast_the_reason_is_said() -> None:
    given = facts(a_task(every("250h"), origin=new_at(0)), on="2026-05-01", hours=10)
    assert "no date: " in " ".join(text for label, text in working(given) if not label)


def test_an_interpolated_figure_is_marked() -> None:
    entry = Done(1, 1, day("2026-04-01"), {Kind.HOURS: LifeFigure(Decimal("5.5"), approximate=True)})
    given = facts(a_task(every("250h")), on="2026-05-01", hours=10, done=[entry])
    assert said(given, "hours").startswith("every 250 h, from ~5.5 h: due at 255.5 h")


@pytest.mark.parametrize(
    ("trigger", "text"),
    [
        (every("250h", first=50), "every 250 h, first after 50 h"),
        (every("12mo", first=Span(1, "mo")), "every 12 mo, first after 1 mo"),
        (CalendarTrigger(Span(12, "mo"), month_end=True), "every 12 mo, through the end of the month"),
        (CalendarTrigger(Span(1, "w"), once_each=Period.WEEK), "once each week"),
    ],
)
def test_an_interval_is_said_with_what_belongs_to_it(trigger: CalendarTrigger, text: str) -> None:
    assert say_trigger(trigger, "h") == text


@pytest.mark.parametrize(
    ("value", "text"),
    [("250", "250 h"), ("250.04", "250 h"), ("0.04", "under 0.1 h"), ("0", "0 h")],
)
def test_a_figure_is_shown_to_the_tenth_and_a_remainder_never_rounds_to_nothing(value: str, text: str) -> None:
    assert say_amount(Decimal(value), "h") == text


@pytest.mark.parametrize(
    ("value", "text"),
    [
        ("12", "12 h left"),
        ("0", "0 h left"),
        ("-0.04", "under 0.1 h over"),
        ("-3.25", "3.2 h over"),
        ("0.01", "under 0.1 h left"),
    ],
)
def test_what_is_left_or_over_is_said(value: str, text: str) -> None:
    assert say_left(Decimal(value), "h") == text


def test_past_work_says_overruns_with_what_was_allowed() -> None:
    task = a_task(every("250h", grace=10), every("12mo"), origin=last_done("2025-01-01", hours=1000))
    given = facts(task, on="2026-05-01", hours=1300, done=[done("2026-01-04", hours=1261)])
    assert past_of(given) == ["done 11 h over, 10 h allowed; done 3 d over, 0 d allowed"]


def test_past_work_in_time_says_so() -> None:
    task = a_task(every("250h"), origin=last_done("2025-01-01", hours=1000))
    assert past_of(facts(task, on="2026-05-01", hours=1300, done=[done("2026-01-04", hours=1240)])) == ["in time"]


def test_past_work_names_the_points_it_missed() -> None:
    task = a_task(every("100h"), anchor=Anchor.FROM_DUE, origin=last_done("2026-01-01", hours=1000))
    given = facts(task, on="2026-05-01", hours=1215, done=[done("2026-04-01", hours=1215)])
    assert past_of(given) == ["done 115 h over, 0 h allowed; missed 1200 h"]


def test_past_work_names_the_points_of_each_kind_in_its_own_unit() -> None:
    both = (every("100h"), every("1000km"))
    task = a_task(*both, anchor=Anchor.FROM_DUE, origin=last_done("2026-01-01", hours=1000, distance=0))
    work = done("2026-04-01", hours=1215, distance=2100)
    given = facts(task, on="2026-05-01", hours=1215, km=2100, done=[work])
    assert "missed 1200 h; missed 2000 km" in past_of(given)[0]


def test_past_work_of_a_period_says_which_it_serves_and_which_were_missed() -> None:
    monthly = CalendarTrigger(Span(1, "mo"), once_each=Period.MONTH)
    task = a_task(monthly, origin=last_done("2026-01-10"))
    given = facts(task, on="2026-05-01", done=[done("2026-03-04", 1), done("2026-03-20", 2)])
    assert past_of(given) == ["serves 2026-03; missed 2026-02-28", "its period was already served"]


def test_work_before_its_window_says_that_it_does_not_count() -> None:
    task = a_task(CalendarTrigger(Span(12, "mo"), window_days=10), origin=last_done("2025-05-01"))
    given = facts(task, on="2026-05-01", done=[done("2026-03-01")])
    assert past_of(given) == ["does not count: before its window opened on 2026-04-21"]
