"""A line's early, likely and late day, out of those of its triggers."""

from dataclasses import replace
from datetime import date

from fleetcare.domain.engines import Status, StatusSpell
from fleetcare.domain.lines import DueLine
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Combine, Deferral, Task
from fleetcare.rules.forecast import History
from tests.builders import a_deferral, a_task, an_item, day, days_from, every, last_done, line

FIVE_A_DAY = [(days_from("2026-01-01", 10 * n), 500 + 50 * n) for n in range(13)]
"""Last read 1100 on 2026-05-01."""
ON = "2026-05-01"


def dates(due: DueLine) -> tuple[date | None, date | None, date | None]:
    return due.early_on, due.likely_on, due.late_on


def reach(hours: int) -> tuple[date | None, date | None, date | None]:
    history = History([(day(on), float(figure)) for on, figure in FIVE_A_DAY])
    found = history.reach(hours)
    return found.early, found.likely, found.late


def test_a_counted_line_has_the_days_on_which_its_point_is_reached() -> None:
    due = line(a_task(every("500h"), origin=last_done(hours=1000)), on=ON, hours=FIVE_A_DAY)
    assert dates(due) == reach(1500)
    assert due.likely_on == day("2026-07-20")


def test_a_calendar_line_has_its_day_three_times_and_a_window_opens_early() -> None:
    assert dates(line(a_task(every("6mo"), origin=last_done("2026-01-10")), on=ON)) == (day("2026-07-10"),) * 3
    window = a_task(every("6mo", window_days=10), origin=last_done("2026-01-10"))
    assert dates(line(window, on=ON)) == (day("2026-06-30"), day("2026-07-20"), day("2026-07-20"))


def test_first_takes_the_minimum_of_each() -> None:
    task = a_task(every("500h"), every("6mo"), origin=last_done("2026-01-15", hours=1000))
    early, likely, _ = reach(1500)
    assert early is not None
    assert likely is not None
    assert early < day("2026-07-15") < likely
    assert dates(line(task, on=ON, hours=FIVE_A_DAY)) == (early, day("2026-07-15"), day("2026-07-15"))


def test_first_leaves_out_the_triggers_that_have_no_dates_and_names_them() -> None:
    task = a_task(every("500h"), every("6mo"), origin=last_done("2026-01-15", hours=1000))
    due = line(task, on=ON, hours=1100)
    assert (dates(due), due.undated) == ((day("2026-07-15"),) * 3, (Kind.HOURS,))


def test_a_line_none_of_whose_triggers_has_dates_has_none() -> None:
    due = line(a_task(every("500h"), origin=last_done(hours=1000)), on=ON, hours=1100)
    assert (dates(due), due.undated) == ((None, None, None), (Kind.HOURS,))


WAITS = a_task(
    every("500h"),
    every("6mo"),
    combine=Combine.LAST,
    not_later_than=Span(5, "y"),
    origin=last_done("2026-01-15", hours=1000),
)


def test_last_takes_the_maximum_of_each() -> None:
    _, likely, late = reach(1500)
    assert dates(line(WAITS, on=ON, hours=FIVE_A_DAY)) == (day("2026-07-15"), likely, late)


def test_last_has_no_dates_where_any_trigger_has_none_even_though_its_bound_is_a_day() -> None:
    due = line(WAITS, on=ON, hours=1100)
    assert (dates(due), due.not_later_than) == ((None, None, None), day("2031-01-15"))
    assert due.undated == (Kind.HOURS,)


def test_a_trigger_already_reached_does_not_keep_a_last_line_from_its_dates() -> None:
    task = replace(WAITS, origin=last_done("2026-01-15", hours=600))
    assert dates(line(task, on=ON, hours=FIVE_A_DAY)) == (day("2026-07-15"),) * 3


def test_a_last_line_is_called_for_by_its_bound_at_the_latest() -> None:
    bound = replace(WAITS, versions=(replace(WAITS.versions[0], not_later_than=Span(177, "d")),))
    due = line(bound, on=ON, hours=FIVE_A_DAY)
    assert due.not_later_than == day("2026-07-11")
    assert dates(due) == (day("2026-07-11"),) * 3


def test_an_open_late_day_is_later_than_all() -> None:
    rare = [("2025-11-01", 0), ("2025-12-01", 9), ("2026-04-01", 10), ("2026-05-01", 10)]
    task = a_task(every("40h"), every("10y"), origin=last_done("2025-11-01", hours=0))
    first = line(task, on=ON, hours=rare)
    assert first.triggers[0].forecast is not None
    assert first.triggers[0].forecast.late is None
    assert first.late_on == day("2035-11-01")
    last = replace(task, versions=(replace(task.versions[0], combine=Combine.LAST),))
    assert line(last, on=ON, hours=rare).late_on is None


def test_a_laid_up_engine_is_not_forecast_by_its_meters_but_its_calendar_goes_on() -> None:
    laid_up = an_item(spells=(StatusSpell(Status.LAID_UP, day("2026-04-01")),))
    task = a_task(every("500h"), every("6mo"), origin=last_done("2026-01-15", hours=1000))
    due = line(task, on=ON, hours=FIVE_A_DAY, item=laid_up)
    assert dates(due) == (day("2026-07-15"),) * 3
    assert due.triggers[0].forecast is not None
    assert "laid up" in (due.triggers[0].forecast.reason or "")


def test_recorded_only_leaves_the_forecasts_of_counted_triggers_out() -> None:
    task = a_task(every("500h"), every("6mo"), origin=last_done("2026-01-15", hours=1000))
    due = line(task, on=ON, hours=FIVE_A_DAY, recorded_only=True)
    assert (dates(due), due.undated) == ((day("2026-07-15"),) * 3, (Kind.HOURS,))


# Deferred


def oil(deferral: Deferral, done_at: int = 750) -> Task:
    return a_task(every("250h"), origin=last_done("2026-01-01", hours=done_at), deferrals=(deferral,))


def test_a_counted_trigger_held_back_to_a_day_calls_on_that_day_where_its_point_is_past() -> None:
    due = line(oil(a_deferral("2026-06-01")), on=ON, hours=FIVE_A_DAY)
    assert dates(due) == (day("2026-06-01"),) * 3


def test_without_a_forecast_the_day_it_is_deferred_to_is_all_that_is_known() -> None:
    due = line(oil(a_deferral("2026-06-01", cap=1180)), on=ON, hours=1005)
    assert dates(due) == (day("2026-06-01"),) * 3


def test_with_a_cap_it_calls_on_whichever_comes_first() -> None:
    free = line(oil(a_deferral(hours=1180)), on=ON, hours=FIVE_A_DAY)
    assert free.likely_on == day("2026-05-17")
    soon = line(oil(a_deferral("2026-05-10", cap=1180)), on=ON, hours=FIVE_A_DAY)
    assert soon.likely_on == day("2026-05-10")
    assert (soon.early_on or date.max) <= day("2026-05-10")
    assert soon.late_on == day("2026-05-10")
    late = line(oil(a_deferral("2026-12-01", cap=1180)), on=ON, hours=FIVE_A_DAY)
    assert dates(late) == dates(free)


def test_a_point_still_ahead_of_a_day_without_a_cap_calls_when_it_is_reached() -> None:
    task = oil(a_deferral("2026-05-10"), done_at=1000)
    due = line(task, on=ON, hours=FIVE_A_DAY)
    assert due.likely_on == day("2026-05-31")
    later = oil(a_deferral("2026-12-10"), done_at=1000)
    assert dates(line(later, on=ON, hours=FIVE_A_DAY))[:2] == (day("2026-12-10"), day("2026-12-10"))


def test_an_open_late_day_stays_open_where_the_point_is_still_ahead() -> None:
    rare = [("2025-11-01", 0), ("2025-12-01", 9), ("2026-04-01", 10), ("2026-05-01", 10)]
    task = a_task(every("40h"), origin=last_done("2025-11-01", hours=0), deferrals=(a_deferral("2026-05-10"),))
    due = line(task, on=ON, hours=rare)
    assert due.likely_on is not None
    assert due.late_on is None
    assert due.triggers[0].forecast is not None
    assert due.triggers[0].forecast.late is None
