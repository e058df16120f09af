"""One due line: a task on an item, on a day, with its whole working."""

from collections.abc import Callable, Sequence
from dataclasses import replace
from datetime import date
from decimal import Decimal

from fleetcare.domain.engines import Status, status_on
from fleetcare.domain.forecasts import Forecast
from fleetcare.domain.lines import DueLine, NextPoint, Point, State, TriggerLine
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import CalendarTrigger, Call, Combine, Deferral, Task, TaskVersion, Trigger
from fleetcare.rules.due.calendar import add
from fleetcare.rules.due.deferrals import Move, has_ended, move_of, stand
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.outlook import LAID_UP, Outlook
from fleetcare.rules.due.replay import Marks, Replay, deferral_of, next_points, replay
from fleetcare.rules.due.states import combine, deciding, state_of, worst
from fleetcare.rules.due.triggers import calendar_ahead

NEVER_DONE = "not known when it was last done; log it, or enter a last-done"


def due_line(facts: ItemFacts, task: Task, outlooks: dict[Kind, Outlook]) -> DueLine | None:
    """Give a task's line on the day of the facts; None where it has none (done once, not called for, ended)."""
    on = facts.on
    version = task.version_on(on)
    if task.removed_on is not None and task.removed_on <= on:
        return None
    replayed = replay(facts, task)
    if version.on_condition:
        call = _open_call(facts, task)
        return _called_line(facts, task, version, replayed, call) if call else None
    if version.once and replayed.last is not None:
        return None
    deferral = deferral_of(task, replayed.marks.from_entry, on)
    lives = {kind: outlook.now for kind, outlook in outlooks.items() if outlook.now is not None}
    ended = deferral is not None and has_ended(deferral, on, lives)
    points = next_points(facts, task, version, replayed.marks, on)
    triggers = tuple(
        _trigger_line(
            trigger,
            points[trigger.kind][0] if trigger.kind in points else None,
            replayed,
            outlooks.get(trigger.kind),
            facts,
            move_of(deferral, version, trigger.kind, ended) if deferral else None,
        )
        for trigger in version.triggers
    )
    return _assembled(facts, task, version, replayed, triggers, deferral, ended)


def _trigger_line(
    trigger: Trigger,
    next_point: NextPoint | None,
    replayed: Replay,
    outlook: Outlook | None,
    facts: ItemFacts,
    move: Move | None,
) -> TriggerLine:
    """Hold one trigger against today's figure."""
    now: Point | None = facts.on if trigger.kind is Kind.CALENDAR else (outlook.now if outlook else None)
    if next_point is None or now is None:
        return TriggerLine(trigger, State.UNSET, unset_because=_why_unset(trigger, next_point, replayed, outlook))
    standing = stand(next_point, now, facts.on, move)
    estimated = None
    if outlook is not None and outlook.likely_now is not None:
        estimated = stand(next_point, outlook.likely_now, facts.on, move).state
    return TriggerLine(
        trigger=trigger,
        state=standing.state,
        next=next_point,
        counts_from=_counts_from(replayed.marks, trigger.kind),
        approximate=trigger.kind in replayed.marks.approximate,
        now=now,
        point=standing.point,
        remaining=standing.remaining,
        own_state=standing.own_state,
        share=standing.remaining / _length(next_point.interval),
        deferred=standing.deferred,
        forecast=_forecast(standing.point, outlook),
        estimated=estimated,
        likely_now=outlook.likely_now if outlook else None,
    )


def _assembled(
    facts: ItemFacts,
    task: Task,
    version: TaskVersion,
    replayed: Replay,
    triggers: tuple[TriggerLine, ...],
    deferral: Deferral | None,
    ended: bool,
) -> DueLine:
    """Combine the triggers of a line."""
    how = version.combine
    state = combine(how, [t.state for t in triggers])
    decider = deciding(how, state, triggers)
    limit = _not_later_than(version, replayed.marks, facts.on)
    if limit is not None and worst([limit.state, state]) is not state:
        state, decider = limit.state, limit
    estimated = None
    if any(t.estimated is not None for t in triggers):
        states = [combine(how, [t.estimated or t.state for t in triggers])]
        estimated = worst([*states, limit.state] if limit is not None else states)
    early, likely, late = _dates(how, triggers, limit)
    unset = next((t.unset_because for t in triggers if t.state is State.UNSET), "")
    return DueLine(
        item=facts.item,
        task=task,
        version=version,
        status=status_on(facts.item.spells, facts.on),
        state=state,
        triggers=triggers,
        deciding=decider,
        last_done_on=replayed.last_done_on,
        last_done_number=replayed.last.number if replayed.last else None,
        reason=unset if state is State.UNSET else (deferral.why if deferral else ""),
        not_later_than=limit.point if limit is not None and isinstance(limit.point, date) else None,
        estimated=estimated,
        early_on=early,
        likely_on=likely,
        late_on=late,
        undated=tuple(t.kind for t in triggers if t.forecast is None or t.forecast.likely is None),
        deferral=deferral,
        deferral_ended=ended,
        past=replayed.past,
    )


def _not_later_than(version: TaskVersion, marks: Marks, on: date) -> TriggerLine | None:
    """Give the bound of a `last` line as if it were a trigger: default ahead, no grace."""
    if version.not_later_than is None or marks.calendar is None:
        return None
    return _calendar_line(CalendarTrigger(version.not_later_than), marks.calendar.done, on)


def _calendar_line(trigger: CalendarTrigger, counts_from: date, on: date) -> TriggerLine:
    """Give a plain calendar trigger's line: counts from a day, default ahead, no grace."""
    point = add(counts_from, trigger.interval.months, trigger.interval.days)
    ahead = Decimal(calendar_ahead(trigger, trigger.interval))
    remaining = Decimal((point - on).days)
    state = state_of(remaining, ahead, Decimal(0))
    return TriggerLine(
        trigger=trigger,
        state=state,
        next=NextPoint(point, trigger.interval, ahead, Decimal(0)),
        counts_from=counts_from,
        now=on,
        point=point,
        remaining=remaining,
        own_state=state,
        share=remaining / _length(trigger.interval),
        forecast=_forecast(point, None),
    )


def _open_call(facts: ItemFacts, task: Task) -> Call | None:
    """Give the call of an on-condition task or follow-up that no later work has answered."""
    done_days = [done.on for done in facts.done.get(task.id, ())]
    waiting = [call for call in task.calls if call.on <= facts.on and not any(day >= call.on for day in done_days)]
    return min(waiting, key=lambda call: call.due_on, default=None)


def _called_line(facts: ItemFacts, task: Task, version: TaskVersion, replayed: Replay, call: Call) -> DueLine:
    """Give the line of a called task: due on the call's day, deferrable like any other."""
    trigger = CalendarTrigger(Span((call.due_on - call.on).days, "d"))
    line = _calendar_line(trigger, call.on, facts.on)
    deferral = deferral_of(task, replayed.marks.from_entry, facts.on)
    ended = deferral is not None and has_ended(deferral, facts.on, {})
    assert line.next is not None
    move = move_of(deferral, version, Kind.CALENDAR, ended) if deferral else None
    if move is not None:
        standing = stand(line.next, facts.on, facts.on, move)
        line = replace(
            line,
            state=standing.state,
            point=standing.point,
            remaining=standing.remaining,
            share=standing.remaining / _length(trigger.interval),
            deferred=standing.deferred,
            forecast=_forecast(standing.point, None),
        )
    assembled = _assembled(facts, task, version, replayed, (line,), deferral, ended)
    return replace(assembled, called_because=call.why)


def _dates(
    how: Combine, triggers: Sequence[TriggerLine], limit: TriggerLine | None
) -> tuple[date | None, date | None, date | None]:
    """Give a line's early, likely and late day.

    `first` takes the minimum of each over the triggers that have dates; `last` the maximum, none
    if any has none. An open late day is later than all.
    """
    forecasts = [t.forecast for t in triggers if t.forecast is not None and t.forecast.likely is not None]
    if how is Combine.LAST and len(forecasts) < len(triggers):
        forecasts = []
    pick = min if how is Combine.FIRST else max
    combined = [_pick_days(pick, forecasts)] if forecasts else []
    if limit is not None and limit.forecast is not None:
        combined.append(_pick_days(min, [limit.forecast]))
    if not combined:
        return None, None, None
    earliest, likeliest, latest = (min(days) for days in zip(*combined, strict=True))
    return earliest, likeliest, None if latest == date.max else latest


def _pick_days(pick: Callable[[list[date]], date], forecasts: Sequence[Forecast]) -> tuple[date, date, date]:
    return (
        pick([f.early or date.max for f in forecasts]),
        pick([f.likely or date.max for f in forecasts]),
        pick([f.late or date.max for f in forecasts]),
    )


def _forecast(point: Point, outlook: Outlook | None) -> Forecast:
    if isinstance(point, date):
        return Forecast(point, point, point, 0)
    return outlook.reach(point) if outlook is not None else LAID_UP


def _counts_from(marks: Marks, kind: Kind) -> Point | None:
    if kind is Kind.CALENDAR:
        return marks.calendar.done if marks.calendar else None
    return marks.counted[kind].done


def _length(interval: Decimal | Span) -> Decimal:
    """An interval's length for shares; a follow-up due the day it is raised counts one day."""
    return Decimal(max(1, interval.nominal_days)) if isinstance(interval, Span) else interval


def _why_unset(trigger: Trigger, next_point: NextPoint | None, replayed: Replay, outlook: Outlook | None) -> str:
    """Say what to enter so that a trigger gets its point."""
    kind = trigger.kind
    if next_point is None and replayed.last is None:
        known = replayed.marks.calendar is not None or replayed.marks.counted
        if not known:
            return NEVER_DONE
        return "last done on an unknown day; log it, or enter the day" if kind is Kind.CALENDAR else (
            f"last done at an unknown {kind} figure; enter it as a last-done"
        )
    if outlook is None:
        return f"no meter counts {kind}; add one"
    if next_point is None:
        assert replayed.last is not None
        return f"entry {replayed.last.number} has no {kind} figure; correct it and give --at"
    return f"no {kind} reading yet; enter one"
