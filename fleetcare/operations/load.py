"""Facts out of rows: everything the due rules need to know about some items, seen up to a day."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.engines import DutyFactor, Item, Status, StatusSpell
from fleetcare.domain.log import Done
from fleetcare.domain.meters import Counter, LifeFigure, Meter, MeterFit, Reading
from fleetcare.domain.quantities import Kind, from_base, to_base
from fleetcare.domain.wear import MeasuredWears
from fleetcare.operations.entries import first_entries, first_of
from fleetcare.operations.load_tasks import load_start_figures, load_tasks
from fleetcare.operations.rows import Row, day, fetch, grouped, known_day
from fleetcare.operations.settings import stale_days
from fleetcare.operations.wears import load_wears
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.meters import CounterHistory, counter_history, dial_on

if TYPE_CHECKING:
    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class Trial:
    """What is not stored and looked at as if it were: new readings (ids below 0), and stored ones turned suspect."""

    readings: tuple[Reading, ...] = ()
    suspects: frozenset[int] = frozenset()


AS_STORED = Trial()
"""Nothing but what is stored."""
_NOTHING_SHOWN = MeasuredWears()


def item_facts(
    connection: "Connection",
    on: date,
    ids: Sequence[int] | None = None,
    trial: Trial = AS_STORED,
    *,
    with_wears: bool = True,
) -> list[ItemFacts]:
    """Load items (all in use on `on`, or those of some ids) as the rules see them on a day.

    What wears moves no own due point: to store work it is left out, which spares judging the item once more.
    """
    items = load_items(connection, on, ids)
    found = [item.id for item in items]
    counters = load_counters(connection, found, on, trial)
    tasks = load_tasks(connection, found, on, counters)
    done = _load_done(connection, found, on, counters)
    stale = stale_days(connection)
    starts = load_start_figures(connection, found)
    wears = load_wears(connection, on, tasks, counters) if with_wears else {}
    return [
        ItemFacts(
            item=item,
            tasks=tasks.get(item.id, ()),
            done=done,
            counters=counters.get(item.id, {}),
            start_life=starts.get(item.id, {}),
            stale_days=stale,
            on=on,
            wears=shown.pulling,
            sound_oil=shown.sound_oil,
        )
        for item in items
        for shown in [wears.get(item.id, _NOTHING_SHOWN)]
    ]


def load_items(connection: "Connection", on: date, ids: Sequence[int] | None = None) -> list[Item]:
    """Load engines and machines with their dated spells, in tag order; those not yet or no more in use only by id."""
    in_use = "(withdrawn_on is null or withdrawn_on > :on) and (in_service_on is null or in_service_on <= :on)"
    chosen = "item.id in :ids" if ids is not None else in_use
    values: dict[str, object] = {"ids": list(ids)} if ids is not None else {"on": on.isoformat()}
    rows = fetch(
        connection,
        "select item.id, item.tag, item.is_engine, item.name, coalesce(site.name, ''), item.in_service_on, item.as_new"
        f" from item left join site on site.id = item.site_id where {chosen} order by item.tag",
        **values,
    )
    found = [row[0] for row in rows]
    machines = _load_machines(connection, found, on)
    spells = grouped(
        fetch(
            connection,
            "select item_id, status, from_on, why, coalesce(person.name, '') from status_spell"
            " left join person on person.id = status_spell.person_id where item_id in :ids"
            " order by from_on, status_spell.id",
            ids=found,
        )
    )
    factors = grouped(
        fetch(
            connection,
            "select item_id, kind, factor, from_on, why from duty_factor where item_id in :ids order by from_on, id",
            ids=found,
        )
    )
    return [
        Item(
            id=row[0],
            tag=row[1],
            is_engine=bool(row[2]),
            name=row[3],
            site=row[4] or machines.get(row[0], ("", ""))[1],
            machine=machines.get(row[0], ("", ""))[0] if row[2] else row[1],
            in_service_on=day(row[5]),
            as_new=bool(row[6]),
            spells=tuple(StatusSpell(Status(s[1]), known_day(s[2]), s[3], s[4]) for s in spells.get(row[0], ())),
            factors=tuple(
                DutyFactor(Kind(f[1]), Decimal(f[2]), known_day(f[3]), f[4]) for f in factors.get(row[0], ())
            ),
        )
        for row in rows
    ]


def _load_machines(connection: "Connection", ids: Sequence[int], on: date) -> dict[int, tuple[str, str]]:
    """Give tag and site of the machine each engine is fitted in on a day."""
    rows = fetch(
        connection,
        "select fitting.engine_id, item.tag, coalesce(site.name, '') from fitting"
        " join item on item.id = fitting.machine_id left join site on site.id = item.site_id"
        " where fitting.engine_id in :ids and fitting.from_on <= :on and (fitting.to_on is null or fitting.to_on > :on)"
        " order by fitting.from_on",
        ids=list(ids),
        on=on.isoformat(),
    )
    return {row[0]: (row[1], row[2]) for row in rows}


def load_counters(
    connection: "Connection", ids: Sequence[int], on: date, trial: Trial = AS_STORED
) -> dict[int, dict[Kind, CounterHistory]]:
    """Load what counts for each item, per kind, as life totals up to a day."""
    fits = fetch(
        connection,
        "select fit.item_id, meter.id, meter.kind, meter.unit, meter.digits, fit.from_on, fit.first, fit.to_on,"
        " fit.last, fit.unmetered from meter_fit fit join meter on meter.id = fit.meter_id"
        " where fit.item_id in :ids order by fit.from_on, fit.id",
        ids=list(ids),
    )
    starts = load_start_figures(connection, ids)
    readings = _load_readings(connection, sorted({row[1] for row in fits}), trial)
    counters: dict[int, dict[Kind, CounterHistory]] = {}
    by_kind: dict[tuple[int, Kind], list[Row]] = {}
    for row in fits:
        by_kind.setdefault((row[0], Kind(row[2])), []).append(row)
    for (item_id, kind), rows in by_kind.items():
        counter = Counter(
            kind,
            starts.get(item_id, {}).get(kind, Decimal(0)),
            tuple(_fit(row, on, readings.get(row[1], ())) for row in rows),
            tuple(reading for meter_id in {row[1] for row in rows} for reading in readings.get(meter_id, ())),
        )
        counters.setdefault(item_id, {})[kind] = counter_history(counter, on)
    return counters


def _fit(row: Row, on: date, readings: Sequence[Reading]) -> MeterFit:
    """Read a fit as known on a day: an end that lies later has not come yet, and what was not stated was read."""
    meter = Meter(row[1], Kind(row[2]), row[3], Decimal(10) ** row[4] if row[4] else None)

    def shown(stated: str | None, then: date | None) -> Decimal:
        return Decimal(stated) if stated is not None else dial_on(meter, readings, then or date.min, on)

    begun, ended = day(row[5]), day(row[7])
    first = shown(row[6], begun)
    if ended is None or ended > on:
        return MeterFit(meter, begun, first)
    return MeterFit(meter, begun, first, ended, shown(row[8], ended), Decimal(row[9] or 0))


def _load_readings(connection: "Connection", meter_ids: Sequence[int], trial: Trial) -> dict[int, list[Reading]]:
    """Load the readings of some meters: not accepted where suspect, voided, or of an entry since superseded."""
    rows = fetch(
        connection,
        'select reading.meter_id, reading.id, reading."on", reading.value, reading.rolled_over, reading.entry_id,'
        " reading.unit, meter.unit,"
        " (select mark from reading_mark where reading_mark.reading_id = reading.id order by id desc limit 1),"
        " entry.is_void, (select 1 from log_entry later where later.supersedes_id = entry.id)"
        " from reading join meter on meter.id = reading.meter_id left join log_entry entry on entry.id = reading.entry_id"
        ' where reading.meter_id in :ids order by reading."on", reading.id',
        ids=list(meter_ids),
    )
    found: dict[int, list[Reading]] = {}
    for row in rows:
        accepted = row[8] not in {"suspect", "void"} and row[1] not in trial.suspects and not row[9] and not row[10]
        value = Decimal(row[3]) if row[6] == row[7] else from_base(to_base(Decimal(row[3]), row[6]), row[7])
        found.setdefault(row[0], []).append(
            Reading(row[1], row[0], known_day(row[2]), value, bool(row[4]), row[5], accepted)
        )
    for new in trial.readings:
        found.setdefault(new.meter_id, []).append(new)
    return found


def _load_done(
    connection: "Connection", ids: Sequence[int], on: date, counters: dict[int, dict[Kind, CounterHistory]]
) -> dict[int, tuple[Done, ...]]:
    """Load, per task, the entries that closed it: neither superseded, voided, in part, nor dated after `on`."""
    rows = fetch(
        connection,
        "select log_task.task_id, entry.item_id, entry.id, entry.\"on\", coalesce(person.name, ''),"
        " coalesce(big_task.name, '')"
        " from log_task join log_entry entry on entry.id = log_task.entry_id"
        " left join person on person.id = entry.person_id"
        " left join log_task big on big.id = log_task.covered_by_id left join task big_task on big_task.id = big.task_id"
        " where entry.item_id in :ids and not log_task.part_done and not entry.is_void"
        ' and entry."on" <= :on and entry.id not in (select supersedes_id from log_entry where supersedes_id is not null)',
        ids=list(ids),
        on=on.isoformat(),
    )
    firsts = first_entries(connection)
    own = {item_id: own_readings(found) for item_id, found in counters.items()}
    lives: dict[int, dict[Kind, LifeFigure]] = {}
    done: dict[int, list[Done]] = {}
    for row in rows:
        entry_id, entry_day = row[2], known_day(row[3])
        if entry_id not in lives:
            lives[entry_id] = entry_lives(counters.get(row[1], {}), own.get(row[1], {}), entry_id, entry_day)
        first = first_of(firsts, entry_id)
        done.setdefault(row[0], []).append(Done(first, entry_id, entry_day, lives[entry_id], row[4], row[5]))
    return {task_id: tuple(entries) for task_id, entries in done.items()}


def own_readings(counters: Mapping[Kind, CounterHistory]) -> dict[tuple[int, Kind], Reading]:
    """Give the accepted readings that came with a log entry, by entry and kind."""
    return {
        (reading.entry_id, kind): reading
        for kind, counter in counters.items()
        for reading in counter.counter.readings
        if reading.entry_id is not None and reading.accepted
    }


def entry_lives(
    counters: Mapping[Kind, CounterHistory], own: Mapping[tuple[int, Kind], Reading], entry_id: int, on: date
) -> dict[Kind, LifeFigure]:
    """Give an entry's life total of each kind: its own reading, else one of that day, else between neighbours."""
    lives: dict[Kind, LifeFigure] = {}
    for kind, counter in counters.items():
        reading = own.get((entry_id, kind))
        life = counter.life_of(reading.meter_id, reading.value, reading.on) if reading is not None else None
        known = LifeFigure(life) if life is not None else counter.figure_on(on)
        if known is not None:
            lives[kind] = known
    return lives
