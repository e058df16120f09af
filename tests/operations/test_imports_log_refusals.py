"""Work out of a file that is refused: by row and cell, with nothing of the file stored."""

import pytest

from fleetcare.context import Context
from tests.operations.importing import beginnings, correct, entries, log, reading, refusals, take_in, yard_with_a_log

SHORT = "engine,task,on,at"
FULL = "engine,task,on,at,by,note"


@pytest.fixture
def yard(ctx: Context) -> Context:
    """P-01 with its tasks, nothing logged yet."""
    return yard_with_a_log(ctx)


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


def test_a_task_that_needs_a_sheet_is_refused_and_leads_to_logging_it_with_its_sheet(yard: Context) -> None:
    lines = refusals(yard, "log", SHORT, "P-01,Lash,2026-04-20,1480", "P-01,Oill,2026-04-20,1480")
    wanted = [
        "row 2, column task: Lash closes only with its lash sheet; leave the row out, and log it with its sheet",
        "row 3, column task: P-01 has no task 'Oill'; did you mean Oil?",
    ]
    assert beginnings(lines, wanted) == wanted


def test_a_figure_that_breaks_with_the_past_names_the_stored_reading(yard: Context) -> None:
    assert refusals(yard, "log", SHORT, "P-01,Oil,2026-04-20,1501h", "P-01,Belts,2026-04-20,1501") == [
        f"row {number}, column at: 1501 h on 2026-04-20 does not fit reading 1 of P-01 (1500 h on 2026-05-01):"
        " lower by 1 h; check it; if it is right, first give fleetcare reading P-01 1501h --on 2026-04-20"
        " with --sure, --rolled-over or --replaced OLD_LAST NEW_FIRST"
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
