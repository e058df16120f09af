"""Names that would drive a terminal, a spreadsheet or a path, taken through every command that shows them."""

import csv
import io
import json
import re
from pathlib import Path

import pytest

from tests.cli.conftest import Runner

TAGS = ("[/b]", "=2+5", "../../etc", "@SUM(1)")
NASTY = "\x1b[2J\u202e\x9b31m[red]{0}%s$HOME"
CONTROL = re.compile("[\x00-\x09\x0b-\x1f\x7f-\x9f\u202a-\u202e\u2066-\u2069]")
RAN_BY_A_SPREADSHEET = ("=", "+", "-", "@", "\t", "\r")


@pytest.fixture
def yard(fleetcare: Runner, db: Path) -> Path:
    """A database whose every free text is hostile."""
    task = f"+Oil {NASTY}"
    start = ("--in-service", "2024-01-10", "--start-at", "0", "--as-new")
    texts = ("--name", NASTY, "--site", f"=1{NASTY}", "--duty", NASTY)
    typed: list[tuple[str, ...]] = [("engine", "add", tag, "--meter", "hours", *start, *texts) for tag in TAGS]
    typed += [("task", "add", tag, task, "--every", "250h", "--source", NASTY, "--caution", NASTY) for tag in TAGS]
    typed += [
        ("reading", TAGS[0], "240", "--note", NASTY, "--by", f"@{NASTY}"),
        ("defer", TAGS[0], task, "--until", "260h", f"--why=-{NASTY}", "--by", f"@{NASTY}"),
        ("log", TAGS[0], "--defect", NASTY, "--note", NASTY, "--by", NASTY, "--component", NASTY),
    ]
    for words in typed:
        ran = fleetcare("--db", str(db), "--as-of", "2026-05-01", *words)
        assert (ran.status, ran.err) == (0, "")
        assert not CONTROL.search(ran.out)
    return db


def test_no_table_or_page_lets_a_name_drive_the_terminal(fleetcare: Runner, yard: Path) -> None:
    looks = [("due",), ("engine", "list"), *(("show", tag) for tag in TAGS), *(("task", "list", tag) for tag in TAGS)]
    looks += [("show", tag, f"+Oil {NASTY}") for tag in TAGS]
    for words in looks:
        ran = fleetcare("--db", str(yard), "--as-of", "2026-05-01", *words)
        assert (ran.status, ran.err) == (0, "")
        assert "\\x1b[2J" in ran.out
        assert not CONTROL.search(ran.out)


def test_no_cell_of_the_csv_is_a_formula(fleetcare: Runner, yard: Path) -> None:
    ran = fleetcare("--db", str(yard), "--as-of", "2026-05-01", "due", "--format", "csv")
    header, *rows = csv.reader(io.StringIO(ran.out, newline=""))
    texts = [header.index(name) for name in ("engine", "site", "task", "reason")]
    shown = {row[place] for row in rows for place in texts}
    assert {"'=2+5", "'@SUM(1)", "[/b]", "../../etc"} <= shown
    assert not [cell for cell in shown if cell.startswith(RAN_BY_A_SPREADSHEET)]


def test_json_gives_names_back_as_they_were_typed_in_plain_characters(fleetcare: Runner, yard: Path) -> None:
    ran = fleetcare("--db", str(yard), "--as-of", "2026-05-01", "due", "--format", "json")
    assert not CONTROL.search(ran.out)
    rows = json.loads(ran.out)
    assert {row["engine"] for row in rows} == set(TAGS)
    assert {row["task"] for row in rows} == {f"+Oil {NASTY}"}
    assert {row["reason"] for row in rows} == {f"-{NASTY}", None}


def test_a_refusal_that_repeats_a_name_is_one_harmless_line(fleetcare: Runner, yard: Path) -> None:
    ran = fleetcare("--db", str(yard), "show", f"no such{NASTY}")
    assert ran.status == 1
    assert ran.err.count("\n") == 1
    assert not CONTROL.search(ran.err)
