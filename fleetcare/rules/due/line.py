"""One due line: a task on an item, on a day, with its whole working."""

from collections.abc import Callable, Sequence
from datetime import date

from fleetcare.domain.engines import status_on
from fleetcare.domain.forecasts import Forecast
from fleetcare.domain.lines import DueLine, State, TriggerLine
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Call, Combine, Deferral, Task, TaskVersion, Trigger
from fleetcare.rules.due.deferrals import Move, has_ended, move_of
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.outlook import Outlook
from fleetcare.rules.due.points import next_points
from fleetcare.rules.due.pulls import pull_of
from fleetcare.rules.due.replay import Replay, deferral_of, replay
from fleetcare.rules.due.states import combine, deciding, worst
from fleetcare.rules.due.trigger_line import calendar_line, trigger_line


def due_line(facts: ItemFacts, task: Task, outlooks: dict[Kind, Outlook]) -> DueLine | None:
    """Give a task's line on the day of the facts; None where it has none (done once, not called for, removed)."""
    version = task.version_on(facts.on)
    if task.is_removed(facts.on):
        return None
    replayed = replay(facts, task)
    call = _open_call(facts, task) if version.on_condition else None
    if call is None and (version.on_condition or (version.once and replayed.last is not None)):
        return None
    deferral = deferral_of(task, replayed.marks.from_entry, facts.on)
    lives = {kind: outlook.now for kind, outlook in outlooks.items() if outlook.now is not None}
    ended = deferral is not None and has_ended(deferral, facts.on, lives)

    def move(kind: Kind) -> Move | None:
        return move_of(deferral, version, kind, ended) if deferral is not None else None

    if call is not None:
        span = Span((call.due_on - call.on).days, "d")
        triggers: tuple[TriggerLine, ...] = (calendar_line(span, call.on, facts.on, move(Kind.CALENDAR)),)
    else:
        points = next_points(facts, task, version, replayed.marks, facts.on)

        def held(trigger: Trigger) -> TriggerLine:
            kind, moved = trigger.kind, move(trigger.kind)
            point = points[kind][0] if kind in points else None
            standing = deferral if moved is not None and not ended else None
            pull = pull_of(facts, version, kind, point, lives.get(kind), replayed.last_done_on, standing)
            return trigger_line(trigger, point, replayed, facts.on, outlooks.get(kind), moved, pull)

        triggers = tuple(map(held, version.triggers))
    return _assembled(facts, task, version, replayed, triggers, deferral, ended, call)


def _open_call(facts: ItemFacts, task: Task) -> Call | None:
    """Give the call of an on-condition task or follow-up that no later work has answered."""
    done_days = [done.on for done in facts.done.get(task.id, ())]
    waiting = [call for call in task.calls if call.on <= facts.on and not any(day >= call.on for day in done_days)]
    return min(waiting, key=lambda call: call.due_on, default=None)


def _assembled(
    facts: ItemFacts,
    task: Task,
    version: TaskVersion,
    replayed: Replay,
    triggers: tuple[TriggerLine, ...],
    deferral: Deferral | None,
    ended: bool,
    call: Call | None,
) -> DueLine:
    """Combine the triggers of a line."""
    how, counting = _counting(version.combine, triggers)
    decider = deciding(how, counting)
    limit = _not_later_than(facts, version, replayed)
    if limit is not None and worst([limit.state, decider.state]) is not decider.state:
        decider = limit
    state = decider.state
    bound = limit.point if limit is not None and isinstance(limit.point, date) else None
    early, likely, late = _dates(how, counting, bound)
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
        not_later_than=bound,
        called_because=call.why if call is not None else "",
        estimated=_estimated(how, counting, limit),
        early_on=early,
        likely_on=likely,
        late_on=late,
        undated=tuple(t.kind for t in triggers if t.forecast is None or t.forecast.likely is None),
        deferral=deferral,
        deferral_ended=ended,
        past=replayed.past,
    )


def _counting(how: Combine, triggers: tuple[TriggerLine, ...]) -> tuple[Combine, tuple[TriggerLine, ...]]:
    """Give how a line's triggers are combined, and which: one pulled forward does not wait for the last of them."""
    if how is Combine.FIRST or all(trigger.pull is None for trigger in triggers):
        return how, triggers
    return Combine.FIRST, tuple(t for t in triggers if t.pull is not None or t.state is State.UNSET)


def _not_later_than(facts: ItemFacts, version: TaskVersion, replayed: Replay) -> TriggerLine | None:
    """Give the bound of a `last` line as if it were a trigger: default ahead, no grace."""
    counts_from = replayed.marks.calendar
    if version.not_later_than is None or counts_from is None:
        return None
    return calendar_line(version.not_later_than, counts_from.done, facts.on)


def _estimated(how: Combine, triggers: Sequence[TriggerLine], limit: TriggerLine | None) -> State | None:
    """Give the state at the likely values, None where no trigger needs one."""
    if all(t.estimated is None for t in triggers):
        return None
    state = combine(how, [t.estimated or t.state for t in triggers])
    return state if limit is None else worst([limit.state, state])


def _dates(
    how: Combine, triggers: Sequence[TriggerLine], bound: date | None
) -> tuple[date | None, date | None, date | None]:
    """Give a line's early, likely and late day.

    `first` takes the minimum of each over the triggers that have dates; `last` the maximum, at most its
    bound, none if any has none, save those already reached. An open late day is later than all.
    """
    forecasts = [t.forecast for t in triggers if t.forecast is not None and t.forecast.likely is not None]
    dateless = [t for t in triggers if t.forecast is None or t.forecast.likely is None]
    if not forecasts or (how is Combine.LAST and any(not _is_reached(t) for t in dateless)):
        return None, None, None
    days = _pick_days(min if how is Combine.FIRST else max, forecasts)
    earliest, likeliest, latest = (min(day, bound or date.max) for day in days)
    return earliest, likeliest, None if latest == date.max else latest


def _is_reached(line: TriggerLine) -> bool:
    return line.remaining is not None and line.remaining <= 0


def _pick_days(pick: Callable[[list[date]], date], forecasts: Sequence[Forecast]) -> tuple[date, date, date]:
    return (
        pick([f.early or date.max for f in forecasts]),
        pick([f.likely or date.max for f in forecasts]),
        pick([f.late or date.max for f in forecasts]),
    )
