"""`correct`: a new entry that says what an old one should have said, or that nothing of it is true."""

from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import LORRY, PUMP

Opener = Callable[[str], Runner]

DONE = (
    PUMP
    + """
    task add P-01 Belt --every 500h --last-done 800
    log P-01 "Oil and filter" --at 1010 --on 2026-04-10 --by Fenn --note "new filter" --part "Oil filter:1"
"""
)


@pytest.fixture
def done(open_yard: Opener) -> Runner:
    """An engine whose oil was done at 1010 h, in entry 1."""
    return open_yard(DONE)


def log(run: Runner) -> list[str]:
    """The log on the page, white space evened out."""
    lines = run("show", "P-01").out.splitlines()
    begin = lines.index("LOG") + 3
    return [" ".join(line.split()) for line in lines[begin : lines.index("", begin)]]


def test_a_correction_is_a_new_entry_and_the_old_one_stays_readable(done: Runner) -> None:
    assert done("correct", "1", "--at", "1020", "--why", "misread dial").out.splitlines() == [
        "Entry 2 (scheduled) of P-01 corrects entry 1.",
        "Done: Oil and filter.",
        "P-01  Oil and filter: 1260 h or 2027-04-10 → 1270 h or 2027-04-10",
    ]
    assert log(done) == [
        "2 2026-04-10 scheduled Oil and filter; 1 × Oil filter; new filter 1020 h Fenn corrects entry 1, misread dial",
        "1 2026-04-10 scheduled Oil and filter; 1 × Oil filter; new filter 1010 h Fenn corrected by entry 2",
    ]


@pytest.mark.parametrize(
    ("words", "stands"),
    [
        (("--on", "2026-04-12"), "2026-04-12 scheduled Oil and filter; 1 × Oil filter; new filter 1010 h Fenn"),
        (("--by", "Quill"), "2026-04-10 scheduled Oil and filter; 1 × Oil filter; new filter 1010 h Quill"),
        (("--note", "washed"), "2026-04-10 scheduled Oil and filter; 1 × Oil filter; washed 1010 h Fenn"),
        (("--part", "Oil filter:2"), "2026-04-10 scheduled Oil and filter; 2 × Oil filter; new filter 1010 h Fenn"),
        (("--component", "pump"), "2026-04-10 scheduled Oil and filter; pump; 1 × Oil filter; new filter 1010 h Fenn"),
        (("--task", "Belt"), "2026-04-10 scheduled Belt; 1 × Oil filter; new filter 1010 h Fenn"),
        (("--part-done",), "2026-04-10 scheduled Oil and filter (in part); 1 × Oil filter; new filter 1010 h Fenn"),
    ],
)
def test_what_is_not_given_stays_as_it_was(done: Runner, words: tuple[str, ...], stands: str) -> None:
    assert done("correct", "1", *words).status == 0
    assert log(done)[0] == f"2 {stands} corrects entry 1"


def test_the_tasks_really_done_take_the_place_of_those_said(done: Runner) -> None:
    assert done("correct", "1", "--task", "Belt").out.splitlines()[1:] == [
        "Done: Belt.",
        "P-01  Oil and filter: 1260 h or 2027-04-10 → 1150 h or 2027-02-01",
        "P-01  Belt: 1300 h → 1510 h",
    ]


def test_work_done_in_part_can_be_corrected_to_done(done: Runner) -> None:
    done("log", "P-01", "Belt", "--part-done", "--at", "1015")
    assert done("correct", "2", "--no-part-done").out.splitlines()[1] == "Done: Belt."


def test_a_void_takes_an_entry_back_with_its_figures(done: Runner) -> None:
    assert done("correct", "1", "--void", "--why", "wrong engine", "--by", "Quill").out.splitlines() == [
        "Entry 2 (scheduled) of P-01 voids entry 1.",
        "P-01  Oil and filter: 1260 h or 2027-04-10 → 1150 h or 2027-02-01",
    ]
    assert "1000 h on the dial" in done("show", "P-01").out
    assert log(done)[0] == "2 2026-04-10 scheduled Quill voids entry 1, wrong engine"
    assert log(done)[1].endswith("voided by entry 2")


def test_a_corrected_figure_no_longer_stands_in_the_way(done: Runner) -> None:
    assert done("reading", "P-01", "1005").status == 1
    done("correct", "1", "--at", "1004")
    assert done("reading", "P-01", "1005").status == 0


def test_a_correction_moves_what_was_worked_out_after_it(done: Runner) -> None:
    done("task", "edit", "P-01", "Belt", "--anchor", "from-due", "--on", "2024-01-10")
    done("log", "P-01", "Belt", "--at", "1020", "--on", "2026-04-20")
    done("log", "P-01", "Belt", "--at", "1030", "--on", "2026-04-25")
    assert "P-01  Belt: 1530 h → 1520 h" in done("correct", "3", "--at", "1020").out


def test_an_entry_is_corrected_once_and_then_its_correction_is(done: Runner) -> None:
    done("correct", "1", "--by", "Quill")
    assert done("correct", "1", "--by", "Harbin").err == (
        "entry 1 was superseded by entry 2; correct entry 2 instead\n"
    )
    assert done("correct", "2", "--by", "Harbin").status == 0


@pytest.mark.parametrize(
    ("kind", "words", "shown"),
    [
        (("--repair", "Seal"), ("--repair", "Both seals"), "repair Both seals"),
        (("--defect", "Leak"), ("--defect", "Leak at pump"), "defect Leak at pump"),
        (("--top-up", "8L"), ("--top-up", "2galus"), "top-up 2 galus"),
        (("--repair", "Seal", "--downtime", "6h"), ("--downtime", "7h"), "repair Seal; 7 h out of service"),
    ],
)
def test_each_kind_of_entry_can_be_corrected_in_its_own_words(
    done: Runner, kind: tuple[str, ...], words: tuple[str, ...], shown: str
) -> None:
    done("log", "P-01", *kind)
    assert done("correct", "2", *words).status == 0
    assert log(done)[0] == f"3 2026-05-01 {shown} corrects entry 2"


def test_with_two_meters_a_figure_restates_that_of_its_kind_alone(open_yard: Opener) -> None:
    lorry = open_yard(LORRY)
    lorry("log", "E-1", "Oil", "--at", "62000km", "--at", "420h")
    lorry("correct", "1", "--at", "62500km")
    assert "62500 km, 420 h" in lorry("show", "E-1").out


@pytest.mark.parametrize(
    ("words", "status", "wrong"),
    [
        (("1",), 1, "nothing to correct; give what should stand instead, or --void --why TEXT"),
        (("1", "--why", "x"), 1, "nothing to correct"),
        (("1", "--void"), 2, "voiding an entry needs a reason; give --why TEXT"),
        (("1", "--void", "--why", "x", "--at", "5"), 1, "a voided entry says nothing any more; give only --void"),
        (("1", "--note", ""), 2, "--note is empty; give it a value, or leave it out"),
        (("99", "--by", "x"), 1, "there is no entry 99; see fleetcare show TAG"),
        (("first", "--by", "x"), 2, "argument ENTRY: 'first' is not a whole number"),
        (("1", "--on", "2026-05-02"), 1, "2026-05-02 has not come yet, today counts as 2026-05-01"),
        (("1", "--at", "999"), 1, "999 h on 2026-04-10 does not fit reading 2 of P-01"),
        (("1", "--task", "Nothing"), 1, "P-01 has no task 'Nothing'"),
        (("1", "--task", "Valve lash"), 1, "Valve lash closes only with its lash sheet"),
        (("1", "--repair", "x"), 1, "entry 1 is no repair; leave out --repair"),
        (("1", "--defect", "x"), 1, "entry 1 is no defect; leave out --defect"),
        (("1", "--top-up", "1L"), 1, "entry 1 is no top-up; leave out --top-up"),
    ],
)
def test_what_cannot_be_is_one_line_with_a_way_out(
    done: Runner, words: tuple[str, ...], status: int, wrong: str
) -> None:
    ran = done("correct", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (status, "", 1)
    assert ran.err.startswith(wrong)


def test_a_void_is_not_corrected_but_the_work_logged_anew(done: Runner) -> None:
    done("correct", "1", "--void", "--why", "x")
    assert done("correct", "2", "--by", "Quill").err == "entry 2 voids entry 1; log the work anew\n"
