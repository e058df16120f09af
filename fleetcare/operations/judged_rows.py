"""The rows of `judged_engine`, read and written with plain SQL: the ledger does not know them."""

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any, NamedTuple

from fleetcare.operations.rows import fetch

if TYPE_CHECKING:
    from sqlalchemy import Connection

KEEP = "derived"
"""Under which a connection holds what is to be written once it is closed; see `Context.read`."""


class Kept(NamedTuple):
    """What the rules made of an engine: as of which entry of the ledger, by which rules, from which facts."""

    item_id: int
    seq: int
    book: str
    facts: str
    content: str

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


def keep(connection: "Connection", rows: Sequence[Kept]) -> None:
    """Store rows in the transaction that is open; one that holds as of a later entry of the ledger stays."""
    driver: Any = connection.connection.driver_connection
    driver.executemany(
        "insert into judged_engine (item_id, seq, book, facts, content) values (?, ?, ?, ?, ?)"
        " on conflict (item_id) do update set seq = excluded.seq, book = excluded.book, facts = excluded.facts,"
        " content = excluded.content where excluded.seq >= judged_engine.seq",
        rows,
    )
