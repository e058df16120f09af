"""`engine lay-up`, `return`, `stand-down`, `withdraw`, `factor`: what holds from a day on."""

from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import PUMP

Opener = Callable[[str], Runner]


@pytest.fixture
def pump(open_yard: Opener) -> Runner:
    """A yard with one engine."""
    return open_yard(PUMP)


def test_a_return_prints_the_whole_group_that_waited_with_every_state(pump: Runner) -> None:
    pump("engine", "lay-up", "P-01", "--on", "2026-04-20")
    assert pump("engine", "return", "P-01", "--by", "Fenn").out.splitlines() == [
        "P-01 is in service from 2026-05-01.",
        "BEFORE RETURN (2)",
        "state  task            due at  due on      remaining   likely      note",
        "-----  --------------  ------  ----------  ----------  ----------  ----",
        "due    Valve lash      1000 h              0 h left",
        "clear  Oil and filter  1150 h  2027-02-01  150 h left  2027-02-01",
    ]


def test_a_return_of_an_engine_stood_down_prints_it_too(pump: Runner) -> None:
    pump("engine", "stand-down", "P-01", "--why", "crack")
    ran = pump("engine", "return", "P-01", "--by", "Fenn")
    line = " ".join(ran.out.splitlines()[4].split())
    assert line == "due Valve lash 1000 h 0 h left stood down: not to be run"


def test_a_return_of_an_engine_without_lines_says_so(open_yard: Opener) -> None:
    run = open_yard("engine add P-01\nengine lay-up P-01 --on 2026-04-20")
    assert run("engine", "return", "P-01", "--by", "Fenn").out == (
        "P-01 is in service from 2026-05-01.\nP-01 has no lines.\n"
    )


@pytest.mark.parametrize("by", [(), ("--by", ""), ("--by", " ")])
def test_nobody_returns_an_engine_without_a_name(pump: Runner, by: tuple[str, ...]) -> None:
    pump("engine", "lay-up", "P-01")
    ran = pump("engine", "return", "P-01", *by)
    assert ran.status in {1, 2}
    assert "--by" in ran.err
    assert "laid up" in pump("engine", "list").out


def test_a_status_holds_from_its_day_with_who_said_so_and_why(pump: Runner) -> None:
    pump("engine", "lay-up", "P-01", "--on", "2026-04-20", "--why", "winter", "--by", "Fenn")
    assert "laid up since 2026-04-20: winter (Fenn)" in pump("show", "P-01").out
    assert "status      in service\n" in pump("show", "P-01", "--as-of", "2026-04-19").out


@pytest.mark.parametrize(
    ("action", "status"), [("lay-up", "laid up"), ("stand-down", "stood down"), ("withdraw", "withdrawn")]
)
def test_a_status_that_holds_already_is_refused(pump: Runner, action: str, status: str) -> None:
    assert pump("engine", action, "P-01").out.startswith(f"P-01 is {status} from 2026-05-01.\n")
    assert pump("engine", action, "P-01").status == 1


def test_laying_up_warns_of_what_ages_all_the_same(pump: Runner) -> None:
    pump("task", "add", "P-01", "Boiler cert", "--every", "12mo", "--pause-while-laid-up")
    pump("task", "add", "P-01", "Cooling", "--work", "coolant", "--every", "24mo", "--pause-while-laid-up")
    pump("task", "add", "P-01", "Reverse gear", "--work", "gear-oil", "--every", "24mo", "--pause-while-laid-up")
    pump("task", "add", "P-01", "Tank water drained", "--work", "fuel", "--every", "3mo", "--pause-while-laid-up")
    assert pump("engine", "lay-up", "P-01").out.splitlines() == [
        "P-01 is laid up from 2026-05-01.",
        *(
            f"Note: the calendar of {name} pauses while laid up; oil, coolant, belts and batteries age all the same."
            for name in ("Cooling", "Reverse gear", "Tank water drained")
        ),
    ]


def test_withdrawing_says_which_lines_end_and_frees_the_tag(pump: Runner) -> None:
    assert pump("engine", "withdraw", "P-01", "--why", "sold").out.splitlines() == [
        "P-01 is withdrawn from 2026-05-01.",
        "P-01  Oil and filter: 1150 h or 2027-02-01 → no line",
        "P-01  Valve lash: 1000 h → no line",
    ]
    assert pump("engine", "add", "P-01").out == "P-01 added.\n"


def test_nothing_is_written_down_about_a_withdrawn_engine_any_more(pump: Runner) -> None:
    pump("engine", "withdraw", "P-01")
    for words in (
        ("reading", "P-01", "1010"),
        ("log", "P-01", "--note", "x"),
        ("engine", "return", "P-01", "--by", "F"),
    ):
        ran = pump(*words)
        assert ran.err == "P-01 is withdrawn since 2026-05-01; add it anew with fleetcare engine add\n"


def test_its_history_can_still_be_corrected_though_the_tag_is_used_again(pump: Runner) -> None:
    pump("log", "P-01", "Oil and filter", "--at", "1010")
    pump("engine", "withdraw", "P-01")
    pump("engine", "add", "P-01", "--meter", "hours")
    assert pump("correct", "1", "--at", "1011", "--why", "misread").status == 0
    assert pump("reading", "--void", "2", "--why", "misread").out == "Reading 2 of P-01 is void.\n"


def test_a_duty_factor_shortens_what_is_worked_out_from_its_day_on(pump: Runner) -> None:
    ran = pump("engine", "factor", "P-01", "hours", "0.5", "--on", "2026-05-01", "--why", "dust")
    assert ran.out.splitlines() == [
        "P-01: hours intervals × 0.5 from 2026-05-01 (dust).",
        "P-01  Oil and filter: 1150 h or 2027-02-01 → 1025 h or 2027-02-01",
        "P-01  Valve lash: 1000 h → 500 h",
    ]
    assert "duty factor 0.5 makes the interval 125 h" in pump("show", "P-01", "Oil and filter").out
    assert "duty factor" not in pump("show", "P-01", "Oil and filter", "--as-of", "2026-04-30").out


def test_a_duty_factor_of_the_calendar_is_down_to_whole_months(pump: Runner) -> None:
    ran = pump("engine", "factor", "P-01", "calendar", "0.55", "--on", "2026-05-01", "--why", "salt")
    assert ran.out.splitlines()[1] == "P-01  Oil and filter: 1150 h or 2027-02-01 → 1150 h or 2026-08-01"


def test_a_factor_of_one_ends_an_earlier_one(pump: Runner) -> None:
    pump("engine", "factor", "P-01", "hours", "0.5", "--on", "2026-04-01", "--why", "dust")
    ran = pump("engine", "factor", "P-01", "hours", "1", "--on", "2026-05-01", "--why", "dust gone")
    assert "P-01  Valve lash: 500 h → 1000 h" in ran.out


def test_a_factor_may_be_set_for_a_day_to_come(pump: Runner) -> None:
    ran = pump("engine", "factor", "P-01", "hours", "0.5", "--on", "2026-06-01", "--why", "dust")
    assert ran.out == "P-01: hours intervals × 0.5 from 2026-06-01 (dust).\n"
    assert "1025 h" in pump("due", "--as-of", "2026-06-01").out


@pytest.mark.parametrize(
    ("words", "status", "wrong"),
    [
        (("hours", "0"), 1, "a duty factor of 0 cannot be; give one above 0 and up to 1"),
        (("hours", "1.01"), 1, "a duty factor of 1.01 cannot be; give one above 0 and up to 1"),
        (("hours", "-0.5"), 1, "a duty factor of -0.5 cannot be; give one above 0 and up to 1"),
        (("hours", "half"), 2, "F: 'half' is not a number; write digits, with a point for decimals"),
        (
            ("weeks", "0.5"),
            2,
            "KIND: 'weeks' is no kind of trigger; use one of hours, distance, fuel, starts, calendar",
        ),
    ],
)
def test_a_factor_outside_its_bounds_is_not_taken(
    pump: Runner, words: tuple[str, str], status: int, wrong: str
) -> None:
    ran = pump("engine", "factor", "P-01", *words, "--on", "2026-05-01", "--why", "dust")
    assert (ran.status, ran.err) == (status, wrong + "\n")
