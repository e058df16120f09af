"""`import`: what it says when it stores, when there is nothing new, on a dry run, and when it refuses."""

import shutil
import sqlite3
import subprocess
import sys
from contextlib import closing
from pathlib import Path

import pytest

from tests.cli.conftest import Ran, Runner

NEW = ("--in-service", "2026-01-10", "--start-at", "0", "--as-new")


@pytest.fixture
def yard(fleetcare: Runner, db: Path) -> Runner:
    """Run a command on a database with P-01, new on 10 January 2026, and its oil change every 250 h."""

    def run(*words: str) -> Ran:
        return fleetcare("--db", str(db), "--as-of", "2026-05-01", *words)

    assert run("engine", "add", "P-01", "--meter", "hours", *NEW).status == 0
    assert run("task", "add", "P-01", "Oil", "--every", "250h").status == 0
    return run


@pytest.fixture
def file(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> str:
    """A file called a.csv in the folder the command is run in, with three readings."""
    monkeypatch.chdir(tmp_path)
    return write("engine,on,value", *(f"P-01,2026-04-{day:02},{100 + day}" for day in (1, 8, 15)))


def write(*lines: str) -> str:
    """Write a.csv anew."""
    Path("a.csv").write_text("\n".join(lines) + "\n", encoding="utf-8")
    return "a.csv"


def stored(db: Path) -> list[str]:
    """Everything a database holds, as SQL."""
    with closing(sqlite3.connect(db)) as connection:
        return list(connection.iterdump())


def refused(yard: Runner, db: Path, *words: str) -> list[str]:
    """The lines on stderr of an import that is refused, and changed nothing."""
    before = stored(db)
    ran = yard("import", *words)
    assert (ran.status, ran.out) == (1, "")
    assert stored(db) == before
    return ran.err.splitlines()


def test_it_says_how_much_is_new(yard: Runner, file: str) -> None:
    ran = yard("import", "readings", file)
    assert (ran.status, ran.out, ran.err) == (0, "a.csv: 3 new, 0 already there.\n", "")


def test_the_same_file_again_says_that_nothing_is_new(yard: Runner, db: Path, file: str) -> None:
    yard("import", "readings", file)
    before = stored(db)
    assert yard("import", "readings", file).out == "a.csv: 0 new, 3 already there.\n"
    assert stored(db) == before


def test_a_dry_run_says_what_would_be_stored_and_stores_nothing(yard: Runner, db: Path, file: str) -> None:
    before = stored(db)
    assert yard("import", "readings", file, "--dry-run").out.splitlines() == [
        "a.csv: 3 would be new, 0 already there.",
        "This was a dry run, nothing is stored.",
        "P-01  101 h on 2026-04-01",
        "P-01  108 h on 2026-04-08",
        "P-01  115 h on 2026-04-15",
    ]
    assert stored(db) == before


def test_a_dry_run_refuses_what_the_import_would(yard: Runner, db: Path, file: str) -> None:
    write("engine,on,value", "P-01,2026-04-01,-")
    dry = refused(yard, db, "readings", file, "--dry-run")
    assert dry == refused(yard, db, "readings", file)


def test_engines_come_in_with_the_options_of_engine_add(yard: Runner, file: str) -> None:
    write("tag,site,cylinders,firing_order,meter", "P-02,North Sluice,4,1-3-4-2,hours;starts", "P-03,,,,")
    assert yard("import", "engines", file).out == "a.csv: 2 new, 0 already there.\n"
    shown = yard("show", "P-02").out
    assert "1-3-4-2" in shown
    assert "starts" in shown
    assert yard("check").status == 0


def test_a_logs_moved_lines_are_told(yard: Runner, file: str) -> None:
    write("engine,task,on,at,by", "P-01,Oil,2026-04-20,240h,Fenn")
    first, second = yard("import", "log", file).out.splitlines()
    assert first == "a.csv: 1 new, 0 already there."
    assert second.startswith("P-01  Oil: 250 h ")
    assert second.endswith(" 490 h")


def test_lines_that_moved_are_told_up_to_a_readable_number(yard: Runner, file: str) -> None:
    for number in range(31):
        yard("engine", "add", f"E-{number:02}", "--meter", "hours")
        yard("task", "add", f"E-{number:02}", "Oil", "--every", "250h")
    write("engine,task,on,at", *(f"E-{number:02},Oil,2026-04-20,{number}" for number in range(31)))
    lines = yard("import", "log", file, "--dry-run").out.splitlines()
    assert lines[2:4] == ["E-00  Oil on 2026-04-20 at 0 h", "E-01  Oil on 2026-04-20 at 1 h"]
    assert lines[22] == "and 11 more."
    lines = yard("import", "log", file).out.splitlines()
    assert len(lines) == 22
    assert lines[1].startswith("E-00  Oil: unset, ")
    assert lines[-1] == "and 11 more lines moved."


def test_one_line_more_is_said_in_the_singular(yard: Runner, file: str) -> None:
    for number in range(21):
        yard("task", "add", "P-01", f"Job {number}", "--every", "250h")
    write("engine,task,on,at", *(f"P-01,Job {number},2026-04-20,240" for number in range(21)))
    assert yard("import", "log", file).out.splitlines()[-1] == "and 1 more line moved."


def test_what_was_done_along_and_what_stays_open_is_noted(yard: Runner, file: str) -> None:
    yard("task", "add", "P-01", "Lash", "--every", "500h", "--needs-sheet", "lash")
    yard("task", "add", "P-01", "Big service", "--every", "1000h", "--covers", "Oil", "--covers", "Lash")
    write("engine,task,on,at", "P-01,Big service,2026-04-20,240h")
    lines = yard("import", "log", file).out.splitlines()
    assert lines[1:3] == [
        "Note: row 2: Lash stays open: it closes only with its lash sheet.",
        "Note: row 2: done along with Big service: Oil.",
    ]


def test_every_bad_cell_is_one_line_on_stderr_with_status_1(yard: Runner, db: Path, file: str) -> None:
    write("engine,on,value,unit", "P-1,2027-01-01,5,", "P-01,x,y,z", "P-01,2026-04-01,50000,h")
    assert [line.split(":")[0] for line in refused(yard, db, "readings", file)] == [
        "row 2, column engine",
        "row 2, column on",
        "row 3, column on",
        "row 3, column value",
        "row 3, column unit",
        "row 4, column value",
    ]


def test_hostile_text_is_refused_where_it_drives_something_and_kept_where_it_does_not(
    yard: Runner, db: Path, file: str
) -> None:
    write("tag,name", "[/b],'=2+5", "../../etc,$HOME", "=cmd|calc,@SUM(1)")
    assert yard("import", "engines", file).out == "a.csv: 3 new, 0 already there.\n"
    assert "[/b]" in yard("engine", "list").out
    write("engine,on,value,note", "[/b],2026-04-01,1,\x1b[2J\x1b]0;x\x07")
    (line,) = refused(yard, db, "readings", file)
    assert line == r"row 2, column note: it holds the control character '\x1b'; remove it"
    write("engine,on,value,\x1b[2J", "P-01,2026-04-01,1,")
    (line,) = refused(yard, db, "readings", file)
    assert line.startswith("row 1, column \\x1b[2j: it is not known here")


# The whole file


@pytest.mark.parametrize(
    ("content", "wrong"),
    [
        (b"", "the file is empty; begin it with the line engine,on,value,meter,unit,note"),
        (b"\xff\xfe\x00", "the file is not UTF-8 text: line 1 holds the byte ff; save it as CSV UTF-8"),
        (b"engine;on;value\n", "row 1: the columns are separated by semicolons; save the file with commas"),
        (b"engine,on,valeu\n", "row 1, column valeu: it is not known here; did you mean value?"),
        (b"tag,site\n", "row 1, column tag: it is not known here"),
    ],
)
def test_what_is_no_file_of_readings_is_said_before_anything_is_stored(
    yard: Runner, db: Path, file: str, content: bytes, wrong: str
) -> None:
    Path(file).write_bytes(content)
    assert refused(yard, db, "readings", file)[0].startswith(wrong)


@pytest.mark.parametrize(
    ("name", "wrong"),
    [
        ("none.csv", "cannot read none.csv: No such file or directory; name a CSV file that can be read"),
        (".", ". is a folder; name a CSV file in it"),
    ],
)
def test_what_cannot_be_read_is_one_line(yard: Runner, db: Path, file: str, name: str, wrong: str) -> None:
    assert refused(yard, db, "readings", name) == [wrong]


@pytest.mark.parametrize(
    ("words", "wrong"),
    [
        ((), "the following arguments are required: KIND"),
        (("readings",), "the following arguments are required: FILE"),
        (("oil", "a.csv"), "argument KIND: invalid choice: 'oil'"),
    ],
)
def test_a_command_line_that_is_wrong_is_status_2(yard: Runner, words: tuple[str, ...], wrong: str) -> None:
    ran = yard("import", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (2, "", 1)
    assert ran.err.startswith(wrong)


def test_the_help_of_a_kind_names_its_columns(yard: Runner) -> None:
    assert "Columns: engine, task and on, or at, by and note besides" in yard("import", "log", "--help").out


def test_an_import_makes_a_missing_database_and_leaves_none_behind_when_refused(
    fleetcare: Runner, tmp_path: Path, file: str
) -> None:
    new = tmp_path / "new.db"
    assert fleetcare("--db", str(new), "import", "readings", file).status == 1
    assert not new.exists()
    write("tag", "P-01")
    assert fleetcare("--db", str(new), "import", "engines", file, "--dry-run").status == 0
    assert not new.exists()
    assert fleetcare("--db", str(new), "import", "engines", file).status == 0
    assert new.exists()


def test_a_header_without_rows_stores_nothing(yard: Runner, file: str) -> None:
    write("engine,on,value")
    assert yard("import", "readings", file).out == "a.csv: 0 new, 0 already there.\n"


def test_a_kill_in_the_middle_of_an_import_leaves_nothing_of_it(yard: Runner, db: Path, file: str) -> None:
    write("engine,on,value", *(f"P-01,2026-04-01,{100 + n / 1000}" for n in range(9000)))
    before = stored(db)
    copy = Path(shutil.copy(db, "killed.db"))
    words = [sys.executable, "-c", KILLED, "--db", str(copy), "--as-of", "2026-05-01", "import", "readings", file]
    ran = subprocess.run(words, capture_output=True, text=True, check=False)
    assert (ran.returncode, ran.stdout) == (9, "")
    assert stored(copy) == before


KILLED = """
import os, sys
from fleetcare.operations import imports_readings
from fleetcare.__main__ import main

def killed(session, found):
    store(session, found)
    os._exit(9)

store, imports_readings.insert_readings = imports_readings.insert_readings, killed
main(sys.argv[1:])
"""
