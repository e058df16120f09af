"""`log --repair`, `--defect`, `--follow-up`, `--top-up`, `--note`: what is no scheduled work."""

from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import PUMP

Opener = Callable[[str], Runner]


@pytest.fixture
def pump(open_yard: Opener) -> Runner:
    """A yard with one engine, and work that is done when called for."""
    return open_yard(PUMP + "\ntask add P-01 Bleed --on-condition")


@pytest.mark.parametrize(
    ("words", "kind", "shown"),
    [
        (("--repair", "New seal"), "repair", "New seal"),
        (("--defect", "Leak"), "defect", "Leak"),
        (("--top-up", "2.5galus"), "top-up", "2.5 galus"),
        (("--note", "Ran rough"), "other", "Ran rough"),
    ],
)
def test_each_kind_of_entry_is_kept_as_what_it_is(pump: Runner, words: tuple[str, str], kind: str, shown: str) -> None:
    assert pump("log", "P-01", *words, "--by", "Fenn").out == f"Entry 1 ({kind}) of P-01 on 2026-05-01.\n"
    assert f"1 2026-05-01 {kind} {shown} Fenn" in " ".join(pump("show", "P-01").out.split())


def test_one_command_may_store_an_entry_of_each_kind(pump: Runner) -> None:
    words = ("--repair", "Seal", "--defect", "Leak", "--top-up", "1L", "--at", "1010")
    assert pump("log", "P-01", "Oil and filter", *words).out.splitlines()[:4] == [
        "Entry 1 (scheduled) of P-01 on 2026-05-01.",
        "Entry 2 (repair) of P-01 on 2026-05-01.",
        "Entry 3 (defect) of P-01 on 2026-05-01.",
        "Entry 4 (top-up) of P-01 on 2026-05-01.",
    ]


def test_a_follow_up_is_due_the_day_it_is_raised(pump: Runner) -> None:
    assert pump("log", "P-01", "--defect", "Leak at pump", "--follow-up").out.splitlines() == [
        "Entry 1 (defect) of P-01 on 2026-05-01.",
        "Follow-up raised: Leak at pump, due 2026-05-01.",
        "P-01  Leak at pump: no line → 2026-05-01",
    ]
    assert "Leak at pump" in pump("due", "--state", "due").out


def test_unless_a_day_is_given_until_when(pump: Runner) -> None:
    ran = pump("log", "P-01", "--defect", "Leak", "--follow-up", "--until", "2026-05-20")
    assert ran.out.splitlines()[1] == "Follow-up raised: Leak, due 2026-05-20."
    assert "raised because  Leak" in pump("show", "P-01", "Leak").out


def test_a_follow_up_done_has_no_line_and_may_be_raised_again(pump: Runner) -> None:
    pump("log", "P-01", "--defect", "Leak", "--follow-up")
    assert pump("log", "P-01", "leak").out.splitlines()[2] == "P-01  Leak: 2026-05-01 → no line"
    again = pump("log", "P-01", "--defect", "Leak", "--follow-up", "--until", "2026-06-01", "--as-of", "2026-05-02")
    assert again.out.splitlines()[2] == "P-01  Leak: no line → 2026-06-01"


def test_of_two_calls_the_earlier_day_counts(pump: Runner) -> None:
    pump("log", "P-01", "--defect", "Leak", "--follow-up", "--until", "2026-05-20")
    ran = pump("log", "P-01", "--defect", "Leak", "--follow-up", "--until", "2026-05-10")
    assert ran.out.splitlines()[2] == "P-01  Leak: 2026-05-20 → 2026-05-10"


def test_a_follow_up_named_like_scheduled_work_stands_apart_from_it(pump: Runner) -> None:
    ran = pump("log", "P-01", "--defect", "Valve lash", "--follow-up")
    assert ran.out.splitlines()[1] == "Follow-up raised: Valve lash (follow-up), due 2026-05-01."


def test_a_defect_may_call_for_a_task_done_on_condition(pump: Runner) -> None:
    ran = pump("log", "P-01", "Bleed", "--defect", "Air in the fuel", "--follow-up", "--until", "2026-05-10")
    assert ran.out.splitlines() == [
        "Entry 1 (defect) of P-01 on 2026-05-01.",
        "Follow-up raised: Bleed, due 2026-05-10.",
        "P-01  Bleed: no line → 2026-05-10",
    ]


def test_voiding_the_defect_takes_the_follow_up_back(pump: Runner) -> None:
    pump("log", "P-01", "--defect", "Leak", "--follow-up")
    ran = pump("correct", "1", "--void", "--why", "it was rain")
    assert ran.out.splitlines()[1] == "P-01  Leak: 2026-05-01 → no line"


def test_correcting_the_defect_leaves_the_follow_up(pump: Runner) -> None:
    pump("log", "P-01", "--defect", "Leak", "--follow-up")
    pump("correct", "1", "--by", "Quill")
    assert "Leak" in pump("due", "--state", "due").out


@pytest.mark.parametrize(
    ("words", "status", "wrong"),
    [
        (("--top-up", "8"), 2, "--top-up: '8' is not a volume; write it like 8L, 2galus or 2galimp"),
        (("--top-up", "8gal"), 2, "--top-up: '8gal' does not say which gallon"),
        (("--top-up", "0L"), 1, "--top-up: 0L cannot be right; give a volume above 0"),
        (("--note", "x", "--follow-up"), 1, "a follow-up is raised from a defect; give --defect TEXT as well"),
        (("--defect", "x", "--until", "2026-05-20"), 1, "--until says by when a follow-up is due; give --follow-up"),
        (("--defect", "x", "--follow-up", "--until", "2026-04-30"), 1, "a follow-up cannot be due on 2026-04-30"),
        (("--defect", " ", "--note", "x"), 1, "--defect: it is empty; write at least one letter"),
    ],
)
def test_what_cannot_be_is_one_line_with_a_way_out(
    pump: Runner, words: tuple[str, ...], status: int, wrong: str
) -> None:
    ran = pump("log", "P-01", *words)
    assert (ran.status, ran.out) == (status, "")
    assert ran.err.startswith(wrong)
