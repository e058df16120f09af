"""Sites and people: they exist once somebody names them."""

from typing import TYPE_CHECKING, TypeVar

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import Person, Site
from fleetcare.errors import Refused
from fleetcare.operations.rows import fetch

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

Named = TypeVar("Named", Site, Person)


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


def rename_site(session: "Session", known: str, name: str) -> str:
    """Give a site another name, and the one it had; refuses an unknown site and a name another one has."""
    return _rename(session, Site, "site", known, name)


def rename_person(session: "Session", known: str, name: str) -> str:
    """Give a person another name, and the one they had; refuses an unknown person and a name another one has."""
    return _rename(session, Person, "person", known, name)


def _rename(session: "Session", table: type[Named], what: str, known: str, name: str) -> str:
    """Change the one row of a name: all that names it says the new name, the ledger keeps the old one."""
    row = _by_key(session, table, known)
    if row is None:
        names = [found.name for found in session.scalars(select(table).order_by(col(table.name)))]
        raise Refused(f"there is no {what} {known!r}", f"choose one of {', '.join(names) or 'none yet'}")
    old = row.name
    if old == name:
        raise Refused(f"the {what} is called {name!r} already", "write the new name")
    taken = _by_key(session, table, name)
    if taken is not None and taken.id != row.id:
        raise Refused(f"there is a {what} {taken.name!r} already", "write another name")
    row.name, row.name_key = name, name.casefold()
    session.flush()
    return old


def _by_key(session: "Session", table: type[Named], name: str) -> Named | None:
    return session.scalars(select(table).where(col(table.name_key) == name.casefold())).one_or_none()
