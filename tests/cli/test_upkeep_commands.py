"""`backup`, `check` and `upgrade`."""

import shutil
import sqlite3
from contextlib import closing
from pathlib import Path

import pytest

from fleetcare.db import migrate, reading
from tests.cli.conftest import Ran, Runner

NEXT = "20270101_next"
REVISION = f'revision = "{NEXT}"\ndown_revision = "{reading.HEAD}"\n\n\ndef upgrade() -> None:\n    pass\n'


@pytest.fixture
def yard(fleetcare: Runner, db: Path) -> Runner:
    """Run a command on a database with one engine."""

    def run(*words: str) -> Ran:
        return fleetcare("--db", str(db), "--as-of", "2026-05-01", *words)

    assert run("engine", "add", "P-01", "--meter", "hours", "--site", "North Sluice").status == 0
    return run


def change(db: Path, *statements: str) -> None:
    """Change a file behind the tool's back."""
    with closing(sqlite3.connect(db)) as connection:
        for statement in statements:
            connection.execute(statement)
        connection.commit()


def dumped(db: Path) -> list[str]:
    """Everything a file holds, as SQL."""
    with closing(sqlite3.connect(db)) as connection:
        return list(connection.iterdump())


def head_of(ran: Ran) -> str:
    """The head a sound check prints."""
    return ran.out.removeprefix("sound, head ").strip()


def test_a_sound_database_is_said_to_be_with_the_head_to_note_down(yard: Runner) -> None:
    ran = yard("check")
    assert (ran.status, ran.err) == (0, "")
    number, digits = head_of(ran).split(":")
    assert ran.out == f"sound, head {number}:{digits}\n"
    assert (int(number) > 0, len(digits)) == (True, 64)


def test_a_head_noted_earlier_holds_after_more_was_stored(yard: Runner) -> None:
    noted = head_of(yard("check"))
    yard("reading", "P-01", "10")
    ran = yard("check", "--head", noted)
    assert ran.status == 0
    assert head_of(ran) != noted


def test_an_edit_an_insertion_and_a_removal_are_each_one_line_with_status_1(yard: Runner, db: Path) -> None:
    yard("reading", "P-01", "10")
    change(
        db,
        "UPDATE reading SET value = '99'",
        "INSERT INTO site (uid, recorded_at, name, name_key) VALUES ('x', '2026-05-01', '[/b]', '[/b]')",
        "DELETE FROM engine",
    )
    ran = yard("check")
    assert (ran.status, ran.out) == (1, "")
    lines = ran.err.splitlines()
    assert [line.split(" ")[0] for line in lines] == ["reading", "site", "the"]
    assert "value is '99' and was '10'" in lines[0]
    assert all(line.endswith("run fleetcare upgrade") for line in lines)


def test_a_cut_end_is_found_only_against_a_head_noted_before(yard: Runner, db: Path) -> None:
    noted = head_of(yard("check"))
    yard("setting", "cap-hours", "20")
    later = head_of(yard("check"))
    change(db, "DELETE FROM setting", "DELETE FROM ledger WHERE seq = (SELECT max(seq) FROM ledger)")
    assert yard("check").status == 0
    assert yard("check", "--head", noted).status == 0
    ran = yard("check", "--head", later)
    assert (ran.status, ran.err.count("\n")) == (1, 1)
    assert "was printed but is not there; the ledger ends at" in ran.err


@pytest.mark.parametrize("head", ["", "12", "x:9f86d081884c", "12:9f", "12:not-hex-at-all", "[/b]"])
def test_a_head_that_cannot_be_read_is_a_mistake_of_typing(yard: Runner, head: str) -> None:
    ran = yard("check", "--head", head)
    assert (ran.status, ran.out, ran.err.count("\n")) == (2, "", 1)
    assert "is not the head of a ledger; write it as it is printed" in ran.err


def test_a_backup_without_a_name_lies_beside_the_database_and_says_where(yard: Runner, db: Path) -> None:
    first, second = yard("backup"), yard("backup")
    assert first.out == f"The database is copied to {db.with_name('yard-2026-05-01.db')}.\n"
    assert second.out == f"The database is copied to {db.with_name('yard-2026-05-01-2.db')}.\n"


def test_a_backup_is_as_sound_as_what_it_was_taken_from(yard: Runner, fleetcare: Runner, tmp_path: Path) -> None:
    out = tmp_path / "copy.db"
    assert yard("backup", str(out)).status == 0
    assert fleetcare("check", "--db", str(out)).out == yard("check").out


def test_a_backup_never_overwrites(yard: Runner, tmp_path: Path) -> None:
    out = tmp_path / "mine.db"
    out.write_text("mine")
    ran = yard("backup", str(out))
    assert (ran.status, ran.out) == (1, "")
    assert ran.err == f"{out} is already there; name a file that is not, or remove that one first\n"
    assert out.read_text() == "mine"


def test_a_backup_into_a_missing_folder_is_one_line(yard: Runner, tmp_path: Path) -> None:
    ran = yard("backup", str(tmp_path / "none" / "copy.db"))
    assert (ran.status, ran.out, ran.err.count("\n")) == (3, "", 1)


def test_a_current_database_has_nothing_to_be_upgraded(yard: Runner, db: Path) -> None:
    before = db.read_bytes()
    assert yard("upgrade").out == f"{db} is up to this program; nothing to do.\n"
    assert db.read_bytes() == before


def test_an_older_database_is_brought_up_after_a_copy_and_says_so(
    yard: Runner, db: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    scripts = Path(shutil.copytree(migrate.scripts_folder(), tmp_path / "scripts"))
    (scripts / "versions" / f"{NEXT}.py").write_text(REVISION)
    before = dumped(db)
    # The program as it will be once there is a second migration.
    monkeypatch.setattr(reading, "HEAD", NEXT)
    monkeypatch.setattr(migrate, "HEAD", NEXT)
    monkeypatch.setattr(migrate, "scripts_folder", lambda: scripts)
    copy = db.with_name(f"yard.db.before-{NEXT}.db")
    ran = yard("upgrade")
    assert (ran.status, ran.err) == (0, "")
    assert ran.out == f"{db} is brought up to this program; as it was before, it is kept in {copy}.\n"
    assert dumped(copy) == before
    assert yard("upgrade").out.endswith("nothing to do.\n")


@pytest.mark.parametrize("words", [("check",), ("backup",), ("upgrade",)])
def test_without_a_database_there_is_nothing_to_look_after(
    fleetcare: Runner, tmp_path: Path, words: tuple[str, ...]
) -> None:
    ran = fleetcare(*words, "--db", str(tmp_path / "none.db"))
    assert (ran.status, ran.out, ran.err.count("\n")) == (3, "", 1)
    assert list(tmp_path.glob("*.db")) == []
