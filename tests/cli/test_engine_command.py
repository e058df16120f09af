"""`engine add`, `edit`, `list`: tags, nameplates, meters and start points."""

import json
from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import LORRY, PUMP

Opener = Callable[[str], Runner]


@pytest.fixture
def empty(open_yard: Opener) -> Runner:
    """A yard with nothing in it."""
    return open_yard("")


@pytest.fixture
def pump(open_yard: Opener) -> Runner:
    """A yard with one engine."""
    return open_yard(PUMP)


def meters(run: Runner, tag: str) -> list[str]:
    """The meters on an engine's page."""
    lines = run("show", tag).out.splitlines()
    begin = lines.index("METERS") + 1
    return lines[begin : lines.index("", begin)]


def test_a_tag_is_free_of_case_and_of_white_space_round_it(empty: Runner) -> None:
    assert empty("engine", "add", " P  01 ").out == "P 01 added.\n"
    assert empty("engine", "add", "p 01").err == "the tag 'P 01' belongs to an engine in use; choose another tag\n"


def test_engines_and_machines_share_their_tags(empty: Runner) -> None:
    empty("machine", "add", "LR-1")
    assert empty("engine", "add", "LR-1").err == "the tag 'LR-1' belongs to a machine in use; choose another tag\n"


def test_with_two_meters_a_bare_start_figure_is_refused(empty: Runner) -> None:
    words = ("engine", "add", "P-01", "--meter", "hours", "--meter", "distance", "--in-service", "2026-01-10")
    ran = empty(*words, "--start-at", "100")
    assert ran.err == "100 could be hours and distance of P-01; write its unit behind it, such as 100h\n"


def test_start_figures_and_digits_bind_to_the_meter_of_their_kind(empty: Runner) -> None:
    words = ("--meter", "hours", "--meter", "distance", "--in-service", "2026-01-10")
    digits = ("--meter-digits", "distance:6.0", "--meter-digits", "hours:5.1")
    ran = empty("engine", "add", "P-01", *words, "--start-at", "5600km", "--start-at", "100.5h", *digits)
    assert ran.status == 0
    assert meters(empty, "P-01") == [
        "hours     100.5 h on the dial, 100.5 h of life, read 2026-01-10",
        "distance  5600 km on the dial, 5600 km of life, read 2026-01-10",
    ]
    too_many = empty("reading", "P-01", "1000000km")
    assert too_many.err == "1000000 km does not fit on 6 digits; check the figure\n"
    assert empty("reading", "P-01", "100000h").err == "100000 h does not fit on 5 digits; check the figure\n"


def test_in_a_machine_a_bare_start_figure_is_that_of_the_engines_own_meter(empty: Runner) -> None:
    empty("machine", "add", "LR-1", "--meter", "distance")
    words = ("--machine", "LR-1", "--meter", "hours", "--in-service", "2026-01-10", "--start-at", "7")
    assert empty("engine", "add", "E-1", *words).status == 0
    assert meters(empty, "E-1")[0] == "hours     7 h on the dial, 7 h of life, read 2026-01-10"


def test_a_start_figure_may_be_typed_in_another_unit_than_the_meters(empty: Runner) -> None:
    empty("engine", "add", "T-1", "--meter", "distance:mi", "--in-service", "2026-01-10", "--start-at", "1609.344km")
    assert meters(empty, "T-1") == ["distance  1000 mi on the dial, 1000 mi of life, read 2026-01-10"]


def test_an_engine_without_a_meter_is_one_all_the_same(empty: Runner) -> None:
    assert empty("engine", "add", "P-01").status == 0
    empty("task", "add", "P-01", "Oil", "--every", "250h", "--every", "12mo", "--last-done", "2026-04-01")
    assert "unset, no meter counts hours; add one" in empty("show", "P-01", "Oil").out


def test_what_counts_as_new_needs_a_start_figure_of_each_of_its_meters(empty: Runner) -> None:
    words = ("--meter", "hours", "--meter", "starts", "--in-service", "2026-01-10", "--as-new")
    ran = empty("engine", "add", "P-01", *words, "--start-at", "0h")
    assert ran.err == "P-01 counts as new but has no start figure of starts; give --start-at for each\n"


def test_a_kind_has_one_start_figure(empty: Runner) -> None:
    words = ("--meter", "hours", "--in-service", "2026-01-10", "--start-at", "0h", "--start-at", "5")
    assert empty("engine", "add", "P-01", *words).err == "--start-at names hours twice; give one figure of each kind\n"


def test_tasks_of_an_engine_that_counts_as_new_count_from_its_first_day_and_figure(empty: Runner) -> None:
    empty("engine", "add", "P-01", "--meter", "hours", "--in-service", "2026-01-10", "--start-at", "20", "--as-new")
    added = empty("task", "add", "P-01", "Oil", "--every", "250h", "--first", "50h", "--every", "12mo")
    assert added.out.splitlines()[1] == "P-01  Oil: clear, 70 h or 2027-01-10"


def test_tasks_of_any_other_engine_are_unset_and_say_what_to_enter(empty: Runner) -> None:
    empty("engine", "add", "P-01", "--meter", "hours", "--in-service", "2026-01-10", "--start-at", "20")
    added = empty("task", "add", "P-01", "Oil", "--every", "250h")
    assert added.out.splitlines()[1] == (
        "P-01  Oil: unset, not known when it was last done; log it, or enter a last-done"
    )


def test_an_edit_changes_what_is_given_and_leaves_the_rest(pump: Runner) -> None:
    pump("engine", "edit", "P-01", "--cylinders", "6", "--bore", "102", "--fuel", "diesel")
    assert pump("engine", "edit", "p-01", "--firing-order", "1-5-3-6-2-4", "--fuel", "gas oil").out == "P-01 edited.\n"
    page = pump("show", "P-01").out
    for part in ("fuel          gas oil", "firing order  1-5-3-6-2-4", "bore          102 mm"):
        assert part in page


def test_an_edit_is_held_against_the_nameplate_there_is(pump: Runner) -> None:
    pump("engine", "edit", "P-01", "--cylinders", "6", "--firing-order", "1-5-3-6-2-4")
    ran = pump("engine", "edit", "P-01", "--cylinders", "4")
    assert ran.status == 1
    assert "firing order 1-5-3-6-2-4 goes beyond the engine with cylinders 5, 6" in ran.err


def test_lash_figures_in_another_unit_take_the_place_of_all_or_none(pump: Runner) -> None:
    pump("engine", "edit", "P-01", "--lash-intake", "0.20-0.30", "--lash-exhaust", "0.40-0.50", "--lash-when", "cold")
    ran = pump("engine", "edit", "P-01", "--lash-intake", "0.008-0.012in")
    assert (
        ran.err
        == "--lash-intake is in inches, the lash figures that stay are in mm; give it in the same unit, or all of them anew\n"
    )
    both = ("--lash-intake", "0.008-0.012in", "--lash-exhaust", "0.016-0.020in")
    assert pump("engine", "edit", "P-01", *both).status == 0
    assert "lash exhaust  check 0.016 to 0.020 in, cold" in pump("show", "P-01").out


def test_a_lash_spec_holds_from_the_day_it_was_changed(pump: Runner) -> None:
    pump("engine", "edit", "P-01", "--lash-set-intake", "0.25", "--as-of", "2026-04-01")
    pump("engine", "edit", "P-01", "--lash-set-intake", "0.30")
    assert "set 0.25 mm" in pump("show", "P-01", "--as-of", "2026-04-30").out
    assert "set 0.30 mm" in pump("show", "P-01").out


def test_a_new_start_figure_moves_the_lines_that_count_from_it(open_yard: Opener) -> None:
    run = open_yard("""
        engine add P-01 --meter hours --in-service 2026-01-10 --start-at 0 --as-new
        reading P-01 300 --on 2026-04-01
        task add P-01 Oil --every 250h
    """)
    ran = run("engine", "edit", "P-01", "--in-service", "2026-01-15", "--start-at", "100")
    assert ran.out == "P-01 edited.\nP-01  Oil: 250 h → 350 h\n"


@pytest.mark.parametrize(
    ("words", "wrong"),
    [
        (("--in-service", "2026-02-01"), "P-01 started at 0 h on 2024-01-10; give --start-at for the new day as well"),
        (("--in-service", "2026-04-02", "--start-at", "1000"), "reading 2 of P-01 on 2026-04-01 lies before --in-serv"),
        (("--in-service", "2026-01-10", "--start-at", "1001"), "1001 h on 2026-01-10 does not fit reading 2 of P-01"),
        (("--meter-digits", "3.1"), "--meter-digits 3.1 has no room for reading 2 of P-01, 1000 h"),
        (("--meter-digits", "distance:6.0"), "--meter-digits 6.0 binds to no meter of P-01"),
        (("--meter", "hours"), "a meter of P-01 counts hours already; a new one is told by fleetcare reading --repl"),
        (("--machine", "LR-1"), "an engine moves between machines on a day; use fleetcare engine fit TAG"),
        (("--position", "aft"), "an engine moves between machines on a day; use fleetcare engine fit TAG"),
        ((), "nothing to edit; give what should change"),
    ],
)
def test_an_edit_that_contradicts_what_was_read_or_says_nothing_is_refused(
    pump: Runner, words: tuple[str, ...], wrong: str
) -> None:
    ran = pump("engine", "edit", "P-01", *words)
    assert (ran.status, ran.out) == (1, "")
    assert ran.err.startswith(wrong)


def test_an_empty_value_would_change_nothing_and_is_no_edit(pump: Runner) -> None:
    ran = pump("engine", "edit", "P-01", "--name", "")
    assert (ran.status, ran.err) == (2, "--name is empty; give it a value, or leave it out\n")


def test_a_meter_added_later_counts_from_that_day(pump: Runner) -> None:
    pump("engine", "edit", "P-01", "--meter", "starts", "--meter-digits", "starts:5.0", "--meter-digits", "hours:6.1")
    assert meters(pump, "P-01")[1] == "starts  not read yet"
    assert pump("reading", "P-01", "40starts").status == 0
    assert pump("reading", "P-01", "30starts", "--on", "2026-04-30").status == 1


def test_the_list_shows_where_each_engine_is_and_what_was_read_last(open_yard: Opener) -> None:
    assert open_yard(LORRY)("engine", "list").out.splitlines() == [
        "tag  name  site        machine  status      duty  cylinders  layout  fuel  in service  last read",
        "---  ----  ----------  -------  ----------  ----  ---------  ------  ----  ----------  "
        "-------------------------------------------",
        "E-1        Board Yard  LR-1     in service                                 2025-01-01  "
        "400 h on 2026-04-01, 61000 km on 2026-04-01",
    ]


def test_the_list_as_json_has_figures_as_numbers_and_null_for_empty(open_yard: Opener) -> None:
    assert json.loads(open_yard(LORRY)("engine", "list", "--json").out) == [
        {
            "tag": "E-1",
            "name": None,
            "site": "Board Yard",
            "machine": "LR-1",
            "status": "in service",
            "duty": None,
            "cylinders": None,
            "layout": None,
            "fuel": None,
            "in_service": "2025-01-01",
            "last_read": [
                {"meter": "hours", "value": 400, "unit": "h", "on": "2026-04-01"},
                {"meter": "distance", "value": 61000, "unit": "km", "on": "2026-04-01"},
            ],
        }
    ]


def test_a_list_of_nothing_says_so(empty: Runner) -> None:
    assert empty("engine", "list").out == "None yet.\n"
    assert empty("engine", "list", "--json").out == "[]\n"
