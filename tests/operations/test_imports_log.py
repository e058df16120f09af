"""Work out of a file: applied in the order it was done, all or none, and nothing a second time."""

from datetime import date
from itertools import permutations

import pytest

from fleetcare.context import Context
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.work import CorrectionDraft, LogDraft
from fleetcare.operations.correct import correct_entry
from fleetcare.operations.log import record_work
from fleetcare.operations.rows import fetch
from fleetcare.operations.upkeep import check
from tests.operations.importing import (
    TODAY,
    beginnings,
    engine,
    points,
    reading,
    readings,
    refusals,
    take_in,
    task,
)

SHORT = "engine,task,on,at"
FULL = "engine,task,on,at,by,note"


@pytest.fixture
def yard(ctx: Context) -> Context:
    """P-01, read at 1500 h on 1 May 2026, with four tasks that nobody knows when were last done."""
    engine(ctx, "P-01", meter=["hours"])
    reading(ctx, "P-01", "2026-05-01", "1500")
    task(ctx, "P-01", "Oil", every=["250h", "12mo"])
    task(ctx, "P-01", "Lash", every=["1000h"], needs_sheet="lash")
    task(ctx, "P-01", "Belts", every=["24mo"])
    task(ctx, "P-01", "Big service", every=["1000h"], covers=["Oil", "Lash", "Belts"])
    return ctx


def entries(ctx: Context) -> list[tuple[int, str, str, str, str]]:
    """Every entry as number, day, tasks with covered ones in brackets, person and note."""
    with ctx.read() as connection:
        rows = fetch(
            connection,
            "select entry.id, entry.\"on\", coalesce(person.name, ''), note from log_entry entry"
            " left join person on person.id = entry.person_id order by entry.id",
        )
        tasks = fetch(
            connection,
            "select entry_id, name, covered_by_id from log_task join task on task.id = task_id order by log_task.id",
        )
    names: dict[int, list[str]] = {}
    for entry, name, covered in tasks:
        names.setdefault(entry, []).append(f"({name})" if covered else name)
    return [(number, on, " ".join(names.get(number, ())), by, note) for number, on, by, note in rows]


def log(ctx: Context, on: str, *names: str, **values: object) -> int:
    """Log work by hand and give the entry's number."""
    with ctx.write() as session:
        draft = read_draft(LogDraft, {"tag": "P-01", "task": list(names), "on": on, **values})
        return record_work(session, draft, TODAY).entries[0][0]


def correct(ctx: Context, entry: int, **values: object) -> None:
    """Correct an entry by hand."""
    with ctx.write() as session:
        correct_entry(session, read_draft(CorrectionDraft, {"entry": entry, **values}), TODAY)


def test_a_row_is_an_entry_with_its_figure_as_a_reading(yard: Context) -> None:
    imported = take_in(yard, "log", FULL, "p-01, oil ,2026-04-20,1480h,Fenn,[/b]")
    assert (imported.stored, imported.known) == (["P-01  oil on 2026-04-20 at 1480 h"], 0)
    assert entries(yard) == [(1, "2026-04-20", "Oil", "Fenn", "[/b]")]
    assert ("P-01", "2026-04-20", "1480h") in readings(yard)
    assert points(yard)["P-01 Oil"] == (1730, date(2027, 4, 20))
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
    assert points(yard)["P-01 Oil"] == (1500, date(2027, 3, 10))


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


# Refused by row


@pytest.mark.parametrize(
    ("row", "column"),
    [
        ("P-01,Oil,2026-04-20,1481,Fenn,", "at"),
        ("P-01,Oil,2026-04-20,,Fenn,", "at"),
        ("P-01,Oil,2026-04-20,1480,Quill,", "by"),
        ("P-01,Oil,2026-04-20,1480,Fenn,other", "note"),
    ],
)
def test_two_rows_that_disagree_about_the_same_work_are_refused(yard: Context, row: str, column: str) -> None:
    assert refusals(yard, "log", FULL, "P-01,Oil,2026-04-20,1480,Fenn,", row) == [
        f"row 3, column {column}: Oil of P-01 on 2026-04-20 is in row 2 too;"
        " keep one; what was done twice that day is logged with fleetcare log P-01"
    ]


@pytest.mark.parametrize("figures", [{}, {"at": ["1470h"]}])
def test_a_row_with_another_figure_than_the_entry_about_it_names_that_entry(
    yard: Context, figures: dict[str, object]
) -> None:
    reading(yard, "P-01", "2026-04-20", "1465")
    number = log(yard, "2026-04-20", "Oil", **figures)
    assert refusals(yard, "log", SHORT, "P-01,Oil,2026-04-20,1480") == [
        f"row 2, column at: Oil of P-01 on 2026-04-20 is entry {number} already, with other figures or none;"
        f" leave the row out, or first give fleetcare correct {number} --at 1480h"
    ]
    correct(yard, number, at=["1480h"])
    assert take_in(yard, "log", SHORT, "P-01,Oil,2026-04-20,1480").known == 1


def test_a_task_that_needs_a_sheet_is_refused_with_the_remedy_of_the_log_command(yard: Context) -> None:
    lines = refusals(yard, "log", SHORT, "P-01,Lash,2026-04-20,1480", "P-01,Oill,2026-04-20,1480")
    wanted = [
        "row 2, column task: Lash closes only with its lash sheet; give --part-done to keep a note",
        "row 3, column task: P-01 has no task 'Oill'; did you mean Oil?",
    ]
    assert beginnings(lines, wanted) == wanted


def test_a_figure_that_breaks_with_the_past_names_the_stored_reading(yard: Context) -> None:
    assert refusals(yard, "log", SHORT, "P-01,Oil,2026-04-20,1501h", "P-01,Belts,2026-04-20,1501") == [
        f"row {number}, column at: 1501 h on 2026-04-20 does not fit reading 1 of P-01 (1500 h on 2026-05-01):"
        " lower by 1 h; check it; if it is right, first give fleetcare reading P-01 1501h --on 2026-04-20 --sure"
        for number in (2, 3)
    ]


def test_figures_of_rows_that_cannot_both_be_true_are_refused(yard: Context) -> None:
    (line,) = refusals(yard, "log", SHORT, "P-01,Oil,2026-04-20,1400", "P-01,Belts,2026-04-10,1410")
    assert line.startswith(
        "row 3, column at: 1410 h on 2026-04-10 does not fit row 2 (1400 h on 2026-04-20): lower by 10"
    )


def test_work_no_reading_tells_a_figure_for_is_refused_by_row_and_needs_none_if_it_counts_none(yard: Context) -> None:
    lines = refusals(yard, "log", SHORT, "P-01,Belts,2020-01-01,", "P-01,Oil,2020-01-01,")
    wanted = ["row 3, column at: Oil counts hours, and "]
    assert beginnings(lines, wanted) == wanted
    assert lines[0].endswith("give the dial figure with column at")


def test_every_bad_cell_has_a_line_of_its_own(yard: Context) -> None:
    lines = refusals(
        yard,
        "log",
        FULL,
        "P-1,Oil,2027-01-01,x,,",
        "P-1,Oil,2027-01-01,1480,,",
        "P-01,Oill,2027-01-01,1480km,,",
        "P-01,,2026-02-30,,,",
        "P-01,Oil,2026-04-20,1480h;1481,,",
        "P-01,Oil,2026-04-21",
    )
    wanted = [
        "row 2, column at: 'x' is not a figure",
        "row 3, column engine: no engine or machine has the tag 'P-1'; did you mean P-01?",
        "row 3, column on: 2027-01-01 has not come yet, today counts as 2026-05-01",
        "row 4, column on: 2027-01-01 has not come yet",
        "row 4, column task: P-01 has no task 'Oill'",
        "row 4, column at: no meter counts distance of P-01 on that day",
        "row 5, column task: it is missing; give it",
        "row 5, column on: there is no day 2026-02-30",
        "row 6, column at: it names two figures of hours; give one of each meter",
        "row 7: it has 3 cells, the header 6",
    ]
    assert beginnings(lines, wanted) == wanted
    assert entries(yard) == []


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
    assert set(points(ctx).values()) == {(530, None)}
