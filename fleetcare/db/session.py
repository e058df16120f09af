"""The one way to write into the file: a session that writes all or nothing."""

from collections.abc import Callable, Iterator
from contextlib import contextmanager, suppress
from datetime import datetime
from pathlib import Path

from sqlalchemy import URL, Engine, NullPool, create_engine, event
from sqlalchemy.orm import Session

from fleetcare.db import reading
from fleetcare.db.failures import newer, opening, using
from fleetcare.db.ledger import keep_ledger


@contextmanager
def writing(path: Path, clock: Callable[[], datetime], uids: Callable[[], str]) -> Iterator[Session]:
    """Give a session that holds the write lock; all of it is stored on a clean exit, nothing otherwise.

    A missing file is made, and is gone again where nothing was stored. Raises NoDatabase as `reading` does.
    """
    with opening(path):
        was_there = path.exists()
        if path.is_dir() or (was_there and path.stat().st_size):
            reading.current(path)
        session = _locked(path)
    try:
        with using(path), session:
            session.info.update(clock=clock, uids=uids)
            keep_ledger(session)
            found = reading.revision(session.connection())
            if found is None:
                from fleetcare.db import migrate  # as in `current`

                migrate.run(session.connection())
            elif found != reading.HEAD:  # somebody upgraded it while this one waited for the lock
                raise newer(path)
            yield session
            session.commit()
    finally:
        if not was_there:
            _drop_if_empty(path)


def engine(path: Path, *, foreign_keys: bool = True) -> Engine:
    """Give an engine for the existing file at `path`; its transactions lock out other writers."""
    made = create_engine(
        URL.create("sqlite", database=str(path)),
        creator=lambda: reading.connect(path, foreign_keys=foreign_keys),
        poolclass=NullPool,
    )
    event.listen(made, "begin", lambda connection: connection.exec_driver_sql("BEGIN IMMEDIATE"))
    return made


def _locked(path: Path) -> Session:
    """Give a session that holds the write lock of the file which stands at `path`, made empty if need be.

    Somebody who made a file and then stored nothing removes it again; whoever waited for the lock of that
    file must not write into what no longer has a name, and starts over.
    """
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
