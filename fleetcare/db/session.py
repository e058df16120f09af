"""The one way into the file: a connection to read by, or a session that writes all or nothing.

Reading needs SQLAlchemy alone: it must not pay for loading the tables, their library or the migrations.
"""

import os
import sqlite3
from collections.abc import Callable, Iterator
from contextlib import closing, contextmanager, suppress
from datetime import datetime
from pathlib import Path
from typing import TYPE_CHECKING, Any

from sqlalchemy import URL, Connection, Engine, NullPool, create_engine, event, text
from sqlalchemy.exc import SQLAlchemyError

from fleetcare.db.failures import newer, opening, using
from fleetcare.errors import NoDatabase

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

HEAD = "20261202_findings"
"""The newest revision in `migrations/`, kept here so that opening need not load them."""

PATIENCE = 30.0
"""Seconds to wait for another program's write to end."""

_IMPATIENCE = 0.1
"""Seconds to wait to write what could as well be left unwritten."""


@contextmanager
def reading(path: Path, *, as_is: bool = False) -> Iterator[Connection]:
    """Give a connection on which every query sees the same state of the file; it cannot write.

    An older file is upgraded first, unless it is wanted `as_is`, and then a newer one is given too.
    Raises NoDatabase for a file that is missing, empty, newer or unusable.
    """
    with opening(path):
        if as_is:
            require(path)
        else:
            current(path)
        connection = engine(path, query_only=True).connect()
    with using(path), connection:
        connection.begin()
        yield connection


@contextmanager
def writing(path: Path, clock: Callable[[], datetime], uids: Callable[[], str]) -> Iterator["Session"]:
    """Give a session that holds the write lock; all of it is stored on a clean exit, nothing otherwise.

    A missing file is made, and is gone again where nothing was stored. Raises NoDatabase as `reading` does.
    """
    from fleetcare.db.ledger import keep_ledger  # loads the tables, which reading must not pay for

    with opening(path):
        was_there = path.exists()
        if path.is_dir() or (was_there and path.stat().st_size):
            current(path)
        session = _locked(path)
    try:
        with using(path), session:
            session.info.update(clock=clock, uids=uids)
            keep_ledger(session)
            found = revision(session.connection())
            if found is None:
                from fleetcare.db import migrate  # as in `current`

                migrate.run(session.connection())
            elif found != HEAD:  # somebody upgraded it while this one waited for the lock
                raise newer(path)
            yield session
            session.commit()
    finally:
        if not was_there:
            _drop_if_empty(path)


def require(path: Path) -> str:
    """Give the schema revision of the file at `path`; raise NoDatabase unless it is a database of ours."""
    with opening(path):
        if path.is_dir():
            raise IsADirectoryError(path)
        if not path.parent.is_dir():
            raise FileNotFoundError(path)
        if not path.exists():
            raise NoDatabase(f"there is no database at {path}", "name one with --db, or add an engine to make it")
        if not path.stat().st_size:
            raise NoDatabase(f"{path} is empty", "name another file with --db, or add an engine to fill it")
        with engine(path, query_only=True).connect() as connection:
            found = revision(connection)
    if found is None:
        raise NoDatabase(f"{path} is not a fleetcare database", "name one with --db or FLEETCARE_DB")
    return found


def current(path: Path) -> Path | None:
    """Upgrade the file at `path` if it is older, and give the copy made before; None if it was current.

    Raises NoDatabase for a newer one.
    """
    if require(path) == HEAD:
        return None
    # Takes longer to load than most commands run, and is hardly ever needed.
    from fleetcare.db import migrate

    return migrate.bring_up(path, migrate.scripts_folder())


def revision(connection: Connection) -> str | None:
    """Give the schema revision of an open database, None where it has none of our tables yet."""
    ours = text("SELECT count(*) FROM sqlite_master WHERE type = 'table' AND name IN ('alembic_version', 'ledger')")
    if connection.execute(ours).scalar_one() < 2:
        return None
    found: str | None = connection.execute(text("SELECT max(version_num) FROM alembic_version")).scalar_one()
    return found


def keep_derived(path: Path, write: Callable[[Connection], None]) -> None:
    """Let what is derived be written to the file at `path` if that can be done at once; nothing is lost if it cannot."""
    with suppress(SQLAlchemyError, sqlite3.Error, OSError), engine(path, patience=_IMPATIENCE).begin() as connection:
        write(connection)


def engine(path: Path, *, query_only: bool = False, foreign_keys: bool = True, patience: float = PATIENCE) -> Engine:
    """Give an engine for the existing file at `path`; unless `query_only` its transactions lock out other writers."""

    def connect() -> sqlite3.Connection:
        # mode=rw and not ro, because a reader may be the first to come after a power cut and must roll back.
        # The driver's own transactions are off: they begin too late, and without the lock.
        uri = f"{path.absolute().as_uri()}?mode=rw"
        connection = sqlite3.connect(uri, uri=True, timeout=patience, isolation_level=None)
        try:
            connection.execute(f"PRAGMA query_only = {query_only:d}")
            connection.execute(f"PRAGMA foreign_keys = {foreign_keys:d}")
            # In rollback-journal mode only EXTRA syncs the folder once the journal is gone, without which
            # a power cut can bring the journal back and undo what was acknowledged.
            connection.execute("PRAGMA synchronous = EXTRA")
        except sqlite3.Error:
            connection.close()
            raise
        return connection

    made = create_engine(URL.create("sqlite", database=str(path)), creator=connect, poolclass=NullPool)
    begin = "BEGIN" if query_only else "BEGIN IMMEDIATE"
    event.listen(made, "begin", lambda connection: connection.exec_driver_sql(begin))
    return made


def copy(source: Path, target: Path) -> None:
    """Copy a database, as of one moment, to a new file that is whole or not there at all."""
    part = target.with_name(f"{target.name}.{os.getpid()}.part")
    with using(source), engine(source, query_only=True).connect() as connection:
        # A first query waits for its turn; the copying itself would wait for ever.
        connection.execute(text("SELECT count(*) FROM sqlite_master"))
        driver: Any = connection.connection.driver_connection
        with opening(target):
            try:
                part.touch()  # fails with words for what SQLite only calls unable to open
                with closing(sqlite3.connect(part)) as out:
                    driver.backup(out)
                _sync(part)
                part.replace(target)
                _sync(target.parent)
            finally:
                part.unlink(missing_ok=True)


def _sync(path: Path) -> None:
    """Make a file, or the names in a folder, outlast a power cut."""
    with suppress(PermissionError):  # where a folder cannot be opened, its file system keeps names by itself
        opened = os.open(path, os.O_RDONLY)
        os.fsync(opened)
        os.close(opened)


def _locked(path: Path) -> "Session":
    """Give a session that holds the write lock of the file which stands at `path`, made empty if need be.

    Somebody who made a file and then stored nothing removes it again; whoever waited for the lock of that
    file must not write into what no longer has a name, and starts over.
    """
    from sqlalchemy.orm import Session

    while True:
        path.open("ab").close()  # makes it where it is missing, and changes nothing where it is not
        before = path.stat().st_ino
        session = Session(engine(path), expire_on_commit=False)
        try:
            session.connection()
            if path.exists() and path.stat().st_ino == before:
                return session
        except BaseException:
            session.close()
            raise
        session.close()


def _drop_if_empty(path: Path) -> None:
    """Remove the file at `path` if it is empty, holding its lock so that nobody can be writing to it.

    An empty file counts as missing for a writer, so it does no harm where it cannot be removed.
    """
    with suppress(Exception):
        if path.stat().st_size == 0:
            with engine(path).begin():
                if path.stat().st_size == 0:
                    path.unlink()
