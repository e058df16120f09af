"""What the next point of a counted trigger is counted from: start, work done, own due point, or a grid."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.lines import NextPoint, State
from fleetcare.domain.quantities import COUNTED, Kind
from fleetcare.domain.schedules import Anchor, CountedTrigger, Task
from tests.builders import a_task, an_item, done, every, last_done, line, new_at, trigger

ON = "2026-05-01"


def next_point(task: Task, *done_at: float | str, start: float | None = None, now: float = 0) -> NextPoint:
    """The next point after work at some figures, on days in a row; `start` is the item's start figure."""
    entries = [done(f"2026-02-{n:02}", entry=n, hours=at) for n, at in enumerate(done_at, 1)]
    start_life = {Kind.HOURS: Decimal(start)} if start is not None else {}
    found = trigger(task, on=ON, done=entries, hours=now, start_life=start_life)
    assert found.next is not None
    return found.next


# Start


@pytest.mark.parametrize("anchor", [None, Anchor.FROM_DONE, Anchor.FROM_DUE])
@pytest.mark.parametrize(
    ("start", "first", "next_at"), [(0, None, 250), (0, 50, 50), (1200, None, 1450), (1200, 50, 1250)]
)
def test_an_item_counted_as_new_owes_its_first_interval_from_its_start(
    anchor: Anchor | None, start: int, first: int | None, next_at: int
) -> None:
    trigger = every("250h", first=first) if first else every("250h")
    assert next_point(a_task(trigger, anchor=anchor, origin=new_at(start))).point == next_at


@pytest.mark.parametrize("anchor", [None, Anchor.FROM_DUE])
def test_the_first_interval_is_owed_once(anchor: Anchor | None) -> None:
    task = a_task(every("250h", first=50), anchor=anchor, origin=new_at(0))
    assert next_point(task).is_first
    after = next_point(task, 50)
    assert (after.point, after.is_first) == (Decimal(300), False)


def test_work_done_before_the_log_began_owes_no_first_interval() -> None:
    assert next_point(a_task(every("250h", first=50), origin=last_done(hours=1000))).point == 1250


@pytest.mark.parametrize("kind", COUNTED)
def test_every_counted_kind_counts_alike(kind: Kind) -> None:
    task = a_task(CountedTrigger(kind, Decimal(250), first=Decimal(50)), origin=new_at(10, kind=kind))
    due = line(task, on=ON, figures={kind: 61})
    assert (due.triggers[0].point, due.state) == (Decimal(60), State.OVERDUE)


@pytest.mark.parametrize(
    ("task", "says"),
    [
        (a_task(every("250h")), "not known when it was last done"),
        (a_task(every("250h"), origin=last_done("2026-01-01")), "the hours figure it counts from is not known"),
        (a_task(every("5000km"), origin=last_done(distance=10)), "no meter counts distance"),
        (a_task(every("6mo"), origin=last_done(hours=10)), "the day it counts from is not known"),
    ],
)
def test_without_a_start_point_a_line_is_unset_and_says_what_to_enter(task: Task, says: str) -> None:
    due = line(task, on=ON, hours=100, item=an_item(as_new=False))
    assert due.state is State.UNSET
    assert says in due.reason


def test_a_meter_that_was_never_read_leaves_the_line_unset() -> None:
    due = line(a_task(every("250h"), origin=new_at(0)), on=ON, hours=[])
    assert (due.state, due.reason) == (State.UNSET, "no hours reading yet; enter one")


def test_an_entry_without_a_figure_leaves_the_line_unset_and_names_the_entry() -> None:
    task = a_task(every("250h"), origin=new_at(0))
    due = line(task, on=ON, done=[done("2026-04-01", entry=7)], hours=100)
    assert (due.state, due.reason) == (State.UNSET, "entry 7 has no hours figure; correct it with what the dial showed")


# From done


@pytest.mark.parametrize("done_at", ["240", "250", "250.1", "900"])
def test_from_done_counts_from_the_work_whether_early_or_late(done_at: str) -> None:
    found = next_point(a_task(every("250h"), origin=new_at(0)), done_at)
    assert (found.point, found.passed) == (Decimal(done_at) + 250, ())


# From due


@pytest.mark.parametrize(
    ("done_at", "next_at", "missed"),
    [
        ("1050", "1150", []),
        ("1099.9", "1199.9", []),
        ("1100", "1200", []),
        ("1100.1", "1200", []),
        ("1199.9", "1200", []),
        ("1200", "1300", ["1200"]),
        ("1200.1", "1300", ["1200"]),
        ("1399.9", "1400", ["1200", "1300"]),
        ("1400", "1500", ["1200", "1300", "1400"]),
    ],
)
def test_from_due_is_the_first_whole_interval_after_the_work_and_counts_those_missed(
    done_at: str, next_at: str, missed: list[str]
) -> None:
    task = a_task(every("100h"), anchor=Anchor.FROM_DUE, origin=last_done(hours=1000))
    found = next_point(task, done_at)
    assert (found.point, found.passed) == (Decimal(next_at), tuple(Decimal(point) for point in missed))
    due = line(task, on=ON, done=[done("2026-02-01", hours=done_at)], hours=1500)
    assert due.past[0].missed == ({Kind.HOURS: found.passed} if missed else {})


def test_from_due_charges_overrun_after_overrun_to_one_row_of_points() -> None:
    task = a_task(every("100h"), anchor=Anchor.FROM_DUE, origin=new_at(0))
    assert next_point(task, 108, 209, 305).point == 400
    assert next_point(task, 108, 195, 305).point == 395


def test_from_due_the_first_interval_is_the_first_due_point() -> None:
    task = a_task(every("100h", first=50), anchor=Anchor.FROM_DUE, origin=new_at(0))
    assert next_point(task, 58).point == 150
    assert next_point(task, 45).point == 145


# On the grid


def grid(*, ahead: float | None = None, first: float | None = None, origin: float | None = None) -> Task:
    given = {"ahead": ahead, "first": first, "grid_origin": origin}
    interval = every("250h", **{name: value for name, value in given.items() if value is not None})
    return a_task(interval, anchor=Anchor.ON_GRID, origin=new_at(0))


@pytest.mark.parametrize(
    ("ahead", "done_at", "next_at"),
    [
        (None, "224.9", 250),
        (None, "225", 500),
        (None, "250", 500),
        (None, "474.9", 500),
        (None, "475", 750),
        (10, "239.9", 250),
        (10, "240", 500),
        (100, "187.4", 250),
        (100, "187.5", 500),
    ],
)
def test_work_within_ahead_but_at_most_a_quarter_interval_early_serves_its_grid_point(
    ahead: float | None, done_at: str, next_at: int
) -> None:
    assert next_point(grid(ahead=ahead), done_at).point == next_at


@pytest.mark.parametrize(
    ("done_at", "next_at", "skipped"),
    [(130, 250, []), (380, 500, []), (490, 750, [500]), (510, 750, [500]), (980, 1250, [500, 750, 1000])],
)
def test_multiples_between_the_point_served_and_the_next_are_named_as_skipped(
    done_at: int, next_at: int, skipped: list[int]
) -> None:
    found = next_point(grid(), done_at)
    assert (found.point, found.passed) == (Decimal(next_at), tuple(Decimal(point) for point in skipped))


@pytest.mark.parametrize(("start", "next_at"), [(0, 250), (240, 250), (249, 250), (250, 500)])
def test_the_first_grid_point_is_the_first_multiple_after_the_start_without_early_credit(
    start: int, next_at: int
) -> None:
    task = replace(grid(origin=0), origin=new_at(start))
    assert next_point(task, start=start).point == next_at


def test_the_first_grid_point_is_the_first_interval_where_one_is_stated() -> None:
    first = grid(first=50)
    assert next_point(first).point == 50
    assert next_point(first).ahead == 5
    assert [next_point(first, at).point for at in (40, 224, 225)] == [250, 250, 500]


def test_a_last_done_before_the_log_began_is_work_and_has_early_credit() -> None:
    assert next_point(replace(grid(), origin=last_done(hours=240))).point == 500


@pytest.mark.parametrize(
    ("start", "origin", "next_at"),
    [(None, None, 250), (100, None, 350), (None, 30, 280), (100, 30, 280), (None, 1030, 280), (None, 1125, 375)],
)
def test_the_grid_begins_at_the_start_figure_unless_an_origin_is_stated(
    start: float | None, origin: float | None, next_at: int
) -> None:
    assert next_point(grid(origin=origin), 200, start=start).point == next_at


def test_work_below_the_grids_origin_goes_to_the_multiples_below_it() -> None:
    assert [next_point(grid(origin=1000), at).point for at in (10, 200, 230)] == [250, 250, 500]
