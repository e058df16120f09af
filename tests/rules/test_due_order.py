"""The order of the due list, and what it keeps for the next so many days."""

from dataclasses import replace

import pytest

from fleetcare.domain.lines import DueLine, State
from fleetcare.rules.due.due_list import in_order, within
from tests.builders import a_deferral, a_task, an_item, day, days_from, every, last_done, line, lines

ON = "2026-05-01"


def at(now: float, tag: str = "P-01", name: str = "Oil", interval: str = "250h") -> DueLine:
    """A line done at 0, with the engine now at a figure."""
    task = a_task(every(interval), name=name, origin=last_done("2026-01-01", hours=0))
    return line(task, on=ON, hours=now, item=an_item(tag=tag))


def unset(tag: str = "P-01", name: str = "Oil") -> DueLine:
    return line(a_task(every("250h"), name=name), on=ON, hours=0, item=an_item(tag=tag))


def labels(found: list[DueLine]) -> list[str]:
    return [f"{one.item.tag} {one.task.name} {one.state}" for one in found]


def test_states_come_overdue_due_near_unset_clear() -> None:
    mixed = [at(0), unset(), at(240), at(250), at(260)]
    assert [one.state for one in in_order(mixed)] == list(State)


def test_within_a_state_the_smaller_share_of_the_interval_left_comes_first() -> None:
    # 10 h over of 250 h is 4 %, 15 h over of 500 h is 3 %
    more, less = at(260, tag="P-02"), at(515, interval="500h")
    assert in_order([less, more]) == [more, less]
    # 20 h of 250 h is 8 %, 30 h of 500 h is 6 %
    near, nearer = at(230, tag="P-01"), at(470, tag="P-02", interval="500h")
    assert in_order([near, nearer]) == [nearer, near]


def test_with_equal_shares_tags_and_then_tasks_decide() -> None:
    rows = [at(100, "P-02", "Air"), at(100, "P-01", "Oil"), at(100, "P-01", "Belts"), unset("P-02"), unset("P-01", "Z")]
    assert labels(in_order(rows)) == [
        "P-01 Z unset",
        "P-02 Oil unset",
        "P-01 Belts clear",
        "P-01 Oil clear",
        "P-02 Air clear",
    ]


def test_the_share_is_the_deciding_triggers() -> None:
    task = a_task(every("250h"), every("1y"), origin=last_done("2025-05-11", hours=0), name="Belts")
    by_day = line(task, on=ON, hours=10)
    assert (by_day.state, by_day.deciding) == (State.NEAR, by_day.triggers[1])
    assert in_order([at(240), by_day]) == [by_day, at(240)]


def test_the_share_of_a_deferred_line_is_of_the_point_in_force() -> None:
    put_off = a_task(
        every("250h"), name="Lash", origin=last_done("2026-01-01", hours=0), deferrals=(a_deferral(hours=300),)
    )
    deferred = line(put_off, on=ON, hours=255)
    assert in_order([deferred, at(240)]) == [at(240), deferred]


# The next so many days


@pytest.mark.parametrize(("days", "kept"), [(39, False), (40, True), (41, True)])
def test_a_clear_line_is_kept_where_its_early_day_is_at_most_so_many_days_away(days: int, kept: bool) -> None:
    due = line(a_task(every("10d"), origin=last_done("2026-05-31")), on="2026-05-31")
    assert due.early_on == day("2026-06-10")
    clear = replace(due, state=State.CLEAR)
    assert (within([clear], day(ON), days) == [clear]) is kept


def test_lines_that_are_overdue_due_near_or_unset_are_always_kept() -> None:
    kept = [at(260), at(250), at(240), unset()]
    assert within([*kept, at(0)], day(ON), 0) == kept


def test_a_clear_line_without_a_date_is_not_kept() -> None:
    assert within([at(0)], day(ON), 10_000) == []


def test_all_lines_of_an_item_come_with_one_look() -> None:
    tasks = [a_task(every(f"{n}00h"), number=n, name=f"Task {n}", origin=last_done(hours=0)) for n in (1, 2, 3)]
    found = lines(*tasks, on=days_from(ON, 1), hours=150)
    assert {name: one.state for name, one in found.items()} == {
        "Task 1": State.OVERDUE,
        "Task 2": State.CLEAR,
        "Task 3": State.CLEAR,
    }
