"""Whether a database is whole, and every row what the ledger says was stored.

Works on the file alone, whatever tables it has.
"""

import json
from collections.abc import Iterator
from typing import TYPE_CHECKING

from fleetcare.db.chain import DERIVED, START, Entry, driver_of, entries, last_entry, payload, rows
from fleetcare.db.reading import HEAD, revision
from fleetcare.errors import Misread

if TYPE_CHECKING:
    from sqlalchemy import Connection

_SHORTEST = 8
"""Hex digits of a printed head that are enough to compare."""

Newest = dict[tuple[str, str], Entry]
"""For each row, by table and uid, its newest entry."""


def check(connection: "Connection", head: str | None = None) -> list[str]:
    """Give one sentence for everything that is wrong with a database; none if it is sound.

    `head` is SEQ:HASH as it was once printed, the hash whole or its first 8 digits or more; against it
    a removed end of the ledger is found. Raises Misread where it cannot be read.
    """
    printed = _read_head(head) if head is not None else None
    newest: Newest = {}
    return [
        *_file(connection),
        *_chain(connection, newest),
        *(_printed(connection, *printed) if printed else ()),
        *_rows(connection, newest),
    ]


def _file(connection: "Connection") -> Iterator[str]:
    for (complaint,) in driver_of(connection).execute("PRAGMA integrity_check"):
        if complaint != "ok":
            yield f"the file is damaged: {complaint}"
    for table, row_id, other, _ in driver_of(connection).execute("PRAGMA foreign_key_check"):
        yield f"{table} {row_id} refers to a row of {other} that is not there"
    if (found := revision(connection)) != HEAD:
        yield f"the tables are those of {found}, this program's are those of {HEAD}"


def _chain(connection: "Connection", newest: Newest) -> Iterator[str]:
    """Follow the chain from its start, filling `newest` on the way."""
    before = START
    for entry in entries(connection):
        if entry.seq != before.seq + 1:
            yield _missing(before.seq + 1, entry.seq - 1)
        elif entry.previous_hash != before.hash:
            yield f"ledger entry {entry.seq} does not follow from entry {before.seq}: one of them was replaced"
        if not entry.is_sealed:
            yield f"ledger entry {entry.seq} was edited: its seal does not fit what it says"
        newest[entry.kind, entry.row_uid] = before = entry


def _missing(first: int, last: int) -> str:
    return f"ledger entry {first} is missing" if first == last else f"ledger entries {first} to {last} are missing"


def _printed(connection: "Connection", seq: int, digits: str) -> Iterator[str]:
    if not seq:
        return  # printed before anything was stored
    found = driver_of(connection).execute("SELECT hash FROM ledger WHERE seq = :seq", {"seq": seq}).fetchone()
    if found is None:
        yield f"ledger entry {seq} was printed but is not there; the ledger ends at {last_entry(connection).seq}"
    elif not found[0].startswith(digits):
        yield f"ledger entry {seq} is not the one that was printed"


def _rows(connection: "Connection", newest: Newest) -> Iterator[str]:
    """Compare every row with its newest entry, using `newest` up."""
    tables = (
        "SELECT name, EXISTS (SELECT 1 FROM pragma_table_info(sqlite_master.name) WHERE name = 'uid') "
        "FROM sqlite_master WHERE type = 'table' AND name NOT LIKE 'sqlite_%' "
        "AND name NOT IN ('ledger', 'alembic_version') ORDER BY name"
    )
    for table, has_uid in driver_of(connection).execute(tables).fetchall():
        if table in DERIVED:
            continue
        if not has_uid:
            yield f"the table {table} is none of fleetcare's"
            continue
        for row in rows(connection, table):
            entry = newest.pop((table, row["uid"]), None)
            if entry is None:
                yield f"{table} {row['id']} was put in behind the tool's back: the ledger does not know it"
            elif entry.payload != payload(row):
                yield f"{table} {row['id']} is not what ledger entry {entry.seq} says{_difference(entry, payload(row))}"
    for entry in newest.values():
        yield f"the {entry.kind} of ledger entry {entry.seq} was removed"


def _difference(entry: Entry, now: str) -> str:
    """Name the columns that differ, where the entry can still be read."""
    try:
        said, found = json.loads(entry.payload), json.loads(now)
        columns = [name for name in found if found[name] != said.get(name)]
        return ": " + ", ".join(f"{name} is {found[name]!r} and was {said.get(name)!r}" for name in columns)
    except (ValueError, AttributeError):
        return ""


def _read_head(head: str) -> tuple[int, str]:
    seq, _, digits = head.strip().lower().partition(":")
    is_hex = set(digits) <= set("0123456789abcdef") and _SHORTEST <= len(digits) <= len(START.hash)
    if not (seq.isascii() and seq.isdigit() and is_hex):
        raise Misread(
            f"{head!r} is not the head of a ledger", "write it as it is printed, such as 128:9f86d081884c7d65"
        )
    return int(seq), digits
