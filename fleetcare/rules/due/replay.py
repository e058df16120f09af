"""Replay: walk the work done in date order and find what the open line counts from.

Due points are never stored. Each entry is held against the point the task had on its day, with
the version, the duty factor and the pauses in force on that day; deferrals never enter it, save
that they keep a once-each period open.
"""

from dataclasses import dataclass, field, replace
from datetime import date, timedelta
from decimal import Decimal

from fleetcare.domain.engines import factor_on
from fleetcare.domain.lines import NextPoint, PastWork, Point
from fleetcare.domain.log import Done
from fleetcare.domain.quantities import COUNTED, Kind
from fleetcare.domain.schedules import CalendarTrigger, CountedTrigger, Deferral, Period, Task, TaskVersion
from fleetcare.rules.due.calendar import CalendarPeriod, Chain, period_of, period_span, say_period
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.once_each import first_period, serve
from fleetcare.rules.due.pauses import paused_days
from fleetcare.rules.due.triggers import (
    CalendarMark,
    CountedMark,
    calendar_ahead,
    calendar_next,
    counted_next,
)


@dataclass(slots=True)
class Marks:
    """What each trigger counts from at one moment of the replay.

    `from_entry` is the first id of the entry counted from, None for the origin. `owed` is the
    earliest unserved period of a once-each task.
    """

    counted: dict[Kind, CountedMark] = field(default_factory=dict)
    calendar: CalendarMark | None = None
    owed: CalendarPeriod | None = None
    from_entry: int | None = None
    approximate: frozenset[Kind] = frozenset()


@dataclass(frozen=True, slots=True)
class Replay:
    """The outcome: what the open line counts from, the last counted work, and what each entry did."""

    marks: Marks
    last_done_on: date | None
    last: Done | None
    past: tuple[PastWork, ...]


def replay(facts: ItemFacts, task: Task) -> Replay:
    """Replay one task's entries up to the day of the facts."""
    marks = Marks()
    origin = task.origin
    last_done_on: date | None = None
    if origin is not None:
        _begin(marks, facts, task)
        last_done_on = None if origin.as_new else origin.on
    last: Done | None = None
    past: list[PastWork] = []
    for done in facts.done.get(task.id, ()):
        version = task.version_on(done.on)
        work = _take(marks, facts, task, version, done)
        past.append(work)
        if work.counted:
            last, last_done_on = done, done.on
    return Replay(marks, last_done_on, last, tuple(past))


def next_points(
    facts: ItemFacts, task: Task, version: TaskVersion, marks: Marks, day: date
) -> dict[Kind, tuple[NextPoint, Chain | None]]:
    """Give the next point of each trigger that has something to count from, as worked out on a day."""
    points: dict[Kind, tuple[NextPoint, Chain | None]] = {}
    for trigger in version.triggers:
        if isinstance(trigger, CountedTrigger):
            mark = marks.counted.get(trigger.kind)
            if mark is not None:
                points[trigger.kind] = (_counted(facts, version, trigger, mark, day), None)
        elif marks.calendar is not None:
            points[Kind.CALENDAR] = _calendar(facts, task, version, trigger, marks, day)
    return points


def deferral_of(task: Task, from_entry: int | None, day: date) -> Deferral | None:
    """Give the newest deferral, made by `day`, of the point that counts from an entry (None: the origin)."""
    bound = [d for d in task.deferrals if d.counts_from == from_entry and d.on <= day]
    return bound[-1] if bound else None


def _begin(marks: Marks, facts: ItemFacts, task: Task) -> None:
    """Set the marks at the task's origin."""
    origin = task.origin
    assert origin is not None
    marks.counted = {kind: CountedMark(life, is_start=origin.as_new) for kind, life in origin.life.items()}
    if origin.on is not None:
        marks.calendar = CalendarMark(origin.on, is_start=origin.as_new)
        trigger = task.version_on(origin.on).calendar
        if trigger is not None and trigger.once_each is not None:
            marks.owed = first_period(trigger.once_each, origin.on)


def _take(marks: Marks, facts: ItemFacts, task: Task, version: TaskVersion, done: Done) -> PastWork:
    """Let one entry move the marks, and say what it did."""
    points = next_points(facts, task, version, marks, done.on)
    opens = points[Kind.CALENDAR][0].opens if Kind.CALENDAR in points else None
    if opens is not None and done.on < opens:
        note = f"before its window opened on {opens.isoformat()}"
        return PastWork(done.entry_id, done.number, done.on, counted=False, note=note)
    over = {
        kind: (excess, point.grace)
        for kind, (point, _) in points.items()
        if (excess := _excess(kind, point, done)) is not None
    }
    calendar = version.calendar
    if calendar is not None and calendar.once_each is not None:
        served, missed = _serve(marks, facts, version, task, calendar, done)
        if missed or not served:
            over.pop(Kind.CALENDAR, None)
        note = "" if served else "its period was already served"
        bound_to = marks.from_entry
        _move(marks, points, done)
        if not served:
            # The period still owed counts from the entry that served the one before, and so does its deferral.
            marks.from_entry = bound_to
        return PastWork(done.entry_id, done.number, done.on, over, missed, served, note=note)
    marks.owed = None
    _move(marks, points, done)
    after = next_points(facts, task, version, marks, done.on)
    missed = tuple(passed for point, _ in after.values() for passed in point.passed)
    return PastWork(done.entry_id, done.number, done.on, over, missed)


def _move(marks: Marks, points: dict[Kind, tuple[NextPoint, Chain | None]], done: Done) -> None:
    counted: dict[Kind, CountedMark] = {}
    for kind in COUNTED:
        life = done.life.get(kind)
        if life is not None:
            own = points[kind][0].point if kind in points else None
            counted[kind] = CountedMark(life.value, own if isinstance(own, Decimal) else None)
    marks.counted = counted
    own_day: date | None = None
    chain: Chain | None = None
    if Kind.CALENDAR in points:
        point, chain = points[Kind.CALENDAR]
        own_day = point.nominal or _day(point.point)
        chain = Chain(own_day) if point.paused_days else chain
    marks.calendar = CalendarMark(done.on, own_day, chain)
    marks.from_entry = done.entry_id
    marks.approximate = frozenset(kind for kind, life in done.life.items() if life.approximate)


def _serve(
    marks: Marks, facts: ItemFacts, version: TaskVersion, task: Task, trigger: CalendarTrigger, done: Done
) -> tuple[str, tuple[Point, ...]]:
    each = trigger.once_each
    assert each is not None
    owed = _owed(each, marks)
    if owed is None:
        # Nothing is known of earlier periods: the first entry ever serves its own.
        own = period_of(each, done.on)
        marks.owed = own.next(each)
        return say_period(each, own), ()
    shift = _shift(facts, version, owed.last, done.on, marks)
    open_until = owed.last + timedelta(days=trigger.grace + shift)
    deferral = deferral_of(task, marks.from_entry, done.on)
    if deferral is not None and deferral.until_on is not None:
        open_until = max(open_until, deferral.until_on)
    outcome = serve(trigger, owed, open_until, done.on)
    marks.owed = outcome.next
    served = say_period(each, outcome.period) if outcome.period else ""
    return served, tuple(period.last for period in outcome.missed)


def _owed(each: Period, marks: Marks) -> CalendarPeriod | None:
    """The earliest unserved period, None where nothing was ever done; fitted to a changed kind of period."""
    if marks.owed is not None:
        return period_of(each, marks.owed.last)
    return first_period(each, marks.calendar.done) if marks.calendar is not None else None


def _counted(
    facts: ItemFacts, version: TaskVersion, trigger: CountedTrigger, mark: CountedMark, day: date
) -> NextPoint:
    origin = trigger.grid_origin
    if origin is None:
        origin = facts.start_life.get(trigger.kind, Decimal(0))
    factor = factor_on(facts.item.factors, trigger.kind, day)
    return counted_next(trigger, mark, version.effective_anchor, factor, origin)


def _calendar(
    facts: ItemFacts, task: Task, version: TaskVersion, trigger: CalendarTrigger, marks: Marks, day: date
) -> tuple[NextPoint, Chain | None]:
    mark = marks.calendar
    assert mark is not None
    if trigger.once_each is not None:
        owed = _owed(trigger.once_each, marks)
        assert owed is not None
        span = period_span(trigger.once_each)
        ahead = Decimal(calendar_ahead(trigger, span))
        point = NextPoint(owed.last, span, ahead, Decimal(trigger.grace))
        return _paused(facts, version, point, day, marks), None
    origin = trigger.grid_origin or facts.item.in_service_on or _first_day(facts, task) or mark.done
    factor = factor_on(facts.item.factors, Kind.CALENDAR, day)
    point, chain = calendar_next(trigger, mark, version.effective_anchor, factor, origin)
    return _paused(facts, version, point, day, marks), chain


def _first_day(facts: ItemFacts, task: Task) -> date | None:
    """The day a task was first done, where no start point is known."""
    if task.origin is not None and task.origin.on is not None:
        return task.origin.on
    done = facts.done.get(task.id, ())
    return done[0].on if done else None


def _paused(facts: ItemFacts, version: TaskVersion, point: NextPoint, day: date, marks: Marks) -> NextPoint:
    last_day = _day(point.point)
    shift = _shift(facts, version, last_day, day, marks)
    if not shift:
        return point
    later = timedelta(days=shift)
    return replace(
        point,
        point=last_day + later,
        nominal=point.nominal + later if point.nominal else None,
        opens=point.opens + later if point.opens else None,
        paused_days=shift,
    )


def _shift(facts: ItemFacts, version: TaskVersion, point: date, day: date, marks: Marks) -> int:
    if not version.pause_while_laid_up or marks.calendar is None:
        return 0
    return paused_days(point, marks.calendar.done, facts.item.spells, day)


def _excess(kind: Kind, point: NextPoint, done: Done) -> Decimal | None:
    """By how much work was done past a point, None if it was not or cannot be known."""
    if isinstance(point.point, date):
        excess = Decimal((done.on - point.point).days)
    else:
        life = done.life.get(kind)
        if life is None:
            return None
        excess = life.value - point.point
    return excess if excess > 0 else None


def _day(point: Point) -> date:
    assert isinstance(point, date)
    return point

