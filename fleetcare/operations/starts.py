"""What a task counts from where no entry says: the item's start, nothing, or work done before the log began."""

from collections.abc import Sequence
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.db.tables import OriginFigure, TaskOrigin
from fleetcare.domain.quantities import COUNTED, Figure, from_base, plain, to_base
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem, FoundMeter, find_meters, pick_meter
from fleetcare.operations.load import load_counters
from fleetcare.operations.rows import fetch

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


def set_start(session: "Session", task_id: int, *, as_new: bool) -> None:
    """Let a task count from the item's start, or from nothing until somebody says when it was done."""
    session.add(TaskOrigin(task_id=task_id, as_new=as_new))
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
    origin = TaskOrigin(task_id=task_id, on=on)
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
            _refuse_beyond_latest(session, item, meter, figure, today, option)
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


def _refuse_beyond_latest(
    session: "Session", item: FoundItem, meter: FoundMeter, figure: Figure, today: date, option: str
) -> None:
    """Refuse work done at a figure that the meter has not reached by its latest reading."""
    history = load_counters(session.connection(), [item.id], today)[item.id][meter.kind]
    life = history.life_at(from_base(to_base(figure.value, figure.unit or meter.unit), meter.unit), today)
    if history.latest is not None and life is not None and life > history.latest.life:
        dial = history.dial_of(history.latest.life)
        shown = f"{plain(dial)} {meter.unit}" if dial is not None else "less"
        raise Refused(
            f"{option} {figure} lies beyond the latest reading, {shown} on {history.latest.on}",
            "check it, or first enter a newer reading",
        )
