"""A write is stored whole or not at all, whoever is killed and however many write at once."""

import signal
import sqlite3
import subprocess
import sys
import threading
from collections.abc import Iterator
from contextlib import closing, contextmanager
from pathlib import Path

import pytest
from sqlalchemy import Connection, Pool, event, text

from fleetcare.context import Context
from fleetcare.db import session as file
from fleetcare.errors import NoDatabase, Refused
from fleetcare.operations import upkeep
from fleetcare.operations.rows import fetch
from tests.operations.small_use import add_a_refused_site, add_site, sites


def test_a_refused_write_stores_nothing(ctx: Context, db: Path) -> None:
    before = db.read_bytes()
    with pytest.raises(Refused):
        add_a_refused_site(ctx)
    assert db.read_bytes() == before


def test_a_refused_first_write_leaves_no_file(tmp_path: Path) -> None:
    with pytest.raises(Refused):
        add_a_refused_site(Context(str(tmp_path / "new.db")))
    assert list(tmp_path.iterdir()) == []


KILLED = """
import os, signal, sys
from fleetcare.context import Context
from fleetcare.db.tables import Site
with Context(sys.argv[1]).write() as session:
    session.connection().exec_driver_sql("PRAGMA cache_size = 1")  # so that pages reach the file before the commit
    session.add_all(Site(name=f"s{n} " + "x" * 4000, name_key=f"s{n}") for n in range(100))
    session.flush()
    os.kill(os.getpid(), signal.SIGKILL)
"""


def kill_while_writing(path: Path) -> None:
    """Start a process that is killed between its write and its commit."""
    run = subprocess.run([sys.executable, "-c", KILLED, str(path)], check=False)
    assert run.returncode == -signal.SIGKILL


def test_a_process_killed_before_its_commit_leaves_the_file_as_it_was(ctx: Context, db: Path) -> None:
    add_site(ctx)
    before = db.read_bytes()
    kill_while_writing(db)
    assert db.read_bytes() != before, "the kill came too early to prove anything"
    assert sites(ctx) == ["North Sluice"]
    assert upkeep.check(ctx).problems == ()
    assert db.read_bytes() == before


def test_a_process_killed_while_it_makes_the_file_leaves_none_to_read_and_one_can_be_made(tmp_path: Path) -> None:
    ctx = Context(str(tmp_path / "new.db"))
    kill_while_writing(ctx.path)
    with pytest.raises(NoDatabase):
        sites(ctx)
    add_site(ctx)
    assert sites(ctx) == ["North Sluice"]
    assert upkeep.check(ctx).problems == ()


BUSY = """
import sys
from fleetcare.context import Context
from fleetcare.db.tables import Site
context = Context(sys.argv[1])
for n in range(20):
    name = f"{sys.argv[2]}{n}"
    with context.write() as session:
        session.add(Site(name=name, name_key=name))
"""


def write_from_two_processes(path: Path) -> None:
    """Let two processes write twenty sites each at the same time."""
    both = [subprocess.Popen([sys.executable, "-c", BUSY, str(path), who]) for who in "ab"]
    assert [process.wait() for process in both] == [0, 0]


@pytest.mark.parametrize("is_there", [True, False], ids=["in a file that is there", "in a file they make"])
def test_two_processes_lose_nothing_of_each_other(ctx: Context, tmp_path: Path, is_there: bool) -> None:
    context = ctx if is_there else Context(str(tmp_path / "new.db"))
    write_from_two_processes(context.path)
    assert sorted(sites(context)) == sorted(f"{who}{n}" for who in "ab" for n in range(20))
    assert upkeep.check(context).problems == ()


@contextmanager
def waiting_writer(context: Context) -> Iterator[tuple[Connection, list[NoDatabase]]]:
    """Hold the lock of a file while a second writer opens it and waits; give the lock's holder, and what befell him."""
    is_open = threading.Event()
    failed: list[NoDatabase] = []

    def write() -> None:
        try:
            add_site(context)
        except NoDatabase as error:
            failed.append(error)

    def opened(*_: object) -> None:
        is_open.set()

    writer = threading.Thread(target=write)
    with file.engine(context.path).begin() as holder:
        event.listen(Pool, "connect", opened)
        writer.start()
        is_open.wait()
        event.remove(Pool, "connect", opened)
        yield holder, failed
    writer.join()


def test_a_writer_that_waited_for_a_file_since_taken_back_makes_its_own(tmp_path: Path) -> None:
    ctx = Context(str(tmp_path / "new.db"))
    ctx.path.touch()
    with waiting_writer(ctx):
        ctx.path.unlink()
    assert sites(ctx) == ["North Sluice"]


def test_a_writer_that_waited_while_a_newer_program_upgraded_writes_nothing(ctx: Context) -> None:
    with waiting_writer(ctx) as (holder, failed):
        holder.execute(text("UPDATE alembic_version SET version_num = '20990101_later_tables'"))
    assert [error.detail for error in failed] == [f"{ctx.path} was made by a newer fleetcare"]


def test_a_reader_sees_one_state_while_others_write(ctx: Context) -> None:
    with ctx.read() as connection:
        assert fetch(connection, "SELECT count(*) FROM site") == [(0,)]
        with closing(sqlite3.connect(ctx.path, timeout=0)) as other:
            other.execute("INSERT INTO site VALUES (1, 'u', '2026-05-01', 'West', 'west')")
            with pytest.raises(sqlite3.OperationalError, match="locked"):
                other.commit()
        assert fetch(connection, "SELECT count(*) FROM site") == [(0,)]
