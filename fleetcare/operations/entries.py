"""Chains of log entries: which entry corrects which, and which sheets that leaves."""

from collections.abc import Iterable
from typing import TYPE_CHECKING

from fleetcare.operations.rows import fetch

if TYPE_CHECKING:
    from sqlalchemy import Connection

NOT_YET = 2**62
"""Stands for the number an entry would get if it were stored: later than any."""

SHEET_COUNTS = (
    "not entry.is_void and not exists (select 1 from log_entry later where later.supersedes_id = entry.id)"
    " and sheet.taken_on <= :on"
)
"""Of `sheet` and its `entry`: sheets up to a day whose entry was neither superseded nor voided."""


def stored_under(connection: "Connection", keys: Iterable[str]) -> dict[str, int]:
    """Give the entries stored under some import keys, by key."""
    rows = fetch(connection, "select import_key, id from log_entry where import_key in :keys", keys=list(keys))
    return {str(row[0]): int(row[1]) for row in rows}


def first_entries(connection: "Connection") -> dict[int, int]:
    """Map each correcting entry to the first entry of its chain."""
    firsts: dict[int, int] = {}
    for entry_id, superseded in fetch(
        connection, "select id, supersedes_id from log_entry where supersedes_id is not null order by id"
    ):
        firsts[entry_id] = first_of(firsts, superseded)
    return firsts


def first_of(firsts: dict[int, int], entry_id: int) -> int:
    """Give the first entry of an entry's chain of corrections; itself where it corrects nothing."""
    return firsts.get(entry_id, entry_id)
