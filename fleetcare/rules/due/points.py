"""The next point of each trigger of a task, worked out on a day from what the task counts from."""

from dataclasses import dataclass, field, replace
from datetime import date, timedelta
from decimal import Decimal

from fleetcare.domain.engines import factor_on
from fleetcare.domain.lines import NextPoint
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import CalendarTrigger, CountedTrigger, Period, Task, TaskVersion
from fleetcare.rules.due.calendar import CalendarPeriod, Chain, period_after, period_of, period_span
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.pauses import paused_days
from fleetcare.rules.due.triggers import CalendarMark, CountedMark, calendar_ahead, calendar_next, counted_next

Points = dict[Kind, tuple[NextPoint, Chain | None]]
"""Per kind the next point, and for a calendar interval the chain it stands on."""


@dataclass(slots=True)
class Marks:
    """What each trigger counts from at one moment of the replay.

    `from_entry` is the first id of the entry counted from, None for the origin. `owed` is the
    earliest unserved period of a once-each task, None where it follows from `calendar`.
    """

    counted: dict[Kind, CountedMark] = field(default_factory=dict)
    calendar: CalendarMark | None = None
    owed: CalendarPeriod | None = None
    from_entry: int | None = None
    approximate: frozenset[Kind] = frozenset()


def next_points(facts: ItemFacts, task: Task, version: TaskVersion, marks: Marks, day: date) -> Points:
    """Give the next point of each trigger that has something to count from, as worked out on a day."""
    points: Points = {}
    for trigger in version.triggers:
        if isinstance(trigger, CountedTrigger):
            mark = marks.counted.get(trigger.kind)
            if mark is not None:
                points[trigger.kind] = (_counted(facts, version, trigger, mark, day), None)
        elif marks.calendar is not None:
            points[Kind.CALENDAR] = _calendar(facts, task, version, trigger, marks, day)
    return points


def owed_period(facts: ItemFacts, version: TaskVersion, each: Period, marks: Marks, day: date) -> CalendarPeriod | None:
    """Give the earliest unserved period, its last day moved by pauses; None where nothing was ever done.

    Where a version changed the kind of period, it is the one of the new kind that holds the old one's last day.
    """
    if marks.calendar is None:
        return None
    owed = period_of(each, marks.owed.last) if marks.owed else period_after(each, marks.calendar.done)
    return CalendarPeriod(owed.first, owed.last + _pause(facts, version, owed.last, marks.calendar, day))


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
        owed = owed_period(facts, version, trigger.once_each, marks, day)
        assert owed is not None
        span = period_span(trigger.once_each)
        paused = (owed.last - period_of(trigger.once_each, owed.first).last).days
        ahead = Decimal(calendar_ahead(trigger, span, span))
        return NextPoint(owed.last, span, ahead, Decimal(trigger.grace), paused_days=paused), None
    origin = trigger.grid_origin or facts.item.in_service_on or _first_day(facts, task) or mark.done
    factor = factor_on(facts.item.factors, Kind.CALENDAR, day)
    point, chain = calendar_next(trigger, mark, version.effective_anchor, factor, origin)
    assert isinstance(point.point, date)
    pause = _pause(facts, version, point.point, mark, day)
    moved = replace(
        point,
        point=point.point + pause,
        nominal=point.nominal + pause if point.nominal else None,
        opens=point.opens + pause if point.opens else None,
        paused_days=pause.days,
    )
    return moved, chain


def _first_day(facts: ItemFacts, task: Task) -> date | None:
    """The day a task was first done, where no start point is known."""
    if task.origin is not None and task.origin.on is not None:
        return task.origin.on
    return min((done.on for done in facts.done.get(task.id, ())), default=None)


def _pause(facts: ItemFacts, version: TaskVersion, point: date, mark: CalendarMark, day: date) -> timedelta:
    if not version.pause_while_laid_up:
        return timedelta(0)
    return timedelta(days=paused_days(point, mark.done, facts.item.spells, day))
