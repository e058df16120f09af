"""`reading --replaced`, `--unmetered`, `--rolled-over`: explanations that keep the life total going."""

import csv
import io
from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import LORRY

Opener = Callable[[str], Runner]

OLD = """
    engine add P-01 --meter hours --meter-digits 4.1 --in-service 2025-01-01 --start-at 4000
    reading P-01 4980 --on 2026-03-20
    task add P-01 Oil --every 250h --last-done 4900
"""


@pytest.fixture
def old(open_yard: Opener) -> Runner:
    """An engine whose meter stopped at 4980 h, oil done at 4900 h."""
    return open_yard(OLD)


def oil(run: Runner) -> dict[str, str]:
    """The oil's line."""
    (line,) = csv.DictReader(io.StringIO(run("due", "--format", "csv").out, newline=""))
    return line


def test_a_new_meter_goes_on_from_the_life_total_of_the_old_one(old: Runner) -> None:
    # Design section 4: stopped at 4,980, new from 0 after 150 h unmetered; oil done at 4,900 every 250 h is due at dial 20.
    ran = old("reading", "P-01", "0", "--replaced", "4980", "0", "--unmetered", "150h", "--on", "2026-04-01")
    assert ran.out.splitlines() == [
        "Reading 4: P-01 shows 0 h on 2026-04-01.",
        "P-01  Oil: 5150 h → 20 h on the dial (5150 h of life)",
    ]
    line = oil(old)
    assert (line["next_due_dial"], line["next_due_at"], line["remaining"]) == ("20", "5150", "20")
    page = old("show", "P-01").out
    assert "hours  0 h on the dial, 5130 h of life, read 2026-04-01" in page
    assert "4980 h  last figure of a replaced meter" in page


def test_a_second_hand_meter_need_not_begin_at_nothing(old: Runner) -> None:
    old("reading", "P-01", "702", "--replaced", "4985", "700")
    assert oil(old)["remaining"] == "163"
    assert old("reading", "P-01", "701").out.startswith("Reading 5: P-01 shows 701 h")
    assert old("reading", "P-01", "699").err == "699 h lies below 700 h, the meter's first figure; check the figure\n"


def test_what_ran_unmetered_is_no_use_of_the_new_meter(old: Runner) -> None:
    old("reading", "P-01", "0", "--replaced", "4980", "0", "--unmetered", "2000h", "--on", "2026-04-01")
    assert old("reading", "P-01", "10", "--on", "2026-04-02").status == 0


@pytest.mark.parametrize(
    ("words", "status", "wrong"),
    [
        (("0", "--replaced", "4980"), 2, "argument --replaced: expected 2 arguments"),
        (("0", "--replaced", "4980", "new"), 2, "--replaced: 'new' is not a figure"),
        (("0", "--replaced", "4980", "0", "--unmetered", "5d"), 2, "--unmetered: '5d' is a span of time"),
        (("0", "--replaced", "4970", "0"), 1, "4970 h on 2026-05-01 does not fit reading 2 of P-01"),
        (("0", "--replaced", "4980km", "0"), 1, "4980 km is not a figure of the hours meter"),
        (("0", "--replaced", "4980", "0", "--unmetered", "5km"), 1, "5 km is not a figure of the hours meter"),
        (("0", "--replaced", "4980", "1"), 1, "0 h lies below 1 h, the meter's first figure"),
        (("30", "--replaced", "4980", "0"), 1, "30 h on 2026-05-01 does not fit reading 3 of P-01"),
        (("0", "--replaced", "4980", "0", "--on", "2026-03-19"), 1, "reading 2 was read off the old meter of P-01"),
    ],
)
def test_a_change_of_meter_that_the_readings_contradict_is_refused_whole(
    old: Runner, words: tuple[str, ...], status: int, wrong: str
) -> None:
    ran = old("reading", "P-01", *words)
    assert (ran.status, ran.out) == (status, "")
    assert ran.err.startswith(wrong)
    assert "last figure of a replaced meter" not in old("show", "P-01").out


def test_a_dial_that_went_round_counts_its_turn(old: Runner) -> None:
    old("reading", "P-01", "9990", "--on", "2026-04-20", "--sure")
    old("reading", "P-01", "20", "--on", "2026-04-22", "--rolled-over")
    old("reading", "P-01", "40", "--on", "2026-04-23")
    assert "hours  40 h on the dial, 10040 h of life, read 2026-04-23" in old("show", "P-01").out


def test_rolling_over_needs_the_digits_of_the_dial(open_yard: Opener) -> None:
    run = open_yard("engine add P-01 --meter hours --in-service 2025-01-01 --start-at 9990")
    assert run("reading", "P-01", "5", "--rolled-over").err == (
        "the digits of the hours meter of P-01 are not known;"
        " give them first: fleetcare engine edit P-01 --meter-digits hours:5.1\n"
    )
    run("engine", "edit", "P-01", "--meter-digits", "4.0")
    assert (
        run("reading", "P-01", "10000", "--rolled-over").err == "10000 h does not fit on 4 digits; check the figure\n"
    )
    assert run("reading", "P-01", "5", "--rolled-over").status == 0


def test_the_digits_of_a_machines_meter_are_asked_for_with_its_own_command(open_yard: Opener) -> None:
    run = open_yard("machine add B-1 --meter hours")
    assert "fleetcare machine edit B-1 --meter-digits hours:5.1" in run("reading", "B-1", "5", "--rolled-over").err


def test_the_reading_that_tells_of_a_turn_is_not_voided_under_those_that_rest_on_it(old: Runner) -> None:
    old("reading", "P-01", "9990", "--on", "2026-04-20", "--sure")
    old("reading", "P-01", "20", "--on", "2026-04-22", "--rolled-over")
    old("reading", "P-01", "40", "--on", "2026-04-23")
    ran = old("reading", "--void", "4", "--why", "x")
    assert (ran.status, ran.err) == (
        1,
        "reading 5 rests on the turn of the dial that reading 4 tells of;"
        " void that one first, or enter another reading with --rolled-over before it\n",
    )
    old("reading", "--void", "5", "--why", "x")
    assert old("reading", "--void", "4", "--why", "x").status == 0


def test_a_machines_new_meter_counts_for_the_engine_in_it_too(open_yard: Opener) -> None:
    lorry = open_yard(LORRY)
    ran = lorry("reading", "LR-1", "5", "--replaced", "61500", "0")
    assert ran.out.splitlines()[1:] == [
        "E-1  Oil: 65000 km on the dial (15000 km of life) → 3500 km on the dial (15000 km of life)",
        "LR-1  Brakes: 70000 km → 8500 km on the dial (70000 km of life)",
    ]
