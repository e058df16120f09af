"""Whether the shop's file, or the day, is another one than before: what an open screen looks for."""

import os
from datetime import date
from typing import TYPE_CHECKING, NamedTuple

if TYPE_CHECKING:
    from pathlib import Path

    from fleetcare.context import Context


class Stamp(NamedTuple):
    """What differs after every change: the day asked about, and what the file system says of the file.

    `file` and `log` (the write-ahead log, where there is one) are inode, moment changed in ns, and size;
    None where there is none.
    """

    on: date
    file: tuple[int, int, int] | None
    log: tuple[int, int, int] | None


def stamp(context: "Context") -> Stamp:
    """Give the stamp of a moment, without opening the file.

    Opening and closing it here would drop the locks a connection of this same process holds on it
    (POSIX; https://www.sqlite.org/howtocorrupt.html, section 2.2). Raises NoDatabase for an address that is no file.
    """
    path = context.path
    return Stamp(context.today(), _looked_at(path), _looked_at(path.with_name(f"{path.name}-wal")))


def _looked_at(path: "Path") -> tuple[int, int, int] | None:
    try:
        found = os.stat(path)
    except OSError:
        return None
    return found.st_ino, found.st_mtime_ns, found.st_size
