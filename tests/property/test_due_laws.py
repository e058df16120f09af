"""Laws of due work, whatever the tasks, the use and the log."""

from copy import deepcopy
from dataclasses import replace
from datetime import date, timedelta
from decimal import Decimal
from random import Random
from typing import TypeVar

from hypothesis import assume, given
from hypothesis import strategies as st

from fleetcare.domain.lines import DueLine, Point, State, TriggerLine, apart
from fleetcare.domain.log import Done
from fleetcare.domain.meters import LifeFigure, Reading
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import CalendarTrigger, Combine, Task
from fleetcare.rules.due.covering import closure
from fleetcare.rules.due.due_list import in_order, item_lines
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.meters import counter_history
from tests.property.strategies import (
    item_facts,
)

T = TypeVar("T")
CALLS = {State.DUE, State.OVERDUE}


def by_name(found: list[DueLine]) -> dict[str, DueLine]:
    return {line.task.name: line for line in found}


def recorded(known: ItemFacts) -> dict[str, DueLine]:
    """Lines without forecasts, which are floats and not what these laws are about."""
    return by_name(item_lines(known, recorded_only=True))


@given(item_facts(), st.randoms(use_true_random=False))
def test_the_order_of_rows_never_changes_lines(known: ItemFacts, random: Random) -> None:
    """Tasks, entries, readings and deferrals may come in any order."""
    counter = known.counters[Kind.HOURS].counter
    counter = replace(counter, readings=mixed(random, counter.readings))
    other = replace(
        known,
        tasks=mixed(random, known.tasks),
        done={task: mixed(random, rows) for task, rows in known.done.items()},
        counters={Kind.HOURS: counter_history(counter, known.on)},
    )
    assert by_name(item_lines(other)) == by_name(item_lines(known))
    found = item_lines(known)
    assert in_order(random.sample(found, len(found))) == in_order(found)


def mixed(random: Random, rows: tuple[T, ...]) -> tuple[T, ...]:
    return tuple(random.sample(rows, len(rows)))


@given(item_facts())
def test_lines_can_be_worked_out_again_and_leave_the_facts_as_they_were(known: ItemFacts) -> None:
    """Evaluation is idempotent: it reads facts and changes none."""
    before = deepcopy(known)
    once, again = item_lines(known), item_lines(known)
    assert once == again
    assert known == before


@given(item_facts(), st.integers(1, 400))
def test_a_later_day_never_un_dues_work_while_nothing_is_recorded_or_ends(known: ItemFacts, later: int) -> None:
    """A day later each line stands as before or worse, unless a deferral ended in between."""
    after = recorded(replace(known, on=known.on + timedelta(days=later)))
    for name, line in recorded(known).items():
        if line.deferral_ended == after[name].deferral_ended:
            assert after[name].state.rank <= line.state.rank


@given(item_facts())
def test_a_deferral_never_makes_a_trigger_better_than_near_past_its_own_point(known: ItemFacts) -> None:
    """A point passed is at least near, whatever was agreed."""
    for line in recorded(known).values():
        for trigger in line.triggers:
            if is_past(trigger):
                assert trigger.state in {State.NEAR, *CALLS}


def is_past(trigger: TriggerLine) -> bool:
    if isinstance(trigger.own, date):
        return isinstance(trigger.now, date) and trigger.now >= trigger.own
    return isinstance(trigger.now, Decimal) and isinstance(trigger.own, Decimal) and trigger.now >= trigger.own


@given(item_facts())
def test_a_deferral_to_a_later_point_never_makes_a_trigger_worse_than_it_is_without_grace(known: ItemFacts) -> None:
    """All it takes away is the grace."""
    strict = replace(known, tasks=tuple(strictly(task) for task in known.tasks))
    without = recorded(strict)
    for name, line in recorded(known).items():
        for trigger, plain in zip(line.triggers, without[name].triggers, strict=True):
            is_later = trigger.deferred and apart(known_point(trigger.point), known_point(trigger.own)) >= 0
            if is_later and trigger.own == plain.own:
                assert trigger.state.rank >= plain.state.rank


def strictly(task: Task) -> Task:
    """The task without deferrals and without grace."""
    triggers = tuple(
        replace(one, grace=0) if isinstance(one, CalendarTrigger) else replace(one, grace=Decimal(0))
        for one in task.versions[0].triggers
    )
    return replace(task, deferrals=(), versions=(replace(task.versions[0], triggers=triggers),))


def known_point(point: Point | None) -> Point:
    assert point is not None
    return point


@given(item_facts())
def test_a_deferral_changes_neither_the_own_point_nor_any_other_line(known: ItemFacts) -> None:
    """Own points come from the replay alone, and nothing but the points they name is moved, save once-each periods."""
    free = replace(known, tasks=tuple(replace(task, deferrals=()) for task in known.tasks))
    without = recorded(free)
    for name, line in recorded(known).items():
        assert [trigger.own for trigger in line.triggers] == [trigger.own for trigger in without[name].triggers]
        if line.deferral is None:
            assert replace(line, covered_by="", task=without[name].task) == replace(without[name], covered_by="")


@given(item_facts())
def test_a_line_due_by_whichever_ends_first_is_never_later_than_any_of_its_triggers(known: ItemFacts) -> None:
    """Neither its state is milder than a trigger's nor any of its days later; a waiting one is the other way round."""
    for line in item_lines(known):
        dated = [t.forecast for t in line.triggers if t.forecast is not None and t.forecast.likely is not None]
        ranks = [trigger.state.rank for trigger in line.triggers]
        if line.version.combine is Combine.FIRST:
            assert line.state.rank == min(ranks)
            for forecast in dated:
                assert forecast.likely is not None
                assert forecast.early is not None
                assert line.likely_on is not None
                assert line.early_on is not None
                assert line.likely_on <= forecast.likely
                assert line.early_on <= forecast.early
        elif line.not_later_than is None and State.UNSET not in {t.state for t in line.triggers}:
            assert line.state.rank == max(ranks)


@given(item_facts())
def test_a_line_shows_who_covers_it_only_while_it_is_known_and_not_overdue(known: ItemFacts) -> None:
    """And never itself, nor where it needs a sheet of its own."""
    for line in item_lines(known):
        if line.covered_by:
            assert line.state not in {State.OVERDUE, State.UNSET}
            assert not line.version.needs_sheet
            assert line.covered_by != line.task.name


# Recording work


@st.composite
def on_a_due_day(draw: st.DrawFn) -> tuple[ItemFacts, int]:
    """An item on the very day, or at the very figure, at which one of its lines falls due, with that task's id."""
    known = draw(item_facts(with_deferrals=False))
    line = draw(st.sampled_from(item_lines(known, recorded_only=True)))
    trigger = draw(st.sampled_from(line.triggers))
    assume(trigger.point is not None)
    if isinstance(trigger.point, Decimal) and isinstance(trigger.now, Decimal):
        assume(trigger.point >= trigger.now)
        counter = known.counters[Kind.HOURS].counter
        at_point = Reading(99, counter.readings[0].meter_id, known.on, trigger.point)
        history = counter_history(replace(counter, readings=(*counter.readings, at_point)), known.on)
        return replace(known, counters={Kind.HOURS: history}), line.task.id
    assert isinstance(trigger.point, date)
    assume(trigger.point >= known.on)
    return replace(known, on=trigger.point), line.task.id


@given(on_a_due_day())
def test_work_on_its_due_day_makes_that_line_and_what_it_covers_not_due_and_changes_no_other(
    case: tuple[ItemFacts, int],
) -> None:
    """What needs a sheet stays as it was; work before a window opens counts for nothing and may leave it due again."""
    known, task_id = case
    latest = known.counters[Kind.HOURS].latest
    assert latest is not None
    covers = {task.id: task.versions[0].covers for task in known.tasks}
    sheets = {task.id for task in known.tasks if task.versions[0].needs_sheet}
    closed = {task_id, *(covered for covered in closure(covers, task_id) if covered not in sheets)}
    work = Done(99, 99, known.on, {Kind.HOURS: LifeFigure(latest.life)})
    done = {task: (*rows, work) if task in closed else rows for task, rows in known.done.items()}
    before = recorded(known)
    assume(next(line.state for line in before.values() if line.task.id == task_id) is State.DUE)
    for line in recorded(replace(known, done=done)).values():
        if line.task.id == task_id and line.past[-1].counted:
            assert line.state not in CALLS or is_still_owed(before[line.task.name], line)
        elif line.task.id in closed:
            assert line.state not in CALLS or is_windowed(line) or is_still_owed(before[line.task.name], line)
        else:
            assert replace(line, covered_by="") == replace(before[line.task.name], covered_by="")


def is_windowed(line: DueLine) -> bool:
    return line.version.calendar is not None and line.version.calendar.window_days is not None


def is_still_owed(before: DueLine, after: DueLine) -> bool:
    """Whether an earlier period was owed too: one entry serves but one of those still open by grace."""
    calendar = after.version.calendar
    return (
        calendar is not None
        and calendar.once_each is not None
        and before.triggers[-1].own is not None
        and before.triggers[-1].state in CALLS
        and before.triggers[-1].own != after.triggers[-1].own
    )


@given(item_facts(), st.integers(0, 4))
def test_each_entry_serves_at_most_one_period_and_none_twice(known: ItemFacts, extra: int) -> None:
    """The periods entries serve and miss follow each other in time, and the next one owed comes after them all."""
    again = {task: tuple(sorted((*rows, *rows[:extra]), key=lambda one: one.on)) for task, rows in known.done.items()}
    for line in recorded(replace(known, done=again)).values():
        served = [work.served for work in line.past if work.served]
        assert len(served) == len(set(served))
        missed = [point for work in line.past if work.served for point in work.missed.get(Kind.CALENDAR, ())]
        assert missed == sorted(missed)
