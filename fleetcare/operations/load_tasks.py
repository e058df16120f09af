"""Tasks out of rows: versions with their triggers, start points, calls and deferrals."""

from collections.abc import Mapping, Sequence
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.quantities import UNITS, Kind, Span, parse_span, to_base
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
    versions = _load_versions(connection, task_ids)
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


def _load_versions(connection: "Connection", task_ids: Sequence[int]) -> dict[int, tuple[TaskVersion, ...]]:
    rows = fetch(
        connection,
        "select task_id, id, from_on, combine, anchor, not_later_than, needs_sheet, once, on_condition,"
        " pause_while_laid_up, law, insurer, deferrable, work, labour_hours, caution, source"
        " from task_version where task_id in :ids order by from_on, id",
        ids=list(task_ids),
    )
    ids = [row[1] for row in rows]
    triggers = grouped(
        fetch(
            connection,
            "select version_id, kind, every, every_unit, first, first_unit, ahead, ahead_unit, grace, grace_unit,"
            " once_each, window_days, month_end, grid_origin, grid_unit"
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
            triggers=tuple(_trigger(trigger) for trigger in triggers.get(row[1], ())),
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


def _trigger(row: Row) -> Trigger:
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
        grid_origin=_base(row[13], row[14]) if row[13] else None,
    )


def _load_origins(connection: "Connection", task_ids: Sequence[int], on: date, counters: Counters) -> dict[int, Origin]:
    """Load the newest start point of each task, its dial figures turned into life totals."""
    rows = fetch(
        connection,
        'select origin.task_id, origin.id, origin.as_new, origin."on", task.item_id from task_origin origin'
        " join task on task.id = origin.task_id where origin.task_id in :ids order by origin.id",
        ids=list(task_ids),
    )
    figures = grouped(
        fetch(
            connection,
            "select origin_id, meter.kind, origin_figure.value, origin_figure.unit from origin_figure"
            " join meter on meter.id = origin_figure.meter_id where origin_id in :ids order by origin_figure.id",
            ids=[row[1] for row in rows],
        )
    )
    origins: dict[int, Origin] = {}
    for task_id, origin_id, as_new, origin_on, item_id in rows:
        item_counters = counters.get(item_id, {})
        origin_day = day(origin_on)
        life = {}
        for kind, counter in item_counters.items():
            known = counter.figure_on(origin_day) if origin_day is not None else None
            if known is not None:
                life[kind] = known.value
        for _, kind, value, _unit in figures.get(origin_id, ()):
            counted = item_counters[Kind(kind)].life_at(Decimal(value), origin_day or on)
            if counted is not None:
                life[Kind(kind)] = counted
        origins[task_id] = Origin(bool(as_new), origin_day, life)
    return origins


def _load_calls(connection: "Connection", task_ids: Sequence[int], on: date) -> dict[int, tuple[Call, ...]]:
    """Load the calls of on-condition tasks and follow-ups, those of voided entries left out."""
    rows = fetch(
        connection,
        'select call.task_id, call.id, call."on", call.due_on, call.why from task_call call'
        " left join log_entry entry on entry.id = call.entry_id"
        ' where call.task_id in :ids and call."on" <= :on and coalesce(entry.is_void, 0) = 0'
        " and not exists (select 1 from log_entry later where later.supersedes_id = entry.id and later.is_void)"
        " order by call.id",
        ids=list(task_ids),
        on=on.isoformat(),
    )
    return {
        task_id: tuple(Call(row[1], known_day(row[2]), known_day(row[3]), row[4]) for row in found)
        for task_id, found in grouped(rows).items()
    }


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
            "select deferral_id, kind, role, value, unit from deferral_figure where deferral_id in :ids order by id",
            ids=[row[1] for row in rows],
        )
    )
    deferrals: dict[int, list[Deferral]] = {}
    for task_id, deferral_id, made_on, counts_from, why, by, until_on, item_id in rows:
        ends: dict[str, dict[Kind, Decimal]] = {"until": {}, "cap": {}}
        for _, kind, role, value, unit in figures.get(deferral_id, ()):
            counter = counters.get(item_id, {}).get(Kind(kind))
            if role == "cap":
                ends[role][Kind(kind)] = to_base(Decimal(value), unit)
            elif counter is not None:
                life = counter.life_at(Decimal(value), known_day(made_on))
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
