"""Replay: what the open line counts from, and what each entry did to the point it had on its day."""

from dataclasses import replace
from datetime import date
from decimal import Decimal

import pytest

from fleetcare.domain.lines import State
from fleetcare.domain.log import Done
from fleetcare.domain.meters import LifeFigure
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Anchor, Combine, Origin, Task
from fleetcare.rules.due.replay import place
from tests.builders import a_task, a_version, an_item, day, done, every, last_done, line, new_at, trigger

OIL = a_task(every("250h"), origin=last_done("2026-01-01", hours=1000))


# Order of entries


def test_entries_count_in_order_of_their_days_whatever_order_they_were_typed_in() -> None:
    typed = [done("2026-04-01", entry=1, hours=1500), done("2026-02-01", entry=2, hours=1250)]
    due = line(OIL, on="2026-05-01", done=typed, hours=1550)
    assert [work.number for work in due.past] == [2, 1]
    assert due.triggers[0].point == 1750
    assert (due.last_done_on, due.last_done_number) == (day("2026-04-01"), 1)


def test_entries_of_one_day_count_by_life_total_and_then_by_number() -> None:
    late, early, same = (
        done("2026-04-01", entry=1, hours=1300),
        done("2026-04-01", entry=3, hours=1290),
        done("2026-04-01", entry=2, hours=1300),
    )
    due = line(OIL, on="2026-05-01", done=[late, early, same], hours=1310)
    assert [work.number for work in due.past] == [3, 1, 2]
    assert due.last_done_number == 2


def test_a_kind_an_entry_has_no_figure_of_stands_first_within_the_day() -> None:
    whole, bare = done("2026-04-01", entry=1, hours=10, distance=5), done("2026-04-01", entry=2, distance=900)
    assert sorted([whole, bare], key=place) == [bare, whole]


# Start points and stated last-dones


def test_work_logged_before_a_stated_last_done_is_history_and_does_not_pull_the_line_back() -> None:
    due = line(OIL, on="2026-05-01", done=[done("2025-11-01", hours=760)], hours=1100)
    assert (due.triggers[0].point, due.last_done_on) == (Decimal(1250), day("2026-01-01"))
    assert due.last_done_number is None
    assert [work.number for work in due.past] == [1]


def test_work_logged_on_the_day_of_a_stated_last_done_is_the_later_word() -> None:
    due = line(OIL, on="2026-05-01", done=[done("2026-01-01", hours=1004)], hours=1100)
    assert (due.triggers[0].point, due.last_done_number) == (Decimal(1254), 1)


@pytest.mark.parametrize(("entry_at", "next_at", "counts_from"), [(999, 1250, None), (1000, 1250, 1), (1001, 1251, 1)])
def test_a_last_done_known_by_figure_alone_takes_its_place_by_that_figure(
    entry_at: int, next_at: int, counts_from: int | None
) -> None:
    task = a_task(every("250h"), origin=last_done(hours=1000))
    due = line(task, on="2026-05-01", done=[done("2026-02-01", hours=entry_at)], hours=1100)
    assert (due.triggers[0].point, due.last_done_number) == (Decimal(next_at), counts_from)


def test_an_entry_without_the_figure_a_last_done_is_known_by_comes_after_it() -> None:
    task = a_task(every("250h"), every("12mo"), origin=last_done(hours=1000))
    due = line(task, on="2026-05-01", done=[done("2026-02-01")], hours=1100)
    assert due.triggers[1].point == day("2027-02-01")
    assert due.triggers[0].state is State.UNSET


def test_work_before_the_start_of_an_item_counted_as_new_does_not_serve_its_first_interval() -> None:
    task = a_task(every("250h", first=50), origin=new_at(1200, day("2026-01-10")))
    due = line(task, on="2026-05-01", done=[done("2026-01-05", hours=1190)], hours=1210)
    assert (due.triggers[0].point, due.last_done_on) == (Decimal(1250), None)


def test_a_last_done_later_than_the_day_asked_about_is_not_known_yet() -> None:
    task = a_task(every("250h"), origin=last_done("2026-06-01", hours=1000))
    assert line(task, on="2026-05-01", hours=900).state is State.UNSET


def test_each_trigger_says_what_it_counts_from() -> None:
    task = a_task(every("250h"), every("12mo"), origin=last_done("2026-01-01", hours=1000))
    stated = line(task, on="2026-05-01", hours=1300)
    assert [t.counts_from for t in stated.triggers] == [1000, day("2026-01-01")]
    worked = line(task, on="2026-05-01", done=[done("2026-04-01", hours=1260)], hours=1300)
    assert [t.counts_from for t in worked.triggers] == [1260, day("2026-04-01")]


def test_without_a_last_done_the_first_entry_is_what_the_line_counts_from() -> None:
    task = a_task(every("250h"))
    assert line(task, on="2026-05-01", hours=900).state is State.UNSET
    assert trigger(task, on="2026-05-01", done=[done("2026-04-01", hours=880)], hours=900).point == 1130


# Back-dated and voided entries


def test_a_back_dated_entry_moves_everything_after_it() -> None:
    task = a_task(every("100h"), anchor=Anchor.FROM_DUE, origin=last_done("2026-01-01", hours=1000))
    late = done("2026-04-01", entry=1, hours=1208)
    assert trigger(task, on="2026-05-01", done=[late], hours=1210).point == 1300
    between = done("2026-03-01", entry=2, hours=1095)
    assert trigger(task, on="2026-05-01", done=[late, between], hours=1210).point == 1295


# Versions in force on their day


def edited(before: Task, on: str, **changes: object) -> Task:
    """A task whose second version is in force from a day."""
    version = replace(before.versions[0], from_on=day(on), **changes)  # type: ignore[arg-type]
    return replace(before, versions=(before.versions[0], version))


def test_an_old_entry_is_held_against_the_interval_in_force_on_its_day() -> None:
    task = edited(OIL, "2026-04-15", triggers=(every("500h"),))
    work = done("2026-04-01", hours=1260)
    due = line(task, on="2026-05-01", done=[work], hours=1300)
    assert due.past[0].over == {Kind.HOURS: (Decimal(10), Decimal(0))}
    assert due.triggers[0].point == 1760


def test_the_open_line_takes_the_interval_in_force_on_the_day_asked_about() -> None:
    task = edited(OIL, "2026-04-15", triggers=(every("500h"),))
    assert trigger(task, on="2026-04-14", hours=1010).point == 1250
    assert trigger(task, on="2026-04-15", hours=1010).point == 1500


def test_a_kind_added_by_an_edit_counts_from_the_last_entry_that_knows_it() -> None:
    task = edited(OIL, "2026-04-15", triggers=(every("250h"), every("5000km")), anchor=Anchor.FROM_DUE)
    due = line(task, on="2026-05-01", done=[done("2026-04-01", hours=1200, distance=8000)], hours=1250, km=8100)
    assert [t.point for t in due.triggers] == [1450, 13000]


# Deferrals stay out; figures that are not exact


def test_a_figure_between_readings_makes_the_point_approximate() -> None:
    work = Done(1, 1, day("2026-04-01"), {Kind.HOURS: LifeFigure(Decimal("1203.5"), approximate=True)})
    due = line(OIL, on="2026-05-01", done=[work], hours=1250)
    assert (due.triggers[0].approximate, due.triggers[0].point) == (True, Decimal("1453.5"))
    assert not trigger(OIL, on="2026-05-01", done=[done("2026-04-01", hours=1200)], hours=1250).approximate


# Overruns


@pytest.mark.parametrize(
    ("done_at", "over"),
    [
        ("1249.9", {}),
        ("1250", {}),
        ("1250.1", {Kind.HOURS: (Decimal("0.1"), Decimal(10))}),
        ("1261", {Kind.HOURS: (Decimal(11), Decimal(10))}),
    ],
)
def test_work_past_its_own_point_is_over_by_the_difference_with_the_grace_it_had(
    done_at: str, over: dict[Kind, tuple[Decimal, Decimal]]
) -> None:
    task = a_task(every("250h", grace=10), origin=last_done("2026-01-01", hours=1000))
    assert line(task, on="2026-05-01", done=[done("2026-04-01", hours=done_at)], hours=1300).past[0].over == over


def test_each_kind_done_past_its_point_is_named_and_one_without_a_figure_is_not() -> None:
    task = a_task(every("250h"), every("3mo"), origin=last_done("2026-01-01", hours=1000))
    assert line(task, on="2026-05-01", done=[done("2026-04-11", hours=1255)], hours=1300).past[0].over == {
        Kind.HOURS: (Decimal(5), Decimal(0)),
        Kind.CALENDAR: (Decimal(10), Decimal(0)),
    }
    assert line(task, on="2026-05-01", done=[done("2026-04-11")], hours=1300).past[0].over == {
        Kind.CALENDAR: (Decimal(10), Decimal(0))
    }


LAST = a_task(
    every("250h"),
    every("3mo"),
    combine=Combine.LAST,
    not_later_than=Span(1, "y"),
    origin=last_done("2026-01-01", hours=1000),
)


@pytest.mark.parametrize(
    ("on", "at", "over"),
    [
        ("2026-03-01", 1600, {}),
        ("2026-05-01", 1100, {}),
        ("2026-04-04", 1260, {Kind.HOURS: 10, Kind.CALENDAR: 3}),
        ("2027-01-01", 1100, {}),
        ("2027-01-03", 1100, {Kind.CALENDAR: 2}),
    ],
)
def test_work_that_waits_for_its_last_interval_is_over_only_past_all_of_them_or_past_its_bound(
    on: str, at: int, over: dict[Kind, int]
) -> None:
    found = line(LAST, on="2027-05-01", done=[done(on, hours=at)], hours=1700).past[0].over
    assert {kind: by for kind, (by, _) in found.items()} == over


def test_work_that_counts_from_a_figure_alone_has_no_bound_to_be_past_of() -> None:
    task = replace(LAST, origin=Origin(as_new=False, on=None, life={Kind.HOURS: Decimal(1000)}))
    assert line(task, on="2030-05-01", done=[done("2030-01-01", hours=1100)], hours=1200).past[0].over == {}


# As of a day


def test_a_removed_task_has_no_line_from_the_day_of_its_removal() -> None:
    task = replace(OIL, removed_on=date(2026, 5, 1))
    assert line(task, on="2026-04-30", hours=1000).state is State.CLEAR
    with pytest.raises(KeyError):
        line(task, on="2026-05-01", hours=1000)


def test_a_version_in_force_from_a_later_day_does_not_count_yet() -> None:
    task = replace(OIL, versions=(*OIL.versions, a_version(every("100h"), on_condition=False)))
    later = replace(task.versions[1], from_on=day("2026-06-01"))
    assert trigger(replace(task, versions=(task.versions[0], later)), on="2026-05-01", hours=1010).point == 1250


def test_a_start_point_without_a_figure_of_a_kind_leaves_that_kind_unset() -> None:
    task = a_task(every("250h"), every("5000km"), origin=new_at(0))
    due = line(task, on="2026-05-01", hours=10, km=100, item=an_item())
    assert [t.state for t in due.triggers] == [State.CLEAR, State.UNSET]
    assert due.state is State.UNSET
    assert "enter it as a last-done" in due.reason
