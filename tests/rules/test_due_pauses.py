"""Tasks that pause while laid up: the day moves one day for each laid-up day, until it is passed."""

from decimal import Decimal

import pytest

from fleetcare.domain.engines import Item, Status, StatusSpell
from fleetcare.domain.lines import State
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Anchor, Combine
from fleetcare.rules.due.pauses import paused_days
from tests.builders import a_task, an_item, day, done, every, last_done, line, trigger


def spells(*stretches: tuple[str, str | None]) -> tuple[StatusSpell, ...]:
    """Laid-up stretches: first day, day of return."""
    found = []
    for begins, returns in stretches:
        found.append(StatusSpell(Status.LAID_UP, day(begins)))
        if returns is not None:
            found.append(StatusSpell(Status.IN_SERVICE, day(returns)))
    return tuple(found)


def laid_up(*stretches: tuple[str, str | None]) -> Item:
    return an_item(spells=spells(*stretches))


# Due on 2026-05-10 counted from 2026-04-10, unless paused.
IMPELLER = a_task(every("1mo"), origin=last_done("2026-04-10"), pause_while_laid_up=True)


@pytest.mark.parametrize(
    ("stretches", "moved"),
    [
        ([], 0),
        ([("2026-04-20", "2026-04-25")], 5),
        ([("2026-04-20", "2026-04-21")], 1),
        ([("2026-04-20", "2026-04-20")], 0),
        ([("2026-04-20", "2026-04-25"), ("2026-05-01", "2026-05-03")], 7),
        ([("2026-03-01", "2026-03-20")], 0),
        ([("2026-03-01", "2026-04-10")], 0),
        ([("2026-03-01", "2026-04-11")], 0),
        ([("2026-03-01", "2026-04-12")], 1),
        ([("2026-04-10", "2026-04-12")], 1),
        ([("2026-05-10", "2026-05-13")], 3),
        ([("2026-05-11", "2026-05-13")], 0),
        ([("2026-05-01", "2026-05-06"), ("2026-05-15", "2026-05-18")], 8),
        ([("2026-05-01", "2026-05-06"), ("2026-05-16", "2026-05-18")], 5),
    ],
)
def test_the_day_moves_for_each_laid_up_day_after_the_work_until_it_is_passed(
    stretches: list[tuple[str, str | None]], moved: int
) -> None:
    found = paused_days(day("2026-05-10"), day("2026-04-10"), spells(*stretches), day("2026-12-31"))
    assert found == moved


@pytest.mark.parametrize(
    ("on", "point", "remaining"),
    [
        ("2026-04-19", "2026-05-10", 21),
        ("2026-04-20", "2026-05-11", 21),
        ("2026-04-24", "2026-05-15", 21),
        ("2026-04-25", "2026-05-15", 20),
        ("2026-04-26", "2026-05-15", 19),
    ],
)
def test_the_clock_stands_still_from_the_first_laid_up_day_to_the_one_before_the_return(
    on: str, point: str, remaining: int
) -> None:
    found = trigger(IMPELLER, on=on, item=laid_up(("2026-04-20", "2026-04-25")))
    assert (found.point, found.remaining) == (day(point), Decimal(remaining))


def test_an_engine_still_laid_up_moves_the_day_with_every_day() -> None:
    item = laid_up(("2026-04-20", None))
    assert {trigger(IMPELLER, on=on, item=item).remaining for on in ("2026-04-20", "2026-09-01", "2027-01-01")} == {21}


def test_a_stretch_that_lies_ahead_is_not_known_yet() -> None:
    assert trigger(IMPELLER, on="2026-04-15", item=laid_up(("2026-04-20", "2026-04-25"))).point == day("2026-05-10")


def test_a_day_laid_up_on_its_own_last_permitted_day_is_not_passed() -> None:
    due = line(IMPELLER, on="2026-05-10", item=laid_up(("2026-05-10", None)))
    assert (due.triggers[0].point, due.state) == (day("2026-05-11"), State.NEAR)


def test_a_line_already_overdue_stays_so_while_laid_up() -> None:
    due = line(IMPELLER, on="2026-06-01", item=laid_up(("2026-05-11", None)))
    assert (due.triggers[0].point, due.state) == (day("2026-05-10"), State.OVERDUE)


@pytest.mark.parametrize("status", [Status.STOOD_DOWN, Status.WITHDRAWN, Status.IN_SERVICE])
def test_only_laid_up_days_count(status: Status) -> None:
    other = (StatusSpell(status, day("2026-04-20")), StatusSpell(Status.IN_SERVICE, day("2026-04-25")))
    assert paused_days(day("2026-05-10"), day("2026-04-10"), other, day("2026-12-31")) == 0


def test_a_spell_restated_while_laid_up_is_not_counted_twice() -> None:
    restated = (*spells(("2026-04-20", None)), *spells(("2026-04-23", "2026-04-25")))
    assert paused_days(day("2026-05-10"), day("2026-04-10"), restated, day("2026-12-31")) == 5


def test_a_task_that_does_not_pause_goes_on() -> None:
    task = a_task(every("1mo"), origin=last_done("2026-04-10"))
    assert trigger(task, on="2026-06-01", item=laid_up(("2026-04-20", "2026-05-20"))).point == day("2026-05-10")


def test_the_moved_days_are_kept_for_the_working_and_move_window_and_nominal_day_alike() -> None:
    task = a_task(every("2mo", window_days=5), origin=last_done("2026-04-10"), pause_while_laid_up=True)
    found = trigger(task, on="2026-05-01", item=laid_up(("2026-04-20", "2026-04-25"))).next
    assert found is not None
    assert found.paused_days == 5
    assert (found.opens, found.nominal, found.point) == (day("2026-06-10"), day("2026-06-15"), day("2026-06-20"))


def test_work_is_held_against_the_day_as_it_was_moved_then() -> None:
    item = laid_up(("2026-04-20", "2026-04-25"))
    over = [
        {kind: by for kind, (by, _) in line(IMPELLER, on="2026-06-01", done=[done(on)], item=item).past[0].over.items()}
        for on in ("2026-05-15", "2026-05-17")
    ]
    assert over == [{}, {Kind.CALENDAR: 2}]


def test_from_due_the_chain_goes_on_from_the_moved_day() -> None:
    task = a_task(every("1mo"), anchor=Anchor.FROM_DUE, origin=last_done("2026-01-31"), pause_while_laid_up=True)
    item = laid_up(("2026-02-10", "2026-02-13"))
    assert trigger(task, on="2026-02-20", item=item).point == day("2026-03-03")
    assert trigger(task, on="2026-03-10", done=[done("2026-03-05")], item=item).point == day("2026-04-03")


def test_the_bound_of_a_waiting_line_does_not_pause() -> None:
    task = a_task(
        every("100h"),
        every("1mo"),
        combine=Combine.LAST,
        not_later_than=Span(6, "mo"),
        origin=last_done("2026-04-10", hours=0),
        pause_while_laid_up=True,
    )
    due = line(task, on="2026-10-11", hours=0, item=laid_up(("2026-04-20", None)))
    assert (due.not_later_than, due.state) == (day("2026-10-10"), State.OVERDUE)
