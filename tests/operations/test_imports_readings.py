"""Readings out of a file: all or none, whatever their order, and nothing a second time."""

from decimal import Decimal
from itertools import permutations

import pytest

from fleetcare.context import Context
from fleetcare.domain.engines import Status
from fleetcare.operations.find import find_item
from fleetcare.operations.readings import void_reading
from fleetcare.operations.rows import fetch
from fleetcare.operations.spells import change_status
from fleetcare.operations.upkeep import check
from tests.operations.importing import (
    TODAY,
    beginnings,
    engine,
    machine,
    points,
    reading,
    readings,
    refusals,
    take_in,
    task,
)

SHORT = "engine,on,value"
FULL = "engine,meter,on,value,unit,note"


@pytest.fixture
def yard(ctx: Context) -> Context:
    """P-01 counts hours and has been read once, as reading 1; LE-1 counts kilometres with its lorry LR-1."""
    engine(ctx, "P-01", meter=["hours"])
    reading(ctx, "P-01", "2026-03-01", "1000")
    machine(ctx, "LR-1", meter=["distance:km"])
    engine(ctx, "LE-1", machine="LR-1", meter=["hours"], in_service="2026-01-01", start_at=["50h"])
    return ctx


def test_readings_are_stored_as_entered_with_unit_and_note(yard: Context) -> None:
    imported = take_in(
        yard, "readings", FULL, "p-01,,2026-04-01,1200.50,,Monday", "LR-1,distance,2026-04-01,100,MI,[/b]"
    )
    assert imported.stored == ["LR-1  100 mi on 2026-04-01", "P-01  1200.5 h on 2026-04-01"]
    assert imported.known == 0
    assert readings(yard) == [
        ("LR-1", "2026-04-01", "100mi"),
        ("P-01", "2026-03-01", "1000h"),
        ("P-01", "2026-04-01", "1200.50h"),
    ]
    with yard.read() as connection:
        assert [row[0] for row in fetch(connection, "select note from reading order by id desc limit 2")] == [
            "Monday",
            "[/b]",
        ]
    assert check(yard).problems == ()


def test_the_column_meter_may_be_missing_where_one_meter_goes_without_saying(yard: Context) -> None:
    take_in(yard, "readings", SHORT, "P-01,2026-04-01,1200", "LE-1,2026-04-01,60h", "LE-1,2026-04-01,5000km")
    assert ("LR-1", "2026-04-01", "5000km") in readings(yard)
    assert ("LE-1", "2026-04-01", "60h") in readings(yard)


def test_an_engine_and_its_machine_are_two_names_of_one_meter(yard: Context) -> None:
    imported = take_in(yard, "readings", FULL, "LE-1,distance,2026-04-01,5000,,", "LR-1,,2026-04-01,5000,km,")
    assert (len(imported.stored), imported.known) == (1, 1)


def test_the_same_file_again_stores_nothing_new(yard: Context) -> None:
    rows = [f"P-01,2026-04-{day:02},{1100 + day}" for day in range(1, 13)]
    assert take_in(yard, "readings", SHORT, *rows).known == 0
    before = check(yard)
    again = take_in(yard, "readings", SHORT, *rows)
    assert (again.stored, again.known, again.moved) == ([], 12, [])
    assert check(yard) == before


def test_a_longer_file_stores_what_is_new_in_it(yard: Context) -> None:
    take_in(yard, "readings", SHORT, "P-01,2026-04-01,1200")
    imported = take_in(yard, "readings", SHORT, "P-01,2026-04-08,1240", "P-01,2026-04-01,1200.0 h")
    assert (imported.stored, imported.known) == (["P-01  1240 h on 2026-04-08"], 1)


def test_a_reading_entered_by_hand_is_there_already(yard: Context) -> None:
    imported = take_in(yard, "readings", SHORT, "P-01,2026-03-01,1000")
    assert (imported.stored, imported.known) == ([], 1)


def test_the_same_reading_twice_in_a_file_is_one_with_both_notes(yard: Context) -> None:
    rows = ["P-01,,2026-04-01,1200,,round", "P-01,hours,2026-04-01,1200h,,by Quill", "P-01,,2026-04-01,1200,,"]
    imported = take_in(yard, "readings", FULL, *rows)
    assert (len(imported.stored), imported.known) == (1, 2)
    with yard.read() as connection:
        assert fetch(connection, "select note from reading order by id desc limit 1")[0][0] == "by Quill; round"


def test_a_reading_imported_and_then_voided_stays_void(yard: Context) -> None:
    take_in(yard, "readings", SHORT, "P-01,2026-04-01,1200")
    with yard.write() as session:
        (number,) = fetch(session.connection(), "select max(id) from reading")[0]
        void_reading(session, number, "misread", TODAY)
    reading(yard, "P-01", "2026-04-02", "1100")
    imported = take_in(yard, "readings", SHORT, "P-01,2026-04-01,1200")
    assert (imported.stored, imported.known) == ([], 1)


def test_the_same_file_after_a_change_of_meter_stores_nothing_new(yard: Context) -> None:
    take_in(yard, "readings", SHORT, "P-01,2026-04-01,1200", "P-01,2026-04-08,1240")
    reading(yard, "P-01", "2026-04-08", "0", replaced=["1240", "0"])
    before = check(yard)
    again = take_in(yard, "readings", SHORT, "P-01,2026-04-01,1200", "P-01,2026-04-08,1240")
    assert (again.stored, again.known) == ([], 2)
    assert check(yard) == before


@pytest.mark.parametrize("order", list(permutations(range(4)))[::5])
def test_the_order_of_rows_changes_nothing(yard: Context, order: tuple[int, ...]) -> None:
    task(yard, "P-01", "Oil", every=["250h"], last_done=["1000h"])
    rows = ["P-01,2026-02-01,900", "P-01,2026-04-01,1200", "P-01,2026-03-15,1100", "P-01,2026-04-01,1210"]
    imported = take_in(yard, "readings", SHORT, *(rows[place] for place in order))
    assert imported.stored == [
        "P-01  900 h on 2026-02-01",
        "P-01  1100 h on 2026-03-15",
        "P-01  1200 h on 2026-04-01",
        "P-01  1210 h on 2026-04-01",
    ]
    assert check(yard).problems == ()


def test_lines_that_moved_are_told(yard: Context) -> None:
    task(yard, "P-01", "Oil", every=["250h"], last_done=["2026-02-01"])
    before = points(yard)
    imported = take_in(yard, "readings", SHORT, "P-01,2026-02-01,900")
    (moved,) = imported.moved
    assert moved.before is not None
    assert moved.after is not None
    assert (moved.before.next_due_at, moved.after.next_due_at) == (before["P-01 Oil"][0], Decimal(1150))


# Refused by row


def test_a_reading_that_breaks_with_the_past_names_the_stored_one_and_how_to_enter_it_all_the_same(
    yard: Context,
) -> None:
    (line,) = refusals(yard, "readings", SHORT, "P-01,2026-04-01,999", "P-01,2026-04-02,1001")
    assert line == (
        "row 2, column value: 999 h on 2026-04-01 does not fit reading 1 of P-01 (1000 h on 2026-03-01): lower by 1 h;"
        " check it; if it is right, first give fleetcare reading P-01 999h --on 2026-04-01"
        " with --sure, --rolled-over or --replaced OLD_LAST NEW_FIRST"
    )


def test_what_the_refusal_says_to_do_first_lets_the_file_in(yard: Context) -> None:
    reading(yard, "P-01", "2026-04-01", "999h", sure=True)
    imported = take_in(yard, "readings", SHORT, "P-01,2026-04-01,999", "P-01,2026-04-02,1001")
    assert (imported.stored, imported.known) == (["P-01  1001 h on 2026-04-02"], 1)


@pytest.mark.parametrize("order", [(0, 1, 2), (2, 1, 0), (1, 0, 2)])
def test_rows_that_contradict_each_other_are_refused_whatever_their_order(
    yard: Context, order: tuple[int, ...]
) -> None:
    rows = ["P-01,2026-04-01,1100", "P-01,2026-04-02,1900", "P-01,2026-04-03,1120"]
    (line,) = refusals(yard, "readings", SHORT, *(rows[place] for place in order))
    wrong, other = order.index(1) + 2, order.index(0) + 2
    assert line == (
        f"row {wrong}, column value: 1900 h on 2026-04-02 does not fit row {other} (1100 h on 2026-04-01):"
        " gains 800 h in 1 day, at most 24 h a day; correct one of them"
    )


def test_two_rows_of_one_day_that_cannot_both_be_true_are_refused(yard: Context) -> None:
    (line,) = refusals(yard, "readings", SHORT, "P-01,2026-04-01,1100", "P-01,2026-04-01,1190")
    assert "does not fit row" in line
    assert "gains 90 h on one day" in line


def test_rows_of_engine_and_machine_contradict_each_other_like_any(yard: Context) -> None:
    (line,) = refusals(yard, "readings", SHORT, "LE-1,2026-04-01,9000km", "LR-1,2026-04-02,8000")
    assert "does not fit row" in line


def test_every_wrong_reading_of_a_run_is_named_at_once(yard: Context) -> None:
    rows = [f"P-01,2026-04-{day:02},{7000 + day}" for day in range(1, 6)] + ["P-01,2026-04-06,1100"]
    lines = refusals(yard, "readings", SHORT, *rows)
    wanted = [f"row {number}, column value: 700{number - 1} h on" for number in range(2, 7)]
    assert beginnings(lines, wanted) == wanted


def test_one_bad_row_keeps_the_good_ones_out_too(yard: Context) -> None:
    refusals(yard, "readings", SHORT, "P-01,2026-04-01,1100", "P-09,2026-04-01,1")
    assert readings(yard) == [("P-01", "2026-03-01", "1000h")]


def test_every_bad_cell_has_a_line_of_its_own_in_the_order_of_the_file(yard: Context) -> None:
    lines = refusals(
        yard,
        "readings",
        FULL,
        "P-1,,2027-01-01,5,,",
        "P-01,oil,2026-02-30,x,gal,",
        ",,,,,",
        "P-01,,2026-04-01,\x07,,",
        "P-01,,2026-04-01,1100h,km,",
        "P-01,,2026-04-01",
        "P-01,calendar,2026-04-01,1100,min,",
        "P-01,,2026-05-02,1100,,",
        ",,2026-04-01,,,",
        "P-01,hours,2026-04-01,1100km,,",
        "P-01,fuel,2026-04-01,1100,,",
        "LE-1,,2026-04-01,60,,",
    )
    wanted = [
        "row 2, column engine: no engine or machine has the tag 'P-1'; did you mean P-01",
        "row 2, column on: 2027-01-01 has not come yet, today counts as 2026-05-01; correct it, or give a later --as-of",
        "row 3, column meter: no meter counts 'oil'; use one of hours, distance, fuel, starts",
        "row 3, column on: there is no day 2026-02-30; check month and day",
        "row 3, column value: 'x' is not a figure; write digits",
        "row 3, column unit: 'gal' does not say which gallon; write galus or galimp",
        "row 5, column value: it holds the control character",
        "row 6, column value: it is in h, column unit says km; leave one of them out",
        "row 7: it has 3 cells, the header 6",
        "row 8, column meter: no meter counts the calendar; use one of",
        "row 8, column unit: 'min' is no unit of a meter; use one of h, km, mi",
        "row 9, column on: 2026-05-02 has not come yet",
        "row 10, column engine: it is missing; give it",
        "row 10, column value: it is missing; give it",
        "row 11, column meter: 1100 km is not a figure of the hours meter",
        "row 12, column meter: no meter counts fuel of P-01 on that day",
        "row 13, column value: 60 could be distance and hours of LE-1; write its unit behind it",
    ]
    assert beginnings(lines, wanted) == wanted


@pytest.mark.parametrize(
    ("row", "wrong"),
    [
        ("P-01,2026-04-01,-5", "'-5' is not a figure"),
        ("P-01,2026-04-01,1.100,5", "it has 4 cells"),
        ('P-01,2026-04-01,"1100,5"', "'1100,5' is not a figure; write digits, a point for decimals"),
        ("P-01,2026-04-01,1e3", "'1e3' is not a figure"),
        ("P-01,01.04.2026,1100", "'01.04.2026' is not a date; write year-month-day"),
        ("P-01,2026-04-01,90d", "'90d' is a span of time"),
        ("[/b],2026-04-01,1", "no engine or machine has the tag '[/b]'"),
        ("'=1+1,2026-04-01,1", "no engine or machine has the tag '=1+1'"),
    ],
)
def test_what_is_no_reading_is_refused(yard: Context, row: str, wrong: str) -> None:
    (line,) = refusals(yard, "readings", SHORT, row)
    assert line.startswith("row 2")
    assert wrong in line


def test_a_figure_the_dial_has_no_digits_for_is_refused_by_row(ctx: Context) -> None:
    engine(ctx, "P-02", meter=["hours"], meter_digits=["4.1"])
    (line,) = refusals(ctx, "readings", SHORT, "P-02,2026-04-01,10000", "P-02,2026-04-02,9999")
    assert line.startswith("row 2, column value: 10000 h does not fit on 4 digits")


def test_a_day_before_the_meter_counted_is_refused_by_row(yard: Context) -> None:
    (line,) = refusals(yard, "readings", SHORT, "LE-1,2025-12-31,10h")
    assert line.startswith("row 2, column value: no meter counts hours of LE-1 on that day")


def test_a_machines_meter_that_began_after_its_engine_was_fitted_is_refused_by_row(yard: Context) -> None:
    machine(yard, "LR-2", meter=["distance:km"], in_service="2026-04-01", start_at=["10km"])
    engine(yard, "LE-2", machine="LR-2", in_service="2026-02-01")
    (line,) = refusals(yard, "readings", SHORT, "LE-2,2026-03-01,20")
    assert line.startswith("row 2, column value: ")
    assert "on that day" in line or "did not count on 2026-03-01" in line


def test_a_withdrawn_engine_is_refused_by_row(yard: Context) -> None:
    with yard.write() as session:
        change_status(session, find_item(session.connection(), "P-01"), Status.WITHDRAWN, TODAY)
    (line,) = refusals(yard, "readings", SHORT, "P-01,2026-04-01,1100")
    assert line.startswith("row 2, column engine: P-01 is withdrawn since 2026-05-01")


def test_thousands_of_readings_are_held_against_each_other_in_one_go(yard: Context) -> None:
    rows = [
        f"P-01,{2000 + year}-{month:02}-{day:02},{year * 30 + month}"
        for year in range(1, 26)
        for month in range(1, 13)
        for day in (1, 9, 17, 25)
    ]
    imported = take_in(yard, "readings", SHORT, *reversed(rows))
    assert len(imported.stored) == len(rows) == 1200
    assert take_in(yard, "readings", SHORT, *rows).known == 1200
