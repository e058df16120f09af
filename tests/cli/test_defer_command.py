"""`defer`: one due point moved, by day, by dial figure or by the first of both."""

import csv
import io
from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import LORRY, PUMP

Opener = Callable[[str], Runner]

PUT_OFF = (
    PUMP
    + """
    task add P-01 Belt --every 100h --last-done 950
    task add P-01 Cert --every 12mo --law --last-done 2025-06-01
    task add P-01 Policy --every 12mo --insurer --last-done 2025-06-01
    task add P-01 Test --once-each month --last-done 2026-03-10
    task add P-01 Round --once-each month --deferrable yes --last-done 2026-03-10
    task add P-01 Fixed --every 500h --deferrable no --last-done 800
    task add P-01 Never --every 500h --every 1y
    task add P-01 Bleed --on-condition
    task edit P-01 Never --last-done 800
"""
)
WHY = ("--why", "parts late", "--by", "Harbin")


@pytest.fixture
def pump(open_yard: Opener) -> Runner:
    """An engine with work that may be put off, and work that may not."""
    return open_yard(PUT_OFF)


def line(run: Runner, task: str, *words: str) -> dict[str, str]:
    """One line of the due list."""
    found = csv.DictReader(io.StringIO(run("due", "--format", "csv", *words).out, newline=""))
    return next(row for row in found if row["task"] == task)


def test_a_dial_figure_moves_the_counted_trigger_alone(pump: Runner) -> None:
    ran = pump("defer", "p-01", "oil AND filter", "--until", "1200", *WHY)
    assert ran.out.splitlines() == [
        "Oil and filter of P-01 deferred until 1200 h by Harbin: parts late",
        "P-01  Oil and filter: 1150 h or 2027-02-01 → 1200 h or 2027-02-01",
    ]
    found = line(pump, "Oil and filter")
    assert (found["next_due_at"], found["own_due_at"], found["next_due_on"]) == ("1200", "1150", "2027-02-01")
    assert (found["deferred_until"], found["reason"]) == ("1200 h", "parts late")


def test_a_day_moves_the_calendar_trigger_alone(pump: Runner) -> None:
    pump("defer", "P-01", "Oil and filter", "--until", "2027-03-01", *WHY)
    found = line(pump, "Oil and filter")
    assert (found["next_due_on"], found["own_due_on"], found["next_due_at"]) == ("2027-03-01", "2027-02-01", "1150")
    assert found["deferred_until"] == "2027-03-01"


def test_both_move_each_its_own(pump: Runner) -> None:
    ran = pump("defer", "P-01", "Oil and filter", "--until", "1200h", "--until", "2027-03-01", *WHY)
    assert ran.out.splitlines()[1] == "P-01  Oil and filter: 1150 h or 2027-02-01 → 1200 h or 2027-03-01"
    assert line(pump, "Oil and filter")["deferred_until"] == "2027-03-01 / 1200 h"


def test_without_a_calendar_trigger_a_day_moves_the_counted_one(pump: Runner) -> None:
    pump("defer", "P-01", "Belt", "--until", "2026-05-20", *WHY)
    found = line(pump, "Belt")
    assert (found["next_due_on"], found["own_due_at"], found["deferred_until"]) == ("2026-05-20", "1050", "2026-05-20")


def test_past_its_own_point_a_deferred_line_is_never_better_than_near(pump: Runner) -> None:
    pump("defer", "P-01", "Belt", "--until", "1100", *WHY)
    pump("reading", "P-01", "1055")
    found = line(pump, "Belt")
    assert (found["state"], found["remaining"], found["own_due_at"]) == ("near", "45", "1050")


def test_a_deferral_ends_at_the_first_of_its_ends_and_leaves_no_grace(pump: Runner) -> None:
    pump("task", "edit", "P-01", "Belt", "--grace", "60h")
    pump("defer", "P-01", "Belt", "--until", "1060", "--until", "2026-06-01", *WHY)
    pump("reading", "P-01", "1061")
    found = line(pump, "Belt")
    assert (found["state"], found["next_due_at"]) == ("overdue", "1050")
    assert "ended, no grace after it" in pump("show", "P-01", "Belt").out


def test_it_ends_the_day_after_its_day(pump: Runner) -> None:
    pump("reading", "P-01", "1055")
    pump("defer", "P-01", "Belt", "--until", "2026-05-20", *WHY)
    states = [line(pump, "Belt", "--as-of", day)["state"] for day in ("2026-05-19", "2026-05-20", "2026-05-21")]
    assert states == ["near", "due", "overdue"]


def test_a_deferral_is_gone_once_the_task_is_done(pump: Runner) -> None:
    pump("defer", "P-01", "Belt", "--until", "1100", *WHY)
    pump("log", "P-01", "Belt", "--at", "1060")
    found = line(pump, "Belt")
    assert (found["next_due_at"], found["deferred_until"], found["reason"]) == ("1160", "", "")


def test_a_later_deferral_takes_the_place_of_an_earlier_one(pump: Runner) -> None:
    pump("defer", "P-01", "Belt", "--until", "1100", *WHY)
    ran = pump("defer", "P-01", "Belt", "--until", "1080", "--why", "sooner", "--by", "Fenn")
    assert ran.out.splitlines()[1] == "P-01  Belt: 1100 h → 1080 h"
    assert line(pump, "Belt")["reason"] == "sooner"


def test_the_working_says_until_when_by_whom_and_why(pump: Runner) -> None:
    pump("defer", "P-01", "Belt", "--until", "1100", *WHY)
    assert "deferred   until 1100 h by Harbin on 2026-05-01: parts late" in pump("show", "P-01", "Belt").out


def test_once_each_work_said_to_be_deferrable_keeps_its_period_open(pump: Runner) -> None:
    # Design section 4: March test deferred to 5 April, done 4 April, serves March, next 30 April; here April in May.
    pump("defer", "P-01", "Round", "--until", "2026-05-05", *WHY)
    assert line(pump, "Round")["next_due_on"] == "2026-05-05"
    pump("log", "P-01", "Round", "--on", "2026-05-04", "--as-of", "2026-05-04")
    assert line(pump, "Round", "--as-of", "2026-05-04")["next_due_on"] == "2026-05-31"
    assert "serves 2026-04" in pump("show", "P-01", "Round", "--as-of", "2026-05-04").out


def test_a_follow_up_may_be_deferred(pump: Runner) -> None:
    pump("log", "P-01", "--defect", "Leak", "--follow-up")
    ran = pump("defer", "P-01", "Leak", "--until", "2026-05-20", *WHY)
    assert ran.out.splitlines()[1] == "P-01  Leak: 2026-05-01 → 2026-05-20"


def test_a_figure_may_be_typed_in_another_unit_than_the_meters(open_yard: Opener) -> None:
    lorry = open_yard(LORRY)
    ran = lorry("defer", "LR-1", "Brakes", "--until", "50000mi", *WHY)
    assert ran.out.splitlines() == [
        "Brakes of LR-1 deferred until 50000 mi by Harbin: parts late",
        "LR-1  Brakes: 70000 km → 80467.2 km",
    ]


@pytest.mark.parametrize(
    ("words", "status", "wrong"),
    [
        (("Cert", "--until", "2026-07-01", *WHY), 1, "Cert of P-01 is required by law; it cannot be deferred"),
        (("Policy", "--until", "2026-07-01", *WHY), 1, "Policy of P-01 is required by the insurer; it cannot be def"),
        (("Test", "--until", "2026-05-10", *WHY), 1, "Test of P-01 is not deferrable; do it, or allow it"),
        (("Fixed", "--until", "1400", *WHY), 1, "Fixed of P-01 is not deferrable"),
        (("Bleed", "--until", "2026-05-10", *WHY), 1, "Bleed of P-01 is not due to be done; nothing needs to be"),
        (("Nothing", "--until", "2026-05-10", *WHY), 1, "P-01 has no task 'Nothing'"),
        (("Belt", "--until", "1050", *WHY), 1, "1050 does not lie after the due point of 1050 h; give a larger figure"),
        (("Oil and filter", "--until", "2027-02-01", *WHY), 1, "Oil and filter is not due before 2027-02-01"),
        (("Belt", "--until", "2026-04-30", *WHY), 1, "2026-04-30 is past; give a day from 2026-05-01 on"),
        (("Belt", "--until", "1100km", *WHY), 1, "no meter counts distance of P-01 on that day"),
        (("Round", "--until", "1100", *WHY), 1, "Round does not count hours; give a day, or a figure of a kind it"),
        (("Belt", "--until", "1100", "--until", "1200", *WHY), 1, "--until: a deferral ends on one day, at one dial"),
        (
            ("Belt", "--until", "2026-06-01", "--until", "2026-07-01", *WHY),
            1,
            "--until: a deferral ends on one day, at one",
        ),
        (("Belt", "--until", "soon", *WHY), 2, "--until: 'soon' is not a figure"),
        (("Belt", "--until", "2mo", *WHY), 2, "--until: '2mo' is a span of time"),
        (("Belt", "--until", "2026-02-30", *WHY), 2, "--until: there is no day 2026-02-30"),
        (("Belt", *WHY), 2, "one of the arguments --until --as-advised is required"),
        (
            ("Belt", "--until", "1100", "--as-advised", *WHY),
            2,
            "argument --as-advised: not allowed with argument --until",
        ),
        (("Belt", "--as-advised", *WHY), 1, "nothing is advised for Belt of P-01: it is no change of an engine's oil"),
        (("Cert", "--as-advised", *WHY), 1, "Cert of P-01 is required by law; it cannot be deferred"),
        (("Belt", "--until", "1100", "--by", "Fenn"), 2, "the following arguments are required: --why"),
        (("Belt", "--until", "1100", "--why", "x"), 2, "the following arguments are required: --by"),
        (("Belt", "--until", "1100", "--why", "", "--by", "Fenn"), 2, "--why is missing; give it"),
        (("Belt", "--until", "1100", "--why", "x", "--by", " "), 1, "--by: it is empty; write at least one letter"),
    ],
)
def test_what_may_not_be_put_off_is_one_line_with_a_way_out(
    pump: Runner, words: tuple[str, ...], status: int, wrong: str
) -> None:
    ran = pump("defer", "P-01", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (status, "", 1)
    assert ran.err.startswith(wrong)


def test_a_line_without_a_point_says_what_to_enter_first(open_yard: Opener) -> None:
    run = open_yard("engine add P-01 --meter hours\ntask add P-01 Oil --every 250h")
    ran = run("defer", "P-01", "Oil", "--until", "1100", *WHY)
    assert ran.err.startswith("Oil of P-01 has no due point yet: not known when it was last done")


def test_a_day_is_not_enough_where_two_meters_count(open_yard: Opener) -> None:
    run = open_yard("""
        engine add P-01 --meter hours --meter starts --in-service 2026-01-10 --start-at 0h --start-at 0starts --as-new
        task add P-01 Starter --every 500h --every 1000starts
    """)
    ran = run("defer", "P-01", "Starter", "--until", "2026-08-01", *WHY)
    assert ran.err == "Starter counts more than one meter; say until which figure\n"


def test_a_point_on_a_dial_that_was_changed_is_named_as_the_dial_shows_it(pump: Runner) -> None:
    pump("reading", "P-01", "0", "--replaced", "1000", "0")
    ran = pump("defer", "P-01", "Belt", "--until", "40", *WHY)
    assert ran.err == "40 does not lie after the due point of 50 h; give a larger figure\n"
