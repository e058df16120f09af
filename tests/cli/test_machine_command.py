"""`machine add`, `edit`, `list`, and `engine fit`: engines in machines, and whose meter counts for whom."""

import csv
import io
import json
from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import LORRY

Opener = Callable[[str], Runner]


@pytest.fixture
def lorry(open_yard: Opener) -> Runner:
    """A yard with two lorries and an engine in the first."""
    return open_yard(LORRY)


def oil(run: Runner, *words: str) -> dict[str, str]:
    """The engine's line."""
    (line,) = csv.DictReader(io.StringIO(run("due", "--engine", "E-1", "--format", "csv", *words).out, newline=""))
    return line


def test_a_machine_has_the_start_options_of_an_engine(open_yard: Opener) -> None:
    run = open_yard("")
    words = ("--site", "Board Yard", "--name", "Boat", "--meter", "hours", "--in-service", "2026-01-10")
    assert run("machine", "add", "B-1", *words, "--start-at", "5", "--as-new").out == "B-1 added.\n"
    added = run("task", "add", "B-1", "Hull", "--every", "500h")
    assert added.out == "Hull added to B-1.\nB-1  Hull: clear, 505 h\n"


def test_an_edit_moves_a_machine_with_the_engines_in_it(lorry: Runner) -> None:
    lorry("machine", "edit", "LR-1", "--site", "East Depot", "--name", "Tipper")
    assert oil(lorry)["site"] == "East Depot"
    assert "Tipper" in lorry("machine", "list").out


def test_the_list_of_machines_to_the_byte(lorry: Runner) -> None:
    assert lorry("machine", "list").out.splitlines() == [
        "tag   name  site        in service  last read",
        "----  ----  ----------  ----------  ----------------------",
        "LR-1        Board Yard  2025-01-01  61000 km on 2026-04-01",
        "LR-2        West Depot  2025-01-01  10000 mi on 2025-01-01",
    ]


def test_the_list_of_machines_as_json(lorry: Runner) -> None:
    assert json.loads(lorry("machine", "list", "--json").out)[1] == {
        "tag": "LR-2",
        "name": None,
        "site": "West Depot",
        "in_service": "2025-01-01",
        "last_read": [{"meter": "distance", "value": 10000, "unit": "mi", "on": "2025-01-01"}],
    }


def test_a_reading_of_either_tag_is_one_of_the_machines_meter_and_moves_both(lorry: Runner) -> None:
    ran = lorry("reading", "E-1", "62000km")
    assert ran.out == "Reading 6: E-1 shows 62000 km on 2026-05-01.\n"
    assert "62000 km" in lorry("show", "LR-1").out
    assert oil(lorry)["remaining"] == "3000"


def test_a_kind_the_engine_counts_itself_is_not_the_machines(open_yard: Opener) -> None:
    run = open_yard("machine add B-1 --meter hours\nengine add E-1 --machine B-1 --meter hours")
    run("reading", "B-1", "500")
    run("reading", "E-1", "40")
    assert "40 h on the dial" in run("show", "E-1").out
    assert "500 h on the dial" in run("show", "B-1").out


def test_an_engine_that_moves_takes_its_life_total_to_the_next_odometer(lorry: Runner) -> None:
    moved = lorry("engine", "fit", "e-1", "--machine", "lr-2", "--on", "2026-04-10")
    assert moved.out.splitlines()[0] == "E-1 fitted in LR-2 on 2026-04-10."
    line = oil(lorry)
    assert (line["machine"], line["site"], line["meter_unit"]) == ("LR-2", "West Depot", "mi")
    # 4000 km were left at 61000 km; the other odometer stood at 10000 mi
    assert round(float(line["remaining"]), 3) == round(4000 / 1.609344, 3)
    assert round(float(line["next_due_dial"]), 3) == round(10000 + 4000 / 1.609344, 3)
    assert oil(lorry, "--as-of", "2026-04-09")["machine"] == "LR-1"


def test_a_move_prints_the_lines_whose_dial_figure_it_changes(lorry: Runner) -> None:
    assert lorry("engine", "fit", "E-1", "--machine", "LR-2").out.splitlines()[1:] == [
        "E-1  Oil: 65000 km on the dial (15000 km of life) → 12485.5 mi on the dial (9320.6 mi of life)"
    ]


def test_an_engine_taken_out_keeps_what_was_counted(lorry: Runner) -> None:
    ran = lorry("engine", "fit", "E-1", "--out", "--on", "2026-04-10")
    assert ran.out.startswith("E-1 taken out of its machine on 2026-04-10.\n")
    lorry("reading", "LR-1", "70000")
    line = oil(lorry)
    assert (line["machine"], line["remaining"]) == ("", "4000")
    assert lorry("reading", "E-1", "70000km").err.startswith("no meter counts distance of E-1 on that day")
    assert lorry("log", "E-1", "Oil", "--on", "2026-04-20").status == 0


def test_within_its_machine_an_engine_may_change_its_place(lorry: Runner) -> None:
    assert lorry("engine", "fit", "E-1", "--machine", "LR-1", "--position", "rear").status == 0
    assert "machine     LR-1, rear" in lorry("show", "E-1").out
    assert oil(lorry)["remaining"] == "4000"


@pytest.mark.parametrize(
    ("words", "status", "wrong"),
    [
        (
            ("E-1", "--machine", "LR-1", "--position", "front"),
            1,
            "E-1 is in LR-1 since 2025-01-01; name another machine",
        ),
        (
            ("E-1", "--machine", "LR-2", "--on", "2024-12-01"),
            1,
            "E-1 is in its machine since 2025-01-01, after 2024-12",
        ),
        (("E-1", "--machine", "LR-2", "--on", "2026-05-02"), 1, "2026-05-02 has not come yet, today counts as 2026-05"),
        (("E-1", "--machine", "LR-9"), 1, "no engine or machine has the tag 'LR-9'; did you mean LR-2 or LR-1?"),
        (("E-1", "--machine", "E-1"), 1, "E-1 is an engine, not a machine; name a machine, or add one with"),
        (("LR-1", "--machine", "LR-2"), 1, "LR-1 is a machine, not an engine; name one of its engines"),
        (("E-1",), 2, "one of the arguments --machine --out is required"),
        (("E-1", "--machine", ""), 2, "an engine goes into a machine or out of one; give --machine TAG or --out"),
        (("E-1", "--machine", "LR-2", "--out"), 2, "argument --out: not allowed with argument --machine"),
    ],
)
def test_a_move_that_cannot_be_is_refused(lorry: Runner, words: tuple[str, ...], status: int, wrong: str) -> None:
    ran = lorry("engine", "fit", *words)
    assert (ran.status, ran.out) == (status, "")
    assert ran.err.startswith(wrong)


def test_an_engine_is_never_in_two_machines_on_one_day(lorry: Runner) -> None:
    lorry("engine", "fit", "E-1", "--out", "--on", "2026-04-10")
    assert lorry("engine", "fit", "E-1", "--out").err == "E-1 is in no machine; nothing needs to be done\n"
    ran = lorry("engine", "fit", "E-1", "--machine", "LR-2", "--on", "2026-04-09")
    assert ran.err == "E-1 was in a machine until 2026-04-10, after 2026-04-09; give a later --on\n"
    assert lorry("engine", "fit", "E-1", "--machine", "LR-2", "--on", "2026-04-10").status == 0


def test_an_engine_added_to_a_machine_that_is_none_is_refused_before_its_own_tag_is_taken(lorry: Runner) -> None:
    ran = lorry("engine", "add", "E-2", "--machine", "E-2")
    assert ran.err.startswith("no engine or machine has the tag 'E-2'; did you mean E-1?")


def test_a_place_without_a_machine_is_refused(lorry: Runner) -> None:
    assert lorry("engine", "add", "E-2", "--position", "aft").err == (
        "a position is one in a machine; give --machine as well\n"
    )


def test_withdrawing_an_engine_takes_it_out_of_its_machine(lorry: Runner) -> None:
    lorry("engine", "withdraw", "E-1")
    assert lorry("engine", "add", "E-2", "--machine", "LR-1").status == 0
    assert "machine" not in lorry("show", "E-1").out


def test_an_engine_given_a_meter_of_its_own_no_longer_counts_by_the_machines(lorry: Runner) -> None:
    lorry("reading", "LR-1", "61100", "--on", "2026-04-10")
    assert lorry("engine", "edit", "E-1", "--meter", "distance", "--as-of", "2026-04-10").status == 0
    lorry("reading", "E-1", "30km")
    lorry("reading", "LR-1", "62000", "--on", "2026-04-20")
    page = lorry("show", "E-1").out
    assert "distance  30 km on the dial, 11130 km of life" in page
    assert "62000 km" not in page


def test_a_meter_given_to_a_machine_counts_for_the_engine_in_it(lorry: Runner) -> None:
    lorry("machine", "edit", "LR-1", "--meter", "starts")
    lorry("reading", "LR-1", "40starts")
    assert "starts    40 starts on the dial" in lorry("show", "E-1").out
