"""Work that closes only with its lash sheet: which sheet closes it, what a bigger job does, and what corrections keep."""

import pytest

from fleetcare.context import Context
from fleetcare.operations.rows import fetch
from fleetcare.operations.upkeep import check
from tests.operations.importing import correct, entries, log, machine, task
from tests.operations.sheet_yard import (
    FOUND_IN,
    ONE_OUT,
    do,
    newest,
    open_points,
    refused,
    sheet,
    stored_values,
    take,
    verdicts,
    yard_with_valves,
)

HALF = FOUND_IN[:3]


@pytest.fixture
def yard(ctx: Context) -> Context:
    """P-01 of two cylinders at 1500 h, nothing logged yet."""
    return yard_with_valves(ctx)


def test_its_sheet_closes_the_work_and_stands_with_its_entry(yard: Context) -> None:
    logged = do(yard, "Lash", when="cold", gauge="F2")
    assert (logged.closed, logged.notes) == (["Lash"], [])
    assert open_points(yard)["Lash"] == "2500"
    judged = newest(yard)
    assert judged is not None
    assert (judged.sheet.entry, judged.sheet.gauge) == (1, "F2")
    assert judged.sheet == logged.sheet if logged.sheet else False
    assert check(yard).problems == ()


@pytest.mark.parametrize(
    ("rows", "why"),
    [
        (HALF, "2E not measured"),
        (FOUND_IN[:1], "1E 2I 2E not measured"),
        (ONE_OUT, "2E found out and not set"),
        ((*HALF, "lash,2E,found,0.35..0.45,"), "2E not told by the blades"),
        (("lash,1I,found,0.19,", *FOUND_IN[1:3]), "2E not measured, 1I found out and not set"),
    ],
)
def test_an_unfinished_sheet_closes_nothing_unless_somebody_is_sure(
    yard: Context, rows: tuple[str, ...], why: str
) -> None:
    assert refused(yard, do, "Lash", rows=rows) == [
        f"Lash does not close with this lash sheet: {why}; add what is wanting, or give --sure to close it as it"
        " stands, or --part-done to keep it open"
    ]
    assert do(yard, "Lash", rows=rows, sure=True).closed == ["Lash"]


@pytest.mark.parametrize(
    "row", ["lash,2E,left,0.45,", "lash,2E,left,0.38,", "lash,2E,left,0.35..0.45,"], ids=["in", "out", "straddling"]
)
def test_a_point_that_was_set_needs_no_found_value_and_closes_however_it_was_left(yard: Context, row: str) -> None:
    assert do(yard, "Lash", rows=(*HALF, row)).closed == ["Lash"]


def test_a_sheet_taken_hot_closes_though_the_limits_are_cold(yard: Context) -> None:
    assert do(yard, "Lash", rows=ONE_OUT, when="hot").closed == ["Lash"]


def test_work_done_in_part_keeps_its_unfinished_sheet_and_stays_open(yard: Context) -> None:
    before = open_points(yard)
    logged = do(yard, "Lash", rows=HALF, part_done=True)
    assert (logged.part_done, logged.closed) == (["Lash"], [])
    assert open_points(yard) == before
    assert len(stored_values(yard)) == 3


def test_without_its_sheet_a_bigger_job_leaves_it_open(yard: Context) -> None:
    log(yard, "2026-05-01", "Big service")
    assert open_points(yard) == {"Oil": "1750", "Lash": "None", "Big service": "3500"}


def test_with_its_sheet_along_a_bigger_job_closes_it_too(yard: Context) -> None:
    logged = do(yard, "Big service")
    assert logged.covered == [("Oil", "Big service"), ("Lash", "Big service")]
    assert open_points(yard) == {"Oil": "1750", "Lash": "2500", "Big service": "3500"}


def test_both_named_with_the_sheet_closes_both(yard: Context) -> None:
    logged = do(yard, "Big service", "Lash")
    assert (logged.closed, logged.covered) == (["Big service", "Lash"], [("Oil", "Big service")])
    assert open_points(yard)["Lash"] == "2500"


def test_an_unfinished_sheet_along_with_a_bigger_job_leaves_the_small_one_open_and_says_why(yard: Context) -> None:
    logged = do(yard, "Big service", rows=HALF)
    assert logged.notes == ["Lash stays open: it does not close with this lash sheet: 2E not measured"]
    assert open_points(yard)["Lash"] == "None"


def test_a_sheet_closes_no_work_that_needs_another_kind(yard: Context) -> None:
    task(yard, "P-01", "Compression", every=["1000h"], needs_sheet="compression")
    (line,) = refused(yard, do, "Compression")
    assert line.startswith("Compression closes only with its compression sheet; ")
    assert "--sheet FILE" in line


def test_a_sheet_with_other_work_says_how_the_lash_task_is_closed_with_it(yard: Context) -> None:
    logged = do(yard, "Oil")
    assert logged.notes == [
        "Lash stays open; to close it with this sheet give fleetcare correct 1 --task Oil --task Lash"
    ]
    correct(yard, 1, task=["Oil", "Lash"])
    assert open_points(yard) == {"Oil": "1750", "Lash": "2500", "Big service": "None"}


def test_a_sheet_comes_with_a_repair_too(yard: Context) -> None:
    assert do(yard, repair="New rocker, exhaust 2").entries == [(1, "repair")]
    assert newest(yard) is not None


def test_a_sheet_that_is_stored_already_is_named(yard: Context) -> None:
    take(yard, *FOUND_IN)
    assert refused(yard, do, "Lash", rows=FOUND_IN[::-1]) == [
        "entry 1 of P-01 has this very sheet already; to close a task with it give fleetcare correct 1 --task NAME"
    ]


def test_a_sheet_taken_by_itself_closes_the_work_by_a_correction(yard: Context) -> None:
    take(yard, *FOUND_IN, at=["1490h"])
    correct(yard, 1, task=["Lash"])
    assert open_points(yard)["Lash"] == "2490"
    judged = newest(yard)
    assert judged is not None
    assert (judged.sheet.entry, len(judged.sheet.values)) == (2, 4)
    with yard.read() as connection:
        kinds = [row[0] for row in fetch(connection, "select kind from log_entry order by id")]
    assert kinds == ["other", "scheduled"]
    assert check(yard).problems == ()


def test_a_sheet_that_is_unfinished_closes_by_a_correction_only_from_who_is_sure(yard: Context) -> None:
    take(yard, *HALF)
    (line,) = refused(yard, lambda ctx: correct(ctx, 1, task=["Lash"]))
    assert line.startswith("Lash does not close with this lash sheet: 2E not measured; ")
    correct(yard, 1, task=["Lash"], sure=True)
    assert open_points(yard)["Lash"] == "2500"


def test_a_correction_of_anything_else_keeps_the_sheet_and_what_it_closed(yard: Context) -> None:
    do(yard, "Lash", rows=ONE_OUT, sure=True, when="cold", gauge="F2", on="2026-04-30", at=["1490h"])
    correct(yard, 1, on="2026-05-01", note="read again")
    judged = newest(yard)
    assert judged is not None
    assert (judged.sheet.entry, judged.sheet.condition, judged.sheet.gauge) == (2, "cold", "F2")
    assert judged.sheet.on.isoformat() == "2026-05-01"
    assert open_points(yard)["Lash"] == "2490"


def test_how_a_sheet_was_taken_can_be_restated_alone(yard: Context) -> None:
    take(yard, *ONE_OUT, when="hot", gauge="F1")
    correct(yard, 1, when="cold")
    judged = newest(yard)
    assert judged is not None
    assert (judged.sheet.condition, judged.sheet.gauge, verdicts(judged)[3]) == ("cold", "F1", "2E alert")


def test_a_sheet_can_be_restated_and_both_stay_readable(yard: Context) -> None:
    do(yard, "Lash")
    correct(yard, 1, sheet=sheet(*HALF, "lash,2E,found,0.46,"))
    judged = newest(yard)
    assert judged is not None
    assert str(judged.sheet.values[3]) == "0.46"
    assert len(stored_values(yard)) == 8
    assert open_points(yard)["Lash"] == "2500"
    assert not take(yard, *FOUND_IN).is_new  # that file was brought in, and corrected since


def test_gaps_restated_are_those_of_the_same_gauge_and_of_an_engine_as_cold(yard: Context) -> None:
    take(yard, *ONE_OUT, when="cold", gauge="F1")
    correct(yard, 1, sheet=sheet(*FOUND_IN))
    judged = newest(yard)
    assert judged is not None
    assert (judged.sheet.condition, judged.sheet.gauge) == ("cold", "F1")
    correct(yard, 2, sheet=sheet(*FOUND_IN[:3]), when="hot", gauge="F2")
    judged = newest(yard)
    assert judged is not None
    assert (judged.sheet.condition, judged.sheet.gauge) == ("hot", "F2")


def test_a_restated_sheet_must_close_the_work_again(yard: Context) -> None:
    do(yard, "Lash")
    (line,) = refused(yard, lambda ctx: correct(ctx, 1, sheet=sheet(*HALF)))
    assert line.startswith("Lash does not close with this lash sheet: 2E not measured; ")


def test_work_kept_in_part_closes_by_a_correction_with_its_finished_sheet(yard: Context) -> None:
    do(yard, "Lash", rows=HALF, part_done=True)
    (line,) = refused(yard, lambda ctx: correct(ctx, 1, part_done=False))
    assert "2E not measured" in line
    correct(yard, 1, part_done=False, sheet=sheet(*FOUND_IN))
    assert open_points(yard)["Lash"] == "2500"


def test_what_a_sheet_was_taken_with_cannot_be_restated_where_there_is_none(yard: Context) -> None:
    log(yard, "2026-05-01", "Oil")
    (line,) = refused(yard, lambda ctx: correct(ctx, 1, gauge="F2"))
    assert line == "entry 1 has no sheet; give one with --sheet FILE"


def test_a_voided_entry_takes_its_sheet_along_and_reopens_the_work(yard: Context) -> None:
    before = open_points(yard)
    do(yard, "Lash")
    correct(yard, 1, void=True, why="another engine")
    assert (newest(yard), open_points(yard)) == (None, before)
    assert len(stored_values(yard)) == 4
    assert [row[2] for row in entries(yard)] == ["Lash", ""]


@pytest.mark.parametrize("name", ["gauge", "when", "sure"])
def test_what_a_sheet_is_taken_with_needs_a_sheet(yard: Context, name: str) -> None:
    value = {"gauge": "F2", "when": "cold", "sure": True}[name]
    (line,) = refused(yard, lambda ctx: log(ctx, "2026-05-01", "Oil", **{name: value}))
    assert line == f"--{name} says how a sheet was taken; give the sheet with --sheet FILE as well"


def test_a_machine_takes_no_lash_sheet(yard: Context) -> None:
    machine(yard, "LR-1")
    (line,) = refused(yard, lambda ctx: do(ctx, tag="LR-1", note="x"))
    assert line == "LR-1 is a machine and has no valves; name one of its engines"
