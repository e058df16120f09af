"""The seals of the ledger: what an entry holds, how it is sealed to the one before, and where the chain ends.

Plain SQL and no tables, so that a card or a label can carry the ledger's head without loading them.
"""

import hashlib
import json
from collections.abc import Iterable, Iterator
from functools import cache
from typing import NamedTuple

from sqlalchemy import Connection, RowMapping, TextClause, bindparam, text

GENESIS = "0" * 64  # what the first entry is sealed to
_MOST_IDS = 500  # in one query; SQLite bounds how many values a statement may bind


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


_NEWEST = text(f"SELECT {', '.join(Entry._fields)} FROM ledger ORDER BY seq DESC LIMIT 1")

START = Entry(0, "", "", 0, "", "", GENESIS)
"""What stands before the first entry."""


def canonical(value: object) -> str:
    """Give the one JSON text of a value: keys sorted, no spaces, nothing escaped that need not be."""
    return json.dumps(value, ensure_ascii=False, sort_keys=True, separators=(",", ":"), default=repr)


def seal(seq: int, kind: str, row_uid: str, payload_version: int, payload: str, previous_hash: str) -> str:
    """Give the SHA-256 (FIPS 180-4) that an entry with this content must carry, as 64 hex digits."""
    content = canonical([seq, kind, row_uid, payload_version, payload, previous_hash])
    return hashlib.sha256(content.encode()).hexdigest()


def entries(connection: Connection) -> Iterator[Entry]:
    """Give every entry of the ledger in order."""
    for row in connection.execute(text(f"SELECT {', '.join(Entry._fields)} FROM ledger ORDER BY seq")):
        yield Entry(*row)


def last_entry(connection: Connection) -> Entry:
    """Give the newest entry of the ledger, START while it has none."""
    row = connection.execute(_NEWEST).one_or_none()
    return Entry(*row) if row else START


def rows(connection: Connection, table: str, ids: Iterable[int] | None = None) -> Iterator[RowMapping]:
    """Give the rows of a table in id order, all or those with the given ids, every value as the file holds it.

    No column types are applied: what is sealed is what is stored, even where somebody spoilt it.
    """
    everything = f"SELECT * FROM {connection.dialect.identifier_preparer.quote_identifier(table)}"
    if ids is None:
        yield from connection.execute(text(f"{everything} ORDER BY id")).mappings()
        return
    some, wanted = _with_ids(everything), sorted(ids)
    for start in range(0, len(wanted), _MOST_IDS):
        yield from connection.execute(some, {"ids": wanted[start : start + _MOST_IDS]}).mappings()


@cache
def _with_ids(everything: str) -> TextClause:
    """Narrow a statement to some ids; read once, as every write to the table asks it."""
    return text(f"{everything} WHERE id IN :ids ORDER BY id").bindparams(bindparam("ids", expanding=True))


def payload(row: RowMapping) -> str:
    """Give the payload of a row: figures and days as text, truth as 0 or 1, references as ids.

    Ids will do, because the payloads of the rows referred to hold those ids too.
    """
    return canonical(dict(row))
