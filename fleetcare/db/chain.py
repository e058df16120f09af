"""The seals of the ledger: what an entry holds, how it is sealed to the one before, and where the chain ends.

Plain SQL and no tables, so that a card or a label can carry the ledger's head without loading them.
"""

import hashlib
import json
from collections.abc import Iterable, Iterator
from typing import NamedTuple

from sqlalchemy import Connection, RowMapping

GENESIS = "0" * 64  # what the first entry is sealed to


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


# In the driver's own words, as every write asks them: taking a statement apart takes longer than answering it.
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


def entries(connection: Connection) -> Iterator[Entry]:
    """Give every entry of the ledger in order."""
    for row in connection.exec_driver_sql(_ALL):
        yield Entry(*row)


def last_entry(connection: Connection) -> Entry:
    """Give the newest entry of the ledger, START while it has none."""
    row = connection.exec_driver_sql(_NEWEST).one_or_none()
    return Entry(*row) if row else START


def append(connection: Connection, added: list[Entry]) -> None:
    """Store entries that follow from the last one."""
    connection.exec_driver_sql(_APPEND, [tuple(entry) for entry in added])


def rows(connection: Connection, table: str, ids: Iterable[int] | None = None) -> Iterator[RowMapping]:
    """Give the rows of a table in id order, all or those with the given ids, every value as the file holds it.

    No column types are applied: what is sealed is what is stored, even where somebody spoilt it.
    """
    everything = f"SELECT * FROM {connection.dialect.identifier_preparer.quote_identifier(table)}"
    if ids is None:
        yield from connection.exec_driver_sql(f"{everything} ORDER BY id").mappings()
    else:
        some = f"{everything} WHERE id IN (SELECT value FROM json_each(?)) ORDER BY id"
        yield from connection.exec_driver_sql(some, (canonical(list(ids)),)).mappings()


def payload(row: RowMapping) -> str:
    """Give the payload of a row: figures and days as text, truth as 0 or 1, references as ids.

    Ids will do, because the payloads of the rows referred to hold those ids too.
    """
    return canonical(dict(row))
