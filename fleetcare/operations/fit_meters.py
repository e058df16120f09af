"""Which meter counts for whom, from when: fits made, ended and restated."""

from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import Fitting, Meter, MeterFit, ReadingMark, StartFigure
from fleetcare.domain import meters as facts
from fleetcare.domain.quantities import Figure, Kind, from_base, plain, to_base
from fleetcare.drafts.items import ItemDraft
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem, FoundMeter, find_fits, find_meters, pick_meter
from fleetcare.operations.load import load_counters
from fleetcare.operations.readings import NewReading, store_reading
from fleetcare.operations.rows import fetch

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

_START_NOTE = "start figure"


def add_meters(session: "Session", item: FoundItem, draft: ItemDraft, from_on: date | None) -> None:
    """Add the meters a draft names, counting from a day (None: since ever). Refuses a kind counted already."""
    owned = {
        fit.meter.kind
        for fit in find_fits(session.connection(), item.id)
        if fit.meter.owner_id == item.id and fit.to_on is None
    }
    for kind, unit in draft.meter:
        if kind in owned:
            raise Refused(
                f"a meter of {item.tag} counts {kind} already", "a new one is told by fleetcare reading --replaced"
            )
        meter = Meter(item_id=item.id, kind=kind, unit=unit)
        session.add(meter)
        session.flush()
        _stop_borrowing(session, item, kind, from_on)
        session.add(MeterFit(meter_id=meter.id, item_id=item.id, from_on=from_on, first=Decimal(0)))
        _lend_to_fitted(session, item, meter, from_on)
    session.flush()


def set_digits(session: "Session", item: FoundItem, draft: ItemDraft) -> None:
    """Set the digits of an item's own meters, which give their rollover. Refuses fewer than have been read."""
    meters = _own_meters(session, item.id) if draft.meter_digits else []
    for kind, before, after in draft.meter_digits:
        fitting = [meter for meter in meters if kind in {None, meter.kind}]
        if len(fitting) != 1:
            raise Refused(
                f"--meter-digits {before}.{after} binds to {'no' if not fitting else 'more than one'} meter of {item.tag}",
                "name the kind, such as distance:6.0",
            )
        meter = fitting[0]
        for reading in _accepted(session, item, meter.kind, meter.id):
            if reading.value >= 10**before:
                raise Refused(
                    f"--meter-digits {before}.{after} has no room for reading {reading.id} of {item.tag},"
                    f" {plain(reading.value)} {meter.unit}",
                    "count the digits before the point again",
                )
        meter.digits, meter.decimals = before, after
    session.flush()


def restate_start(session: "Session", item: FoundItem, draft: ItemDraft, *, is_new: bool) -> None:
    """Set the figures an item started from: life total, first figure of the first fit, and a reading of that day.

    A bare figure is that of the item's own meter, where it has one.
    """
    if not draft.start_at:
        return
    assert draft.in_service is not None
    meters = _meters_from(session, item, draft.in_service)
    seen: set[Kind] = set()
    own = [meter for meter in meters if meter.owner_id == item.id]
    for figure in draft.start_at:
        meter = pick_meter(meters if figure.unit or not own else own, figure, item.tag)
        if meter.kind in seen:
            raise Refused(f"--start-at names {meter.kind} twice", "give one figure of each kind")
        seen.add(meter.kind)
        _set_start_figure(session, item, meter.kind, figure, meter.unit)
        if meter.owner_id == item.id:
            _restate_first(session, item, meter, figure, draft.in_service, is_new)
    left = {meter.kind for meter in meters} - seen
    if draft.as_new and left:
        raise Refused(
            f"{item.tag} counts as new but has no start figure of {', '.join(sorted(left))}", "give --start-at for each"
        )
    session.flush()


def _meters_from(session: "Session", item: FoundItem, on: date) -> list[FoundMeter]:
    """Give the meters counting for an item on its first day; an own one that began later begins with it."""
    fits = find_fits(session.connection(), item.id)
    meters = {fit.meter.kind: fit.meter for fit in fits if fit.counts_on(on)}
    for fit in fits:
        if fit.meter.owner_id == item.id and fit.from_on is not None and on < fit.from_on:
            meters.setdefault(fit.meter.kind, fit.meter)
    return list(meters.values())


def count_with_machine(session: "Session", engine: FoundItem, machine: FoundItem, on: date) -> None:
    """Let a machine's meters count for an engine from a day, save the kinds the engine has a meter for."""
    own = {meter.kind for meter in _own_meters(session, engine.id)}
    for meter in _own_meters(session, machine.id):
        if meter.kind not in own:
            session.add(MeterFit(meter_id=meter.id, item_id=engine.id, from_on=on))
    session.flush()


def stop_counting(session: "Session", engine: FoundItem, machine_id: int, on: date) -> None:
    """End what a machine's meters count for an engine on a day."""
    for meter in _own_meters(session, machine_id):
        for fit in _open_fits(session, meter.id):
            if fit.item_id == engine.id:
                fit.to_on = on
    session.flush()


def _own_meters(session: "Session", item_id: int) -> list[Meter]:
    """Give the meters now counting that are an item's own, one a kind; replaced ones are left out."""
    rows = session.scalars(
        select(Meter)
        .join(MeterFit, col(MeterFit.meter_id) == col(Meter.id))
        .where(col(Meter.item_id) == item_id, col(MeterFit.item_id) == item_id, col(MeterFit.to_on).is_(None))
        .order_by(col(Meter.id))
    )
    return list(rows)


def _open_fits(session: "Session", meter_id: int) -> list[MeterFit]:
    return list(
        session.scalars(
            select(MeterFit)
            .where(col(MeterFit.meter_id) == meter_id, col(MeterFit.to_on).is_(None))
            .order_by(col(MeterFit.id))
        )
    )


def _stop_borrowing(session: "Session", item: FoundItem, kind: Kind, on: date | None) -> None:
    """End a machine's count of a kind that the engine from now on counts by itself."""
    for meter in find_meters(session.connection(), item.id, on or date.max):
        if meter.kind is kind and meter.owner_id != item.id and on is not None:
            for fit in _open_fits(session, meter.id):
                if fit.item_id == item.id:
                    fit.to_on = on


def _lend_to_fitted(session: "Session", machine: FoundItem, meter: Meter, on: date | None) -> None:
    """Let a machine's new meter count for the engines fitted in it."""
    if machine.is_engine:
        return
    fittings = session.scalars(
        select(Fitting).where(col(Fitting.machine_id) == machine.id, col(Fitting.to_on).is_(None))
    )
    for fitting in fittings:
        if meter.kind not in {own.kind for own in _own_meters(session, fitting.engine_id)}:
            begins = max(on, fitting.from_on) if on is not None else fitting.from_on
            session.add(MeterFit(meter_id=meter.id, item_id=fitting.engine_id, from_on=begins))


def _set_start_figure(session: "Session", item: FoundItem, kind: Kind, figure: Figure, unit: str) -> None:
    row = session.scalars(
        select(StartFigure).where(col(StartFigure.item_id) == item.id, col(StartFigure.kind) == kind)
    ).one_or_none()
    row = row or StartFigure(item_id=item.id, kind=kind, value=Decimal(0), unit=unit)
    row.value, row.unit = figure.value, figure.unit or unit
    session.add(row)


def _restate_first(
    session: "Session", item: FoundItem, meter: FoundMeter, figure: Figure, on: date, is_new: bool
) -> None:
    """Make a start figure the first of the item's first fit, and a reading of that day, held against later ones."""
    fit = session.scalars(
        select(MeterFit)
        .where(col(MeterFit.meter_id) == meter.id, col(MeterFit.item_id) == item.id)
        .order_by(col(MeterFit.id))
    ).first()
    assert fit is not None
    fit.from_on = on
    fit.first = from_base(to_base(figure.value, figure.unit or meter.unit), meter.unit)
    if not is_new:
        _void_start(session, meter, on)
        _refuse_earlier(session, item, meter, on)
    remedy = "check --start-at and --in-service, or void that reading"
    store_reading(session, item, meter, NewReading(on, figure, note=_START_NOTE), remedy=remedy)


def _void_start(session: "Session", meter: FoundMeter, on: date) -> None:
    """Void the reading that an earlier start figure left."""
    for (reading_id,) in fetch(
        session.connection(),
        "select id from reading where meter_id = :meter and note = :note",
        meter=meter.id,
        note=_START_NOTE,
    ):
        session.add(ReadingMark(reading_id=reading_id, mark="void", why="start figure restated", on=on))
    session.flush()


def _refuse_earlier(session: "Session", item: FoundItem, meter: FoundMeter, on: date) -> None:
    """Refuse a first day that readings lie before: the meter would not count them."""
    for reading in _accepted(session, item, meter.kind, meter.id):
        if reading.on < on:
            raise Refused(
                f"reading {reading.id} of {item.tag} on {reading.on} lies before --in-service {on}",
                "give an earlier day, or void that reading",
            )


def _accepted(session: "Session", item: FoundItem, kind: Kind, meter_id: int) -> list[facts.Reading]:
    """Give the readings of one of an item's meters that count, in its own unit."""
    counter = load_counters(session.connection(), [item.id], date.max)[item.id][kind].counter
    return [reading for reading in counter.readings if reading.meter_id == meter_id and reading.accepted]
