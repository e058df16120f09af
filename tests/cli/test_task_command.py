"""`task add`: the grammar of intervals, what binds to them, and what cannot go together."""

from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner

Opener = Callable[[str], Runner]

NEW = """
    engine add P-01 --meter hours --meter distance:mi --in-service 2026-01-10 --start-at 0h --start-at 0mi --as-new
    task add P-01 Small --every 100h
    task add P-01 Other --every 100h --covers Small
"""


@pytest.fixture
def new(open_yard: Opener) -> Runner:
    """A yard with an engine that counts as new, with an hour meter and an odometer in miles."""
    return open_yard(NEW)


def line(run: Runner, *words: str) -> str:
    """How the line of a task stands once it is added."""
    ran = run("task", "add", "P-01", "T", *words)
    assert (ran.status, ran.err) == (0, "")
    return ran.out.removeprefix("T added to P-01.\n").removeprefix("P-01  T: ").rstrip("\n")


@pytest.mark.parametrize(
    ("interval", "stands"),
    [
        ("250h", "clear, 250 h"),
        ("250 H", "clear, 250 h"),
        (".5h", "clear, 0.5 h"),
        ("100.25h", "clear, 100.2 h"),
        ("160.9344km", "clear, 100 mi"),
        ("100mi", "clear, 100 mi"),
        ("1000L", "unset, no meter counts fuel; add one"),
        ("30galus", "unset, no meter counts fuel; add one"),
        ("30galimp", "unset, no meter counts fuel; add one"),
        ("50starts", "unset, no meter counts starts; add one"),
        ("200d", "clear, 2026-07-29"),
        ("20w", "clear, 2026-05-30"),
        ("4mo", "near, 2026-05-10"),
        ("1.0mo", "overdue, 2026-02-10"),
        ("1y", "clear, 2027-01-10"),
    ],
)
def test_an_interval_is_a_number_and_a_unit(new: Runner, interval: str, stands: str) -> None:
    assert line(new, "--every", interval) == stands


@pytest.mark.parametrize(
    ("interval", "status", "wrong"),
    [
        ("250", 2, "--every: '250' has no unit; add one of h km mi L galus galimp starts d w mo y, such as 250h"),
        ("30gal", 2, "--every: '30gal' does not say which gallon; write galus or galimp"),
        ("30min", 2, "--every: '30min' has the unknown unit 'min'; use one of h km mi L galus galimp"),
        ("1e3h", 2, "--every: '1e3h' is not a figure; write digits, a point for decimals"),
        ("250,5h", 2, "--every: '250,5h' is not a figure"),
        ("\u0662\u0665h", 2, "--every: '\u0662\u0665h' is not a figure"),
        ("-5h", 2, "argument --every: expected one argument; see fleetcare task add --help"),
        ("=-5h", 2, "--every: '=-5h' is not a figure"),
        ("1.5mo", 2, "--every: '1.5mo' is not a whole number of days, weeks, months or years"),
        ("0h", 1, "--every 0 h is no interval; give a figure above 0"),
        ("0.01h", 1, "--every 0.01 h is shorter than any meter shows; give 0.1 or more"),
        ("0mo", 1, "--every 0 mo is no interval; give a figure above 0"),
        ("1000000000h", 1, "--every: 1000000000h cannot be right; give a figure up to 999999999"),
        ("101y", 1, "--every: 101y cannot be right; give a span of up to 100 years"),
    ],
)
def test_what_is_no_interval_is_not_taken(new: Runner, interval: str, status: int, wrong: str) -> None:
    ran = new("task", "add", "P-01", "T", "--every", interval)
    assert (ran.status, ran.out) == (status, "")
    assert ran.err.startswith(wrong)


def test_first_ahead_and_grace_bind_to_the_trigger_of_their_kind(new: Runner) -> None:
    bound = ("--first", "6mo", "--first", "50h", "--ahead", "30d", "--ahead", "10h", "--grace", "5h", "--grace", "14d")
    assert line(new, "--every", "250h", "--every", "12mo", *bound) == "clear, 50 h or 2026-07-10"
    working = new("show", "P-01", "T").out
    assert "every 250 h, first after 50 h, from 0 h: due at 50 h" in working
    assert "near from 10 h ahead, 5 h grace" in working
    assert "every 12 mo, first after 6 mo, from 2026-01-10: due 2026-07-10" in working
    assert "near from 30 d ahead, 14 d grace" in working


def test_units_of_the_calendar_are_one_kind(new: Runner) -> None:
    assert line(new, "--every", "1y", "--ahead", "2w", "--grace", "1mo") == "clear, 2027-01-10"
    assert "near from 14 d ahead, 30 d grace" in new("show", "P-01", "T").out


def test_near_begins_a_tenth_before_unless_said_otherwise(new: Runner) -> None:
    line(new, "--every", "250h", "--every", "6mo")
    working = new("show", "P-01", "T").out
    assert "near from 25 h ahead, 0 h grace" in working
    assert "near from 18 d ahead, 0 d grace" in working


@pytest.mark.parametrize("option", ["--first", "--ahead", "--grace"])
@pytest.mark.parametrize(("value", "kind"), [("5km", "distance"), ("5d", "calendar"), ("5starts", "starts")])
def test_an_option_that_binds_to_no_trigger_is_refused(new: Runner, option: str, value: str, kind: str) -> None:
    ran = new("task", "add", "P-01", "T", "--every", "250h", option, value)
    shown = value.replace("5", "5 ")
    assert (ran.status, ran.err) == (
        1, f"{option} {shown} binds to no interval of this task; add an --every counting {kind}\n"
    )  # fmt: skip


@pytest.mark.parametrize(
    ("words", "wrong"),
    [
        (("--every", "250h", "--every", "300h"), "--every names hours twice"),
        (("--every", "1y", "--every", "300d"), "--every names calendar twice"),
        (("--every", "250h", "--grace", "5h", "--grace", "6h"), "--grace names hours twice"),
        (("--every", "250h", "--ahead", "250h"), "--ahead 250 h is not shorter than the interval of 250 h"),
        (("--every", "1mo", "--ahead", "30d"), "--ahead 30 d is not shorter than the interval of 1 mo"),
        (("--every", "250h", "--first", "0h"), "--first 0 h is no interval"),
        ((), "the task has no interval; give --every, such as --every 250h, or --on-condition"),
        (("--first", "250h"), "the task has no interval"),
        (("--every", "250h", "--on-condition"), "on-condition work has no interval"),
        (("--every", "250h", "--window", "10d"), "--window lies around a calendar date"),
        (("--every", "12mo", "--window", "10d", "--grace", "5d"), "--grace with --window would say the same thing"),
        (("--every", "1mo", "--window", "15d"), "--window 15 d does not fit into the interval of 1 mo"),
        (("--every", "1mo", "--window", "0d"), "--window 0 d does not fit into the interval of 1 mo"),
        (("--every", "1y", "--window", "9d", "--once-each", "year"), "a task is done in a window or once each period"),
        (("--once-each", "month", "--first", "10d"), "--once-each begins with the period after the start point"),
        (("--once-each", "month", "--every", "2mo"), "--every 2 mo is not once each month"),
        (("--every", "250h", "--through-month-end"), "--through-month-end extends a plain calendar interval"),
        (("--once-each", "month", "--through-month-end"), "--through-month-end extends a plain calendar interval"),
        (("--every", "250h", "--grid-origin", "0h"), "--grid-origin needs a grid; add --anchor on-grid"),
        (("--every", "250h", "--anchor", "on-grid", "--grid-origin", "2026-01-01"), "--grid-origin 2026-01-01 binds"),
        (
            ("--every", "250h", "--every", "9km", "--anchor", "on-grid", "--grid-origin", "5"),
            "--grid-origin 5 could be hours and distance; write its unit behind it",
        ),
        (
            ("--every", "250h", "--anchor", "on-grid", "--grid-origin", "5h", "--grid-origin", "6"),
            "--grid-origin names hours twice; give one of each kind",
        ),
        (("--every", "250h", "--every", "1y", "--combine", "last"), "--combine last could wait for ever; bound it"),
        (("--every", "250h", "--not-later-than", "2y"), "--not-later-than bounds --combine last only"),
        (("--every", "250h", "--combine", "last", "--not-later-than", "0y"), "--not-later-than 0 y is no bound"),
        (
            ("--every", "250h", "--every", "1y", "--combine", "last", "--not-later-than", "2y", "--law"),
            "work required by law or insurer falls due by its first interval",
        ),
        (("--every", "250h", "--law", "--deferrable", "yes"), "work required by law or insurer is never deferrable"),
        (("--every", "250h", "--insurer", "--deferrable", "yes"), "work required by law or insurer is never deferr"),
        (("--every", "250h", "--covers", "Nothing"), "P-01 has no task 'Nothing'"),
        (("--every", "250h", "--covers", "T"), "covering goes in a circle: T covers T; leave out one of the --covers"),
        (("--every", "250h", "--last-done", "2026-05-02"), "--last-done 2026-05-02 has not come yet"),
        (("--every", "250h", "--last-done", "2026-03-01", "--last-done", "2026-04-01"), "--last-done names two days"),
        (("--every", "250h", "--last-done", "5h", "--last-done", "6h"), "--last-done names two figures of the hours"),
        (("--every", "250h", "--last-done", "99999h"), "--last-done 99999 h lies out of reach of reading 1 on 2026-01"),
        (("--every", "250h", "--last-done", "5L"), "no meter counts fuel of P-01 on that day"),
    ],
)
def test_what_cannot_go_together_is_refused(new: Runner, words: tuple[str, ...], wrong: str) -> None:
    ran = new("task", "add", "P-01", "T", *words)
    assert (ran.status, ran.out) == (1, "")
    assert ran.err.startswith(wrong)


@pytest.mark.parametrize(
    ("words", "wrong"),
    [
        (("--combine", "both"), "--combine: 'both' is not known; use 'first' or 'last'"),
        (("--anchor", "grid"), "--anchor: 'grid' is not known; use 'from-done', 'from-due' or 'on-grid'"),
        (
            ("--once-each", "fortnight"),
            "--once-each: 'fortnight' is not known; use 'week', 'month', 'quarter' or 'year'",
        ),
        (("--window", "10h"), "--window: '10h' is not a whole number of days, weeks, months or years"),
        (("--deferrable", "perhaps"), "--deferrable: 'perhaps' is not known; use 'yes' or 'no'"),
        (
            ("--needs-sheet", "paint"),
            "--needs-sheet: 'paint' is not known; use 'lash', 'compression', 'leakdown', 'run'",
        ),
        (("--labour", "90min"), "--labour: '90min' has the unknown unit 'min'"),
        (("--last-done", "2026-02-30"), "--last-done: there is no day 2026-02-30"),
        (("--part", "Ring:two"), "--part: 'two' is not a number"),
    ],
)
def test_a_value_that_is_none_of_its_kind_is_status_2(new: Runner, words: tuple[str, ...], wrong: str) -> None:
    ran = new("task", "add", "P-01", "T", "--every", "250h", *words)
    assert (ran.status, ran.out) == (2, "")
    assert ran.err.startswith(wrong)


def test_a_name_is_taken_whatever_its_case_and_free_again_once_the_task_ended(new: Runner) -> None:
    assert new("task", "add", "P-01", " SMALL ", "--every", "1h").err.startswith("P-01 has a task 'SMALL' already")
    new("task", "remove", "P-01", "Other")
    assert new("task", "add", "P-01", "Other", "--every", "90h").status == 0


@pytest.mark.parametrize(("name", "status"), [("", 2), (" ", 1)])
def test_a_task_needs_a_name(new: Runner, name: str, status: int) -> None:
    ran = new("task", "add", "P-01", name, "--every", "250h")
    assert ran.status == status
    assert ran.err.startswith("TASK")


def test_several_tasks_may_be_covered_by_one_option_or_by_several(new: Runner) -> None:
    line(new, "--every", "1000h", "--covers", "Small", "Other")
    assert new("task", "add", "P-01", "U", "--every", "1000h", "--covers", "T", "--covers", "Small").status == 0
    assert new("log", "P-01", "U", "--at", "0h", "--at", "0mi", "--on", "2026-01-10").out.splitlines()[2:5] == [
        "Done along with U: T.",
        "Done along with U: Small.",
        "Done along with U: Other.",
    ]


def test_a_circle_in_covering_is_refused_with_the_way_round(new: Runner) -> None:
    line(new, "--every", "1000h", "--covers", "Other")
    ran = new("task", "edit", "P-01", "Small", "--covers", "T")
    assert (
        ran.err
        == "covering goes in a circle: Small covers T covers Other covers Small; leave out one of the --covers\n"
    )


def test_a_line_that_another_one_moves_is_printed_too(new: Runner) -> None:
    ran = new("task", "add", "P-01", "Once", "--every", "10h", "--once")
    assert ran.out == "Once added to P-01.\nP-01  Once: clear, 10 h\n"


def test_pausing_what_ages_all_the_same_is_warned_about(new: Runner) -> None:
    ran = new("task", "add", "P-01", "Coolant", "--every", "24mo", "--pause-while-laid-up")
    assert ran.out.splitlines()[1].startswith("Note: the calendar of Coolant pauses while laid up; oil, coolant,")
