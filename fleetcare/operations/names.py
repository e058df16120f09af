"""Sites and people: they exist once somebody names them."""

from typing import TYPE_CHECKING

from fleetcare.db.tables import Person, Site
from fleetcare.operations.rows import fetch

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
    stored = fetch(session.connection(), f"select id from {table.__tablename__} where name_key = :key", key=key)
    if stored:
        return int(stored[0][0])
    row = table(name=name, name_key=key)
    session.add(row)
    session.flush()
    return row.id
