"""One meter in the place of another: the old one's fits end, the new one's begin on the same day."""

from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import Meter, MeterFit
from fleetcare.operations.find import FoundMeter

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


def swap_meter(
    session: "Session", old: FoundMeter, on: date, *, last: Decimal, first: Decimal, unmetered: Decimal
) -> FoundMeter:
    """Begin a new meter where an old one ended, for everybody it counts for, and give the new one.

    Figures are in the meter's unit: `last` of the old one, `first` of the new one, and what ran `unmetered` between.
    """
    row = session.get_one(Meter, old.id)
    new = Meter(item_id=row.item_id, kind=row.kind, unit=row.unit, digits=row.digits, decimals=row.decimals)
    session.add(new)
    session.flush()
    fits = session.scalars(
        select(MeterFit)
        .where(col(MeterFit.meter_id) == old.id, col(MeterFit.to_on).is_(None))
        .order_by(col(MeterFit.id))
    ).all()
    for fit in fits:
        fit.to_on, fit.last, fit.unmetered = on, last, unmetered
        session.add(MeterFit(meter_id=new.id, item_id=fit.item_id, from_on=on, first=first))
    session.flush()
    return FoundMeter(new.id, old.kind, old.unit, old.owner_id)
