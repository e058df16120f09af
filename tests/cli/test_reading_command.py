"""`reading`: what a meter shows, held against its past; taken for sure, voided, restored."""

import csv
import io
from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import LORRY, PUMP

Opener = Callable[[str], Runner]


@pytest.fixture
def pump(open_yard: Opener) -> Runner:
    """A yard with one engine."""
    return open_yard(PUMP)


def remaining(run: Runner, *words: str) -> str:
    """What remains of the oil's hours."""
    found = csv.DictReader(io.StringIO(run("due", "--format", "csv", *words).out, newline=""))
    return next(row["remaining"] for row in found if row["task"] == "Oil and filter")


def test_a_reading_is_said_back_with_its_unit_and_number(pump: Runner) -> None:
    assert pump("reading", "p-01", "1010.50").out == "Reading 3: P-01 shows 1010.5 h on 2026-05-01.\n"


def test_the_same_figure_twice_on_a_day_is_one_reading(pump: Runner) -> None:
    pump("reading", "P-01", "1010")
    assert pump("reading", "P-01", "1010.0 h").out == "Nothing new: reading 3 says the same.\n"


def test_readings_of_one_day_count_by_value_not_by_the_order_of_typing(pump: Runner) -> None:
    pump("reading", "P-01", "1020")
    assert pump("reading", "P-01", "1015").status == 0
    assert remaining(pump) == "130"


def test_a_reading_typed_late_takes_its_place_in_time(pump: Runner) -> None:
    pump("reading", "P-01", "1050")
    assert pump("reading", "P-01", "1030", "--on", "2026-04-15").status == 0
    assert remaining(pump) == "100"
    assert remaining(pump, "--as-of", "2026-04-20") == "120"


def test_a_reading_is_kept_as_it_was_typed(open_yard: Opener) -> None:
    lorry = open_yard(LORRY)
    lorry("reading", "LR-2", "20000km", "--by", "Quill", "--note", "gauge lamp out")
    assert "20000 km  gauge lamp out, by Quill" in lorry("show", "LR-2").out


def test_with_two_meters_a_bare_figure_is_refused_and_the_unit_or_the_meter_tells(open_yard: Opener) -> None:
    lorry = open_yard(LORRY)
    ran = lorry("reading", "E-1", "450")
    assert (ran.status, ran.err) == (
        1, "450 could be distance and hours of E-1; write its unit behind it, such as 450km\n"
    )  # fmt: skip
    assert lorry("reading", "E-1", "450h").status == 0
    assert lorry("reading", "E-1", "61500", "--meter", "distance").status == 0


@pytest.mark.parametrize("value", ["1048.1", "999.9"])
def test_what_breaks_the_rule_is_refused_with_its_options_and_the_reading_it_collides_with(
    pump: Runner, value: str
) -> None:
    # 24 h a day for the 1 day and the slack of 1 allow 1048 h, a fall is never allowed.
    ran = pump("reading", "P-01", value, "--on", "2026-04-02")
    assert (ran.status, ran.out) == (1, "")
    assert "does not fit reading 2 of P-01 (1000 h on 2026-04-01)" in ran.err
    assert "--sure" in ran.err
    assert "--rolled-over" in ran.err
    assert "--replaced OLD_LAST NEW_FIRST" in ran.err


def test_exactly_the_cap_for_a_day_more_is_plausible(pump: Runner) -> None:
    assert pump("reading", "P-01", "1048", "--on", "2026-04-02").status == 0


def test_a_reading_is_held_against_the_later_ones_too(pump: Runner) -> None:
    ran = pump("reading", "P-01", "1001", "--on", "2026-03-31")
    assert "1001 h on 2026-03-31 does not fit reading 2 of P-01 (1000 h on 2026-04-01): lower by 1 h" in ran.err


def test_sure_takes_the_new_one_and_doubts_what_falls_off_the_longest_plausible_chain(pump: Runner) -> None:
    pump("reading", "P-01", "1010", "--on", "2026-04-10")
    ran = pump("reading", "P-01", "600", "--sure")
    assert ran.out.splitlines() == [
        "Reading 4: P-01 shows 600 h on 2026-05-01.",
        "Reading 2 is suspect now and counts for nothing; --restore 2 brings it back.",
        "Reading 3 is suspect now and counts for nothing; --restore 3 brings it back.",
    ]
    assert "600 h on the dial" in pump("show", "P-01").out
    assert "suspect: a later reading was taken for sure" in pump("show", "P-01").out


def test_a_suspect_is_restored_where_it_fits_again(pump: Runner) -> None:
    pump("reading", "P-01", "600", "--sure")
    blocked = pump("reading", "--restore", "2")
    assert blocked.status == 1
    assert "void that one first, or give --sure" in blocked.err
    pump("reading", "--void", "3", "--why", "typed wrong")
    assert pump("reading", "--restore", "2", "--why", "was right").out == "Reading 2 of P-01 counts again.\n"
    assert remaining(pump) == "150"
    assert "restored: was right" in pump("show", "P-01").out


def test_restored_for_sure_the_other_ones_are_in_doubt(pump: Runner) -> None:
    pump("reading", "P-01", "600", "--sure")
    ran = pump("reading", "--restore", "2", "--sure")
    assert ran.out.splitlines()[1] == "Reading 3 is suspect now and counts for nothing; --restore 3 brings it back."


def test_voiding_a_reading_moves_what_rests_on_it(pump: Runner) -> None:
    pump("reading", "P-01", "1060")
    pump("log", "P-01", "Oil and filter", "--on", "2026-04-16")
    ran = pump("reading", "--void", "3", "--why", "wrong engine")
    assert ran.out.splitlines() == [
        "Reading 3 of P-01 is void.",
        "P-01  Oil and filter: 1280 h or 2027-04-16 → 1250 h or 2027-04-16",
    ]
    assert "void: wrong engine" in pump("show", "P-01").out


@pytest.mark.parametrize(
    ("words", "status", "wrong"),
    [
        ((), 2, "TAG and VALUE are needed"),
        (("P-01",), 2, "TAG and VALUE are needed"),
        (("P-01", "12h3"), 2, "VALUE: '12h3' is not a figure"),
        (("P-01", "-5"), 2, "VALUE: '-5' is not a figure"),
        (("P-01", "5gal"), 2, "VALUE: '5gal' does not say which gallon"),
        (("P-01", "5mo"), 2, "VALUE: '5mo' is a span of time, not a dial figure"),
        (
            ("P-01", "1010", "--meter", "km"),
            2,
            "--meter: no meter counts 'km'; use one of hours, distance, fuel, starts",
        ),
        (("P-01", "1010", "--why", "x"), 2, "--why belongs to --void"),
        (("P-01", "1010", "--on", "1 May"), 2, "argument --on: '1 May' is not a date"),
        (("--void", "2"), 2, "--void needs a reason; give --why TEXT"),
        (("--void", "2", "--why", " "), 2, "--void needs a reason"),
        (("--void", "two", "--why", "x"), 2, "argument --void: 'two' is not a whole number"),
        (("--void", "2", "--restore", "2", "--why", "x"), 2, "--void and --restore contradict each other"),
        (("P-01", "--void", "2", "--why", "x"), 2, "--void and --restore stand by themselves"),
        (("--void", "2", "--why", "x", "--sure"), 2, "--void and --restore stand by themselves"),
        (("--restore", "2", "--on", "2026-04-01"), 2, "--void and --restore stand by themselves"),
        (("P-01", "1010km"), 1, "no meter counts distance of P-01 on that day"),
        (("P-01", "1010km", "--meter", "hours"), 1, "1010 km is not a figure of the hours meter"),
        (("P-01", "1010", "--on", "2026-05-02"), 1, "2026-05-02 has not come yet, today counts as 2026-05-01"),
        (("P-01", "0", "--on", "2024-01-09"), 1, "no meter counts anything of P-01 on that day; check the day"),
        (("P-99", "1010"), 1, "no engine or machine has the tag 'P-99'"),
        (("P-01", "1010", "--sure", "--rolled-over"), 1, "one explanation is enough"),
        (("P-01", "1010", "--unmetered", "5h"), 1, "--unmetered belongs to a replaced meter"),
        (("--void", "99", "--why", "x"), 1, "there is no reading 99; see fleetcare show TAG"),
        (("--restore", "2"), 1, "reading 2 counts already; nothing needs to be done"),
    ],
)
def test_what_cannot_be_is_one_line_with_a_way_out(
    pump: Runner, words: tuple[str, ...], status: int, wrong: str
) -> None:
    ran = pump("reading", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (status, "", 1)
    assert ran.err.startswith(wrong)


def test_a_reading_is_void_once(pump: Runner) -> None:
    pump("reading", "--void", "2", "--why", "x")
    assert pump("reading", "--void", "2", "--why", "x").err == (
        "reading 2 is voided already; bring it back with --restore 2\n"
    )


def test_a_reading_below_the_first_figure_of_its_meter_cannot_be_even_for_sure(open_yard: Opener) -> None:
    run = open_yard("engine add P-01 --meter hours --in-service 2026-05-01 --start-at 4000")
    ran = run("reading", "P-01", "3990", "--sure")
    assert (ran.status, ran.err) == (1, "3990 h lies below 4000 h, the meter's first figure; check the figure\n")


def test_a_reading_from_before_the_first_day_is_not_restored(open_yard: Opener) -> None:
    run = open_yard("""
        engine add P-01 --meter hours --in-service 2026-01-10 --start-at 100
        reading P-01 300 --on 2026-03-01
        reading --void 2 --why "other engine"
        engine edit P-01 --in-service 2026-04-01 --start-at 5
    """)
    assert run("reading", "--restore", "2").err == (
        "the hours meter of P-01 did not count on 2026-03-01; check the day, or edit --in-service\n"
    )
