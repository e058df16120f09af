"""`log`: work with its figures, what it covers, and what it does not close."""

import csv
import io
from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import LORRY, PUMP

Opener = Callable[[str], Runner]

SERVICE = """
    engine add P-01 --meter hours --in-service 2026-01-10 --start-at 0 --as-new
    reading P-01 500 --on 2026-04-01
    task add P-01 Oil --every 250h
    task add P-01 Lash --every 500h --needs-sheet lash
    task add P-01 Look --every 6mo --window 10d
    task add P-01 Small --every 500h --covers Oil Lash
    task add P-01 Big --every 1000h --covers Small Look
    task add P-01 Bleed --on-condition
    task add P-01 Test --once-each month --last-done 2026-03-10
"""


@pytest.fixture
def pump(open_yard: Opener) -> Runner:
    """A yard with one engine."""
    return open_yard(PUMP)


@pytest.fixture
def service(open_yard: Opener) -> Runner:
    """An engine whose big jobs do the small ones along with them."""
    return open_yard(SERVICE)


def line(run: Runner, task: str, *words: str) -> dict[str, str]:
    """One line of the due list."""
    found = csv.DictReader(io.StringIO(run("due", "--format", "csv", *words).out, newline=""))
    return next(row for row in found if row["task"] == task)


def test_work_is_said_back_with_the_lines_it_moved(pump: Runner) -> None:
    assert pump("log", "p-01", "oil AND filter", "--at", "1020", "--by", "Fenn").out.splitlines() == [
        "Entry 1 (scheduled) of P-01 on 2026-05-01.",
        "Done: Oil and filter.",
        "P-01  Oil and filter: 1150 h or 2027-02-01 → 1270 h or 2027-05-01",
    ]


def test_the_figure_of_an_entry_is_a_reading_too(pump: Runner) -> None:
    pump("log", "P-01", "--note", "round", "--at", "1020h")
    page = pump("show", "P-01").out
    assert "1020 h on the dial" in page
    assert "1020 h  entry 1" in page


def test_a_back_dated_entry_takes_its_place_in_the_replay(pump: Runner) -> None:
    pump("log", "P-01", "Oil and filter", "--at", "1040")
    ran = pump("log", "P-01", "Oil and filter", "--at", "1010", "--on", "2026-04-10")
    assert ran.out.splitlines()[2:] == []
    assert line(pump, "Oil and filter")["last_done_at"] == "1040"
    assert line(pump, "Oil and filter", "--as-of", "2026-04-15")["last_done_at"] == "1010"


def test_without_a_figure_the_reading_of_that_day_is_taken(pump: Runner) -> None:
    pump("log", "P-01", "Oil and filter", "--on", "2026-04-01")
    assert line(pump, "Oil and filter")["last_done_at"] == "1000"


def test_without_one_it_lies_between_its_neighbours(pump: Runner) -> None:
    pump("reading", "P-01", "1060")
    ran = pump("log", "P-01", "Oil and filter", "--on", "2026-04-16")
    assert "Note" not in ran.out
    assert line(pump, "Oil and filter")["last_done_at"] == "1030"


def test_with_no_later_neighbour_yet_it_says_what_it_counts_from(pump: Runner) -> None:
    ran = pump("log", "P-01", "Oil and filter")
    assert ran.out.splitlines()[0] == (
        "Note: Oil and filter counts from ~1000 h, the reading of 2026-04-01, until a later one is there;"
        " correct the entry and give --at if the dial was seen."
    )
    moved = pump("reading", "P-01", "1100", "--as-of", "2026-05-31")
    assert moved.out.splitlines()[1] == "P-01  Oil and filter: 1250 h or 2027-05-01 → 1300 h or 2027-05-01"


def test_with_no_neighbour_before_it_work_that_counts_is_refused(open_yard: Opener) -> None:
    run = open_yard("engine add P-01 --meter hours\ntask add P-01 Oil --every 250h\ntask add P-01 Cert --every 1y")
    ran = run("log", "P-01", "Oil")
    assert (ran.status, ran.err) == (
        1, "Oil counts hours, and no reading of P-01 lies on or before 2026-05-01; give the dial figure with --at\n"
    )  # fmt: skip
    assert run("log", "P-01", "Cert").status == 0


def test_the_big_job_logs_the_small_ones_save_those_with_a_sheet_or_outside_their_window(service: Runner) -> None:
    assert service("log", "P-01", "Big", "--on", "2026-04-01").out.splitlines() == [
        "Note: Look stays open: before its window opened on 2026-06-30.",
        "Note: Lash stays open: it closes only with its lash sheet.",
        "Entry 1 (scheduled) of P-01 on 2026-04-01.",
        "Done: Big.",
        "Done along with Big: Small.",
        "Done along with Big: Oil.",
        "P-01  Oil: 250 h → 750 h",
        "P-01  Small: 500 h → 1000 h",
        "P-01  Big: 1000 h → 1500 h",
    ]


def test_voiding_the_big_job_voids_what_it_covered(service: Runner) -> None:
    service("log", "P-01", "Big", "--on", "2026-04-01")
    assert service("correct", "1", "--void", "--why", "wrong engine").out.splitlines()[1:] == [
        "P-01  Oil: 750 h → 250 h",
        "P-01  Small: 1000 h → 500 h",
        "P-01  Big: 1500 h → 1000 h",
    ]


def test_jobs_named_together_that_cover_the_same_are_each_done_once(service: Runner) -> None:
    ran = service("log", "P-01", "Small", "Big", "small", "--on", "2026-04-01")
    assert ran.out.splitlines()[3:6] == [
        "Entry 1 (scheduled) of P-01 on 2026-04-01.",
        "Done: Small, Big.",
        "Done along with Small: Oil.",
    ]


def test_work_that_needs_a_sheet_closes_only_with_it(service: Runner) -> None:
    ran = service("log", "P-01", "Lash", "--at", "500")
    assert (ran.status, ran.out) == (1, "")
    assert ran.err.startswith("Lash closes only with its lash sheet; give --part-done")


def test_work_done_in_part_closes_nothing_and_says_so(service: Runner) -> None:
    ran = service("log", "P-01", "Lash", "Oil", "--part-done")
    assert ran.out.splitlines() == [
        "Entry 1 (scheduled) of P-01 on 2026-05-01.",
        "Done in part, still open: Lash.",
        "Done in part, still open: Oil.",
    ]
    assert line(service, "Oil")["state"] == "overdue"
    assert "Lash (in part), Oil (in part)" in service("show", "P-01").out


def test_work_before_its_window_does_not_count_and_says_from_when_it_would(service: Runner) -> None:
    ran = service("log", "P-01", "Look")
    assert ran.out.startswith(
        "Note: Look stays open: before its window opened on 2026-06-30, so this work does not count."
    )
    assert line(service, "Look")["next_due_on"] == "2026-07-20"
    assert "does not count: before its window opened on 2026-06-30" in service("show", "P-01", "Look").out


def test_work_for_a_period_already_served_says_that_the_next_stays_open(service: Runner) -> None:
    service("log", "P-01", "Test", "--on", "2026-04-30")
    ran = service("log", "P-01", "Test", "--on", "2026-04-30")
    assert ran.out.splitlines()[0] == "Note: Test: its period was already served; the next period stays open."


def test_a_task_done_once_has_no_line_any_more(pump: Runner) -> None:
    pump("task", "add", "P-01", "Retorque", "--first", "50h", "--once")
    ran = pump("log", "P-01", "Retorque", "--on", "2026-04-01")
    assert ran.out.splitlines()[2] == "P-01  Retorque: 50 h → no line"


def test_parts_component_and_downtime_stand_in_the_history(pump: Runner) -> None:
    pump(
        "log", "P-01", "Oil and filter", "--at", "1010", "--part", "Oil filter", "--part", "Oil:18", "--downtime", "2h"
    )
    assert "Oil and filter; 1 × Oil filter, 18 × Oil; 2 h out of service" in pump("show", "P-01").out


def test_a_machine_has_a_log_of_its_own(open_yard: Opener) -> None:
    ran = open_yard(LORRY)("log", "LR-1", "Brakes", "--at", "61500", "--by", "Quill")
    assert ran.out.splitlines()[2] == "LR-1  Brakes: 70000 km → 81500 km"


@pytest.mark.parametrize(
    ("words", "status", "wrong"),
    [
        ((), 1, "nothing to log; name a task, or give --repair, --defect, --top-up or --note"),
        (("Oil",), 1, "P-01 has no task 'Oil'; did you mean Oil and filter?"),
        (("Oil and filter", "--on", "2026-05-02"), 1, "2026-05-02 has not come yet, today counts as 2026-05-01"),
        (("Oil and filter", "--at", "999"), 1, "999 h on 2026-05-01 does not fit reading 2 of P-01"),
        (("Oil and filter", "--at", "1010h", "--at", "1011h"), 1, "--at names two figures of the hours meter"),
        (("Oil and filter", "--at", "5km"), 1, "no meter counts distance of P-01 on that day"),
        (("Oil and filter", "--at", "0", "--on", "2024-01-09"), 1, "no meter counts anything of P-01 on that day"),
        (("--note", "x", "--part-done"), 1, "--part-done says which task was done in part; name the task"),
        (("Oil and filter", "--at", "ten"), 2, "--at: 'ten' is not a figure"),
        (("Oil and filter", "--on", "yesterday"), 2, "argument --on: 'yesterday' is not a date"),
        (("Oil and filter", "--downtime", "2d"), 2, "--downtime: '2d' is a span of time"),
        (("Oil and filter", "--part", "Ring:x"), 2, "--part: 'x' is not a number"),
        (("Oil and filter", " "), 1, "TASK: it is empty; write at least one letter"),
    ],
)
def test_what_cannot_be_is_one_line_with_a_way_out(
    pump: Runner, words: tuple[str, ...], status: int, wrong: str
) -> None:
    ran = pump("log", "P-01", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (status, "", 1)
    assert ran.err.startswith(wrong)


def test_a_figure_that_collides_says_how_to_insist_on_it(pump: Runner) -> None:
    ran = pump("log", "P-01", "Oil and filter", "--at", "999.5")
    assert ran.err.endswith("if it is right, first give fleetcare reading P-01 999.5h --on 2026-05-01 --sure\n")
    pump("reading", "P-01", "999.5h", "--on", "2026-05-01", "--sure")
    assert pump("log", "P-01", "Oil and filter", "--at", "999.5").status == 0


def test_work_done_when_called_for_is_not_covered_by_a_big_job(service: Runner) -> None:
    service("task", "edit", "P-01", "Big", "--covers", "Bleed", "Oil", "--on", "2026-03-01")
    ran = service("log", "P-01", "Big", "--on", "2026-04-01")
    assert ran.out.splitlines()[1:3] == ["Done: Big.", "Done along with Big: Oil."]
