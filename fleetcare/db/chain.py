"""The seals of the ledger: what an entry holds, how it is sealed to the one before, and where the chain ends.

Plain SQL and no tables, so that a card or a label can carry the ledger's head without loading them.
"""

import hashlib
import json
from collections.abc import Iterable, Iterator, Mapping, Sequence
from typing import TYPE_CHECKING, Any, NamedTuple

if TYPE_CHECKING:
    from sqlalchemy import Connection

GENESIS = "0" * 64  # what the first entry is sealed to

DERIVED = ("judged_engine",)
"""Tables whose rows are worked out from all others and may be dropped at any time: the ledger knows none of them."""


class Entry(NamedTuple):
    """One entry of the ledger: the row `row_uid` of the table `kind`, as it was stored or changed."""

    seq: int
    kind: str
    row_uid: str
    payload_version: int
    payload: str
    previous_hash: str
    hash: str

    @property
    def is_sealed(self) -> bool:
        """Whether the entry's hash fits its content."""
        return self.hash == seal(*self[:-1])

    @property
    def head(self) -> str:
        """The entry's number and hash, as printed on cards and labels."""
        return f"{self.seq}:{self.hash}"


_ALL = f"SELECT {', '.join(Entry._fields)} FROM ledger ORDER BY seq"
_NEWEST = f"{_ALL} DESC LIMIT 1"
_APPEND = f"INSERT INTO ledger ({', '.join(Entry._fields)}) VALUES ({', '.join('?' for _ in Entry._fields)})"

START = Entry(0, "", "", 0, "", "", GENESIS)
"""What stands before the first entry."""


canonical = json.JSONEncoder(ensure_ascii=False, sort_keys=True, separators=(",", ":"), default=repr).encode
"""Gives the one JSON text of a value: keys sorted, no spaces, nothing escaped that need not be."""


def seal(seq: int, kind: str, row_uid: str, payload_version: int, payload: str, previous_hash: str) -> str:
    """Give the SHA-256 (FIPS 180-4) that an entry with this content must carry, as 64 hex digits."""
    content = canonical([seq, kind, row_uid, payload_version, payload, previous_hash])
    return hashlib.sha256(content.encode()).hexdigest()


def entries(connection: "Connection") -> Iterator[Entry]:
    """Give every entry of the ledger in order."""
    for row in driver_of(connection).execute(_ALL):
        yield Entry(*row)


def last_entry(connection: "Connection") -> Entry:
    """Give the newest entry of the ledger, START while it has none."""
    row = driver_of(connection).execute(_NEWEST).fetchone()
    return Entry(*row) if row else START


def append(connection: "Connection", added: Sequence[Entry]) -> None:
    """Store entries that follow from the last one."""
    driver_of(connection).executemany(_APPEND, added)


def rows(connection: "Connection", table: str, ids: Iterable[int] | None = None) -> Iterator[dict[str, Any]]:
    """Give the rows of a table in id order, all or those with the given ids, every value as the file holds it.

    No column types are applied: what is sealed is what is stored, even where somebody spoilt it.
    """
    some, values = "", []
    if ids is not None:
        some, values = "WHERE id IN (SELECT value FROM json_each(?))", [canonical(list(ids))]
    name = table.replace('"', '""')
    found = driver_of(connection).execute(f'SELECT * FROM "{name}" {some} ORDER BY id', values)
    columns = [column for column, *_ in found.description]
    for row in found:
        yield dict(zip(columns, row, strict=True))


def driver_of(connection: "Connection") -> Any:
    """Give the driver's connection, in the transaction that is open: what lies between takes longer than the answer."""
    return connection.connection.driver_connection


def payload(row: Mapping[str, Any]) -> str:
    """Give the payload of a row: figures and days as text, truth as 0 or 1, references as ids.

    Ids will do, because the payloads of the rows referred to hold those ids too.
    """
    return canonical(row)
