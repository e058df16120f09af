"""`show`: one engine or machine on one page, and the whole working of one line."""

from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import LORRY, PUMP

Opener = Callable[[str], Runner]

CAUTION = (
    "Limits and intervals are to be checked against the engine maker's manual, local codes and law;"
    " work on engines is for competent, where required licensed, people."
)

PLATE = """
    engine add P-01 --name "Main pump" --site "North Sluice" --duty pump --fuel diesel --cylinders 6 --layout inline \
    --firing-order 1-5-3-6-2-4 --bore 102 --stroke 120.5 --rod 192 --compression-ratio 17.5 --valves-per-cylinder 2 \
    --intake-closes 34 --adjuster screw --lash-intake 0.20-0.30 --lash-exhaust 0.40-0.50 --lash-set-intake 0.25 \
    --lash-set-exhaust 0.45 --lash-when cold --oil-grade 15W-40 --sump 18 --rated-rpm 1500 --rated-kw 110 --altitude -2
"""


@pytest.fixture
def pump(open_yard: Opener) -> Runner:
    """A yard with one engine."""
    return open_yard(PUMP)


def section(text: str, title: str) -> list[str]:
    """The lines under a title of a page, up to the next empty one."""
    lines = text.splitlines()
    begin = lines.index(title) + 1
    return lines[begin : lines.index("", begin)]


def test_the_page_to_the_byte(pump: Runner) -> None:
    assert pump("show", "p-01").out.splitlines() == [
        "tag         P-01",
        "site        North Sluice",
        "status      in service",
        "in service  2024-01-10, counted as new",
        "",
        "METERS",
        "hours  1000 h on the dial, 1000 h of life, read 2026-04-01",
        "",
        "READINGS",
        "reading  on          shown   remark",
        "-------  ----------  ------  ------------",
        "      2  2026-04-01  1000 h",
        "      1  2024-01-10  0 h     start figure",
        "",
        "LINES",
        "state  task            due at  due on      remaining   likely      note",
        "-----  --------------  ------  ----------  ----------  ----------  ----",
        "due    Valve lash      1000 h              0 h left",
        "clear  Oil and filter  1150 h  2027-02-01  150 h left  2027-02-01",
        "",
        CAUTION,
    ]


def test_the_nameplate_shows_what_was_typed_with_its_units(open_yard: Opener) -> None:
    shown = open_yard(PLATE)("show", "P-01").out.splitlines()
    for line in (
        "name                 Main pump",
        "duty                 pump",
        "firing order         1-5-3-6-2-4",
        "stroke               120.5 mm",
        "intake closes        34° after bottom dead centre",
        "rated power          110 kW",
        "altitude             -2 m",
        "lash intake          check 0.20 to 0.30 mm, set 0.25 mm, cold",
        "lash exhaust         check 0.40 to 0.50 mm, set 0.45 mm, cold",
    ):
        assert line in shown


def test_a_line_shows_its_whole_working(pump: Runner) -> None:
    assert pump("show", "P-01", "oil AND filter").out.splitlines() == [
        "state      clear; by hours, 150 h left",
        "last done  2026-02-01 (before the log began)",
        "hours      every 250 h, from 900 h: due at 1150 h, 1150 h on the dial",
        "           now 1000 h, read 2026-04-01: 150 h left; near from 25 h ahead, 0 h grace: clear",
        "           no date: only 2 readings; three over at least 14 days are needed",
        "calendar   every 12 mo, from 2026-02-01: due 2027-02-01",
        "           today 2026-05-01: 276 d left; near from 30 d ahead, 0 d grace: clear",
        "combined   due by whichever interval ends first",
        "source     not stated",
        "",
        CAUTION,
    ]


def test_the_history_of_a_line_says_what_each_entry_did_newest_first(pump: Runner) -> None:
    pump("log", "P-01", "Oil and filter", "--on", "2026-04-01")
    pump("task", "add", "P-01", "Pump", "--every", "100h", "--grace", "10h", "--last-done", "850")
    pump("log", "P-01", "Pump", "--on", "2026-04-10", "--at", "1010")
    pump("log", "P-01", "Pump", "--on", "2026-04-20", "--at", "1020")
    assert section(pump("show", "P-01", "Pump").out, "HISTORY") == [
        "entry 3, 2026-04-20  in time",
        "entry 2, 2026-04-10  done 60 h over, 10 h allowed",
    ]


def test_an_unknown_task_is_refused_with_the_nearest_names(pump: Runner) -> None:
    ran = pump("show", "P-01", "valve lsh")
    assert (ran.status, ran.out) == (1, "")
    assert ran.err == "P-01 has no task 'valve lsh'; did you mean Valve lash?\n"


def test_a_task_without_a_line_says_why_and_keeps_its_history(pump: Runner) -> None:
    pump("task", "add", "P-01", "Bleed", "--on-condition")
    pump("task", "add", "P-01", "First check", "--first", "1100h", "--once")
    pump("log", "P-01", "First check", "--on", "2026-04-01")
    pump("log", "P-01", "Oil and filter", "--on", "2026-04-01")
    pump("task", "remove", "P-01", "Oil and filter")
    assert "no line: not called for" in pump("show", "P-01", "Bleed").out
    assert "no line: done once" in pump("show", "P-01", "First check").out
    ended = pump("show", "P-01", "Oil and filter").out
    assert "no line: ended on 2026-05-01" in ended
    assert section(ended, "HISTORY") == ["entry 2, 2026-04-01  in time"]
    assert "state      clear" in pump("show", "P-01", "Oil and filter", "--as-of", "2026-04-30").out


def test_a_withdrawn_engine_stays_readable_with_all_it_had(pump: Runner) -> None:
    pump("log", "P-01", "Oil and filter", "--on", "2026-04-01")
    pump("engine", "withdraw", "P-01", "--why", "sold", "--by", "Harbin")
    page = pump("show", "P-01").out
    assert "status      withdrawn since 2026-05-01: sold (Harbin)" in page
    assert "Oil and filter" in page
    working = pump("show", "P-01", "Oil and filter").out
    assert "no line: P-01 is withdrawn" in working
    assert section(working, "HISTORY") == ["entry 1, 2026-04-01  in time"]


def test_the_log_shows_all_an_entry_says_and_what_became_of_it(pump: Runner) -> None:
    told = ("--repair", "New seal", "--component", "sea pump", "--downtime", "6h", "--part", "Seal:2", "--note", "wet")
    pump("log", "P-01", *told, "--top-up", "2galus", "--by", "Fenn")
    pump("correct", "1", "--downtime", "7h", "--why", "counted again")
    assert [" ".join(line.split()) for line in section(pump("show", "P-01").out, "LOG")[2:]] == [
        "3 2026-05-01 repair New seal; sea pump; 2 × Seal; 7 h out of service; wet Fenn corrects entry 1, counted again",
        "2 2026-05-01 top-up 2 galus Fenn",
        "1 2026-05-01 repair New seal; sea pump; 2 × Seal; 6 h out of service; wet Fenn corrected by entry 3",
    ]


def test_work_without_a_figure_is_shown_at_the_figure_taken_for_it(pump: Runner) -> None:
    pump("reading", "P-01", "1060", "--on", "2026-05-01")
    pump("log", "P-01", "Oil and filter", "--on", "2026-04-11")
    pump("log", "P-01", "Oil and filter", "--on", "2026-05-01")
    figures = [line.split()[-2:] for line in section(pump("show", "P-01").out, "LOG")[2:]]
    assert figures == [["1060", "h"], ["~1020", "h"]]


def test_as_of_a_day_before_the_later_neighbour_it_is_taken_at_the_earlier_one(pump: Runner) -> None:
    pump("reading", "P-01", "1060", "--on", "2026-05-01")
    pump("log", "P-01", "Oil and filter", "--on", "2026-04-11")
    assert "from ~1020 h" in pump("show", "P-01", "Oil and filter").out
    assert "from ~1000 h" in pump("show", "P-01", "Oil and filter", "--as-of", "2026-04-30").out


def test_within_a_day_the_log_is_in_the_order_of_the_life_total(pump: Runner) -> None:
    pump("log", "P-01", "Oil and filter", "--on", "2026-04-20", "--at", "1020")
    pump("log", "P-01", "Oil and filter", "--on", "2026-04-20", "--at", "1010")
    assert [line.split()[0] for line in section(pump("show", "P-01").out, "LOG")[2:]] == ["1", "2"]


def test_only_the_newest_ten_readings_are_shown(pump: Runner) -> None:
    for hours in range(1, 11):
        pump("reading", "P-01", f"{1000 + hours}", "--on", f"2026-04-{hours + 1:02}")
    assert len(section(pump("show", "P-01").out, "READINGS, the newest 10")) == 12


def test_an_engine_in_a_machine_shows_where_and_both_figures_of_a_borrowed_meter(open_yard: Opener) -> None:
    lorry = open_yard(LORRY)
    page = lorry("show", "E-1").out
    assert "machine     LR-1, front" in page
    assert section(page, "METERS") == [
        "hours     400 h on the dial, 400 h of life, read 2026-04-01",
        "distance  61000 km on the dial, 11000 km of life, read 2026-04-01",
    ]


def test_readings_of_a_machines_meter_are_shown_only_while_it_counted_for_the_engine(open_yard: Opener) -> None:
    lorry = open_yard(LORRY)
    lorry("engine", "fit", "E-1", "--machine", "LR-2", "--on", "2026-04-02")
    lorry("reading", "LR-1", "62000", "--on", "2026-04-20")
    shown = "\n".join(section(lorry("show", "E-1").out, "READINGS"))
    assert "61000 km" in shown
    assert "62000 km" not in shown
    assert "10000 mi" not in shown
    assert "62000 km" in lorry("show", "LR-1").out


def test_a_converted_dial_figure_is_rounded_for_reading(open_yard: Opener) -> None:
    lorry = open_yard(LORRY)
    lorry("reading", "LR-2", "20000km", "--on", "2026-04-20")
    assert section(lorry("show", "LR-2").out, "METERS") == [
        "distance  12427.4 mi on the dial, 12427.4 mi of life, read 2026-04-20"
    ]


def test_a_line_break_somebody_typed_begins_no_line(pump: Runner) -> None:
    pump("task", "add", "P-01", "Belt", "--every", "500h", "--caution", "sharp\nOVERDUE\x1b[2J")
    assert "caution    sharp\\nOVERDUE\\x1b[2J" in pump("show", "P-01", "Belt").out.splitlines()
