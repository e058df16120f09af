"""The file as the driver alone opens it: to read by, to copy, to tell its tables by.

Nothing of SQLAlchemy is loaded here: loading it takes longer than the due list does.
"""

import os
import sqlite3
from collections.abc import Callable, Iterator
from contextlib import closing, contextmanager, suppress
from pathlib import Path
from typing import TYPE_CHECKING, Any, cast

from fleetcare.db.chain import driver_of
from fleetcare.db.failures import opening, using
from fleetcare.errors import NoDatabase

if TYPE_CHECKING:
    from sqlalchemy import Connection

HEAD = "20261202_findings"
"""The newest revision in `migrations/`, kept here so that opening need not load them."""

PATIENCE = 30.0
"""Seconds to wait for another program's write to end."""

SYNCHRONOUS = "EXTRA"
"""How a write is brought to the disk. In rollback-journal mode only EXTRA syncs the folder once the journal is gone.

Without that a power cut can bring the journal back and undo what was acknowledged.
"""

_IMPATIENCE = 0.1
"""Seconds to wait to write what could as well be left unwritten."""


class _Plain:
    """An open file. It has what operations ask of the connection of a session: that of the driver, and a place for notes."""

    def __init__(self, driver: sqlite3.Connection) -> None:
        self.driver_connection = driver
        self.info: dict[str, Any] = {}

    @property
    def connection(self) -> "_Plain":
        return self


@contextmanager
def reading(path: Path, *, as_is: bool = False) -> "Iterator[Connection]":
    """Give a connection on which every query sees the same state of the file; it cannot write.

    An older file is upgraded first, unless it is wanted `as_is`, and then a newer one is given too.
    Raises NoDatabase for a file that is missing, empty, newer or unusable.
    """
    with opening(path):
        if as_is:
            require(path)
        else:
            current(path)
        driver = connect(path, query_only=True)
    with using(path), closing(driver):
        driver.execute("BEGIN")
        yield _seen(driver)


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
        with closing(connect(path, query_only=True)) as driver:
            found = revision(_seen(driver))
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


def revision(connection: "Connection") -> str | None:
    """Give the schema revision of an open database, None where it has none of our tables yet."""
    driver = driver_of(connection)
    ours = "SELECT count(*) FROM sqlite_master WHERE type = 'table' AND name IN ('alembic_version', 'ledger')"
    if driver.execute(ours).fetchone()[0] < 2:
        return None
    found: str | None = driver.execute("SELECT max(version_num) FROM alembic_version").fetchone()[0]
    return found


def keep_derived(path: Path, write: "Callable[[Connection], None]") -> None:
    """Let what is derived be written to the file at `path` if that can be done at once; nothing is lost if it cannot."""
    with suppress(sqlite3.Error, OSError), closing(connect(path, patience=_IMPATIENCE)) as driver:
        driver.execute("BEGIN IMMEDIATE")
        write(_seen(driver))
        driver.execute("COMMIT")


def connect(
    path: Path, *, query_only: bool = False, foreign_keys: bool = True, patience: float | None = None
) -> sqlite3.Connection:
    """Open the existing file at `path`, whose transactions are then begun and ended in so many words.

    `patience` is how many seconds to wait for another program's write to end, PATIENCE unless told.
    """
    # mode=rw and not ro, because a reader may be the first to come after a power cut and must roll back.
    # The driver's own transactions are off: they begin too late, and without the lock.
    uri = f"{path.absolute().as_uri()}?mode=rw"
    driver = sqlite3.connect(uri, uri=True, timeout=PATIENCE if patience is None else patience, isolation_level=None)
    try:
        driver.execute(f"PRAGMA query_only = {query_only:d}")
        driver.execute(f"PRAGMA foreign_keys = {foreign_keys:d}")
        driver.execute(f"PRAGMA synchronous = {SYNCHRONOUS}")
    except sqlite3.Error:
        driver.close()
        raise
    return driver


def copy(source: Path, target: Path) -> None:
    """Copy a database, as of one moment, to a new file that is whole or not there at all."""
    part = target.with_name(f"{target.name}.{os.getpid()}.part")
    with using(source), closing(connect(source, query_only=True)) as driver:
        # A first query waits for its turn; the copying itself would wait for ever.
        driver.execute("SELECT count(*) FROM sqlite_master").fetchone()
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


def _seen(driver: sqlite3.Connection) -> "Connection":
    """Give an open file as operations see it, whether they only read or write: they ask it for nothing else."""
    return cast("Connection", _Plain(driver))


def _sync(path: Path) -> None:
    """Make a file, or the names in a folder, outlast a power cut."""
    with suppress(PermissionError):  # where a folder cannot be opened, its file system keeps names by itself
        opened = os.open(path, os.O_RDONLY)
        os.fsync(opened)
        os.close(opened)
