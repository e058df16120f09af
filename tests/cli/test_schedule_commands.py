"""`schedule`: look at shipped and own sets of tasks, and give them to engines."""

import json
import subprocess
import sys
import tomllib
from pathlib import Path

import pytest

from tests.cli.conftest import Ran, Runner

OWN = """name = "Ditch pumps"
source = "workshop book"
note = "Check against the manual."

[[task]]
name = "Oil"
every = ["250h", "12mo"]
first = "50h"
law = true
caution = "Hot oil."

[[task]]
name = "Test run"
once_each = "month"
needs_sheet = "run"
source = "insurer's letter"

[[task]]
name = "Big service"
every = "24mo"
covers = ["Oil"]
part = ["Filter:2", "Gasket"]

[[task]]
name = "Compression"
on_condition = true
"""


@pytest.fixture
def own(tmp_path: Path) -> str:
    """A schedule of the shop's own."""
    path = tmp_path / "ditch.toml"
    path.write_text(OWN, encoding="utf-8")
    return str(path)


@pytest.fixture
def yard(fleetcare: Runner, db: Path) -> Runner:
    """Run a command on a database with an engine that counts as new, P-01, and one that does not, P-02."""

    def run(*words: str) -> Ran:
        return fleetcare("--db", str(db), "--as-of", "2026-05-01", *words)

    new = ("--in-service", "2026-01-10", "--start-at", "0", "--as-new")
    assert run("engine", "add", "P-01", "--meter", "hours", *new).status == 0
    assert run("engine", "add", "P-02").status == 0
    return run


def test_the_list_names_each_shipped_schedule_and_what_it_is_for(fleetcare: Runner) -> None:
    lines = fleetcare("schedule", "list").out.splitlines()
    assert lines[0].split() == ["schedule", "name", "fuel", "duty", "tasks"]
    genset = next(line for line in lines if line.startswith("diesel-genset"))
    assert "Diesel generating set" in genset


def test_the_list_as_json_has_source_and_note(fleetcare: Runner) -> None:
    first = json.loads(fleetcare("schedule", "list", "--json").out)[0]
    assert list(first) == ["schedule", "name", "engines", "fuel", "duty", "source", "note", "tasks"]
    assert (first["schedule"], len(first["tasks"])) == ("diesel-genset", 10)


def test_a_schedule_is_shown_with_its_source_its_tasks_and_what_can_hurt(fleetcare: Runner, own: str) -> None:
    assert fleetcare("schedule", "show", own).out.splitlines() == [
        f"{own}: Ditch pumps",
        "engines: -",
        "fuel:    -",
        "duty:    -",
        "source:  workshop book",
        "note:    Check against the manual.",
        "",
        "task         every                    work  also",
        "-----------  -----------------------  ----  ---------------------------------",
        "Oil          250h or 12mo, first 50h        law",
        "Test run     once each month                closes with its run sheet",
        "Big service  24mo                           part Filter:2, Gasket; covers Oil",
        "Compression  on condition",
        "",
        "caution (Oil): Hot oil.",
        "",
        "source (Test run): insurer's letter",
    ]


def test_a_schedule_as_json_has_the_options_of_task_add(fleetcare: Runner, own: str) -> None:
    shown = json.loads(fleetcare("schedule", "show", own, "--json").out)
    assert shown["tasks"][1] == {
        "name": "Test run",
        "once_each": "month",
        "needs_sheet": "run",
        "source": "insurer's letter",
    }


def test_a_shipped_schedule_can_be_written_out_changed_and_applied_as_the_shops_own(
    yard: Runner, tmp_path: Path
) -> None:
    mine = tmp_path / "mine.toml"
    assert yard("schedule", "show", "pump-diesel", "--toml", "--out", str(mine)).status == 0
    text = mine.read_text(encoding="utf-8").replace('"250h", "12mo"', '"200h", "12mo"')
    mine.write_text(text, encoding="utf-8")
    assert tomllib.loads(text)["name"] == "Pump diesel"
    ran = yard("schedule", "apply", str(mine), "P-01", "--from", "2026-04-20", "--from", "100h")
    assert ran.out.splitlines()[0] == f"P-01: 10 tasks of {mine} added."
    assert "P-01  Oil and filter: clear, 300 h or 2027-04-20" in ran.out.splitlines()


def test_applying_says_each_line_what_is_unset_and_why_and_the_caution(yard: Runner, own: str) -> None:
    ran = yard("schedule", "apply", own, "P-01", "P-02", "--from", "unset")
    assert ran.status == 0
    assert ran.out.splitlines()[5:] == [
        f"P-02: 4 tasks of {own} added.",
        "P-02  Oil: unset, not known when it was last done; log it, or enter a last-done",
        "P-02  Test run: unset, not known when it was last done; log it, or enter a last-done",
        "P-02  Big service: unset, not known when it was last done; log it, or enter a last-done",
        "P-02  Compression: no line until it is called for",
        "P-02  no meter counts hours, so Oil cannot fall due by hours;"
        " add one with fleetcare engine edit P-02 --meter hours",
        "Check against the manual.",
    ]


def test_applying_to_an_engine_that_counts_as_new_needs_no_start(yard: Runner, own: str) -> None:
    lines = yard("schedule", "apply", own, "P-01").out.splitlines()
    assert lines[1:4] == [
        "P-01  Oil: clear, 50 h or 2027-01-10",
        "P-01  Test run: overdue, 2026-02-28",
        "P-01  Big service: clear, 2028-01-10",
    ]


def test_hydraulic_adjusters_are_named_where_the_lash_is_left_out(yard: Runner) -> None:
    yard("engine", "edit", "P-01", "--adjuster", "hydraulic")
    ran = yard("schedule", "apply", "diesel-genset", "P-01")
    assert "P-01  Valve lash: left out, its hydraulic adjusters keep the lash" in ran.out.splitlines()


def test_what_was_applied_stands_in_the_task_list(yard: Runner, own: str) -> None:
    yard("schedule", "apply", own, "P-01")
    tasks = json.loads(yard("task", "list", "P-01", "--json").out)
    assert [task["task"] for task in tasks] == ["Oil", "Test run", "Big service", "Compression"]


@pytest.mark.parametrize(
    ("words", "status", "wrong"),
    [
        (("show", "diesel-gensett"), 1, "there is no schedule 'diesel-gensett'; did you mean diesel-genset?"),
        (("show", "none.toml"), 1, "cannot read none.toml: No such file or directory"),
        (("show", "diesel-genset", "--json", "--toml"), 2, "argument --toml: not allowed with argument --json"),
        (("show", "diesel-genset", "--out", "g.toml"), 2, "--out writes JSON or TOML; add --json or --toml"),
        (("apply", "diesel-genset"), 2, "the following arguments are required: TAG"),
        (("apply", "diesel-genset", "P-02"), 1, "P-02 does not count as new"),
        (("apply", "diesel-genset", "P-02", "--from", "soon"), 2, "--from: 'soon' is not a figure; write start, unset"),
    ],
)
def test_what_cannot_be_is_one_line_with_a_remedy(
    yard: Runner, words: tuple[str, ...], status: int, wrong: str
) -> None:
    ran = yard("schedule", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (status, "", 1)
    assert ran.err.startswith(wrong)


def test_a_file_of_ones_own_is_tried_out_in_full_when_shown(fleetcare: Runner, own: str) -> None:
    Path(own).write_text(OWN.replace('"50h"', '"50km"').replace('"24mo"', '"24"'), encoding="utf-8")
    ran = fleetcare("schedule", "show", own)
    assert (ran.status, ran.out) == (1, "")
    first, second = ran.err.splitlines()
    assert first.startswith(f"{own}, task 'Oil': --first 50 km binds to no interval")
    assert second.startswith(f"{own}, task 'Big service': every: '24' has no unit")


@pytest.mark.parametrize("words", [("list",), ("show", "zzzz-2d-4")])
def test_looking_at_shipped_schedules_loads_no_database_and_no_forms(words: tuple[str, ...]) -> None:
    look = (
        "import sys; from fleetcare.__main__ import main; main(sys.argv[1:]);"
        "print(*{'pydantic', 'sqlalchemy', 'sqlmodel'} & set(sys.modules), file=sys.stderr)"
    )
    ran = subprocess.run([sys.executable, "-c", look, "schedule", *words], capture_output=True, text=True, check=True)
    assert ran.stderr == "\n"
