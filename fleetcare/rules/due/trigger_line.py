"""One trigger of a line, held against today's figure."""

from collections.abc import Callable
from dataclasses import replace
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.forecasts import Forecast
from fleetcare.domain.lines import NextPoint, Point, State, TriggerLine
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import CalendarTrigger, Trigger
from fleetcare.rules.due.calendar import add
from fleetcare.rules.due.deferrals import Move, Standing, stand, without_grace
from fleetcare.rules.due.outlook import Outlook
from fleetcare.rules.due.points import Marks
from fleetcare.rules.due.replay import Replay
from fleetcare.rules.due.triggers import calendar_ahead

if TYPE_CHECKING:
    from fleetcare.domain.wear import Pull

NEVER_DONE = "not known when it was last done; log it, or enter a last-done"
NO_DAY = "the day it counts from is not known; log it, or enter the day of the last-done"


def trigger_line(
    trigger: Trigger,
    next_point: NextPoint | None,
    replayed: Replay,
    on: date,
    outlook: Outlook | None,
    move: Move | None,
    pull: "Pull | None" = None,
) -> TriggerLine:
    """Give one trigger's line on a day; unset where it has no point, or its meter no reading."""
    now: Point | None = on if trigger.kind is Kind.CALENDAR else (outlook.now if outlook else None)
    if next_point is None or now is None:
        return TriggerLine(trigger, State.UNSET, unset_because=_why_unset(trigger.kind, next_point, replayed, outlook))
    if move is not None:
        next_point = without_grace(next_point)
    line = _held(trigger, next_point, now, on, move, outlook, pull)
    approximate = trigger.kind in replayed.marks.approximate
    line = replace(line, counts_from=_counts_from(replayed.marks, trigger.kind), approximate=approximate)
    if outlook is None or outlook.likely_now is None:
        return line
    estimated = stand(next_point, outlook.likely_now, on, move, pull.at if pull is not None else None).state
    return replace(line, estimated=estimated, likely_now=outlook.likely_now)


def calendar_line(interval: Span, counts_from: date, on: date, move: Move | None = None) -> TriggerLine:
    """Give a plain calendar interval's line: counts from a day, default ahead, no grace."""
    trigger = CalendarTrigger(interval)
    ahead = Decimal(calendar_ahead(trigger, interval, interval))
    point = NextPoint(add(counts_from, interval.months, interval.days), interval, ahead, Decimal(0))
    return replace(_held(trigger, point, on, on, move, None), counts_from=counts_from)


def _held(
    trigger: Trigger,
    next_point: NextPoint,
    now: Point,
    on: date,
    move: Move | None,
    outlook: Outlook | None,
    pull: "Pull | None" = None,
) -> TriggerLine:
    standing = stand(next_point, now, on, move, pull.at if pull is not None else None)
    return TriggerLine(
        trigger=trigger,
        state=standing.state,
        next=next_point,
        now=now,
        point=standing.point,
        remaining=standing.remaining,
        share=standing.remaining / _length(next_point.interval),
        deferred=standing.deferred,
        forecast=_forecast(next_point, standing, move, outlook),
        pull=pull if standing.pulled else None,
    )


def _forecast(next_point: NextPoint, standing: Standing, move: Move | None, outlook: Outlook | None) -> Forecast:
    """Give the days on which a trigger calls for its work: a calendar point itself, a window from its opening."""
    point = standing.point
    if isinstance(point, date):
        opens = None if standing.deferred else next_point.opens
        return Forecast(opens or point, point, point, 0)
    assert outlook is not None
    reached = outlook.reach(point)
    if not standing.deferred or move is None or move.until_on is None:
        return reached
    return _with_day(reached, move.until_on, max if move.to is None else min)


def _with_day(reached: Forecast, until: date, pick: Callable[[date, date], date]) -> Forecast:
    """Join the days a figure is reached with the day it is deferred to: whichever comes first where a figure
    ends the deferral, else the later, as the own point does not call before that day.
    """
    if reached.early is None or reached.likely is None:
        return Forecast(until, until, until, reached.readings_used)
    late = pick(reached.late or date.max, until)
    return replace(
        reached,
        early=pick(reached.early, until),
        likely=pick(reached.likely, until),
        late=late if late < date.max else None,
    )


def _counts_from(marks: Marks, kind: Kind) -> Point:
    if kind is not Kind.CALENDAR:
        return marks.counted[kind].done
    assert marks.calendar is not None
    return marks.calendar.done


def _length(interval: Decimal | Span) -> Decimal:
    """An interval's length for shares; a follow-up due the day it is raised counts one day."""
    return Decimal(max(1, interval.nominal_days)) if isinstance(interval, Span) else interval


def _why_unset(kind: Kind, next_point: NextPoint | None, replayed: Replay, outlook: Outlook | None) -> str:
    """Say what to enter so that a trigger gets its point."""
    marks = replayed.marks
    if marks.calendar is None and not marks.counted:
        return NEVER_DONE
    if kind is Kind.CALENDAR:
        return NO_DAY
    if outlook is None:
        return f"no meter counts {kind}; add one"
    if next_point is not None:
        return f"no {kind} reading yet; enter one"
    if replayed.last is not None:
        return f"entry {replayed.last.number} has no {kind} figure; correct it with what the dial showed"
    return f"the {kind} figure it counts from is not known; enter it as a last-done"
