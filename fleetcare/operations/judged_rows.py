"""The rows of `judged_engine`, read and written with plain SQL: the ledger does not know them."""

from collections.abc import Callable, Sequence
from datetime import date
from typing import TYPE_CHECKING, Any, NamedTuple

from fleetcare.operations.rows import fetch, known_day

if TYPE_CHECKING:
    from sqlalchemy import Connection

KEEP = "derived"
"""Under which a connection holds what is to be written once it is closed; see `Context.read`."""

FAR_BEHIND = 200
"""Entries of the ledger that are looked through each time a row is read, rather than the row be written anew for them."""


class Kept(NamedTuple):
    """What the rules made of an engine: as of which entry of the ledger, by which rules, from which facts.

    The first line of `content` is what its sheets show over its hours, so that it can be had without the rest.
    """

    item_id: int
    seq: int
    book: str
    facts: str
    content: str

    @property
    def lives(self) -> str:
        """What is kept of its findings."""
        return self.content.partition("\n")[2]

    def at(self, seq: int) -> "Kept":
        """Give the row as it holds at a later entry of the ledger."""
        return self._replace(seq=seq)


def sheet_owners(connection: "Connection") -> list[int]:
    """Give every engine that ever had a sheet."""
    return [row[0] for row in fetch(connection, "select distinct item_id from sheet order by item_id")]


def measured_since(connection: "Connection", seq: int) -> list[int]:
    """Give the engines of which sheets were stored after an entry of the ledger."""
    return [
        row[0]
        for row in fetch(
            connection,
            "select distinct json_extract(payload, '$.item_id') from ledger where seq > :seq and kind = 'sheet'",
            seq=seq,
        )
    ]


def kept_rows(connection: "Connection", ids: Sequence[int]) -> dict[int, Kept]:
    """Give what is kept of some engines."""
    rows = fetch(
        connection,
        "select item_id, seq, book, facts, content from judged_engine where item_id in :ids",
        ids=list(ids),
    )
    return {row[0]: Kept(*row) for row in rows}


def newest_day(connection: "Connection") -> date:
    """Give the newest day anything judging looks at is dated: before it, less was known than what is kept rests on."""
    rows = fetch(
        connection,
        'select max(day) from (select max(taken_on) as day from sheet union all select max("on") from reading'
        " union all select max(from_on) from lash_spec)",
    )
    return known_day(rows[0][0]) if rows[0][0] else date.min


def keep_later(connection: "Connection", rows: Sequence[Kept]) -> None:
    """Let rows be kept once a connection is closed, along with those that already wait for that."""
    before: Callable[[Connection], None] | None = connection.info.get(KEEP)

    def write(other: "Connection") -> None:
        if before is not None:
            before(other)
        keep(other, rows)

    if rows:
        connection.info[KEEP] = write


def keep(connection: "Connection", rows: Sequence[Kept]) -> None:
    """Store rows in the transaction that is open; one that holds as of a later entry of the ledger stays."""
    driver: Any = connection.connection.driver_connection
    driver.executemany(
        "insert into judged_engine (item_id, seq, book, facts, content) values (?, ?, ?, ?, ?)"
        " on conflict (item_id) do update set seq = excluded.seq, book = excluded.book, facts = excluded.facts,"
        " content = excluded.content where excluded.seq >= judged_engine.seq",
        rows,
    )
