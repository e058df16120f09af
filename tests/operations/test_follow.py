"""Whether the file or the day is another one than before."""

import sqlite3
from contextlib import closing
from datetime import date
from pathlib import Path

from fleetcare.context import Context
from fleetcare.operations.follow import stamp
from fleetcare.operations.settings import change_setting


def test_nothing_changed_gives_the_same_stamp_and_reading_changes_nothing(ctx: Context) -> None:
    before = stamp(ctx)
    with ctx.read():
        pass
    assert stamp(ctx) == before


def test_every_write_gives_another_stamp(ctx: Context) -> None:
    stamps = [stamp(ctx)]
    for name in ("Tallow", "Fen"):
        with ctx.write() as session:
            change_setting(session, "shop-name", name)
        stamps.append(stamp(ctx))
    assert len(set(stamps)) == 3


def test_a_write_that_waits_in_a_log_beside_the_file_gives_another_stamp(ctx: Context, db: Path) -> None:
    with closing(sqlite3.connect(db)) as connection:
        connection.execute("pragma journal_mode = wal")
        before = stamp(ctx)
        connection.execute("create table other (id)")
        connection.commit()
        assert stamp(ctx) != before


def test_a_file_that_is_gone_and_one_put_in_its_place_are_told(ctx: Context, db: Path) -> None:
    before = stamp(ctx)
    content = db.read_bytes()
    db.unlink()
    assert stamp(ctx).file is None
    db.write_bytes(content)
    assert stamp(ctx) not in (before, None)


def test_another_day_gives_another_stamp(db: Path) -> None:
    assert stamp(Context(str(db), date(2026, 5, 1))) != stamp(Context(str(db), date(2026, 5, 2)))
