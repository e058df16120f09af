"""The ledger writes itself: whatever a session stores or changes is appended, sealed to what went before.

The session hooks here are its only writer.
"""

from collections import defaultdict

from sqlalchemy import event
from sqlalchemy.orm import ORMExecuteState, Session, UOWTransaction

from fleetcare.db.chain import Entry, append, last_entry, payload, rows, seal
from fleetcare.db.tables import Row, metadata

PAYLOAD_VERSION = 1

# The order of dependency, then of ids, makes the same operations write the same ledger.
_IN_ORDER = tuple(table.name for table in metadata.sorted_tables)


def keep_ledger(session: Session) -> None:
    """Hook a session so that what it stores is stamped, never deleted, and appended to the ledger.

    `session.info` must hold `clock`, giving an aware moment, and `uids`, giving an unused uid.
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
        touched[row.__table__.name].append(row.id)
    connection = session.connection()
    entry = last_entry(connection)
    added = []
    for table in (name for name in _IN_ORDER if name in touched):
        for row in rows(connection, table, touched[table]):
            content = (entry.seq + 1, table, row["uid"], PAYLOAD_VERSION, payload(row), entry.hash)
            entry = Entry(*content, seal(*content))
            added.append(entry)
    if added:
        append(connection, added)


def _refuse_bulk(statement: ORMExecuteState) -> None:
    if statement.is_insert or statement.is_update or statement.is_delete:
        raise RuntimeError("a bulk statement would pass the ledger by; add or change rows one at a time")
