"""The smallest reads and writes, and the one line a failed one gives."""

from collections.abc import Callable

import pytest

from fleetcare.context import Context
from fleetcare.db.tables import Site
from fleetcare.errors import NoDatabase, Refused
from fleetcare.operations.rows import fetch


def add_site(context: Context, name: str = "North Sluice") -> None:
    """One small write."""
    with context.write() as session:
        session.add(Site(name=name, name_key=name.casefold()))


def sites(context: Context) -> list[str]:
    """One small read."""
    with context.read() as connection:
        return [row[0] for row in fetch(connection, "SELECT name FROM site ORDER BY id")]


def add_a_refused_site(context: Context) -> None:
    """A write that turns out to be refused after it has stored something."""
    with context.write() as session:
        session.add(Site(name="West", name_key="west"))
        session.flush()
        raise Refused("no", "do not")


def add_what_does_not_fit(context: Context) -> None:
    """A write larger than SQLite is allowed to make the file."""
    with context.write() as session:
        session.connection().exec_driver_sql("PRAGMA max_page_count = 1")
        session.add(Site(name="x" * 100_000, name_key="x"))


def complaint(error: pytest.ExceptionInfo[NoDatabase]) -> str:
    """The one line a person is shown."""
    (line,) = error.value.lines()
    assert "\n" not in line
    assert error.value.exit_code == 3
    assert error.value.remedy
    return line


Use = Callable[[Context], object]
BOTH = pytest.mark.parametrize("use", [sites, add_site])
