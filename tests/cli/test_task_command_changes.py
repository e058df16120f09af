"""`task edit`, `list`, `remove`: versions of a task, and its end."""

import csv
import io
import json
from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import PUMP

Opener = Callable[[str], Runner]


@pytest.fixture
def pump(open_yard: Opener) -> Runner:
    """A yard with one engine."""
    return open_yard(PUMP)


def point(run: Runner, task: str, *words: str) -> tuple[str, str]:
    """The point of a task: figure and day."""
    found = csv.DictReader(io.StringIO(run("due", "--format", "csv", *words).out, newline=""))
    return next((row["next_due_at"], row["next_due_on"]) for row in found if row["task"] == task)


def test_an_edit_makes_a_version_in_force_from_its_day(pump: Runner) -> None:
    ran = pump("task", "edit", "P-01", "oil AND filter", "--every", "200h", "--on", "2026-06-01")
    assert ran.out == "Oil and filter of P-01 changed from 2026-06-01.\n"
    assert point(pump, "Oil and filter", "--as-of", "2026-05-31") == ("1150", "2027-02-01")
    assert point(pump, "Oil and filter", "--as-of", "2026-06-01") == ("1100", "2027-02-01")


def test_work_is_judged_by_the_version_of_its_day(pump: Runner) -> None:
    pump("task", "edit", "P-01", "Oil and filter", "--every", "50h", "--on", "2026-05-01")
    pump("log", "P-01", "Oil and filter", "--on", "2026-04-01")
    pump("log", "P-01", "Oil and filter", "--on", "2026-05-01", "--at", "1060")
    history = pump("show", "P-01", "Oil and filter").out
    assert "entry 1, 2026-04-01  in time" in history
    assert "entry 2, 2026-05-01  done 10 h over, 0 h allowed" in history


def test_an_edit_prints_each_line_that_moved_old_and_new(pump: Runner) -> None:
    assert pump("task", "edit", "P-01", "Oil and filter", "--every", "6mo").out.splitlines() == [
        "Oil and filter of P-01 changed from 2026-05-01.",
        "P-01  Oil and filter: 1150 h or 2027-02-01 → 1150 h or 2026-08-01",
    ]


def test_an_interval_can_be_dropped_with_all_that_binds_to_it(pump: Runner) -> None:
    pump("task", "edit", "P-01", "Oil and filter", "--ahead", "30h", "--through-month-end")
    dropped = pump("task", "edit", "P-01", "Oil and filter", "--without", "hours")
    assert dropped.out.splitlines()[1] == "P-01  Oil and filter: 1150 h or 2027-02-28 → 2027-02-28"
    changed = pump("task", "edit", "P-01", "Oil and filter", "--without", "calendar", "--every", "300h")
    assert changed.out.splitlines()[1] == "P-01  Oil and filter: 2027-02-28 → 1200 h"


def test_once_each_goes_with_the_calendar(pump: Runner) -> None:
    pump("task", "add", "P-01", "Test", "--once-each", "month", "--every", "500h", "--last-done", "2026-04-10")
    ran = pump("task", "edit", "P-01", "Test", "--without", "calendar")
    assert ran.out.splitlines()[1] == "P-01  Test: 1500 h or 2026-05-31 → 1500 h"


def test_a_grid_goes_on_from_the_dial_it_was_given_at(pump: Runner) -> None:
    pump("task", "add", "P-01", "Grid", "--every", "300h", "--anchor", "on-grid", "--grid-origin", "50")
    assert point(pump, "Grid") == ("50", "")
    pump("task", "edit", "P-01", "Grid", "--grid-origin", "", "--every", "6mo")
    assert point(pump, "Grid") == ("300", "2024-07-10")
    ran = pump("task", "edit", "P-01", "Grid", "--without", "hours", "--grid-origin", "2024-02-01")
    assert (ran.status, point(pump, "Grid")) == (0, ("", "2024-02-01"))


def test_a_mark_can_be_taken_away_again(pump: Runner) -> None:
    pump("task", "edit", "P-01", "Oil and filter", "--law", "--once", "--pause-while-laid-up")
    assert "law; once; pause while laid up" in pump("task", "list", "P-01").out
    pump("task", "edit", "P-01", "Oil and filter", "--no-law", "--no-once", "--no-pause-while-laid-up")
    assert "law" not in pump("task", "list", "P-01").out


def test_an_empty_value_takes_an_option_away(pump: Runner) -> None:
    pump("task", "edit", "P-01", "Oil and filter", "--caution", "Hot oil", "--covers", "Valve lash", "--part", "Ring:2")
    assert json.loads(pump("task", "list", "P-01", "--json").out)[0]["covers"] == ["Valve lash"]
    pump("task", "edit", "P-01", "Oil and filter", "--caution", "", "--covers", "", "--part", "")
    task = json.loads(pump("task", "list", "P-01", "--json").out)[0]
    assert (task["caution"], task["covers"], task["part"]) == (None, None, None)


def test_a_last_done_alone_is_no_new_version(pump: Runner) -> None:
    ran = pump("task", "edit", "P-01", "Oil and filter", "--last-done", "950")
    assert ran.out.splitlines() == [
        "Oil and filter of P-01 changed.",
        "P-01  Oil and filter: 1150 h or 2027-02-01 → 1200 h",
    ]
    # A version of 1 May would bind a later edit of an earlier day.
    pump("task", "edit", "P-01", "Oil and filter", "--every", "100h", "--on", "2026-04-10")
    assert point(pump, "Oil and filter") == ("1050", "")


def test_an_edit_may_turn_work_into_work_done_when_called_for(pump: Runner) -> None:
    words = ("--without", "hours", "--without", "calendar", "--on-condition")
    ran = pump("task", "edit", "P-01", "Oil and filter", *words)
    assert ran.out.splitlines()[1] == "P-01  Oil and filter: 1150 h or 2027-02-01 → no line"


@pytest.mark.parametrize(
    ("words", "status", "wrong"),
    [
        (("Oil and filter",), 1, "nothing to edit; give what should change, such as --every 250h"),
        (("Oil and filter", "--without", "fuel"), 1, "Oil and filter has no interval counting fuel; leave out that"),
        (("Oil and filter", "--without", "oil"), 2, "'oil' is no kind of trigger; use one of hours, distance, fuel"),
        (("Valve lash", "--without", "hours"), 1, "the task has no interval; give --every, such as --every 250h"),
        (("Oil and filter", "--every", "250"), 2, "--every: '250' has no unit; add one of h km mi L"),
        (("Oil and filter", "--first", "5km"), 1, "--first 5 km binds to no interval of this task"),
        (("Oil and filter", "--covers", "Nothing"), 1, "P-01 has no task 'Nothing'"),
        (("Oil and filter", "--last-done", "2026-05-02"), 1, "--last-done 2026-05-02 has not come yet"),
        (("Oil and filter", "--last-done", "soon"), 2, "--last-done: 'soon' is not a figure"),
        (("Nothing", "--every", "250h"), 1, "P-01 has no task 'Nothing'; add one with fleetcare task add P-01 NAME"),
        (("Oil and filter", "--name", "Oil"), 2, "unrecognized arguments: --name Oil"),
    ],
)
def test_an_edit_that_says_nothing_or_cannot_be_is_not_taken(
    pump: Runner, words: tuple[str, ...], status: int, wrong: str
) -> None:
    ran = pump("task", "edit", "P-01", *words)
    assert (ran.status, ran.out) == (status, "")
    assert ran.err.startswith(wrong)


def test_the_list_to_the_byte(pump: Runner) -> None:
    pump("task", "add", "P-01", "Bleed", "--on-condition", "--work", "bleed", "--source", "Manual 4.2")
    pump("task", "add", "P-01", "Big", "--every", "2y", "--grace", "1mo", "--anchor", "from-due", "--covers", "Bleed")
    assert pump("task", "list", "P-01").out.splitlines() == [
        "task            every                     work   also                                      source",
        "--------------  ------------------------  -----  ----------------------------------------  ----------",
        "Oil and filter  every 250 h, every 12 mo",
        "Valve lash      every 1000 h                     closes with its lash sheet",
        "Bleed           on condition              bleed                                            Manual 4.2",
        "Big             every 2 y                        anchor from-due; grace 30d; covers Bleed",
    ]


def test_the_list_as_json_has_the_options_of_task_add(pump: Runner) -> None:
    told = ("--first", "50h", "--ahead", "0d", "--grace", "10h", "--combine", "last", "--not-later-than", "5y")
    more = ("--labour", "1.5h", "--part", "Ring:2", "--insurer", "--needs-sheet", "run")
    pump("task", "add", "P-01", "T", "--every", "250h", "--every", "1y", *told, *more[:4])
    pump("task", "add", "P-01", "W", "--every", "1y", "--window", "10d", *more[4:])
    *_, last, window = json.loads(pump("task", "list", "P-01", "--json").out)
    assert {name: value for name, value in last.items() if value not in (None, False)} == {
        "task": "T",
        "every": ["250h", "1y"],
        "first": ["50h"],
        "ahead": ["0d"],
        "grace": ["10h"],
        "combine": "last",
        "anchor": "from-done",
        "not_later_than": "5y",
        "labour": "1.5h",
        "part": ["Ring:2"],
        "deferrable": True,
    }
    assert (window["window"], window["insurer"], window["needs_sheet"], window["deferrable"]) == (
        "10d", True, "run", False
    )  # fmt: skip


def test_a_list_of_nothing_says_so(open_yard: Opener) -> None:
    run = open_yard("engine add P-01")
    assert run("task", "list", "P-01").out == "None yet.\n"


def test_a_task_ends_with_its_line_and_keeps_its_history(pump: Runner) -> None:
    pump("log", "P-01", "Oil and filter", "--on", "2026-04-01")
    assert pump("task", "remove", "P-01", "oil and filter", "--on", "2026-04-20").out.splitlines() == [
        "Oil and filter of P-01 ended on 2026-04-20; its history stays.",
        "P-01  Oil and filter: 1250 h or 2027-04-01 → no line",
    ]
    assert "Oil and filter" in pump("show", "P-01").out
    assert "Oil and filter" not in pump("task", "list", "P-01").out
    assert "Oil and filter" in pump("task", "list", "P-01", "--as-of", "2026-04-19").out


def test_a_task_ends_on_no_day_to_come(pump: Runner) -> None:
    ran = pump("task", "remove", "P-01", "Valve lash", "--on", "2026-05-02")
    assert (ran.status, ran.err.split(",")[0]) == (1, "2026-05-02 has not come yet")


def test_what_was_said_about_deferring_stays_through_an_edit(pump: Runner) -> None:
    pump("task", "edit", "P-01", "Oil and filter", "--deferrable", "no")
    pump("task", "edit", "P-01", "Oil and filter", "--every", "300h")
    assert json.loads(pump("task", "list", "P-01", "--json").out)[0]["deferrable"] is False


def test_where_a_grid_begins_is_listed_as_it_was_typed(pump: Runner) -> None:
    origins = ("--grid-origin", "2026-01-01", "--grid-origin", "50h")
    assert (
        pump("task", "add", "P-01", "Grid", "--every", "6mo", "--every", "100h", "--anchor", "on-grid", *origins).status
        == 0
    )
    assert json.loads(pump("task", "list", "P-01", "--json").out)[-1]["grid_origin"] == ["2026-01-01", "50h"]
