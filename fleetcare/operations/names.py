"""Sites and people: they exist once somebody names them."""

from typing import TYPE_CHECKING

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import Person, Site

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


def site_id(session: "Session", name: str | None) -> int | None:
    """Give the id of a site, made where it was never named before; None for no name."""
    return _named(session, Site, name)


def person_id(session: "Session", name: str | None) -> int | None:
    """Give the id of a person, made where never named before; None for no name."""
    return _named(session, Person, name)


def _named(session: "Session", table: type[Site] | type[Person], name: str | None) -> int | None:
    if not name:
        return None
    key = name.casefold()
    found = session.scalars(select(table).where(col(table.name_key) == key)).one_or_none()
    if found is None:
        found = table(name=name, name_key=key)
        session.add(found)
        session.flush()
    return found.id
