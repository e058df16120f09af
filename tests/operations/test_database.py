"""Where the database is and what it may be: whatever is wrong is one clear line."""

import sqlite3
from contextlib import closing
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.db import reading as file
from fleetcare.errors import NoDatabase
from fleetcare.operations import upkeep
from tests.operations.small_use import BOTH, Use, add_site, complaint, sites

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


def test_an_own_folder_that_cannot_be_made_is_one_line(tmp_path: Path) -> None:
    (tmp_path / "home").write_text("no folder")
    with pytest.raises(NoDatabase) as error:
        add_site(Context())
    assert "fleetcare does not exist" in complaint(error)


@BOTH
def test_a_name_no_file_system_takes_is_one_line(tmp_path: Path, use: Use) -> None:
    with pytest.raises(NoDatabase) as error:
        use(Context(str(tmp_path / ("x" * 300))))
    assert "cannot be used (File name too long)" in complaint(error)


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
