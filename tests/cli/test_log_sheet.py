"""`log`, `correct` and `show` with a lash sheet."""

import shlex
from pathlib import Path

import pytest

from tests.cli.conftest import Runner
from tests.cli.test_measure_command import CAUTIONS, YARD, Opener, write
from tests.cli.test_measure_command import lash as lash  # the fixture
from tests.cli.test_show_command import section

BIG = YARD + '    task add P-01 "Big service" --every 2000h --covers "Valve lash"\n'
HALF = ("lash,1I,,0.25,", "lash,1E,,0.45,", "lash,2I,,0.25,")


@pytest.fixture
def pump(open_yard: Opener) -> Runner:
    """P-01 of two cylinders, whose valve lash is part of a bigger service."""
    return open_yard(BIG)


def test_logging_with_a_sheet_closes_the_task_and_prints_the_judgement(pump: Runner, lash: str) -> None:
    words = ("--sheet", lash, "--at", "1200", "--by", "Fenn", "--when", "cold", "--gauge", "F2")
    ran = pump("log", "P-01", "Valve lash", *words)
    assert (ran.status, ran.err) == (0, "")
    out = ran.out.splitlines()
    assert out[:3] == [
        "Entry 1 (scheduled) of P-01 on 2026-05-01.",
        "Done: Valve lash.",
        "Valve lash of P-01 on 2026-05-01, cold, gauge F2.",
    ]
    assert "2E     left   0.38 mm        alarm    0.02 mm below 0.40 to 0.50 mm  turn the screw 25° looser" in out
    assert out[-7:] == [*CAUTIONS, "P-01  Valve lash: 1000 h → 2200 h"]


def test_a_bigger_job_closes_it_with_its_sheet(pump: Runner, lash: str) -> None:
    assert "Done along with Big service: Valve lash." in pump("log", "P-01", "Big service", "--sheet", lash).out


def test_an_unfinished_sheet_is_refused_in_one_line_and_stores_nothing(pump: Runner, tmp_path: Path) -> None:
    before = (tmp_path / "opened.db").read_bytes()
    ran = pump("log", "P-01", "Valve lash", "--sheet", write(tmp_path, *HALF, "lash,2E,,0.36,"))
    assert (ran.status, ran.out) == (1, "")
    assert ran.err == (
        "Valve lash does not close with this lash sheet: 2E found out and not set; add what is wanting, or give --sure"
        " to close it as it stands, or --part-done to keep it open\n"
    )
    assert (tmp_path / "opened.db").read_bytes() == before


def test_a_sheet_left_as_found_closes_from_who_is_sure_and_offers_the_follow_up(pump: Runner, tmp_path: Path) -> None:
    ran = pump("log", "P-01", "Valve lash", "--sheet", write(tmp_path, *HALF, "lash,2E,,0.36,"), "--sure")
    assert "Done: Valve lash." in ran.out
    assert (
        "To raise it: fleetcare log P-01 --on 2026-05-01 --defect 'Valve lash left out of limits: 2E 0.36 mm'"
        in ran.out
    )


def test_the_follow_up_that_is_offered_can_be_typed(pump: Runner, lash: str) -> None:
    out = pump("log", "P-01", "Valve lash", "--sheet", lash).out
    (command,) = [line.partition("To raise it: ")[2] for line in out.splitlines() if "To raise it: " in line]
    ran = pump(*shlex.split(command)[1:])
    assert ran.status == 0
    assert "Follow-up raised: Valve lash left out of limits: 2E 0.38 mm, due 2026-05-01." in ran.out


def test_without_its_sheet_it_says_what_to_give(pump: Runner) -> None:
    assert pump("log", "P-01", "Valve lash").err == (
        "Valve lash closes only with its lash sheet; give --part-done to keep a note of the work until the sheet is"
        " there, or give it with --sheet FILE\n"
    )


def test_the_log_names_the_sheet_of_an_entry(pump: Runner, lash: str, tmp_path: Path) -> None:
    pump("log", "P-01", "Valve lash", "--sheet", lash, "--when", "cold", "--gauge", "F2")
    pump("measure", "lash", "P-01", write(tmp_path, "lash,1I,,0.25,"))
    assert [" ".join(line.split()) for line in section(pump("show", "P-01").out, "LOG")[2:]] == [
        "2 2026-05-01 other lash sheet, 1 value",
        "1 2026-05-01 scheduled Valve lash; lash sheet, 6 values, cold, gauge F2 ~1000 h",
    ]


def test_the_log_says_of_a_run_how_long_at_which_load_and_what_for(pump: Runner, tmp_path: Path) -> None:
    run = write(tmp_path, "minutes,,,35,min", "load,,,40,%", "purpose,,,test,")
    assert pump("measure", "run", "P-01", run).status == 0
    (_, _, line) = section(pump("show", "P-01").out, "LOG")
    assert " ".join(line.split()) == "1 2026-05-01 other run sheet, 35 min at 40 %, test"


def test_a_lash_task_shows_its_last_sheet_point_by_point(pump: Runner, lash: str) -> None:
    assert "LAST SHEET" not in pump("show", "P-01", "Valve lash").out
    pump("log", "P-01", "Valve lash", "--sheet", lash, "--by", "Fenn", "--gauge", "F2")
    shown = pump("show", "P-01", "Valve lash").out
    assert section(shown, "LAST SHEET") == [
        "entry 1, 2026-05-01, gauge F2, Fenn; limits: intake 0.20 to 0.30 mm, exhaust 0.40 to 0.50 mm, cold",
        "point  phase  value          verdict  why                            to mend",
        "-----  -----  -------------  -------  -----------------------------  -------------------------",
        "1I     found  0.25 mm        in       in 0.20 to 0.30 mm",
        "1E     found  0.45..0.50 mm  in       in 0.40 to 0.50 mm",
        "2I     found  0.17 mm        alert    0.03 mm below 0.20 to 0.30 mm",
        "2I     left   0.25 mm        in       in 0.20 to 0.30 mm",
        "2E     found  0.36 mm        alert    0.04 mm below 0.40 to 0.50 mm",
        "2E     left   0.38 mm        alarm    0.02 mm below 0.40 to 0.50 mm  turn the screw 25° looser",
        "nobody said whether the engine was cold or hot; it is taken to be cold, as the limits ask",
    ]
    assert "LAST SHEET" not in pump("show", "P-01", "Oil").out
    assert "LAST SHEET" not in pump("show", "P-01", "Valve lash", "--as-of", "2026-04-30").out


def test_a_task_of_the_work_lash_shows_it_too(pump: Runner, lash: str) -> None:
    pump("task", "add", "P-01", "First check", "--first", "50h", "--once", "--work", "lash")
    pump("measure", "lash", "P-01", lash)
    assert "LAST SHEET" in pump("show", "P-01", "First check").out


def test_voiding_the_entry_takes_the_sheet_out_of_account_and_says_so_in_the_log(pump: Runner, lash: str) -> None:
    pump("log", "P-01", "Valve lash", "--sheet", lash)
    ran = pump("correct", "1", "--void", "--why", "another engine")
    assert ran.status == 0
    assert "LAST SHEET" not in pump("show", "P-01", "Valve lash").out
    assert any("lash sheet, 6 values" in line for line in section(pump("show", "P-01").out, "LOG"))


def test_a_correction_takes_another_sheet_and_prints_it(pump: Runner, lash: str, tmp_path: Path) -> None:
    pump("log", "P-01", "Valve lash", "--sheet", lash, "--when", "cold", "--at", "1200")
    ran = pump("correct", "1", "--sheet", write(tmp_path, *HALF, "lash,2E,,0.36,", "lash,2E,left,0.45,"))
    assert ran.out.splitlines()[:2] == ["Entry 2 (scheduled) of P-01 corrects entry 1.", "Done: Valve lash."]
    assert "5 values: 4 in, 1 alert; found out of limits: 2E." in ran.out
    assert pump("check").status == 0


@pytest.mark.parametrize(
    ("words", "is_judged_anew"), [(("--note", "x"), False), (("--gauge", "F3"), False), (("--when", "hot"), True)]
)
def test_a_correction_prints_the_sheet_where_its_judgement_may_change(
    pump: Runner, lash: str, words: tuple[str, ...], is_judged_anew: bool
) -> None:
    pump("log", "P-01", "Valve lash", "--sheet", lash, "--when", "cold")
    ran = pump("correct", "1", *words)
    assert ran.status == 0
    assert ("Valve lash of P-01 on 2026-05-01" in ran.out) is is_judged_anew


@pytest.mark.parametrize(
    ("words", "err"),
    [
        (
            ("log", "P-01", "Oil", "--gauge", "F2"),
            "--gauge says how a sheet was taken; give the sheet with --sheet FILE",
        ),
        (("log", "P-01", "Oil", "--sure"), "--sure says how a sheet was taken; give the sheet with --sheet FILE"),
        (("log", "P-01", "Oil", "--sheet", "missing.csv"), "cannot read missing.csv: No such file or directory; name"),
        (("correct", "1", "--sheet", "missing.csv"), "cannot read missing.csv: No such file or directory; name"),
        (("correct", "1", "--sure"), "nothing to correct; give what should stand instead"),
        (("correct", "1", "--void", "--why", "x", "--when", "hot"), "a voided entry says nothing any more"),
    ],
)
def test_wrong_use_of_a_sheet_is_one_line(pump: Runner, words: tuple[str, ...], err: str) -> None:
    pump("log", "P-01", "Oil")
    ran = pump(*words)
    assert (ran.status, ran.out) == (1, "")
    assert ran.err.startswith(err)
    assert ran.err.count("\n") == 1
