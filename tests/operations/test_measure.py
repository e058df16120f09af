"""A lash sheet taken by itself: kept exactly, judged by the spec of its day, once however often it comes."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.context import Context
from fleetcare.domain.sheets import Phase
from fleetcare.drafts.items import EngineDraft
from fleetcare.drafts.reading_in import read_draft
from fleetcare.errors import Refused
from fleetcare.operations.find import find_item
from fleetcare.operations.items import edit_item
from fleetcare.operations.rows import fetch
from fleetcare.operations.sheets_load import load_sheets
from fleetcare.operations.upkeep import check
from tests.operations.importing import correct, engine, entries, machine, readings
from tests.operations.sheet_yard import (
    FOUND_IN,
    ONE_OUT,
    lash_of,
    newest,
    open_points,
    refused,
    stored_values,
    take,
    verdicts,
    yard_with_valves,
)


@pytest.fixture
def yard(ctx: Context) -> Context:
    """P-01 of two cylinders, nothing measured yet."""
    return yard_with_valves(ctx)


def edit(ctx: Context, on: date, **changes: object) -> None:
    """Edit the nameplate of P-01 on a day."""
    with ctx.write() as session:
        item = find_item(session.connection(), "P-01")
        edit_item(session, item, read_draft(EngineDraft, {"tag": "P-01", **changes}), on)


def test_values_are_kept_as_they_were_entered_in_their_own_unit(yard: Context) -> None:
    take(
        yard,
        "lash,1I,found,30,mm",
        'lash,1I,left,"0,250",mm',
        "lash,1E,found,0.45..0.50,",
        "lash,2I,,10,in",
        "lash,2E,found,<5,",
    )
    assert stored_values(yard) == [
        ("1I", "found", "0.30", None, None, "mm", ""),
        ("1I", "left", "0.250", None, None, "mm", ""),
        ("1E", "found", None, "0.45", "0.50", "mm", ""),
        ("2I", "found", "0.010", None, None, "in", ""),
        ("2E", "found", "0.05", None, None, "mm", "<"),
    ]
    assert check(yard).problems == ()


def test_a_sheet_comes_back_with_all_that_was_said_of_it(yard: Context) -> None:
    measured = take(
        yard, *ONE_OUT, on="2026-04-20", when="cold", gauge="F2", by="Fenn", note="after cooling", at=["1480h"]
    )
    assert (measured.is_new, measured.report.sheet.entry) == (True, 1)
    with yard.read() as connection:
        (sheet,) = load_sheets(connection, find_item(connection, "P-01").id, date(2026, 5, 1))
    assert (sheet.entry, sheet.kind, sheet.on, sheet.condition, sheet.gauge) == (
        1,
        "lash",
        date(2026, 4, 20),
        "cold",
        "F2",
    )
    assert (sheet.by, sheet.note, len(sheet.values)) == ("Fenn", "after cooling", 4)
    assert sheet == measured.report.sheet
    assert ("P-01", "2026-04-20", "1480h") in readings(yard)
    assert entries(yard) == [(1, "2026-04-20", "", "Fenn", "after cooling")]


def test_a_sheet_by_itself_closes_nothing_and_says_how_it_could(yard: Context) -> None:
    before = open_points(yard)
    measured = take(yard, *FOUND_IN)
    assert measured.notes == ("Lash stays open; to close it with this sheet give fleetcare correct 1 --task Lash",)
    assert open_points(yard) == before


def test_one_that_would_close_nothing_says_nothing_of_tasks(yard: Context) -> None:
    assert take(yard, *ONE_OUT).notes == ()


def test_a_sheet_says_what_was_found_out_and_offers_to_raise_what_is_left_so(yard: Context) -> None:
    judged = lash_of(take(yard, *ONE_OUT, "lash,2E,left,38,"))
    assert verdicts(judged) == ["1I in", "1E in", "2I in", "2E alert", "2E* alarm"]
    assert (judged.stand.found_out, judged.stand.left_out) == (("2E",), ("2E",))
    assert judged.defect() == "Valve lash left out of limits: 2E 0.38 mm"
    assert judged.raise_command() == (
        "fleetcare log P-01 --on 2026-05-01 --defect 'Valve lash left out of limits: 2E 0.38 mm' --follow-up"
    )


def test_all_in_offers_nothing(yard: Context) -> None:
    judged = lash_of(take(yard, *FOUND_IN))
    assert (judged.defect(), judged.raise_command()) == ("", "")


def test_the_same_values_of_the_same_day_are_stored_once_in_whatever_order_and_unit(yard: Context) -> None:
    take(yard, *FOUND_IN, when="cold")
    before = check(yard)
    for rows in (FOUND_IN, FOUND_IN[::-1], ("lash,1i,,25,mm", *FOUND_IN[1:]), ("lash,1I,,0.250,mm", *FOUND_IN[1:])):
        again = take(yard, *rows, when="hot", gauge="other")
        assert (again.is_new, again.report.sheet.entry, again.report.sheet.condition) == (False, 1, "cold")
    assert check(yard) == before


def test_in_inches_the_same_gap_is_the_same_sheet(ctx: Context) -> None:
    yard_with_valves(
        ctx, lash_intake="0.008-0.012in", lash_exhaust="0.016-0.020in", lash_set_intake=None, lash_set_exhaust=None
    )
    take(ctx, "lash,1I,found,10,")
    assert not take(ctx, "lash,1I,found,0.254,mm").is_new
    assert stored_values(ctx) == [("1I", "found", "0.010", None, None, "in", "")]


@pytest.mark.parametrize(
    ("rows", "on"),
    [((*FOUND_IN[:3], "lash,2E,found,0.46,"), "2026-05-01"), (FOUND_IN, "2026-04-30"), (FOUND_IN[:3], "2026-05-01")],
)
def test_other_values_or_another_day_are_another_sheet(yard: Context, rows: tuple[str, ...], on: str) -> None:
    take(yard, *FOUND_IN)
    assert take(yard, *rows, on=on).is_new


def test_a_voided_sheet_counts_no_more_and_may_come_again_once(yard: Context) -> None:
    take(yard, *FOUND_IN, on="2026-04-20")
    take(yard, *ONE_OUT)
    correct(yard, 2, void=True, why="another engine")
    judged = newest(yard)
    assert judged is not None
    assert judged.sheet.entry == 1
    assert len(stored_values(yard)) == 8  # both stay readable
    assert take(yard, *ONE_OUT).is_new
    assert not take(yard, *ONE_OUT).is_new
    assert check(yard).problems == ()


def test_an_older_sheet_is_judged_by_the_spec_of_its_day(yard: Context) -> None:
    take(yard, *FOUND_IN, on="2026-04-20")
    edit(yard, date(2026, 4, 25), lash_exhaust="0.46-0.50", lash_set_exhaust="0.48")
    assert verdicts(newest(yard))[1] == "1E in"
    assert verdicts(lash_of(take(yard, *FOUND_IN)))[1] == "1E alert"


def test_the_first_spec_holds_for_sheets_older_than_it(ctx: Context) -> None:
    engine(ctx, "P-01", cylinders=1, valves_per_cylinder=2)
    take(ctx, "lash,1I,found,0.10,", on="2026-04-20")
    assert verdicts(newest(ctx)) == ["1I not judged"]
    edit(ctx, date(2026, 5, 1), lash_intake="0.20-0.30")
    assert verdicts(newest(ctx)) == ["1I alert"]


def test_a_setting_outside_its_check_range_is_refused(yard: Context) -> None:
    with pytest.raises(Refused, match=r"--lash-set-exhaust 0.45 lies outside the check range 0.46 to 0.50; mend it"):
        edit(yard, date(2026, 4, 25), lash_exhaust="0.46-0.50")


def test_what_each_point_showed_last_stands_beside(yard: Context) -> None:
    take(yard, *ONE_OUT, "lash,2E,left,0.46,", on="2026-04-01")
    take(yard, "lash,2E,found,0.44,", on="2026-04-20")
    rows = lash_of(take(yard, *FOUND_IN)).rows
    assert [row.last for row in rows] == [
        "0.25 mm on 2026-04-01",
        "0.45 mm on 2026-04-01",
        "0.25 mm on 2026-04-01",
        "0.44 mm on 2026-04-20",
    ]


def test_a_sheet_typed_late_takes_its_place_in_time(yard: Context) -> None:
    take(yard, *FOUND_IN)
    take(yard, *ONE_OUT, on="2026-04-20")
    judged = newest(yard)
    assert judged is not None
    assert judged.sheet.on == date(2026, 5, 1)
    assert judged.rows[3].last == "0.36 mm on 2026-04-20"


def test_a_hot_reading_is_kept_and_not_held_against_cold_limits(yard: Context) -> None:
    judged = lash_of(take(yard, *ONE_OUT, when="hot"))
    assert set(verdicts(judged)) == {"1I not judged", "1E not judged", "2I not judged", "2E not judged"}
    assert {row.note for row in judged.rows} == {"the limits are for a cold engine"}
    assert judged.notes() == ("not judged as they stand: 1I, 1E, 2I, 2E",)


def test_a_sheet_that_does_not_say_cold_or_hot_says_what_it_is_taken_for(yard: Context) -> None:
    assert lash_of(take(yard, *ONE_OUT)).notes() == (
        "nobody said whether the engine was cold or hot; it is taken to be cold, as the limits ask",
    )


def test_an_unfinished_sheet_is_kept_and_says_what_is_missing(yard: Context) -> None:
    judged = lash_of(take(yard, *FOUND_IN[:2], when="cold"))
    assert judged.notes() == ("not measured: 2I, 2E",)


def test_the_shim_fitted_last_time_tells_which_to_fit_now(ctx: Context) -> None:
    yard_with_valves(ctx, adjuster="shim", shim_step="0.05")
    take(ctx, "shim,1I,found,2.70,", "shim,1I,left,2.75,", on="2026-04-20")
    (row,) = lash_of(take(ctx, "lash,1I,found,0.19,")).rows
    assert row.mending == "fit a 2.7 mm shim, which leaves 0.24 mm"
    found, _ = lash_of(take(ctx, "lash,1I,found,0.19,", "shim,1I,found,2.80,")).rows
    assert found.mending == "fit a 2.75 mm shim, which leaves 0.24 mm"


def test_a_left_gap_is_mended_from_the_shim_that_was_left(ctx: Context) -> None:
    yard_with_valves(ctx, adjuster="shim", shim_step="0.05")
    rows = lash_of(
        take(ctx, "lash,1I,found,0.19,", "shim,1I,found,2.80,", "lash,1I,left,0.31,", "shim,1I,left,2.65,")
    ).rows
    assert [row.mending for row in rows] == ["", "fit a 2.7 mm shim, which leaves 0.26 mm", "", ""]


def test_points_the_nameplate_no_longer_has_stay_readable(yard: Context) -> None:
    take(yard, *ONE_OUT)
    edit(yard, date(2026, 5, 1), cylinders=2, valves_per_cylinder=4)
    judged = newest(yard)
    assert verdicts(judged) == ["1E in", "1I in", "2E alert", "2I in"]
    assert judged is not None
    assert judged.stand.missing == ("1I1", "1I2", "1E1", "1E2", "2I1", "2I2", "2E1", "2E2")


def test_valves_nobody_counted_are_taken_for_two_and_it_says_so(ctx: Context) -> None:
    yard_with_valves(ctx, valves_per_cylinder=None)
    assert lash_of(take(ctx, *FOUND_IN, when="cold")).notes() == (
        "P-01 is taken to have 2 valves per cylinder, as nobody stated how many",
    )


def test_a_machine_has_no_lash_sheet(ctx: Context) -> None:
    machine(ctx, "P-01")
    assert refused(ctx, take, *FOUND_IN) == ["P-01 is a machine and has no valves; name one of its engines"]


def test_an_engine_whose_cylinders_nobody_stated_is_refused_with_how_to_state_them(ctx: Context) -> None:
    engine(ctx, "P-01")
    assert refused(ctx, take, *FOUND_IN) == [
        "the number of cylinders of P-01 is not known; give it with fleetcare engine edit P-01 --cylinders N"
    ]


def test_hydraulic_adjusters_leave_nothing_to_measure_but_older_sheets_stay(yard: Context) -> None:
    take(yard, *FOUND_IN)
    edit(yard, date(2026, 5, 1), cylinders=2, adjuster="hydraulic")
    assert refused(yard, take, *ONE_OUT)[0].startswith("the hydraulic adjusters of P-01 leave no gap to measure; ")
    assert newest(yard) is not None


def test_a_day_to_come_is_refused(yard: Context) -> None:
    assert refused(yard, take, *FOUND_IN, on="2026-05-02")[0].startswith("2026-05-02 has not come yet")


def test_the_phase_of_a_fact_is_the_word_of_the_file(yard: Context) -> None:
    (value,) = take(yard, "lash,1I,LEFT,0.25,").report.sheet.values
    assert (value.phase, value.value) == (Phase.LEFT, Decimal("0.25"))


def test_every_sheet_and_value_stands_in_the_ledger(yard: Context) -> None:
    take(yard, *FOUND_IN)
    with yard.read() as connection:
        rows = fetch(
            connection, "select kind, count(*) from ledger where kind like 'sheet%' group by kind order by kind"
        )
    assert [tuple(row) for row in rows] == [("sheet", 1), ("sheet_value", 4)]


def test_a_sheet_dated_before_the_engine_came_is_kept_with_a_word_about_its_day(ctx: Context) -> None:
    yard = yard_with_valves(ctx, in_service="2024-01-10", start_at="0")
    doubt = "2020-05-01 is before P-01 came into service on 2024-01-10: check the day"
    first_day = take(yard, *FOUND_IN, on="2024-01-10")
    early = take(yard, *FOUND_IN, on="2020-05-01")
    assert (first_day.is_new, early.is_new) == (True, True)
    assert (doubt in early.notes, any("came into service" in note for note in first_day.notes)) == (True, False)
