"""Which meter counts for whom, from when: fits made, ended and restated."""

from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import Fitting, Meter, MeterFit, Reading, ReadingMark, StartFigure
from fleetcare.domain.quantities import Figure, Kind, from_base, to_base
from fleetcare.drafts.items import ItemDraft
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem, find_meters, pick_meter
from fleetcare.operations.rows import fetch

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

_START_NOTE = "start figure"


def add_meters(session: "Session", item: FoundItem, draft: ItemDraft, from_on: date | None) -> None:
    """Add the meters a draft names, counting from a day (None: since ever). Refuses a kind counted already."""
    owned = {meter.kind for meter in _own_meters(session, item.id)}
    for kind, unit in draft.meter:
        if kind in owned:
            raise Refused(f"{item.tag} has a {kind} meter already", "a new one is told by fleetcare reading --replaced")
        digits = next((d for d in draft.meter_digits if d[0] in {None, kind}), None)
        meter = Meter(
            item_id=item.id,
            kind=kind,
            unit=unit,
            digits=digits[1] if digits else None,
            decimals=digits[2] if digits else None,
        )
        session.add(meter)
        session.flush()
        _stop_borrowing(session, item, kind, from_on)
        session.add(MeterFit(meter_id=meter.id, item_id=item.id, from_on=from_on, first=Decimal(0)))
        _lend_to_fitted(session, item, meter, from_on)
    _check_digits(item, draft)
    session.flush()


def set_digits(session: "Session", item: FoundItem, draft: ItemDraft) -> None:
    """Set the digits of an item's own meters, which give their rollover."""
    meters = _own_meters(session, item.id)
    for kind, before, after in draft.meter_digits:
        fitting = [meter for meter in meters if kind in {None, meter.kind}]
        if len(fitting) != 1:
            raise Refused(
                f"--meter-digits {before}.{after} binds to {'no' if not fitting else 'more than one'} meter of {item.tag}",
                "name the kind, such as distance:6.0",
            )
        fitting[0].digits, fitting[0].decimals = before, after
    session.flush()


def restate_start(session: "Session", item: FoundItem, draft: ItemDraft, *, is_new: bool) -> None:
    """Set the figures an item started from: life total, first figure of the first fit, and a reading of that day."""
    if not draft.start_at:
        return
    assert draft.in_service is not None
    meters = find_meters(session.connection(), item.id, draft.in_service)
    seen: set[Kind] = set()
    for figure in draft.start_at:
        meter = pick_meter(meters, figure, item.tag)
        if meter.kind in seen:
            raise Refused(f"--start-at names {meter.kind} twice", "give one figure of each kind")
        seen.add(meter.kind)
        _set_start_figure(session, item, meter.kind, figure, meter.unit)
        if meter.owner_id == item.id:
            _restate_first(session, item, meter.id, meter.unit, figure, draft.in_service, is_new)
    left = {meter.kind for meter in meters} - seen
    if draft.as_new and left:
        raise Refused(
            f"{item.tag} counts as new but has no start figure of {', '.join(sorted(left))}", "give --start-at for each"
        )
    session.flush()


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
    session: "Session", item: FoundItem, meter_id: int, unit: str, figure: Figure, on: date, is_new: bool
) -> None:
    """Make a start figure the first of the item's first fit, and a reading of that day."""
    fit = session.scalars(
        select(MeterFit)
        .where(col(MeterFit.meter_id) == meter_id, col(MeterFit.item_id) == item.id)
        .order_by(col(MeterFit.id))
    ).first()
    assert fit is not None
    fit.from_on = on
    fit.first = from_base(to_base(figure.value, figure.unit or unit), unit)
    if not is_new:
        for (reading_id,) in fetch(
            session.connection(),
            "select id from reading where meter_id = :meter and note = :note",
            meter=meter_id,
            note=_START_NOTE,
        ):
            session.add(ReadingMark(reading_id=reading_id, mark="void", why="start figure restated", on=on))
    session.add(Reading(meter_id=meter_id, on=on, value=figure.value, unit=figure.unit or unit, note=_START_NOTE))


def _check_digits(item: FoundItem, draft: ItemDraft) -> None:
    kinds = {kind for kind, _ in draft.meter}
    for kind, before, after in draft.meter_digits:
        ambiguous = kind is None and len(kinds) > 1
        if kinds and (ambiguous or kind not in {None, *kinds}):
            raise Refused(
                f"--meter-digits {before}.{after} binds to no one meter of {item.tag}",
                "name the kind, such as distance:6.0",
            )
