"""What a task counts from where no entry says: the item's start, nothing, or work done before the log began."""

from collections.abc import Sequence
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.db.tables import OriginFigure, TaskOrigin
from fleetcare.domain.quantities import BASE_UNIT, COUNTED, Figure, from_base, to_base
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem, FoundMeter, find_meters, pick_meter
from fleetcare.operations.load import load_counters
from fleetcare.operations.rows import fetch
from fleetcare.operations.settings import cap_per_day
from fleetcare.rules.readings import breaks_rule

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


def set_start(session: "Session", task_id: int, today: date, *, as_new: bool) -> None:
    """Let a task count from the item's start, or from nothing until somebody says when it was done."""
    session.add(TaskOrigin(task_id=task_id, as_new=as_new, stated_on=today))
    session.flush()


def set_last_done(
    session: "Session",
    item: FoundItem,
    task_id: int,
    last_done: Sequence[date | Figure],
    today: date,
    option: str = "--last-done",
) -> None:
    """Store when a task was last done before the log began: a day, a figure of each dial, or both.

    `option` is what errors call it.
    """
    days = [given for given in last_done if isinstance(given, date)]
    if len(days) > 1:
        raise Refused(f"{option} names two days", "give one")
    on = days[0] if days else None
    if on is not None and on > today:
        raise Refused(f"{option} {on} has not come yet", f"give a day up to {today}")
    origin = TaskOrigin(task_id=task_id, stated_on=today, on=on)
    session.add(origin)
    session.flush()
    meters = _meters_counted(session, item, task_id, on or today)
    told: set[int] = set()
    for figure in last_done:
        if isinstance(figure, Figure):
            meter = pick_meter(meters, figure, item.tag)
            if meter.id in told:
                raise Refused(f"{option} names two figures of the {meter.kind} meter", "give one of each meter")
            told.add(meter.id)
            _refuse_unreachable(session, item, meter, figure, on or today, option)
            session.add(
                OriginFigure(origin_id=origin.id, meter_id=meter.id, value=figure.value, unit=figure.unit or meter.unit)
            )
    session.flush()


def _meters_counted(session: "Session", item: FoundItem, task_id: int, on: date) -> list[FoundMeter]:
    """Give the meters a bare figure may be read off: those the task counts, or all where it counts none."""
    rows = fetch(
        session.connection(),
        "select kind from task_trigger where version_id = (select max(id) from task_version where task_id = :task)",
        task=task_id,
    )
    kinds = {row[0] for row in rows}
    meters = find_meters(session.connection(), item.id, on)
    return [meter for meter in meters if meter.kind in kinds] if kinds & set(COUNTED) else meters


def _refuse_unreachable(
    session: "Session", item: FoundItem, meter: FoundMeter, figure: Figure, by: date, option: str
) -> None:
    """Refuse work done at a figure that the meter cannot have reached by a day, going on from its latest reading."""
    history = load_counters(session.connection(), [item.id], by)[item.id][meter.kind]
    metered = history.metered_at(from_base(to_base(figure.value, figure.unit or meter.unit), meter.unit), by)
    latest = history.latest
    if latest is None or metered is None or metered <= latest.metered:
        return
    cap = cap_per_day(session.connection(), meter.kind)
    why = breaks_rule((latest.on, latest.metered), (by, metered), cap, BASE_UNIT[meter.kind])
    if why is not None:
        raise Refused(
            f"{option} {figure} lies out of reach of reading {latest.reading.id} on {latest.on}: {why}",
            "check it, or first enter a newer reading",
        )
