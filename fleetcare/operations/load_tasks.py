"""Tasks out of rows: versions with their triggers, start points, calls and deferrals."""

from collections.abc import Mapping, Sequence
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.quantities import UNITS, Kind, Span, from_base, parse_span, to_base
from fleetcare.domain.schedules import (
    Anchor,
    CalendarTrigger,
    Call,
    Combine,
    CountedTrigger,
    Deferral,
    Origin,
    Period,
    Task,
    TaskVersion,
    Trigger,
)
from fleetcare.operations.entries import first_entries, first_of
from fleetcare.operations.rows import Row, day, fetch, figure, grouped, known_day
from fleetcare.rules.meters import CounterHistory

if TYPE_CHECKING:
    from sqlalchemy import Connection

Counters = Mapping[int, Mapping[Kind, CounterHistory]]


def load_tasks(
    connection: "Connection", item_ids: Sequence[int], on: date, counters: Counters
) -> dict[int, tuple[Task, ...]]:
    """Load the tasks of some items, by item, as known on a day; removed ones carry the day of removal."""
    rows = fetch(
        connection,
        "select item_id, id, name, removed_on from task where item_id in :ids order by id",
        ids=list(item_ids),
    )
    task_ids = [row[1] for row in rows]
    by_task = {row[1]: counters.get(row[0], {}) for row in rows}
    versions = _load_versions(connection, task_ids, by_task)
    origins = _load_origins(connection, task_ids, on, counters)
    calls = _load_calls(connection, task_ids, on)
    deferrals = _load_deferrals(connection, task_ids, on, counters)
    tasks: dict[int, list[Task]] = {}
    for item_id, task_id, name, removed_on in rows:
        task = Task(
            id=task_id,
            name=name,
            versions=versions[task_id],
            removed_on=day(removed_on),
            origin=origins.get(task_id),
            calls=calls.get(task_id, ()),
            deferrals=deferrals.get(task_id, ()),
        )
        tasks.setdefault(item_id, []).append(task)
    return {item_id: tuple(found) for item_id, found in tasks.items()}


def _load_versions(
    connection: "Connection", task_ids: Sequence[int], counters: Counters
) -> dict[int, tuple[TaskVersion, ...]]:
    """Load the versions of some tasks, by task; `counters` are those of each task's item."""
    rows = fetch(
        connection,
        "select task_id, id, from_on, combine, anchor, not_later_than, needs_sheet, once, on_condition,"
        ' pause_while_laid_up, law, insurer, "deferrable", work, labour_hours, caution, source'
        " from task_version where task_id in :ids order by from_on, id",
        ids=list(task_ids),
    )
    ids = [row[1] for row in rows]
    triggers = grouped(
        fetch(
            connection,
            "select version_id, kind, every, every_unit, first, first_unit, ahead, ahead_unit, grace, grace_unit,"
            " once_each, window_days, month_end, grid_origin, grid_unit, grid_on"
            " from task_trigger where version_id in :ids order by place",
            ids=ids,
        )
    )
    covers = grouped(
        fetch(connection, "select version_id, covered_id from task_cover where version_id in :ids order by id", ids=ids)
    )
    parts = grouped(
        fetch(
            connection, "select version_id, name, quantity from task_part where version_id in :ids order by id", ids=ids
        )
    )
    versions: dict[int, list[TaskVersion]] = {}
    for row in rows:
        version = TaskVersion(
            from_on=known_day(row[2]),
            triggers=tuple(_trigger(trigger, counters[row[0]]) for trigger in triggers.get(row[1], ())),
            combine=Combine(row[3]),
            anchor=Anchor(row[4]) if row[4] else None,
            not_later_than=parse_span(row[5]) if row[5] else None,
            covers=tuple(cover[1] for cover in covers.get(row[1], ())),
            needs_sheet=row[6],
            once=bool(row[7]),
            on_condition=bool(row[8]),
            pause_while_laid_up=bool(row[9]),
            law=bool(row[10]),
            insurer=bool(row[11]),
            deferrable=bool(row[12]),
            work=row[13],
            labour_hours=figure(row[14]),
            parts=tuple((part[1], Decimal(part[2])) for part in parts.get(row[1], ())),
            caution=row[15],
            source=row[16],
        )
        versions.setdefault(row[0], []).append(version)
    return {task_id: tuple(found) for task_id, found in versions.items()}


def _trigger(row: Row, counters: Mapping[Kind, CounterHistory]) -> Trigger:
    kind = Kind(row[1])
    if kind is Kind.CALENDAR:
        return CalendarTrigger(
            interval=_known_span(row[2], row[3]),
            first=_span(row[4], row[5]),
            ahead=_days(row[6], row[7]),
            grace=_days(row[8], row[9]) or 0,
            grid_origin=day(row[13]) if row[13] else None,
            once_each=Period(row[10]) if row[10] else None,
            window_days=row[11],
            month_end=bool(row[12]),
        )
    return CountedTrigger(
        kind=kind,
        interval=to_base(Decimal(row[2]), row[3]),
        first=_base(row[4], row[5]),
        ahead=_base(row[6], row[7]),
        grace=_base(row[8], row[9]) or Decimal(0),
        grid_origin=_grid_life(row, counters.get(kind)) if row[13] else None,
    )


def _grid_life(row: Row, counter: CounterHistory | None) -> Decimal:
    """Give the life total a grid begins at: what the dial showed on its day, or the figure itself without a meter."""
    base = to_base(Decimal(row[13]), row[14])
    if counter is None or counter.unit is None:
        return base
    life = counter.life_at(from_base(base, counter.unit), known_day(row[15]))
    return base if life is None else life


def _load_origins(connection: "Connection", task_ids: Sequence[int], on: date, counters: Counters) -> dict[int, Origin]:
    """Load what each task counts from: the newest start point stated, else the start of an item counted as new."""
    tasks = fetch(
        connection,
        "select task.id, item.id, item.as_new, item.in_service_on from task join item on item.id = task.item_id"
        " where task.id in :ids",
        ids=list(task_ids),
    )
    stated = {
        row[0]: row
        for row in fetch(
            connection,
            'select task_id, id, as_new, "on", stated_on from task_origin where task_id in :ids order by id',
            ids=list(task_ids),
        )
    }
    figures = grouped(
        fetch(
            connection,
            "select origin_id, meter.kind, origin_figure.value, origin_figure.unit, meter.id, meter.unit from origin_figure"
            " join meter on meter.id = origin_figure.meter_id where origin_id in :ids order by origin_figure.id",
            ids=[row[1] for row in stated.values()],
        )
    )
    starts = load_start_figures(connection, sorted({row[1] for row in tasks}))
    origins: dict[int, Origin] = {}
    for task_id, item_id, item_as_new, in_service_on in tasks:
        _, origin_id, as_new, origin_on, stated_on = stated.get(task_id, (task_id, None, item_as_new, None, None))
        if as_new:
            if in_service_on is not None:
                origins[task_id] = Origin(True, day(in_service_on), starts.get(item_id, {}))
            continue
        told = figures.get(origin_id, ())
        life = _life_then(counters.get(item_id, {}), day(origin_on), told, day(origin_on) or day(stated_on) or on)
        if origin_on is not None or life:
            origins[task_id] = Origin(False, day(origin_on), life)
    return origins


def _life_then(
    counters: Mapping[Kind, CounterHistory], origin_day: date | None, figures: Sequence[Row], read_on: date
) -> dict[Kind, Decimal]:
    """Give the life totals of a last-done: figures as each dial showed them on `read_on`, else what readings say."""
    life = {}
    for kind, counter in counters.items():
        known = counter.figure_on(origin_day) if origin_day is not None else None
        if known is not None:
            life[kind] = known.value
    for _, name, value, unit, meter_id, meter_unit in figures:
        dial = from_base(to_base(Decimal(value), unit), meter_unit)
        counted = counters[Kind(name)].life_of(meter_id, dial, read_on)
        if counted is not None:
            life[Kind(name)] = counted
    return life


def load_start_figures(connection: "Connection", item_ids: Sequence[int]) -> dict[int, dict[Kind, Decimal]]:
    """Load the life totals items came with, in base units, by item and kind."""
    rows = fetch(
        connection, "select item_id, kind, value, unit from start_figure where item_id in :ids", ids=list(item_ids)
    )
    starts: dict[int, dict[Kind, Decimal]] = {}
    for row in rows:
        starts.setdefault(row[0], {})[Kind(row[1])] = to_base(Decimal(row[2]), row[3])
    return starts


def _load_calls(connection: "Connection", task_ids: Sequence[int], on: date) -> dict[int, tuple[Call, ...]]:
    """Load the calls of on-condition tasks and follow-ups, those of voided entries left out."""
    rows = fetch(
        connection,
        'select task_id, id, "on", due_on, why, entry_id from task_call'
        ' where task_id in :ids and "on" <= :on order by id',
        ids=list(task_ids),
        on=on.isoformat(),
    )
    firsts = first_entries(connection)
    voided = {first_of(firsts, row[0]) for row in fetch(connection, "select id from log_entry where is_void")}
    calls: dict[int, list[Call]] = {}
    for task_id, call_id, made_on, due_on, why, entry_id in rows:
        if entry_id is None or first_of(firsts, entry_id) not in voided:
            calls.setdefault(task_id, []).append(Call(call_id, known_day(made_on), known_day(due_on), why))
    return {task_id: tuple(found) for task_id, found in calls.items()}


def _load_deferrals(
    connection: "Connection", task_ids: Sequence[int], on: date, counters: Counters
) -> dict[int, tuple[Deferral, ...]]:
    rows = fetch(
        connection,
        'select deferral.task_id, deferral.id, deferral."on", deferral.counts_from_id, deferral.why, person.name,'
        " deferral.until_on, task.item_id from deferral join person on person.id = deferral.person_id"
        " join task on task.id = deferral.task_id"
        ' where deferral.task_id in :ids and deferral."on" <= :on order by deferral.id',
        ids=list(task_ids),
        on=on.isoformat(),
    )
    figures = grouped(
        fetch(
            connection,
            "select deferral_id, deferral_figure.kind, role, value, deferral_figure.unit, meter.id, meter.unit"
            " from deferral_figure left join meter on meter.id = deferral_figure.meter_id"
            " where deferral_id in :ids order by deferral_figure.id",
            ids=[row[1] for row in rows],
        )
    )
    deferrals: dict[int, list[Deferral]] = {}
    for task_id, deferral_id, made_on, counts_from, why, by, until_on, item_id in rows:
        ends: dict[str, dict[Kind, Decimal]] = {"until": {}, "cap": {}}
        for _, kind, role, value, unit, meter_id, meter_unit in figures.get(deferral_id, ()):
            counter = counters.get(item_id, {}).get(Kind(kind))
            if role == "cap":
                ends[role][Kind(kind)] = to_base(Decimal(value), unit)
            elif counter is not None:
                dial = from_base(to_base(Decimal(value), unit), meter_unit)
                life = counter.life_of(meter_id, dial, known_day(made_on))
                if life is not None:
                    ends[role][Kind(kind)] = life
        deferrals.setdefault(task_id, []).append(
            Deferral(deferral_id, known_day(made_on), counts_from, why, by, day(until_on), ends["until"], ends["cap"])
        )
    return {task_id: tuple(found) for task_id, found in deferrals.items()}


def _span(value: str | None, unit: str) -> Span | None:
    return None if value is None else _known_span(value, unit)


def _known_span(value: str, unit: str) -> Span:
    return parse_span(f"{value}{unit}")


def _days(value: str | None, unit: str) -> int | None:
    """Whole days of an ahead or a grace; a month counts 30, a year 365."""
    return None if value is None else _known_span(value, unit).nominal_days


def _base(value: str | None, unit: str) -> Decimal | None:
    return None if value is None else to_base(Decimal(value), unit) if unit in UNITS else Decimal(value)
