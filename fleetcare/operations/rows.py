"""Rows read with plain SQL, typed at the door.

Reading never loads the tables' classes: declaring them costs more time than the whole due list.
"""

import json
import re
from collections.abc import Iterable, Sequence
from datetime import date
from decimal import Decimal
from functools import cache
from typing import TYPE_CHECKING, Any, cast

if TYPE_CHECKING:
    from sqlalchemy import Connection

Row = tuple[Any, ...]


def fetch(connection: "Connection", sql: str, **values: object) -> Sequence[Row]:
    """Give all rows of a statement. A name in it bound to a list or tuple stands for all of its values, however many.

    The driver is asked directly, in the transaction that is open: everything in between takes ten times as long as
    it takes to answer, and a file that is only read is opened by nothing else.
    """
    lists = tuple(name for name, value in values.items() if isinstance(value, list | tuple))
    bound = values | {name: json.dumps(values[name]) for name in lists}
    driver: Any = connection.connection.driver_connection
    return cast("Sequence[Row]", driver.execute(_with_lists(sql, lists), bound).fetchall())


@cache
def _with_lists(sql: str, lists: tuple[str, ...]) -> str:
    """Let some names of a statement stand for lists, each bound as one value: SQLite limits how many there may be."""
    for name in lists:
        sql = re.sub(rf":{name}\b", f"(select value from json_each(:{name}))", sql)
    return sql


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
