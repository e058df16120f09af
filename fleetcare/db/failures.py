"""What the file system and SQLite complain of, as one line a person can act on."""

import sqlite3
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from fleetcare.errors import NoDatabase

_BACKUP = "restore the newest backup copy, and check the disk"
# Primary result codes: https://www.sqlite.org/rescode.html
_COMPLAINTS = {
    sqlite3.SQLITE_BUSY: ("is kept locked by another program", "close that program, then repeat"),
    sqlite3.SQLITE_LOCKED: ("is kept locked by another program", "close that program, then repeat"),
    sqlite3.SQLITE_READONLY: (
        "may not be written, nothing was changed",
        "make the file and its folder writable, or name a copy with --db",
    ),
    sqlite3.SQLITE_FULL: ("does not fit on the disk, nothing was changed", "free some space, then repeat"),
    sqlite3.SQLITE_IOERR: (
        "cannot be read or written, nothing was changed",
        "check the disk or the network, then repeat",
    ),
    sqlite3.SQLITE_CANTOPEN: (
        "or a file beside it cannot be opened, nothing was changed",
        "check who may read and write the file and its folder",
    ),
    sqlite3.SQLITE_PERM: ("may not be opened", "check who may read and write the file and its folder"),
    sqlite3.SQLITE_NOTADB: ("is not a database", "name a fleetcare database with --db or FLEETCARE_DB"),
    sqlite3.SQLITE_CORRUPT: ("is damaged", _BACKUP),
}


@contextmanager
def using(path: Path) -> Iterator[None]:
    """Turn what SQLite complains of into NoDatabase; a broken constraint or a mistake of ours passes."""
    try:
        yield
    except Exception as error:
        # SQLAlchemy wraps what the driver raised; looked for by shape, so that this file costs no import.
        cause = getattr(error, "orig", error)
        if not isinstance(cause, sqlite3.DatabaseError) or isinstance(
            cause, (sqlite3.IntegrityError, sqlite3.ProgrammingError)
        ):
            raise
        raise _of_sqlite(cause, path) from error


@contextmanager
def opening(path: Path) -> Iterator[None]:
    """Turn what SQLite and the file system complain of into NoDatabase."""
    try:
        with using(path):
            yield
    except OSError as error:
        raise _of_the_system(error, path) from error


def newer(path: Path) -> NoDatabase:
    """The failure of a file whose tables this program does not know yet."""
    return NoDatabase(f"{path} was made by a newer fleetcare", "update the program on this computer")


def _of_sqlite(error: sqlite3.DatabaseError, path: Path) -> NoDatabase:
    code = getattr(error, "sqlite_errorcode", sqlite3.SQLITE_ERROR) & 0xFF
    complaint, remedy = _COMPLAINTS.get(code, (f"cannot be used ({error})", _BACKUP))
    return NoDatabase(f"{path} {complaint}", remedy)


def _of_the_system(error: OSError, path: Path) -> NoDatabase:
    match error:
        case FileNotFoundError() | NotADirectoryError():
            return NoDatabase(f"the folder {path.parent} does not exist", "make it, or name another file with --db")
        case IsADirectoryError():
            return NoDatabase(f"{path} is a folder", "name a file in it with --db")
        case PermissionError():
            return NoDatabase(
                f"{path} may not be written, nothing was changed",
                "make its folder writable, or name another file with --db",
            )
    return NoDatabase(f"{path} cannot be used ({error.strerror})", "check the disk, or name another file with --db")
