"""The ledger writes itself: whatever a session stores or changes is appended, sealed to what went before.

The session hooks here are the only writer. An entry's payload is its row exactly as the database
holds it, all columns: figures and days as text, truth as 0 or 1, references as ids (the payloads of
the rows referred to hold those ids too).
"""

import hashlib
import json
from collections import defaultdict
from collections.abc import Iterable, Iterator
from typing import Any

from sqlalchemy import Connection, bindparam, event, insert, text
from sqlalchemy.orm import ORMExecuteState, Session, UOWTransaction

from fleetcare.db.tables import LedgerEntry, Row, metadata

PAYLOAD_VERSION = 1
GENESIS = "0" * 64  # what the first entry is sealed to
_MOST_IDS = 500  # in one query; SQLite bounds how many values a statement may bind

KEPT = tuple(table.name for table in metadata.sorted_tables if table.name != LedgerEntry.__tablename__)
"""The tables the ledger vouches for, each after those it refers to."""


def canonical(value: object) -> str:
    """Give the one JSON text of a value: keys sorted, no spaces, nothing escaped that need not be."""
    return json.dumps(value, ensure_ascii=False, sort_keys=True, separators=(",", ":"), default=repr)


def seal(seq: int, kind: str, row_uid: str, payload_version: int, payload: str, previous_hash: str) -> str:
    """Give the SHA-256 that an entry with this content must carry (FIPS 180-4), as 64 hex digits."""
    content = canonical([seq, kind, row_uid, payload_version, payload, previous_hash])
    return hashlib.sha256(content.encode()).hexdigest()


def payloads(connection: Connection, table: str, ids: Iterable[int] | None = None) -> Iterator[tuple[int, str, str]]:
    """Give id, uid and payload of the rows of a table in id order, or of those with the given ids."""
    if ids is None:
        yield from _rows(connection, table, "", {})
        return
    wanted = sorted(ids)
    for start in range(0, len(wanted), _MOST_IDS):
        yield from _rows(connection, table, "WHERE id IN :ids", {"ids": wanted[start : start + _MOST_IDS]})


def _rows(connection: Connection, table: str, where: str, values: dict[str, Any]) -> Iterator[tuple[int, str, str]]:
    # Plain text and no column types: what is sealed is what the file holds, even where somebody spoilt it.
    query = text(f"SELECT * FROM {table} {where} ORDER BY id")
    if values:
        query = query.bindparams(bindparam("ids", expanding=True))
    for row in connection.execute(query, values).mappings():
        yield row["id"], row["uid"], canonical(dict(row))


def keep_ledger(session: Session) -> None:
    """Hook a session so that what it stores is stamped, never deleted, and appended to the ledger.

    `session.info` must hold `clock`, giving an aware moment, and `uids`, giving a new uid.
    """
    event.listen(session, "before_flush", _stamp)
    event.listen(session, "after_flush", _append)
    event.listen(session, "do_orm_execute", _refuse_bulk)


def _stamp(session: Session, flush: UOWTransaction, instances: object) -> None:
    if session.deleted:
        raise RuntimeError("rows are never deleted; store a new row that voids, ends or supersedes the old one")
    for row in session.new:
        if isinstance(row, Row):
            row.uid = row.uid or session.info["uids"]()
            row.recorded_at = row.recorded_at or session.info["clock"]()


def _append(session: Session, flush: UOWTransaction) -> None:
    touched: dict[str, list[int]] = defaultdict(list)
    for row in (*session.new, *(row for row in session.dirty if session.is_modified(row))):
        touched[str(row.__tablename__)].append(row.id)
    connection = session.connection()
    last = connection.execute(text("SELECT seq, hash FROM ledger ORDER BY seq DESC LIMIT 1")).one_or_none()
    seq, previous = last if last else (0, GENESIS)
    entries = []
    for kind in KEPT:
        for _, uid, payload in payloads(connection, kind, touched.get(kind, ())):
            seq += 1
            sealed = seal(seq, kind, uid, PAYLOAD_VERSION, payload, previous)
            values = (seq, kind, uid, PAYLOAD_VERSION, payload, previous, sealed)
            entries.append(dict(zip(LedgerEntry.model_fields, values, strict=True)))
            previous = sealed
    if entries:
        connection.execute(insert(LedgerEntry), entries)


def _refuse_bulk(statement: ORMExecuteState) -> None:
    if statement.is_insert or statement.is_update or statement.is_delete:
        raise RuntimeError("a bulk statement would pass the ledger by; add or change rows one at a time")
