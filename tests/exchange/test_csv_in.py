"""Reading CSV: what is no such file is refused as a whole, what is wrong with a row names the row."""

import os
import sys
from pathlib import Path

import pytest

from fleetcare.errors import Refused
from fleetcare.exchange.csv_in import MOST_BYTES, MOST_IN_A_CELL, CsvFile, read_file, read_rows
from fleetcare.exchange.csv_out import csv_text

NEEDED = ("engine", "on", "value")
MORE = ("unit", "note")


def rows(text: str | bytes) -> CsvFile:
    """Read a file of three columns that must be there and two that may."""
    return read_rows(text if isinstance(text, bytes) else text.encode(), NEEDED, MORE)


def refusal(text: str | bytes) -> list[str]:
    """The lines a file is refused with as a whole."""
    with pytest.raises(Refused) as error:
        rows(text)
    assert error.value.exit_code == 1
    return error.value.lines()


def faults(text: str) -> list[str]:
    """What is wrong with rows of a file."""
    return [line for fault in rows(text).faults for line in fault.lines()]


def test_a_row_has_its_cells_by_column_and_the_line_it_begins_on() -> None:
    found = rows("engine,on,value\nP-01,2026-05-01,1250\n\nP-02,2026-05-01,7\n")
    assert [(row.number, row.cells) for row in found.rows] == [
        (2, {"engine": "P-01", "on": "2026-05-01", "value": "1250"}),
        (4, {"engine": "P-02", "on": "2026-05-01", "value": "7"}),
    ]
    assert found.faults == ()


def test_columns_stand_in_any_order_and_case_and_cells_are_trimmed() -> None:
    (row,) = rows(" Value ,ON,Engine\n 12 , 2026-05-01,P-01 \n").rows
    assert row.cells == {"value": "12", "on": "2026-05-01", "engine": "P-01"}


@pytest.mark.parametrize("ending", ["\n", "\r\n", "\r"])
def test_line_endings_of_every_system_are_read(ending: str) -> None:
    found = rows(ending.join(["engine,on,value", "P-01,2026-05-01,1", "P-02,2026-05-01,2"]))
    assert [row.number for row in found.rows] == [2, 3]


def test_a_byte_order_mark_is_no_part_of_the_first_column() -> None:
    assert rows("engine,on,value\nÄ-01,2026-05-01,1\n".encode("utf-8-sig")).rows[0].cells["engine"] == "Ä-01"


def test_quoted_cells_hold_commas_quotes_and_line_breaks_and_rows_keep_their_line() -> None:
    found = rows('engine,on,value,note\nP-01,2026-05-01,1,"a, ""b""\nc"\nP-02,2026-05-01,2,\n')
    assert found.rows[0].cells["note"] == 'a, "b"\nc'
    assert [row.number for row in found.rows] == [2, 4]


def test_rows_of_nothing_but_commas_are_passed_over() -> None:
    assert [row.number for row in rows("engine,on,value\n,,\n  ,,\nP-01,2026-05-01,1\n,,\n").rows] == [4]


def test_a_header_alone_is_a_file_without_rows() -> None:
    assert rows("engine,on,value") == CsvFile((), ())


@pytest.mark.parametrize("name", ["=2+5", "+P", "-P", "@SUM(1)", "'quoted", "[/b]"])
def test_a_name_our_own_csv_guards_comes_back_as_it_was(name: str) -> None:
    text = csv_text(["engine", "on", "value"], [[name, "2026-05-01", "1"]])
    assert rows(text).rows[0].cells["engine"] == name


@pytest.mark.parametrize("text", ["", "\n\n", " , ,\n", "\ufeff"])
def test_an_empty_file_is_told_what_to_begin_with(text: str) -> None:
    assert refusal(text) == ["the file is empty; begin it with the line engine,on,value,unit,note"]


@pytest.mark.parametrize(
    ("data", "wrong"),
    [
        (
            "engine,on,value\nP\xf6,2026-05-01,1\n".encode("latin-1"),
            "the file is not UTF-8 text: line 2 holds the byte f6",
        ),
        ("engine,on,value\n".encode("utf-16"), "the file is not UTF-8 text: line 1 holds the byte ff"),
        ("engine,on,value\n".encode("utf-16-le"), "the file is not plain text: line 1 holds a NUL character"),
        (b"\x89PNG\r\n\x1a\n", "the file is not UTF-8 text: line 1 holds the byte 89"),
    ],
)
def test_what_is_no_utf_8_text_is_one_line(data: bytes, wrong: str) -> None:
    assert refusal(data) == [f"{wrong}; save it as CSV UTF-8 (comma separated)"]


@pytest.mark.parametrize(("separator", "name"), [(";", "semicolons"), ("\t", "tabs"), ("|", "bars")])
def test_other_separators_are_named(separator: str, name: str) -> None:
    text = "engine,on,value\nP-01,2026-05-01,1\n".replace(",", separator)
    assert refusal(text) == [
        f"row 1: the columns are separated by {name}; save the file with commas between the columns"
    ]


def test_every_column_that_is_wrong_has_a_line_with_the_nearest_known_one() -> None:
    assert refusal("engin,on,on,,colour\n") == [
        "row 1, column engin: it is not known here; did you mean engine?",
        "row 1, column 4: it has no name; name it, or remove it from every row; known are engine, on, value, unit, note",
        "row 1, column colour: it is not known here; remove it; known are engine, on, value, unit, note",
        "row 1, column on: it stands 2 times; keep one of them",
        "row 1, column engine: it is missing; add it to the header and to every row",
        "row 1, column value: it is missing; add it to the header and to every row",
    ]


def test_a_single_unknown_column_is_not_taken_for_another_separator() -> None:
    assert refusal("colour\n")[0].startswith("row 1, column colour: it is not known here")


def test_a_row_with_too_many_or_too_few_cells_is_named_and_the_others_are_read() -> None:
    text = "engine,on,value\nP-01,2026-05-01,1,250\nP-01\nP-02,2026-05-01,2\n"
    remedy = 'add or remove commas; a cell that holds a comma stands in "double quotes"'
    assert faults(text) == [
        f"row 2: it has 4 cells, the header 3; {remedy}",
        f"row 3: it has 1 cell, the header 3; {remedy}",
    ]
    assert [row.number for row in rows(text).rows] == [4]


def test_every_cell_with_a_control_character_has_a_line() -> None:
    text = "engine,on,value\n\x1b[2JP-01,2026-05-01,\x07\nP\x85-02,\u202e1,1\n"
    assert faults(text) == [
        r"row 2, column engine: it holds the control character '\x1b'; remove it",
        r"row 2, column value: it holds the control character '\x07'; remove it",
        r"row 3, column engine: it holds the control character '\x85'; remove it",
        r"row 3, column on: it holds the control character '\u202e'; remove it",
    ]
    assert rows(text).rows == ()


def test_a_cell_too_long_for_a_note_is_named() -> None:
    text = f"engine,on,value,note\nP-01,2026-05-01,1,{'x' * MOST_IN_A_CELL}\n"
    assert faults(text) == []
    (fault,) = faults(text.replace("xx", "xxx", 1))
    assert fault.startswith(f"row 2, column note: the cell is longer than {MOST_IN_A_CELL} characters; shorten it")


def test_a_quote_that_is_never_closed_is_one_line_where_it_begins() -> None:
    head = "engine,on,value\nP-01,2026-05-01,1\n"
    assert refusal(head + 'P-02,2026-05-01,"2\n' + "P-03,2026-05-01,3\n" * 3) == [
        "row 3: it is not well-formed: a quote is not closed, or stands in the middle of a cell;"
        ' put the whole cell in "double quotes" and double each quote inside it'
    ]
    (line,) = refusal(head + 'P-02,2026-05-01,"2\n' + "P-03,2026-05-01,3\n" * 20_000)
    assert line.startswith("row 3: the cell is longer than")


# The file itself


def test_a_file_is_read_whole(tmp_path: Path) -> None:
    path = tmp_path / "a.csv"
    path.write_bytes(b"a,b\r\n")
    assert read_file(path) == b"a,b\r\n"


@pytest.mark.parametrize(
    ("name", "wrong"),
    [
        ("", "{path} is a folder; name a CSV file in it"),
        ("none.csv", "cannot read {path}: No such file or directory; name a CSV file that can be read"),
        ("file.csv/below.csv", "cannot read {path}: Not a directory; name a CSV file that can be read"),
        ("x" * 300, "cannot read {path}: File name too long; name a CSV file that can be read"),
    ],
)
def test_what_is_no_file_to_read_is_one_line(tmp_path: Path, name: str, wrong: str) -> None:
    (tmp_path / "file.csv").write_text("a")
    path = tmp_path / name
    with pytest.raises(Refused) as error:
        read_file(path)
    assert error.value.lines() == [wrong.format(path=path)]


@pytest.mark.skipif(sys.platform == "win32", reason="Windows has no named pipes in folders")
def test_a_pipe_is_not_waited_for(tmp_path: Path) -> None:
    path = tmp_path / "pipe"
    os.mkfifo(path)
    with pytest.raises(Refused, match="is no plain file"):
        read_file(path)


def test_a_file_too_large_for_a_shop_is_not_read(tmp_path: Path) -> None:
    path = tmp_path / "large.csv"
    with path.open("wb") as file:
        file.truncate(MOST_BYTES + 1)
    with pytest.raises(Refused, match="is larger than 32 MB; split it into smaller files"):
        read_file(path)
