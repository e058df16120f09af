"""The facts of a history without a database: what the due rules would be given, made from its steps alone.

Knows the plain items only: one meter of their own at most, never replaced nor rolled over, no schedule applied. Written
apart from the operations, so that each can be held against the other.
"""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field, replace
from datetime import date
from decimal import Decimal
from typing import Any

from fleetcare.demo.steps import Step, Verb
from fleetcare.domain.engines import DutyFactor, Item, Status, StatusSpell
from fleetcare.domain.log import Done
from fleetcare.domain.meters import Counter, LifeFigure, Meter, MeterFit, Reading
from fleetcare.domain.quantities import Figure, Kind, Span, parse_dial, to_base
from fleetcare.domain.schedules import (
    CalendarTrigger,
    Call,
    CountedTrigger,
    Deferral,
    Origin,
    Task,
    TaskVersion,
    Trigger,
)
from fleetcare.drafts.fields import parse_kind, parse_meter
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.tasks import TaskDraft, TriggerDraft
from fleetcare.rules.due.covering import closure
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.outlook import outlooks
from fleetcare.rules.due.replay import replay
from fleetcare.rules.meters import CounterHistory, counter_history


@dataclass
class _Record:
    """What is known of an item so far."""

    item: Item
    meter: Meter | None = None
    start: Decimal = Decimal(0)
    readings: list[Reading] = field(default_factory=list)
    tasks: dict[str, Task] = field(default_factory=dict)
    done: dict[int, list[tuple[int, date, Figure | None]]] = field(default_factory=dict)


_NOTHING_DUE = {Verb.SHEET, Verb.ANSWER}
"""Entries by which no line here comes or moves: sheets taken in passing, and what is decided about their findings."""


def pure_facts(steps: Iterable[Step], on: date) -> list[ItemFacts]:
    """Give the facts of every item in some steps, seen on a day that none of them lies after."""
    records: dict[str, _Record] = {}
    for number, step in enumerate(steps, start=1):
        if step.verb in {Verb.ENGINE, Verb.MACHINE}:
            records[step.tag] = _arrived(number, step.values)
        elif step.tag and step.verb not in _NOTHING_DUE:
            _VERBS[step.verb](records[step.tag], number, step)
    return [_facts(record, on) for record in records.values()]


def _arrived(number: int, values: Mapping[str, Any]) -> _Record:
    item = Item(
        number, values["tag"], "cylinders" in values, in_service_on=values["in_service"], as_new=values["as_new"]
    )
    if not values.get("meter"):
        return _Record(item)
    kind, unit = parse_meter(values["meter"][0])
    start = parse_dial(values["start_at"][0]).value
    first = Reading(-number, number, values["in_service"], start)
    return _Record(item, Meter(number, kind, unit), start, [first])


def _reading(record: _Record, number: int, step: Step) -> None:
    assert record.meter is not None
    value = parse_dial(str(step.values["value"])).value
    record.readings.append(Reading(number, record.meter.id, step.on, value))


def _task(record: _Record, number: int, step: Step) -> None:
    draft = read_draft(TaskDraft, step.values)
    assert not draft.last_done
    version = TaskVersion(
        from_on=date.min,
        triggers=tuple(_trigger(trigger) for trigger in draft.triggers()),
        covers=tuple(record.tasks[name].id for name in draft.covers),
        deferrable=draft.is_deferrable,
        **{name: getattr(draft, name) for name in _SAME},
    )
    record.tasks[draft.name] = Task(number, draft.name, (version,))


_SAME = ("combine", "anchor", "not_later_than", "once", "on_condition", "pause_while_laid_up", "law", "insurer")


def _trigger(draft: TriggerDraft) -> Trigger:
    if isinstance(draft.every, Span):
        return CalendarTrigger(
            draft.every,
            first=draft.first if isinstance(draft.first, Span) else None,
            ahead=draft.ahead.nominal_days if isinstance(draft.ahead, Span) else None,
            grace=draft.grace.nominal_days if isinstance(draft.grace, Span) else 0,
            grid_origin=draft.grid_origin if isinstance(draft.grid_origin, date) else None,
            once_each=draft.once_each,
            window_days=draft.window_days,
            month_end=draft.month_end,
        )
    bound = {
        name: given.base
        for name in ("first", "ahead", "grace")
        if not isinstance(given := getattr(draft, name), Span | None)
    }
    return CountedTrigger(draft.kind, draft.every.base, **bound)


def _log(record: _Record, number: int, step: Step) -> None:
    values: Mapping[str, Any] = step.values
    figure = parse_dial(values["at"][0]) if values.get("at") else None
    if figure is not None:
        assert record.meter is not None
        record.readings.append(Reading(number, record.meter.id, step.on, figure.value, entry_id=number))
    if values.get("follow_up"):
        _follow_up(record, number, step)
        return
    for name in values.get("task", ()):
        covers = {task.id: task.versions[0].covers for task in record.tasks.values()}
        task_id = record.tasks[name].id
        for closed in (task_id, *closure(covers, task_id)):
            record.done.setdefault(closed, []).append((number, step.on, figure))


def _follow_up(record: _Record, number: int, step: Step) -> None:
    defect, due_on = str(step.values["defect"]), step.values.get("until", step.on)
    assert isinstance(due_on, date)
    version = TaskVersion(date.min, (), on_condition=True)
    record.tasks[defect] = Task(number, defect, (version,), calls=(Call(number, step.on, due_on, defect),))


def _status(record: _Record, number: int, step: Step) -> None:
    spell = StatusSpell(Status(str(step.values["status"])), step.on)
    record.item = replace(record.item, spells=(*record.item.spells, spell))


def _factor(record: _Record, number: int, step: Step) -> None:
    kind, factor = parse_kind(str(step.values["kind"])), Decimal(str(step.values["factor"]))
    record.item = replace(record.item, factors=(*record.item.factors, DutyFactor(kind, factor, step.on, "")))


def _defer(record: _Record, number: int, step: Step) -> None:
    values: Mapping[str, Any] = step.values
    task, facts = record.tasks[values["task"]], _facts(record, step.on)
    seen = next(each for each in facts.tasks if each.id == task.id)
    days = [end for end in values["until"] if isinstance(end, date)]
    deferral = Deferral(
        number,
        step.on,
        counts_from=replay(facts, seen).marks.from_entry,
        why=values["why"],
        by=values["by"],
        until_on=days[0] if days else None,
        until_life={
            kind: life for end in values["until"] if not isinstance(end, date) for kind, life in _life(record, end)
        },
    )
    if days and seen.versions[0].calendar is None:
        deferral = replace(deferral, caps=_caps(facts, days[0]))
    record.tasks[task.name] = replace(task, deferrals=(*task.deferrals, deferral))


def _correct(record: _Record, number: int, step: Step) -> None:
    """Leave everything as it was: no due point hangs on a top-up."""
    assert "top_up" in step.values


def _life(record: _Record, dial: str) -> Iterable[tuple[Kind, Decimal]]:
    assert record.meter is not None
    yield record.meter.kind, to_base(parse_dial(dial).value, record.meter.unit)


def _caps(facts: ItemFacts, until: date) -> dict[Kind, Decimal]:
    """Give the likely figures on a day; the items here are always expected past their point by then."""
    caps = {}
    for kind, look in outlooks(facts, is_future=False).items():
        assert look.history is not None
        likely = look.history.likely_value(until)
        assert likely is not None
        caps[kind] = Decimal(str(round(likely, 1)))
    return caps


def _facts(record: _Record, on: date) -> ItemFacts:
    counters = _counters(record, on)
    origin = _origin(record)
    tasks = tuple(replace(task, origin=origin) for task in record.tasks.values())
    done = {task_id: _done(record, counters, rows, on) for task_id, rows in record.done.items()}
    start = {record.meter.kind: to_base(record.start, record.meter.unit)} if record.meter is not None else {}
    return ItemFacts(record.item, tasks, done, counters, start_life=start, on=on)


def _counters(record: _Record, on: date) -> dict[Kind, CounterHistory]:
    meter = record.meter
    if meter is None:
        return {}
    fit = MeterFit(meter, record.item.in_service_on, record.start)
    counter = Counter(meter.kind, to_base(record.start, meter.unit), (fit,), tuple(record.readings))
    return {meter.kind: counter_history(counter, on)}


def _origin(record: _Record) -> Origin | None:
    if not record.item.as_new:
        return None
    life = {record.meter.kind: to_base(record.start, record.meter.unit)} if record.meter is not None else {}
    return Origin(True, record.item.in_service_on, life)


def _done(
    record: _Record, counters: Mapping[Kind, CounterHistory], rows: Iterable[tuple[int, date, Figure | None]], on: date
) -> tuple[Done, ...]:
    done = []
    for number, day, figure in rows:
        life: dict[Kind, LifeFigure] = {}
        for kind, counter in counters.items():
            known = counter.figure_on(day) if figure is None else _told(counter, figure, day)
            if known is not None:
                life[kind] = known
        if day <= on:
            done.append(Done(number, number, day, life))
    return tuple(sorted(done, key=lambda one: (one.on, one.number)))


def _told(counter: CounterHistory, figure: Figure, day: date) -> LifeFigure | None:
    life = counter.life_at(figure.value, day)
    return LifeFigure(life) if life is not None else None


_VERBS = {
    Verb.TASK: _task,
    Verb.CARD_READING: _reading,
    Verb.ROUND: _reading,
    Verb.CARD_WORK: _log,
    Verb.LOG: _log,
    Verb.STATUS: _status,
    Verb.FACTOR: _factor,
    Verb.CORRECT: _correct,
    Verb.DEFER: _defer,
}
