"""Work out of a file: applied in the order it was done, all or none, and nothing a second time."""

import shutil
from datetime import date
from decimal import Decimal
from itertools import permutations
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.operations.rows import fetch
from fleetcare.operations.upkeep import check
from tests.operations.importing import (
    correct,
    engine,
    entries,
    log,
    points,
    readings,
    take_in,
    task,
    yard_with_a_log,
)

SHORT = "engine,task,on,at"
FULL = "engine,task,on,at,by,note"


@pytest.fixture
def yard(ctx: Context) -> Context:
    """P-01 with its tasks, nothing logged yet."""
    return yard_with_a_log(ctx)


def test_a_row_is_an_entry_with_its_figure_as_a_reading(yard: Context) -> None:
    imported = take_in(yard, "log", FULL, "p-01, oil ,2026-04-20,1480h,Fenn,[/b]")
    assert (imported.stored, imported.known) == (["P-01  oil on 2026-04-20 at 1480 h"], 0)
    assert entries(yard) == [(1, "2026-04-20", "Oil", "Fenn", "[/b]")]
    assert ("P-01", "2026-04-20", "1480h") in readings(yard)
    assert points(yard)["P-01 Oil"] == (Decimal(1730), date(2027, 4, 20))
    assert check(yard).problems == ()


def test_a_shops_last_dones_set_every_line_and_each_move_is_told(yard: Context) -> None:
    imported = take_in(
        yard, "log", SHORT, "P-01,Oil,2026-04-20,1480", "P-01,Belts,2025-06-01,", "P-01,Oil,2025-06-01,900"
    )
    moved = {move.after.task: move.after.next_due_on for move in imported.moved if move.after is not None}
    assert moved == {"Oil": date(2027, 4, 20), "Belts": date(2027, 6, 1)}


def test_several_rows_of_one_engine_on_one_day_with_one_figure_are_several_entries(yard: Context) -> None:
    take_in(yard, "log", SHORT, "P-01,Oil,2026-04-20,1480h", "P-01,Belts,2026-04-20,1480")
    assert [row[2] for row in entries(yard)] == ["Oil", "Belts"]
    assert readings(yard).count(("P-01", "2026-04-20", "1480h")) == 2  # each entry keeps its own
    assert points(yard)["P-01 Oil"][0] == 1730


def test_a_cell_holds_a_figure_of_each_meter(ctx: Context) -> None:
    engine(ctx, "L-1", meter=["hours", "distance:km"])
    task(ctx, "L-1", "Oil", every=["250h", "10000km"])
    imported = take_in(ctx, "log", SHORT, "L-1,Oil,2026-04-20,100h; 5600km")
    assert imported.stored == ["L-1  Oil on 2026-04-20 at 100 h, 5600 km"]
    assert readings(ctx) == [("L-1", "2026-04-20", "100h"), ("L-1", "2026-04-20", "5600km")]


def test_work_without_a_figure_takes_it_from_the_readings_around_it_wherever_their_rows_stand(yard: Context) -> None:
    rows = ["P-01,Oil,2026-04-15,", "P-01,Belts,2026-04-10,1400h", "P-01,Belts,2026-04-20,1480h"]
    take_in(yard, "log", SHORT, *rows)
    assert points(yard)["P-01 Oil"][0] == 1440 + 250  # half way between 1400 and 1480; worked by hand


@pytest.mark.parametrize("order", list(permutations(range(4)))[::3])
def test_the_order_of_rows_changes_nothing(yard: Context, order: tuple[int, ...]) -> None:
    rows = [
        "P-01,Oil,2026-01-10,1000",
        "P-01,Big service,2026-02-10,1100h",
        "P-01,Oil,2026-03-10,1250",
        "P-01,Belts,2026-03-10,",
    ]
    take_in(yard, "log", SHORT, *(rows[place] for place in order))
    assert [row[:3] for row in entries(yard)] == [
        (1, "2026-01-10", "Oil"),
        (2, "2026-02-10", "Big service (Oil) (Belts)"),
        (3, "2026-03-10", "Belts"),
        (4, "2026-03-10", "Oil"),
    ]
    assert points(yard)["P-01 Oil"] == (Decimal(1500), date(2027, 3, 10))


def test_a_file_leaves_the_due_list_the_same_work_leaves_when_logged_by_hand(
    yard: Context, new_database: Path, tmp_path: Path
) -> None:
    by_hand = yard_with_a_log(Context(str(shutil.copy(new_database, tmp_path / "hand.db"))))
    for each in (yard, by_hand):
        task(each, "P-01", "Test run", once_each="month")
        task(each, "P-01", "Tappets", every=["300h"], first="50h", anchor="from-due", grace=["20h"])
    work = [
        ("Tappets", "2025-06-02", "600"),
        ("Oil", "2025-06-02", "600"),
        ("Test run", "2026-02-27", ""),
        ("Tappets", "2026-03-05", "980"),
        ("Big service", "2026-03-09", "1000"),
        ("Test run", "2026-04-02", ""),
    ]
    for name, on, at in work:
        log(by_hand, on, name, at=[at] if at else [])
    take_in(yard, "log", SHORT, *(f"P-01,{name},{on},{at}" for name, on, at in reversed(work)))
    assert points(yard) == points(by_hand)
    assert sorted(row[1:3] for row in entries(yard)) == sorted(row[1:3] for row in entries(by_hand))


# The big job and the small ones


def test_a_big_job_covers_the_small_ones_and_says_which_and_which_not(yard: Context) -> None:
    imported = take_in(yard, "log", SHORT, "P-01,Big service,2026-04-20,1480")
    assert entries(yard)[0][2] == "Big service (Oil) (Belts)"
    assert imported.notes == [
        "row 2: Lash stays open: it closes only with its lash sheet",
        "row 2: done along with Big service: Oil",
        "row 2: done along with Big service: Belts",
    ]


def test_a_small_job_with_a_row_of_its_own_that_day_is_not_done_twice(yard: Context) -> None:
    rows = ["P-01,Big service,2026-04-20,1480", "P-01,Oil,2026-04-20,1480"]
    take_in(yard, "log", SHORT, *rows)
    assert sorted(row[2] for row in entries(yard)) == ["Big service (Belts)", "Oil"]
    assert take_in(yard, "log", SHORT, *rows).known == 2


def test_a_small_job_already_covered_that_day_is_there(yard: Context) -> None:
    take_in(yard, "log", SHORT, "P-01,Big service,2026-04-20,1480")
    imported = take_in(yard, "log", SHORT, "P-01,Oil,2026-04-20,1480", "P-01,Belts,2026-04-20,")
    assert (imported.stored, imported.known) == ([], 2)


def test_rows_of_a_once_each_task_serve_one_period_after_the_other(yard: Context) -> None:
    task(yard, "P-01", "Test run", once_each="month")
    take_in(yard, "log", SHORT, "P-01,Test run,2026-04-05,", "P-01,Test run,2026-02-27,", "P-01,Test run,2026-03-31,")
    with yard.read() as connection:
        served = fetch(connection, "select served_period from log_task order by id")
    assert [row[0] for row in served] == ["2026-02", "2026-03", "2026-04"]
    assert points(yard)["P-01 Test run"][1] == date(2026, 5, 31)


def test_work_before_its_window_is_kept_but_said_not_to_count(yard: Context) -> None:
    task(yard, "P-01", "Inspection", every=["12mo"], window="10d")
    imported = take_in(yard, "log", SHORT, "P-01,Inspection,2025-12-01,", "P-01,Inspection,2025-03-01,")
    assert imported.notes == [
        "row 2: Inspection stays open: before its window opened on 2026-02-19, so this work does not count"
    ]
    assert points(yard)["P-01 Inspection"][1] == date(2026, 3, 11)


# A second time


def test_the_same_file_again_stores_nothing_new(yard: Context) -> None:
    rows = [f"P-01,Oil,2026-04-{day:02},{1400 + day},Fenn," for day in range(1, 13)]
    take_in(yard, "log", FULL, *rows)
    before = check(yard)
    again = take_in(yard, "log", FULL, *rows)
    assert (again.stored, again.known, again.moved, again.notes) == ([], 12, [], [])
    assert check(yard) == before


def test_work_logged_by_hand_is_there_already(yard: Context) -> None:
    log(yard, "2026-04-20", "Oil", at=["1480h"], by="Fenn")
    imported = take_in(yard, "log", FULL, "P-01,Oil,2026-04-20,1480.0,Quill,")
    assert (imported.stored, imported.known) == ([], 1)


def test_a_row_without_a_figure_says_no_more_than_an_entry_with_one(yard: Context) -> None:
    log(yard, "2026-04-20", "Oil", at=["1480h"])
    assert take_in(yard, "log", SHORT, "P-01,Oil,2026-04-20,").known == 1


def test_work_done_in_part_is_not_the_work(yard: Context) -> None:
    log(yard, "2026-04-20", "Oil", at=["1480h"], part_done=True)
    assert take_in(yard, "log", SHORT, "P-01,Oil,2026-04-20,1480").known == 0


def test_a_row_that_was_imported_and_corrected_or_voided_is_not_stored_again(yard: Context) -> None:
    rows = ["P-01,Oil,2026-04-10,1400", "P-01,Belts,2026-04-20,1480"]
    take_in(yard, "log", SHORT, *rows)
    correct(yard, 1, on="2026-04-11", at=["1410h"])
    correct(yard, 2, void=True, why="not done")
    before = check(yard)
    again = take_in(yard, "log", SHORT, *rows)
    assert (again.stored, again.known) == ([], 2)
    assert check(yard) == before


def test_the_same_row_twice_in_a_file_is_one(yard: Context) -> None:
    imported = take_in(yard, "log", FULL, "P-01,Oil,2026-04-20,1480,Fenn,", "p-01,OIL,2026-04-20,1480h,fenn,")
    assert (len(imported.stored), imported.known) == (1, 1)


def test_a_year_of_rounds_of_many_engines_comes_in_at_once(ctx: Context) -> None:
    rows = []
    for number in range(20):
        tag = f"E-{number:02}"
        engine(ctx, tag, meter=["hours"])
        task(ctx, tag, "Grease", every=["50h"])
        rows += [f"{tag},Grease,2025-{month:02}-11,{month * 40}" for month in range(1, 13)]
    imported = take_in(ctx, "log", SHORT, *reversed(rows))
    assert (len(imported.stored), len(imported.moved)) == (240, 20)
    assert take_in(ctx, "log", SHORT, *rows).known == 240
    assert set(points(ctx).values()) == {(Decimal(530), None)}
