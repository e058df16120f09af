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
from fleetcare.domain.meters import Counter, LifeFigure, Meter, MeterFit, Reading
from fleetcare.domain.quantities import Kind, to_base
from fleetcare.domain.schedules import Anchor, CalendarTrigger, Combine, CountedTrigger, Task, TaskVersion
from fleetcare.rules.due.calendar import shorten
from fleetcare.rules.due.covering import closure
from fleetcare.rules.due.due_list import in_order, item_lines
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.triggers import CalendarMark, CountedMark, calendar_next, counted_next
from fleetcare.rules.meters import counter_history
from tests.builders import a_task, an_item, every, facts, last_done
from tests.property.strategies import (
    FIRST,
    calendar_triggers,
    counted_triggers,
    days,
    factors,
    figures,
    item_facts,
    spans,
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


# Units


@st.composite
def typed_figures(draw: st.DrawFn) -> dict[str, Decimal]:
    """An interval, its ahead and grace, and what the dial read when it was done and now: bare numbers."""
    interval = draw(figures)
    done_at = draw(figures)
    return {
        "interval": interval,
        "first": draw(figures),
        "ahead": interval * draw(st.integers(0, 99)) / 100,
        "grace": draw(figures),
        "done_at": done_at,
        "now": done_at + draw(figures),
    }


@given(typed_figures(), st.sampled_from([("km", "mi"), ("L", "galus"), ("L", "galimp")]), st.sampled_from(Anchor))
def test_the_same_figures_mean_the_same_in_any_unit(
    typed: dict[str, Decimal], units: tuple[str, str], anchor: Anchor
) -> None:
    """Miles or kilometres, litres or gallons: state, remaining share and the dial at which it is due are alike."""
    seen = []
    for unit in units:
        kind = Kind.DISTANCE if units[0] == "km" else Kind.FUEL
        base = {name: to_base(figure, unit) for name, figure in typed.items()}
        trigger = CountedTrigger(kind, base["interval"], base["first"], base["ahead"], base["grace"])
        meter = Meter(1, kind, unit)
        rows = (Reading(1, 1, FIRST, typed["done_at"]), Reading(2, 1, FIRST + timedelta(days=9), typed["now"]))
        counter = Counter(kind, Decimal(0), (MeterFit(meter, None, Decimal(0)),), rows)
        task = a_task(trigger, anchor=anchor, origin=last_done(**{kind.value: str(base["done_at"])}))
        known = facts(task, on="2024-06-01", item=an_item())
        (line,) = item_lines(replace(known, counters={kind: counter_history(counter, known.on)}))
        (only,) = line.triggers
        assert isinstance(only.point, Decimal)
        assert only.share is not None
        dial = counter_history(counter, known.on).dial_of(only.point)
        assert dial is not None
        seen.append((line.state, round(only.share, 20), round(dial, 15)))
    assert seen[0] == seen[1]


# Points


@given(counted_triggers(), figures, figures | st.none(), st.sampled_from(Anchor), figures)
def test_a_counted_point_lies_after_the_work_by_at_most_an_interval_and_early_credit(
    trigger: CountedTrigger, done: Decimal, own: Decimal | None, anchor: Anchor, origin: Decimal
) -> None:
    """On a grid it is a multiple of the interval; nothing passed lies at or after it."""
    found = counted_next(trigger, CountedMark(done, own), anchor, Decimal(1), origin)
    assert isinstance(found.point, Decimal)
    credit = trigger.interval / 4 if anchor is Anchor.ON_GRID else 0
    assert done < found.point <= done + trigger.interval + credit
    if anchor is Anchor.ON_GRID:
        assert (found.point - origin) % trigger.interval == 0
    assert all(isinstance(point, Decimal) and point < found.point for point in found.passed)


@given(counted_triggers(), figures, figures, factors, factors, st.sampled_from([Anchor.FROM_DONE, Anchor.FROM_DUE]))
def test_a_lower_duty_factor_never_makes_a_counted_point_later(
    trigger: CountedTrigger, done: Decimal, own: Decimal, one: Decimal, other: Decimal, anchor: Anchor
) -> None:
    """Unless whole intervals were missed, of which a shorter one may fit in more."""
    low, high = sorted((one, other))
    sooner, later = (counted_next(trigger, CountedMark(done, own), anchor, f, Decimal(0)) for f in (low, high))
    assume(not sooner.passed)
    assert sooner.point <= later.point  # type: ignore[operator]


@given(spans, days, factors, factors)
def test_a_lower_duty_factor_never_makes_a_calendar_point_later(
    span: object, done: date, one: Decimal, other: Decimal
) -> None:
    """Whole months and days, rounded down, never below one."""
    trigger = CalendarTrigger(span)  # type: ignore[arg-type]
    low, high = sorted((one, other))
    sooner, later = (calendar_next(trigger, CalendarMark(done), Anchor.FROM_DONE, f, done)[0] for f in (low, high))
    assert done < sooner.point <= later.point  # type: ignore[operator]
    shortest = shorten(trigger.interval, low)
    assert shortest.count >= 1


@given(st.integers(1, 36), days, st.lists(st.integers(0, 20), max_size=6), st.booleans())
def test_so_many_months_never_skip_a_month(months: int, start: date, late: list[int], through_end: bool) -> None:
    """Done on its day or days late within the month, each point lies so many months after the one before."""
    trigger = CalendarTrigger(every(f"{months}mo").interval, month_end=through_end)  # type: ignore[arg-type]
    mark = CalendarMark(start)
    for delay in late:
        found, chain = calendar_next(trigger, mark, Anchor.FROM_DUE, Decimal(1), start)
        assert isinstance(found.point, date)
        assert month_of(found.point) == month_of(mark.own or mark.done) + months
        done = found.point + timedelta(days=delay)
        assume(month_of(done) == month_of(found.point))
        mark = CalendarMark(done, found.point, chain)


def month_of(day: date) -> int:
    return 12 * day.year + day.month


@given(calendar_triggers(), days, days)
def test_the_first_calendar_point_lies_after_the_day_it_counts_from(
    trigger: CalendarTrigger, done: date, origin: date
) -> None:
    """Whatever the anchor and the form, and a window opens before its last day."""
    assume(trigger.once_each is None)
    for anchor in Anchor:
        found, _ = calendar_next(trigger, CalendarMark(done), anchor, Decimal(1), origin)
        assert isinstance(found.point, date)
        assert found.point > done
        assert found.opens is None or found.opens < found.point


@given(days, st.lists(st.integers(1, 60), min_size=1, max_size=5))
def test_work_before_its_window_leaves_the_line_as_it_was(start: date, gaps: list[int]) -> None:
    """However often it is done early, point and state stay."""
    task = Task(1, "Oil", (TaskVersion(FIRST, (CalendarTrigger(every("1y").interval, window_days=30),)),))  # type: ignore[arg-type]
    task = replace(task, origin=last_done(start.isoformat()))
    on = (start + timedelta(days=sum(gaps))).isoformat()
    assume(sum(gaps) < 365 - 31)
    early = [Done(n, n, start + timedelta(days=sum(gaps[:n]))) for n in range(1, len(gaps) + 1)]
    (before,) = item_lines(facts(task, on=on))
    (after,) = item_lines(facts(task, on=on, done=early))
    assert replace(after, past=()) == before
