"""Opening, writing and copying the file: whatever goes wrong is one clear line, and nothing is lost."""

import os
import signal
import sqlite3
import subprocess
import sys
import tempfile
import threading
from collections.abc import Callable, Iterator
from contextlib import closing
from datetime import date
from pathlib import Path

import pytest
from sqlalchemy import Pool, event, text
from sqlalchemy.exc import IntegrityError

from fleetcare.context import Context
from fleetcare.db import session as file
from fleetcare.db.tables import Item, Site
from fleetcare.errors import NoDatabase, Refused
from fleetcare.operations import upkeep


def add_site(context: Context, name: str = "North Sluice") -> None:
    """One small write."""
    with context.write() as session:
        session.add(Site(name=name, name_key=name.casefold()))


def sites(context: Context) -> list[str]:
    """One small read."""
    with context.read() as connection:
        return list(connection.execute(text("SELECT name FROM site ORDER BY id")).scalars())


def add_a_refused_site(context: Context) -> None:
    """A write that turns out to be refused after it has stored something."""
    with context.write() as session:
        session.add(Site(name="West", name_key="west"))
        session.flush()
        raise Refused("no", "do not")


def add_what_does_not_fit(context: Context) -> None:
    """A write larger than SQLite is allowed to make the file."""
    with context.write() as session:
        session.connection().exec_driver_sql("PRAGMA max_page_count = 1")
        session.add(Site(name="x" * 100_000, name_key="x"))


def complaint(error: pytest.ExceptionInfo[NoDatabase]) -> str:
    """The one line a person is shown."""
    (line,) = error.value.lines()
    assert "\n" not in line
    assert error.value.exit_code == 3
    assert error.value.remedy
    return line


Use = Callable[[Context], object]
BOTH = pytest.mark.parametrize("use", [sites, add_site])


# Where the file is


def test_what_is_written_is_read_back(ctx: Context) -> None:
    add_site(ctx)
    assert sites(ctx) == ["North Sluice"]


def test_a_writing_command_makes_a_missing_file(tmp_path: Path) -> None:
    ctx = Context(str(tmp_path / "new.db"))
    add_site(ctx)
    assert sites(ctx) == ["North Sluice"]
    assert [path.name for path in tmp_path.iterdir()] == ["new.db"]


def test_a_writing_command_fills_a_file_that_is_there_but_empty(tmp_path: Path) -> None:
    path = tmp_path / "new.db"
    path.touch()
    add_site(Context(str(path)))
    assert sites(Context(str(path))) == ["North Sluice"]


def test_a_reading_command_makes_no_file_and_says_how_one_is_made(tmp_path: Path) -> None:
    path = tmp_path / "none.db"
    with pytest.raises(NoDatabase) as error:
        sites(Context(str(path)))
    assert complaint(error) == f"there is no database at {path}; name one with --db, or add an engine to make it"
    assert not path.exists()


def test_an_empty_file_is_not_a_database_to_read(tmp_path: Path) -> None:
    path = tmp_path / "empty.db"
    path.touch()
    with pytest.raises(NoDatabase, match="is empty"):
        sites(Context(str(path)))


@BOTH
def test_a_missing_folder_is_named_and_not_made(tmp_path: Path, use: Use) -> None:
    path = tmp_path / "none" / "yard.db"
    with pytest.raises(NoDatabase) as error:
        use(Context(str(path)))
    assert complaint(error).startswith(f"the folder {path.parent} does not exist")
    assert not path.parent.exists()


@BOTH
def test_a_folder_is_not_a_database(tmp_path: Path, use: Use) -> None:
    with pytest.raises(NoDatabase, match="is a folder"):
        use(Context(str(tmp_path)))


def test_without_an_address_the_file_is_the_persons_own_and_its_folder_is_made(tmp_path: Path) -> None:
    ctx = Context()
    assert ctx.path.is_relative_to(tmp_path / "home")
    add_site(ctx)
    assert sites(ctx) == ["North Sluice"]


def test_the_environment_names_the_file_where_the_command_does_not(
    db: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("FLEETCARE_DB", str(db))
    assert Context().path == db
    assert Context(str(tmp_path / "other.db")).path == tmp_path / "other.db"


def test_an_address_of_a_file_may_be_a_url(db: Path) -> None:
    assert sites(Context(f"sqlite:///{db}")) == []


def test_a_url_of_another_kind_is_no_database_here() -> None:
    with pytest.raises(NoDatabase, match="postgresql:// databases are not supported"):
        sites(Context("postgresql://office/yard"))


def test_a_file_name_may_hold_marks_that_mean_something_in_a_url(tmp_path: Path) -> None:
    ctx = Context(str(tmp_path / "yard 100%?#[1].db"))
    add_site(ctx)
    assert sites(ctx) == ["North Sluice"]
    assert [path.name for path in tmp_path.iterdir()] == ["yard 100%?#[1].db"]


# What the file is


@BOTH
def test_a_file_that_is_no_database_is_said_to_be_none_and_left_alone(tmp_path: Path, use: Use) -> None:
    path = tmp_path / "notes.txt"
    path.write_text("oil done in March, Fenn\n" * 100)
    with pytest.raises(NoDatabase) as error:
        use(Context(str(path)))
    assert complaint(error).startswith(f"{path} is not a database")
    assert path.read_text() == "oil done in March, Fenn\n" * 100


@BOTH
def test_a_database_of_another_program_is_refused_and_left_alone(tmp_path: Path, use: Use) -> None:
    path = tmp_path / "other.db"
    with closing(sqlite3.connect(path)) as connection:
        connection.executescript("CREATE TABLE site (name TEXT); INSERT INTO site VALUES ('x')")
    before = path.read_bytes()
    with pytest.raises(NoDatabase, match="is not a fleetcare database"):
        use(Context(str(path)))
    assert path.read_bytes() == before


@BOTH
def test_a_damaged_file_is_said_to_be_damaged(ctx: Context, db: Path, use: Use) -> None:
    content = bytearray(db.read_bytes())
    content[100:4096] = b"\xff" * 3996  # the rest of the first page: the list of tables
    db.write_bytes(content)
    with pytest.raises(NoDatabase) as error:
        use(ctx)
    assert complaint(error) == f"{db} is damaged; restore the newest backup copy, and check the disk"


@BOTH
def test_a_file_of_a_newer_program_is_refused_and_left_alone(ctx: Context, db: Path, use: Use) -> None:
    with closing(sqlite3.connect(db)) as connection:
        connection.executescript("UPDATE alembic_version SET version_num = '20990101_later_tables'")
    before = db.read_bytes()
    with pytest.raises(NoDatabase) as error:
        use(ctx)
    assert complaint(error) == f"{db} was made by a newer fleetcare; update the program on this computer"
    assert db.read_bytes() == before


def test_a_check_still_reads_a_file_of_a_newer_program(ctx: Context, db: Path) -> None:
    with closing(sqlite3.connect(db)) as connection:
        connection.executescript("UPDATE alembic_version SET version_num = '20990101_later_tables'")
    (problem,) = upkeep.check(ctx).problems
    assert problem == f"the tables are those of 20990101_later_tables, this program's are those of {file.HEAD}"


# What one may do with it


@pytest.fixture
def shelf(new_database: Path) -> Iterator[Path]:
    """A folder that may not be written, with two databases: yard.db that may not be either, and loose.db that may.

    Root is not bound by permissions, so where root runs the tests, this one is run as nobody.
    """
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        for file_name, mode in (("yard.db", 0o444), ("loose.db", 0o666)):
            (folder / file_name).write_bytes(new_database.read_bytes())
            (folder / file_name).chmod(mode)
        folder.chmod(0o555)
        was = os.geteuid()
        if was == 0:
            os.seteuid(65534)
        yield folder
        os.seteuid(was)
        folder.chmod(0o755)


def test_a_database_in_a_read_only_folder_can_be_read(shelf: Path) -> None:
    assert sites(Context(str(shelf / "yard.db"))) == []


def test_a_database_in_a_read_only_folder_cannot_be_written(shelf: Path) -> None:
    with pytest.raises(NoDatabase) as error:
        add_site(Context(str(shelf / "yard.db")))
    assert "may not be written, nothing was changed" in complaint(error)


def test_a_writable_file_in_a_read_only_folder_is_left_whole(shelf: Path) -> None:
    ctx = Context(str(shelf / "loose.db"))
    with pytest.raises(NoDatabase) as error:
        add_site(ctx)
    assert "may not be written, nothing was changed" in complaint(error)
    assert sites(ctx) == []


def test_a_missing_file_in_a_read_only_folder_is_not_made(shelf: Path) -> None:
    with pytest.raises(NoDatabase, match="may not be written, nothing was changed"):
        add_site(Context(str(shelf / "new.db")))


def test_a_full_disk_is_one_line_and_changes_nothing(ctx: Context) -> None:
    with pytest.raises(NoDatabase) as error:
        add_what_does_not_fit(ctx)
    assert "does not fit on the disk, nothing was changed" in complaint(error)
    assert sites(ctx) == []


@BOTH
def test_a_file_somebody_keeps_locked_is_one_line(
    ctx: Context, db: Path, monkeypatch: pytest.MonkeyPatch, use: Use
) -> None:
    monkeypatch.setattr(file, "PATIENCE", 0.01)
    with closing(sqlite3.connect(db)) as other:
        other.execute("BEGIN EXCLUSIVE")
        with pytest.raises(NoDatabase) as error:
            use(ctx)
    assert complaint(error) == f"{db} is kept locked by another program; close that program, then repeat"


def test_a_broken_constraint_is_no_failure_of_the_file(ctx: Context) -> None:
    add_site(ctx)
    with pytest.raises(IntegrityError):
        add_site(ctx)


def test_a_reference_to_nothing_is_refused_by_the_database(ctx: Context) -> None:
    with pytest.raises(IntegrityError), ctx.write() as session:
        session.add(Item(tag="P-01", tag_key="p-01", is_engine=True, site_id=7))


def test_a_tag_is_taken_by_one_item_at_a_time_and_free_once_that_is_withdrawn(ctx: Context) -> None:
    with ctx.write() as session:
        session.add(Item(tag="P-01", tag_key="p-01", is_engine=True))
    with pytest.raises(IntegrityError), ctx.write() as session:
        session.add(Item(tag="p-01", tag_key="p-01", is_engine=False))
    with ctx.write() as session:
        session.get_one(Item, 1).withdrawn_on = date(2026, 4, 1)
    with ctx.write() as session:
        session.add(Item(tag="p-01", tag_key="p-01", is_engine=False))


# All or nothing


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


def test_a_writer_that_waited_for_a_file_since_taken_back_makes_its_own(tmp_path: Path) -> None:
    ctx = Context(str(tmp_path / "new.db"))
    ctx.path.touch()
    is_open = threading.Event()
    writer = threading.Thread(target=add_site, args=(ctx,))
    with file.engine(ctx.path).begin():

        def opened(*_: object) -> None:
            is_open.set()

        event.listen(Pool, "connect", opened)
        writer.start()
        is_open.wait()
        event.remove(Pool, "connect", opened)
        ctx.path.unlink()
    writer.join()
    assert sites(ctx) == ["North Sluice"]


def test_a_reader_sees_one_state_while_others_write(ctx: Context) -> None:
    with ctx.read() as connection:
        assert connection.execute(text("SELECT count(*) FROM site")).scalar_one() == 0
        with closing(sqlite3.connect(ctx.path, timeout=0)) as other:
            other.execute("INSERT INTO site VALUES (1, 'u', '2026-05-01', 'West', 'west')")
            with pytest.raises(sqlite3.OperationalError, match="locked"):
                other.commit()
        assert connection.execute(text("SELECT count(*) FROM site")).scalar_one() == 0


# Copies


def test_a_backup_is_a_database_with_everything_in_it(ctx: Context, tmp_path: Path) -> None:
    add_site(ctx)
    out = upkeep.backup(ctx, tmp_path / "copy.db")
    assert sites(Context(str(out))) == ["North Sluice"]
    assert upkeep.check(Context(str(out))) == upkeep.check(ctx)
    assert sorted(path.name for path in tmp_path.iterdir()) == ["copy.db", "yard.db"]


def test_a_backup_never_overwrites(ctx: Context, tmp_path: Path) -> None:
    (tmp_path / "copy.db").write_text("mine")
    with pytest.raises(Refused, match="already there; name a file that is not"):
        upkeep.backup(ctx, tmp_path / "copy.db")
    assert (tmp_path / "copy.db").read_text() == "mine"


def test_a_backup_into_a_missing_folder_is_one_line(ctx: Context, tmp_path: Path) -> None:
    with pytest.raises(NoDatabase) as error:
        upkeep.backup(ctx, tmp_path / "none" / "copy.db")
    assert complaint(error).startswith(f"the folder {tmp_path / 'none'} does not exist")


def test_a_backup_of_a_missing_file_is_refused(tmp_path: Path) -> None:
    with pytest.raises(NoDatabase, match="there is no database"):
        upkeep.backup(Context(str(tmp_path / "none.db")), tmp_path / "copy.db")


def test_a_current_database_needs_no_upgrade(ctx: Context) -> None:
    assert upkeep.upgrade(ctx) is None
