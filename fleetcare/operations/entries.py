"""Chains of log entries: which entry corrects which."""

from typing import TYPE_CHECKING

from fleetcare.operations.rows import fetch

if TYPE_CHECKING:
    from sqlalchemy import Connection


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
