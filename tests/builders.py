"""Facts with sane defaults: each test overrides the one thing it is about."""

from collections.abc import Mapping, Sequence
from dataclasses import replace
from datetime import date, timedelta
from decimal import Decimal

from fleetcare.domain.engines import Item
from fleetcare.domain.lines import DueLine, TriggerLine
from fleetcare.domain.log import Done
from fleetcare.domain.meters import Counter, LifeFigure, Meter, MeterFit, Reading
from fleetcare.domain.quantities import BASE_UNIT, Kind, Span, parse_interval
from fleetcare.domain.schedules import CalendarTrigger, CountedTrigger, Deferral, Origin, Task, TaskVersion, Trigger
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.meters import CounterHistory, counter_history

START = date(2024, 1, 10)


def day(text: str) -> date:
    """Read an ISO day."""
    return date.fromisoformat(text)


def an_item(**changes: object) -> Item:
    """An engine P-01, new on 2024-01-10."""
    item = Item(id=1, tag="P-01", is_engine=True, site="North Sluice", in_service_on=START, as_new=True)
    return replace(item, **changes)  # type: ignore[arg-type]


def every(text: str, **changes: object) -> Trigger:
    """A trigger from an interval as typed: every("250h"), every("12mo", grace=5)."""
    interval = parse_interval(text)
    if isinstance(interval, Span):
        return CalendarTrigger(interval, **changes)  # type: ignore[arg-type]
    figures = {name: Decimal(str(value)) for name, value in changes.items()}
    return CountedTrigger(interval.kind, interval.base, **figures)


def a_version(*triggers: Trigger, **changes: object) -> TaskVersion:
    """A version in force from the start."""
    return TaskVersion(from_on=START, triggers=triggers, **changes)  # type: ignore[arg-type]


def a_task(*triggers: Trigger, number: int = 1, name: str = "Oil and filter", **changes: object) -> Task:
    """A task of one version, without an origin; `origin`, `calls`, `deferrals` go to the task, the rest to its version."""
    own = {key: changes.pop(key) for key in ("origin", "calls", "deferrals", "removed_on") if key in changes}
    return Task(id=number, name=name, versions=(a_version(*triggers, **changes),), **own)  # type: ignore[arg-type]


def new_at(life: float | str = 0, on: date = START, kind: Kind = Kind.HOURS) -> Origin:
    """The origin of an item counted as new."""
    return Origin(as_new=True, on=on, life={kind: Decimal(str(life))})


def last_done(on: str | None = None, **life: float | str) -> Origin:
    """Work done before the log began: last_done("2026-01-10", hours=900)."""
    figures = {Kind(kind): Decimal(str(value)) for kind, value in life.items()}
    return Origin(as_new=False, on=day(on) if on else None, life=figures)


def a_deferral(
    until: str | None = None,
    *,
    hours: float | str | None = None,
    cap: float | str | None = None,
    on: str = "2026-04-01",
    counts_from: int | None = None,
    number: int = 1,
) -> Deferral:
    """A deferral made on 2026-04-01: a_deferral("2026-06-01"), a_deferral(hours=1100)."""
    return Deferral(
        id=number,
        on=day(on),
        counts_from=counts_from,
        why="parts on order",
        by="Fenn",
        until_on=day(until) if until else None,
        until_life={Kind.HOURS: Decimal(str(hours))} if hours is not None else {},
        caps={Kind.HOURS: Decimal(str(cap))} if cap is not None else {},
    )


def done(on: str, entry: int = 1, **life: float | str) -> Done:
    """One entry: done("2026-04-20", hours=1234)."""
    figures = {Kind(kind): LifeFigure(Decimal(str(value))) for kind, value in life.items()}
    return Done(entry_id=entry, number=entry, on=day(on), life=figures)


def a_counter(*readings: tuple[str, float | str], kind: Kind = Kind.HOURS, on: date = date.max) -> CounterHistory:
    """One meter read on some days: a_counter(("2026-05-01", 1250))."""
    meter = Meter(1, kind, BASE_UNIT[kind])
    rows = tuple(Reading(n, 1, day(when), Decimal(str(value))) for n, (when, value) in enumerate(readings, 1))
    return counter_history(Counter(kind, Decimal(0), (MeterFit(meter, None, Decimal(0)),), rows), on)


Readings = float | str | Sequence[tuple[str, float | str]]
"""Today's figure, or dated readings."""


def facts(
    *tasks: Task,
    on: str,
    done: Mapping[int, Sequence[Done]] | Sequence[Done] = (),
    hours: Readings | None = None,
    km: Readings | None = None,
    figures: Mapping[Kind, Readings] | None = None,
    item: Item | None = None,
    **changes: object,
) -> ItemFacts:
    """An item's facts: `hours`, `km` or `figures` are its readings; `done` the entries of task 1 or of each task id."""
    counters = {}
    for kind, given in {Kind.HOURS: hours, Kind.DISTANCE: km, **(figures or {})}.items():
        if given is not None:
            readings = [(on, given)] if isinstance(given, int | float | str) else given
            counters[kind] = a_counter(*readings, kind=kind, on=day(on))
    entries = done if isinstance(done, Mapping) else {1: done}
    return ItemFacts(
        item=item or an_item(),
        tasks=tasks,
        done={task: tuple(rows) for task, rows in entries.items()},
        counters=counters,
        on=day(on),
        **changes,  # type: ignore[arg-type]
    )


def lines(*tasks: Task, is_future: bool = False, recorded_only: bool = False, **kwargs: object) -> dict[str, DueLine]:
    """The lines of an item by task name; arguments as for `facts`."""
    found = item_lines(facts(*tasks, **kwargs), is_future, recorded_only)  # type: ignore[arg-type]
    return {one.task.name: one for one in found}


def line(*tasks: Task, **kwargs: object) -> DueLine:
    """The line of the first task given; arguments as for `lines`."""
    return lines(*tasks, **kwargs)[tasks[0].name]  # type: ignore[arg-type]


def trigger(*tasks: Task, **kwargs: object) -> TriggerLine:
    """The only trigger of the first task given; arguments as for `lines`."""
    (only,) = line(*tasks, **kwargs).triggers
    return only


def days_from(on: str, days: int) -> str:
    """The ISO day some days later."""
    return (day(on) + timedelta(days=days)).isoformat()
