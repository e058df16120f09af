"""Covering: the big job that does small ones along with it, and when a line may say so."""

from collections.abc import Sequence
from dataclasses import replace

import pytest

from fleetcare.domain.lines import State
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Call, Combine, Task, Trigger
from fleetcare.rules.due.covering import closure, find_cycle
from tests.builders import a_deferral, a_task, day, days_from, done, every, last_done, lines

# Which tasks a task covers


def test_covering_is_transitive_and_names_each_task_once_in_the_order_met() -> None:
    assert closure({1: [2, 3], 2: [4], 3: [4, 5]}, 1) == (2, 3, 4, 5)
    assert closure({1: [2]}, 3) == ()


def test_a_task_never_covers_itself() -> None:
    assert closure({1: [2], 2: [1, 3]}, 1) == (2, 3)


@pytest.mark.parametrize(
    ("covers", "way"),
    [
        ({1: [2], 2: [3]}, ()),
        ({1: [1]}, (1, 1)),
        ({1: [2], 2: [1]}, (1, 2, 1)),
        ({1: [2, 3], 2: [4], 3: [5], 5: [1]}, (1, 3, 5, 1)),
        ({1: [2, 3], 2: [4], 3: [4], 4: []}, ()),
        ({1: [2], 2: [3], 3: [2]}, ()),
    ],
)
def test_a_cycle_is_found_with_the_way_round(covers: dict[int, Sequence[int]], way: tuple[int, ...]) -> None:
    assert find_cycle(covers, 1) == way


# When a line shows it


def small(*triggers: Trigger, hours: float = 750, on: str = "2025-11-10") -> Task:
    return a_task(*triggers, name="Oil", origin=last_done(on, hours=hours))


def big(
    *triggers: Trigger, hours: float = 500, on: str = "2025-11-10", number: int = 2, covers: tuple[int, ...] = (1,)
) -> Task:
    return a_task(*triggers, number=number, name="Service", covers=covers, origin=last_done(on, hours=hours))


def covered_by(*tasks: Task, on: str = "2026-05-01", **kwargs: object) -> str:
    return lines(*tasks, on=on, **kwargs)["Oil"].covered_by  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("service_done_at", "shown"), [(499, "Service"), (500, "Service"), (510, "Service"), ("510.1", "")]
)
def test_a_line_is_covered_where_the_big_one_is_due_no_later_than_its_own_point_and_grace(
    service_done_at: float, shown: str
) -> None:
    oil = small(every("250h", grace=10))
    assert covered_by(oil, big(every("500h"), hours=service_done_at), hours=990) == shown


@pytest.mark.parametrize(("now", "shown"), [(1000, "Service"), (1010, "Service"), ("1010.1", "")])
def test_an_overdue_line_is_not_covered(now: float, shown: str) -> None:
    assert covered_by(small(every("250h", grace=10)), big(every("500h")), hours=now) == shown


def test_a_line_that_needs_a_sheet_closes_only_with_it_and_is_not_covered() -> None:
    lash = a_task(every("250h"), name="Oil", origin=last_done(hours=750), needs_sheet="lash")
    assert covered_by(lash, big(every("500h")), hours=990) == ""


def test_an_unset_line_is_not_covered_and_an_unset_one_covers_nothing() -> None:
    unset = a_task(every("250h"), name="Oil")
    assert covered_by(unset, big(every("500h")), hours=990) == ""
    assert covered_by(small(every("250h")), replace(big(every("500h")), origin=None), hours=990) == ""


@pytest.mark.parametrize(("service_on", "shown"), [("2025-11-15", "Service"), ("2025-11-16", "")])
def test_days_are_compared_where_a_day_decides_the_covered_line(service_on: str, shown: str) -> None:
    oil = small(every("6mo", grace=5))
    assert covered_by(oil, big(every("6mo"), every("500h"), on=service_on, hours=0), hours=700) == shown


TEN_A_DAY = [(days_from("2026-01-01", 10 * n), 100 * n) for n in range(13)]
"""10 h a day from 0 on, last read 1200 on 2026-05-01."""


@pytest.mark.parametrize(("service_on", "shown"), [("2025-11-11", "Service"), ("2025-11-12", "")])
def test_without_that_kind_likely_dates_are_compared(service_on: str, shown: str) -> None:
    oil = small(every("100h"), hours=1200)
    assert covered_by(oil, big(every("6mo"), on=service_on), hours=TEN_A_DAY) == shown


def test_without_that_kind_and_without_a_date_nothing_is_shown() -> None:
    assert covered_by(small(every("250h")), big(every("6mo")), hours=990) == ""
    dated = small(every("6mo"))
    assert covered_by(dated, big(every("500h")), hours=990) == ""


def test_a_big_job_that_waits_for_its_last_trigger_is_compared_by_likely_dates() -> None:
    oil = small(every("100h"), hours=1200)
    waits = a_task(
        every("100h"),
        every("6mo"),
        number=2,
        name="Service",
        covers=(1,),
        combine=Combine.LAST,
        not_later_than=Span(5, "y"),
        origin=last_done("2026-03-01", hours=1100),
    )
    assert covered_by(oil, waits, hours=TEN_A_DAY) == ""
    sooner = replace(waits, origin=last_done("2025-11-05", hours=1205 - 100))
    assert covered_by(oil, sooner, hours=TEN_A_DAY) == "Service"


# Deferrals counted


def test_the_points_in_force_are_compared() -> None:
    oil, service = small(every("250h", grace=10)), big(every("500h"))
    assert covered_by(oil, replace(service, deferrals=(a_deferral(hours=1100),)), hours=990) == ""
    put_off = replace(oil, deferrals=(a_deferral(hours=1100),))
    assert covered_by(put_off, replace(service, deferrals=(a_deferral(hours=1100),)), hours=990) == "Service"


@pytest.mark.parametrize(("service_until", "shown"), [(1100, "Service"), ("1100.1", "")])
def test_a_deferred_point_has_no_grace_to_be_covered_in(service_until: float, shown: str) -> None:
    oil = replace(small(every("250h", grace=10)), deferrals=(a_deferral(hours=1100),))
    service = replace(big(every("500h")), deferrals=(a_deferral(hours=service_until),))
    assert covered_by(oil, service, hours=990) == shown


@pytest.mark.parametrize(("service_done_at", "shown"), [(500, "Service"), (505, "")])
def test_nor_has_the_own_point_once_its_deferral_has_ended(service_done_at: int, shown: str) -> None:
    oil = replace(small(every("250h", grace=10)), deferrals=(a_deferral("2026-04-15", hours=1100),))
    assert covered_by(oil, big(every("500h"), hours=service_done_at), hours=990) == shown


def test_a_big_job_held_back_to_a_day_alone_is_compared_by_that_day() -> None:
    oil = small(every("110h"), hours=1200)
    service = big(every("500h"), hours=690)
    assert covered_by(oil, replace(service, deferrals=(a_deferral("2026-05-12"),)), hours=TEN_A_DAY) == "Service"
    assert covered_by(oil, replace(service, deferrals=(a_deferral("2026-05-13"),)), hours=TEN_A_DAY) == ""


# Windows


@pytest.mark.parametrize(
    ("service_on", "shown"),
    [("2025-10-29", ""), ("2025-10-30", "Service"), ("2025-11-20", "Service"), ("2025-11-21", "")],
)
def test_a_windowed_line_is_covered_only_by_work_inside_its_window(service_on: str, shown: str) -> None:
    oil = small(every("6mo", window_days=10))
    assert covered_by(oil, big(every("6mo"), on=service_on), on="2026-04-20") == shown


@pytest.mark.parametrize(("service_on", "shown"), [("2025-10-29", ""), ("2025-10-30", "Service")])
def test_a_window_beside_an_interval_without_a_figure_counts_all_the_same(service_on: str, shown: str) -> None:
    oil = a_task(every("250h"), every("6mo", window_days=10), name="Oil", origin=last_done("2025-11-10"))
    assert covered_by(oil, big(every("6mo"), on=service_on), on="2026-04-20", hours=10) == shown


def test_a_windowed_line_is_not_covered_by_work_nobody_can_date() -> None:
    assert covered_by(small(every("6mo", window_days=10)), big(every("500h")), hours=990) == ""


# Through other tasks


def test_a_line_is_covered_through_a_task_between() -> None:
    oil, service = small(every("250h")), big(every("500h"), covers=(3,))
    between = a_task(every("250h"), number=3, name="Filters", covers=(1,), origin=last_done(hours=2000))
    assert covered_by(oil, between, service, hours=990) == "Service"


def test_covering_passes_through_a_task_that_has_no_line_itself() -> None:
    oil, service = small(every("250h")), big(every("500h"), covers=(3,))
    called = a_task(number=3, name="Injectors", covers=(1,), on_condition=True)
    assert covered_by(oil, called, service, hours=990) == "Service"


def test_of_several_big_jobs_the_likeliest_first_is_shown_and_then_the_first_by_name() -> None:
    oil = small(every("100h"), hours=1200)
    late, soon = big(every("500h"), hours=795), replace(big(every("500h"), hours=750, number=3), name="Top end")
    assert covered_by(oil, late, soon, hours=TEN_A_DAY) == "Top end"
    twin = replace(late, id=4, name="Overhaul")
    assert covered_by(oil, late, twin, hours=TEN_A_DAY) == "Overhaul"


def test_a_cover_of_a_task_without_a_line_shows_nothing() -> None:
    once = a_task(every("250h"), name="Retorque", once=True, origin=last_done("2026-01-01", hours=0))
    found = lines(once, big(every("500h")), on="2026-05-01", hours=990, done={1: [done("2026-02-01", hours=200)]})
    assert list(found) == ["Service"]


def test_a_follow_up_called_for_is_covered_like_any_other_line() -> None:
    call = Call(1, day("2026-05-01"), day("2026-05-01"), "weeping gasket")
    task = a_task(name="Oil", on_condition=True, calls=(call,))
    found = lines(task, big(every("6mo"), on="2025-11-01"), on="2026-05-01")["Oil"]
    assert (found.state, found.covered_by) == (State.DUE, "Service")


def test_a_big_job_that_counts_more_kinds_covers_by_the_one_that_decides() -> None:
    oil = small(every("250h"), every("5000km"))
    oil = replace(oil, origin=last_done("2025-11-10", hours=750, distance=0))
    service = replace(big(every("500h"), every("10000km")), origin=last_done(hours=500, distance=2000))
    found = lines(oil, service, on="2026-05-01", hours=990, km=100)["Oil"]
    assert (found.deciding.kind, found.covered_by) == (Kind.HOURS, "Service")
    found = lines(oil, service, on="2026-05-01", hours=800, km=4950)["Oil"]
    assert found.covered_by == ""
