"""Rows read with plain SQL, typed at the door.

Reading never loads the tables' classes: declaring them costs more time than the whole due list.
"""

from collections.abc import Iterable, Sequence
from datetime import date
from decimal import Decimal
from functools import cache
from typing import TYPE_CHECKING, Any, cast

if TYPE_CHECKING:
    from sqlalchemy import Connection, TextClause

Row = tuple[Any, ...]


def fetch(connection: "Connection", sql: str, **values: object) -> Sequence[Row]:
    """Give all rows of a statement. A name in it bound to a list or tuple stands for all of its values."""
    lists = tuple(name for name, value in values.items() if isinstance(value, list | tuple))
    return cast("Sequence[Row]", connection.execute(_statement(sql, lists), values).all())


@cache
def _statement(sql: str, lists: tuple[str, ...]) -> "TextClause":
    """Give a statement read once: what is asked again and again need not be taken apart again."""
    from sqlalchemy import bindparam, text

    return text(sql).bindparams(*(bindparam(name, expanding=True) for name in lists))


def day(value: str | date | None) -> date | None:
    """Read a stored day."""
    return date.fromisoformat(value) if isinstance(value, str) else value


def known_day(value: str | date) -> date:
    """Read a stored day that is never missing."""
    return date.fromisoformat(value) if isinstance(value, str) else value


def figure(value: str | None) -> Decimal | None:
    """Read a stored exact figure."""
    return None if value is None else Decimal(value)


def grouped(rows: Iterable[Row]) -> dict[int, list[Row]]:
    """Group rows by their first column, keeping their order."""
    groups: dict[int, list[Row]] = {}
    for row in rows:
        groups.setdefault(row[0], []).append(row)
    return groups
