"""`--db` and FLEETCARE_DB: which file, made by whom, and what happens where it cannot be used."""

import os
import sqlite3
from contextlib import closing
from pathlib import Path

import pytest

from tests.cli.conftest import Runner

READS = (
    ("due",), ("due", "--format", "csv", "--out", "due.csv"), ("show", "P-01"), ("show", "P-01", "Oil"),
    ("engine", "list"), ("machine", "list", "--json"), ("task", "list", "P-01"),
)  # fmt: skip
WRITES = (
    ("engine", "add", "P-01"), ("engine", "edit", "P-01", "--name", "x"), ("engine", "lay-up", "P-01"),
    ("engine", "fit", "P-01", "--out"), ("engine", "factor", "P-01", "hours", "1", "--on", "2026-05-01", "--why", "x"),
    ("machine", "add", "M-1"), ("task", "add", "P-01", "Oil", "--every", "250h"), ("task", "remove", "P-01", "Oil"),
    ("task", "edit", "P-01", "Oil", "--every", "9h"), ("reading", "P-01", "5"), ("reading", "--restore", "1"),
    ("reading", "--void", "1", "--why", "x"), ("log", "P-01", "--note", "x"), ("correct", "1", "--by", "x"),
    ("defer", "P-01", "Oil", "--until", "5", "--why", "x", "--by", "y"),
)  # fmt: skip


def words_of(words: tuple[str, ...]) -> str:
    """Name a case by its command line."""
    return " ".join(words)


@pytest.mark.parametrize("words", READS, ids=words_of)
def test_a_reading_command_never_makes_a_file(fleetcare: Runner, tmp_path: Path, words: tuple[str, ...]) -> None:
    path = tmp_path / "missing.db"
    ran = fleetcare("--db", str(path), *words)
    assert (ran.status, ran.out) == (3, "")
    assert ran.err == f"there is no database at {path}; name one with --db, or add an engine to make it\n"
    assert list(tmp_path.glob("*.db")) == []


def test_a_writing_command_makes_a_missing_file(fleetcare: Runner, tmp_path: Path) -> None:
    path = tmp_path / "new.db"
    assert fleetcare("--db", str(path), "engine", "add", "P-01").status == 0
    assert "P-01" in fleetcare("--db", str(path), "engine", "list").out


def test_a_refused_one_leaves_none_behind(fleetcare: Runner, tmp_path: Path) -> None:
    assert fleetcare("--db", str(tmp_path / "new.db"), "reading", "P-01", "5").status == 1
    assert list(tmp_path.glob("*.db")) == []


@pytest.mark.parametrize("words", [*READS, *WRITES], ids=words_of)
def test_no_command_makes_a_folder(fleetcare: Runner, tmp_path: Path, words: tuple[str, ...]) -> None:
    ran = fleetcare("--db", str(tmp_path / "missing" / "yard.db"), *words)
    assert (ran.status, ran.out) == (3, "")
    assert ran.err == f"the folder {tmp_path / 'missing'} does not exist; make it, or name another file with --db\n"
    assert not (tmp_path / "missing").exists()


@pytest.mark.parametrize("words", [*READS, *WRITES], ids=words_of)
def test_what_is_no_database_is_status_3_for_every_command(
    fleetcare: Runner, tmp_path: Path, words: tuple[str, ...]
) -> None:
    path = tmp_path / "letter.txt"
    path.write_text("Dear Fenn, the pump has been running rough since Easter.")
    ran = fleetcare("--db", str(path), *words)
    assert (ran.status, ran.out) == (3, "")
    assert ran.err == f"{path} is not a database; name a fleetcare database with --db or FLEETCARE_DB\n"
    assert path.read_text().startswith("Dear Fenn")


@pytest.mark.parametrize("words", [("due",), ("engine", "add", "P-01")], ids=words_of)
def test_a_database_of_a_newer_program_is_left_alone(fleetcare: Runner, db: Path, words: tuple[str, ...]) -> None:
    with closing(sqlite3.connect(db)) as connection, connection:
        connection.execute("update alembic_version set version_num = '29991231_later'")
    before = db.read_bytes()
    ran = fleetcare("--db", str(db), *words)
    assert (ran.status, ran.err) == (
        3, f"{db} was made by a newer fleetcare; update the program on this computer\n"
    )  # fmt: skip
    assert db.read_bytes() == before


@pytest.mark.parametrize("words", [("due",), ("engine", "add", "P-01")], ids=words_of)
def test_a_database_of_another_program_is_left_alone(fleetcare: Runner, tmp_path: Path, words: tuple[str, ...]) -> None:
    path = tmp_path / "other.db"
    with closing(sqlite3.connect(path)) as connection, connection:
        connection.execute("create table birds (name text)")
    ran = fleetcare("--db", str(path), *words)
    assert (ran.status, ran.err) == (
        3, f"{path} is not a fleetcare database; name one with --db or FLEETCARE_DB\n"
    )  # fmt: skip


@pytest.mark.skipif(os.geteuid() == 0, reason="nothing is closed to the superuser")
def test_a_folder_that_may_not_be_written_is_status_3_and_reading_goes_on(fleetcare: Runner, db: Path) -> None:
    db.chmod(0o444)
    db.parent.chmod(0o555)
    try:
        ran = fleetcare("--db", str(db), "engine", "add", "P-01")
        assert (ran.status, ran.err.count("\n")) == (3, 1)
        assert fleetcare("--db", str(db), "due").status == 0
    finally:
        db.parent.chmod(0o755)


def test_an_empty_name_is_no_database(fleetcare: Runner) -> None:
    ran = fleetcare("--db", "", "due")
    assert (ran.status, ran.out) == (2, "")
    assert "no database is named; name a file, or leave --db out" in ran.err


def test_the_environment_names_it_where_the_command_does_not(
    fleetcare: Runner, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("FLEETCARE_DB", str(tmp_path / "of-the-shop.db"))
    assert fleetcare("engine", "add", "P-01").status == 0
    assert fleetcare("--db", str(tmp_path / "other.db"), "engine", "add", "P-02").status == 0
    assert "P-02" not in fleetcare("engine", "list").out
    assert "P-01" in fleetcare("engine", "list", "--db", str(tmp_path / "of-the-shop.db")).out


def test_without_either_it_is_the_persons_own_file_and_its_folder_is_made(fleetcare: Runner, tmp_path: Path) -> None:
    assert fleetcare("due").status == 3
    assert not (tmp_path / "home").exists()
    assert fleetcare("engine", "add", "P-01").status == 0
    assert [path.name for path in (tmp_path / "home").rglob("*.db")] == ["fleetcare.db"]


def test_an_address_may_be_given_as_a_url(fleetcare: Runner, db: Path) -> None:
    assert fleetcare("--db", f"sqlite:///{db}", "engine", "add", "P-01").status == 0
    ran = fleetcare("--db", "mysql://shop/yard", "due")
    assert (ran.status, ran.err.count("\n")) == (3, 1)
    assert ran.err.startswith("mysql:// databases are not supported")
