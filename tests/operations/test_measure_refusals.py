"""Sheets that are refused: every bad cell is named with its row and column, slips are asked about, nothing is stored."""

import pytest

from fleetcare.context import Context
from fleetcare.errors import Misread, Refusals, Refused
from fleetcare.exchange.sheet_in import sheet_of
from tests.operations.sheet_yard import FOUND_IN, HEADER, refused, stored_values, take, yard_with_valves


@pytest.fixture
def yard(ctx: Context) -> Context:
    """P-01 of two cylinders, nothing measured yet."""
    return yard_with_valves(ctx, adjuster="screw")


GAP = "write it like 0.25, the digits on the blade, or a range like 0.25..0.30"
POINTS = "its points are 1I, 1E to 2I, 2E; name one of them, or mend its valves with fleetcare engine edit"


@pytest.mark.parametrize(
    ("row", "lines"),
    [
        ("lash,3E,found,0.45,", [f"row 2, column point: P-01 has no lash point '3E'; {POINTS}"]),
        ("lash,1,found,0.45,", [f"row 2, column point: P-01 has no lash point '1'; {POINTS}"]),
        ("lash,1E1,found,0.45,", [f"row 2, column point: P-01 has no lash point '1E1'; {POINTS}"]),
        ("lash,1E,found,wide,", [f"row 2, column value: 'wide' is not a gap; {GAP}"]),
        ("lash,1E,found,ND,", [f"row 2, column value: 'ND' is not a gap; {GAP}"]),
        ("lash,1E,found,-0.45,", [f"row 2, column value: '-0.45' is not a gap; {GAP}"]),
        ("lash,1E,found,0.45 mm,", [f"row 2, column value: '0.45 mm' is not a gap; {GAP}"]),
        ("lash,1E,found,<0,", ["row 2, column value: '<0' is not a gap; write < and the thinnest blade, which does not go"]),
        ("lash,1E,found,<0.2..0.3,", ["row 2, column value: '<0.2..0.3' is not a gap; write < and the thinnest blade, which does not go"]),
        ("lash,1E,found,0.50..0.45,", ["row 2, column value: range 0.50..0.45 runs backwards; put the blade that goes first, then a thicker one"]),
        ("lash,1E,found,,", ["row 2, column value: it is missing; give it"]),
        ("lash,,found,0.45,", ["row 2, column point: it is missing; give it"]),
        (",1E,found,0.45,", ["row 2, column quantity: it is missing; give it"]),
        ("lash,1E,before,0.45,", ["row 2, column phase: a lash is found or left, not 'before'; write found or left; empty means found"]),
        ("lash,1E,dry,0.45,", ["row 2, column phase: a lash is found or left, not 'dry'; write found or left; empty means found"]),
        ("pressure,1,dry,27,bar", [
            "row 2, column quantity: 'pressure' does not belong on a lash sheet; use lash, or shim for the shim fitted",
            "row 2, column phase: a lash is found or left, not 'dry'; write found or left; empty means found",
            "row 2, column unit: 'bar' is no unit of lash; write mm or in; empty takes the unit of the engine's limits",
        ]),
        ("lash,9X,found,wide,cm", ["row 2, column unit: 'cm' is no unit of lash; write mm or in; empty takes the unit of the engine's limits"]),
        ("lash,9X,found,wide,", [
            f"row 2, column point: P-01 has no lash point '9X'; {POINTS}",
            f"row 2, column value: 'wide' is not a gap; {GAP}",
        ]),
        ("shim,1E,found,2.75,", ["row 2, column point: the valves of P-01 are set by screws, not by shims; leave this row out"]),
        ("lash,1E,found", ["row 2: it has 3 cells, the header 5; add or remove commas; a cell that holds a comma stands in \"double quotes\""]),
        ("lash,1E,found,0,45,", ["row 2: it has 6 cells, the header 5; add or remove commas; a cell that holds a comma stands in \"double quotes\""]),
    ],
)  # fmt: skip
def test_a_bad_cell_is_one_line_with_its_row_and_column(yard: Context, row: str, lines: list[str]) -> None:
    assert refused(yard, take, row, *FOUND_IN[:1]) == lines


@pytest.mark.parametrize(
    ("row", "text"),
    [
        ("lash,1I,found,3.0,", "3.0 mm at 1I: it is 3 times the 0.3 mm where its check range ends, or more; 0.3 mm is likely meant"),
        ("lash,1I,found,0.95,", "0.95 mm at 1I: it is 3 times the 0.3 mm where its check range ends, or more"),
        ("lash,1E,found,4.5,mm", "4.5 mm at 1E: it is 3 times the 0.5 mm where its check range ends, or more; 0.45 mm is likely meant"),
        ("lash,1E,left,4,", "0.04 mm at 1E: nobody leaves a valve 3 times as tight as the 0.4 mm where its check range begins; 0.4 mm is likely meant"),
        ("lash,1I,found,0.010,", "0.010 mm at 1I: no blade is thinner than 0.02 mm; 0.01 in or 0.1 mm is likely meant"),
        ("lash,1I,found,0.10,in", "0.10 in at 1I: it is 3 times the 0.3 mm where its check range ends, or more; 0.01 in or 0.1 mm is likely meant"),
    ],
)  # fmt: skip
def test_a_likely_slip_is_asked_about_and_taken_from_who_is_sure(yard: Context, row: str, text: str) -> None:
    assert refused(yard, take, row) == [f"row 2, column value: {text}; correct it, or give --sure if it is right"]
    take(yard, row, sure=True)
    assert len(stored_values(yard)) == 1


@pytest.mark.parametrize(
    ("row", "meant"),
    [("lash,1I,found,0.25,in", "; 0.25 mm is likely meant"), ("lash,1I,found,25.0,mm", "")],
)
def test_a_gap_no_engine_has_is_refused_even_from_who_is_sure(yard: Context, row: str, meant: str) -> None:
    (line,) = refused(yard, take, row, sure=True)
    assert line.endswith(f"at 1I: no valve lash is wider than 5 mm{meant}; correct it, or its unit")


def test_everything_wrong_is_said_at_once_in_the_order_of_the_rows(yard: Context) -> None:
    rows = ("lash,1I,found,3.0,", "lash,1E,found", "lash,8E,left,wide,", "lash,1i,,0.25,", "lash,2E,found,0.45,")
    assert [line.partition(":")[0] for line in refused(yard, take, *rows)] == [
        "row 2, column value",
        "row 3",
        "row 4, column point",
        "row 4, column value",
        "row 5, column point",
    ]


def test_a_point_twice_in_one_phase_is_refused_with_the_row_it_stands_in(yard: Context) -> None:
    rows = ("lash,1E,,0.45,", "lash,1e,FOUND,0.46,", "lash,1E,left,0.46,")
    assert refused(yard, take, *rows) == [
        "row 3, column point: lash found at 1E stands in row 2 already; keep one of them"
    ]


@pytest.mark.parametrize(
    ("row", "line"),
    [
        ("shim,1E,found,2.75,in", "row 2, column unit: shims are measured in mm; write mm, or leave the unit empty"),
        ("shim,1E,found,275,", "row 2, column value: shim 275 mm cannot be right; give a figure above 0 and up to 50 mm"),
        ("shim,1E,found,thick,", "row 2, column value: 'thick' is not a number; write digits, with a point for decimals"),
    ],
)  # fmt: skip
def test_a_shim_is_a_thickness_in_millimetres(ctx: Context, row: str, line: str) -> None:
    yard_with_valves(ctx, adjuster="shim")
    assert refused(ctx, take, row) == [line]


@pytest.mark.parametrize(
    ("text", "wrong"),
    [
        ("", "the file is empty"),
        (f"{HEADER}\n", "the sheet has no values; give one a row: quantity, point, phase, value, unit"),
        ("quantity,point,phase\nlash,1E,found\n", "row 1, column value: it is missing"),
        ("quantity;point;phase;value;unit\n", "row 1: the columns are separated by semicolons"),
        (f"{HEADER},colour\n", "row 1, column colour: it is not known here"),
    ],
)
def test_what_is_no_sheet_file_is_refused_as_a_whole(text: str, wrong: str) -> None:
    with pytest.raises(Refused) as error:
        sheet_of(text.encode())
    assert str(error.value).startswith(wrong)


def test_phase_and_unit_may_be_left_out_of_the_header(yard: Context) -> None:
    file = sheet_of(b"value,point,quantity\n0.25,1I,lash\n")
    assert [row.cells for row in file.rows] == [{"value": "0.25", "point": "1I", "quantity": "lash"}]


def test_a_refused_sheet_is_a_refusal_whatever_is_wrong_with_its_cells(yard: Context) -> None:
    with pytest.raises(Refusals) as error:
        take(yard, "lash,1E,found,wide,", "lash,1I,found,thick,cm")
    assert error.value.exit_code == 1
    assert not any(isinstance(one, Misread) for one in error.value.errors)
