"""Status and duty of an engine: laid up, stood down, back in service, withdrawn; duty factors."""

from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import DutyFactor, Fitting, Item, StatusSpell
from fleetcare.domain.engines import Status
from fleetcare.domain.quantities import Kind, plain
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem
from fleetcare.operations.items import fit_engine
from fleetcare.operations.names import person_id

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


def change_status(
    session: "Session", engine: FoundItem, status: Status, on: date, *, why: str = "", by: str | None = None
) -> None:
    """Begin a spell of a status on a day. Refuses one that is in force already, and any change of a withdrawn engine."""
    spells = session.scalars(
        select(StatusSpell)
        .where(col(StatusSpell.item_id) == engine.id)
        .order_by(col(StatusSpell.from_on), col(StatusSpell.id))
    ).all()
    before = [spell for spell in spells if spell.from_on <= on]
    current = before[-1].status if before else Status.IN_SERVICE
    since = f" since {before[-1].from_on}" if before else ""
    if current is Status.WITHDRAWN or any(spell.status is Status.WITHDRAWN for spell in spells):
        raise Refused(f"{engine.tag} is withdrawn", "add it anew with fleetcare engine add")
    if current is status:
        raise Refused(f"{engine.tag} is {status}{since}", "nothing needs to be done")
    session.add(StatusSpell(item_id=engine.id, status=status, from_on=on, why=why, person_id=person_id(session, by)))
    if status is Status.WITHDRAWN:
        _withdraw(session, engine, on)
    session.flush()


def set_factor(session: "Session", item: FoundItem, kind: Kind, factor: Decimal, on: date, why: str) -> None:
    """Set the duty factor of a kind from a day on; 1 ends an earlier one. Refuses anything but 0 < factor <= 1."""
    if not 0 < factor <= 1:
        raise Refused(f"a duty factor of {plain(factor)} cannot be", "give one above 0 and up to 1")
    session.add(DutyFactor(item_id=item.id, kind=kind, factor=factor, from_on=on, why=why))
    session.flush()


def _withdraw(session: "Session", engine: FoundItem, on: date) -> None:
    """Free the tag and take the engine out of its machine; its history stays."""
    session.get_one(Item, engine.id).withdrawn_on = on
    fitted = session.scalars(
        select(Fitting).where(col(Fitting.engine_id) == engine.id, col(Fitting.to_on).is_(None))
    ).one_or_none()
    if fitted is not None:
        fit_engine(session, engine, None, on)
