"""Plain CSV from spreadsheets and other programs: bytes become rows by column, or refusals that name row and column."""

import csv
import io
import re
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from pathlib import Path

from fleetcare.domain.printable import UNPRINTABLE
from fleetcare.errors import Refusals, Refused

MOST_BYTES = 32 * 1024 * 1024
MOST_IN_A_CELL = 2000
"""Characters; what is longer is a quote that was never closed, or no shop's note."""

# What our own CSV guards against spreadsheets, by an apostrophe in front.
_GUARDED = re.compile("'[=+\\-@\t\r\uff1d\uff0b\uff0d\uff20]")
_SEPARATORS = {";": "semicolons", "\t": "tabs", "|": "bars"}
_MOST_NAMED = 60
_SAVE = "save it as CSV UTF-8 (comma separated)"


@dataclass(frozen=True, slots=True)
class CsvRow:
    """One row: its number, which is the line of the file it begins on, from 1; and its trimmed cells by column."""

    number: int
    cells: dict[str, str]


class RowRefused(Refused):
    """Something is wrong with a row of a file, or with one cell of it."""

    def __init__(self, number: int, column: str, detail: str, remedy: str) -> None:
        super().__init__(f"row {number}, column {column}: {detail}" if column else f"row {number}: {detail}", remedy)
        self.number = number


@dataclass(frozen=True, slots=True)
class CsvFile:
    """The rows of a file that fit its header, and what is wrong with the others."""

    rows: tuple[CsvRow, ...]
    faults: tuple[RowRefused, ...]


def read_file(path: Path) -> bytes:
    """Give what a file holds. Refuses a folder, a device, what is too large, and what cannot be read."""
    try:
        if path.is_dir():
            raise Refused(f"{path} is a folder", "name a CSV file in it")
        if path.exists() and not path.is_file():
            raise Refused(f"{path} is no plain file", "name a CSV file")
        with path.open("rb") as file:
            data = file.read(MOST_BYTES + 1)
    except OSError as error:
        raise Refused(f"cannot read {path}: {error.strerror}", "name a CSV file that can be read") from None
    if len(data) > MOST_BYTES:
        raise Refused(f"{path} is larger than {MOST_BYTES // 1024 // 1024} MB", "split it into smaller files")
    return data


def read_rows(data: bytes, required: Sequence[str], optional: Sequence[str] = ()) -> CsvFile:
    """Read CSV (RFC 4180, UTF-8 with or without a byte order mark) whose first line names the columns.

    Empty lines are passed over. Raises Refused for what is no such text, Refusals for columns that are
    missing, unknown or double; a row that does not fit the header, or holds what no cell can, is a fault.
    """
    lines = _lines(_text(data), required, optional)
    number, head = next(lines)
    columns = [name.strip().lower() for name in head]
    _check_columns(number, columns, required, optional)
    rows: list[CsvRow] = []
    faults: list[RowRefused] = []
    for number, cells in lines:
        if len(cells) != len(columns):
            detail = f"it has {_count(len(cells), 'cell')}, the header {len(columns)}"
            remedy = 'add or remove commas; a cell that holds a comma stands in "double quotes"'
            faults.append(RowRefused(number, "", detail, remedy))
            continue
        row = CsvRow(number, {name: _plain(cell) for name, cell in zip(columns, cells, strict=True)})
        wrong = list(_faults(row))
        faults.extend(wrong)
        if not wrong:
            rows.append(row)
    return CsvFile(tuple(rows), tuple(faults))


def _text(data: bytes) -> str:
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = data.count(b"\n", 0, error.start) + 1
        raise Refused(
            f"the file is not UTF-8 text: line {line} holds the byte {data[error.start]:02x}", _SAVE
        ) from None
    nul = text.find("\0")
    if nul >= 0:
        line = text.count("\n", 0, nul) + 1
        raise Refused(f"the file is not plain text: line {line} holds a NUL character", _SAVE)
    return text


def _lines(text: str, required: Sequence[str], optional: Sequence[str]) -> Iterator[tuple[int, list[str]]]:
    """Give what is not empty, with the line it begins on; the header first, even where there is nothing."""
    reader = csv.reader(io.StringIO(text, newline=""), strict=True)
    begins, is_first = 1, True
    while True:
        try:
            cells = next(reader, None)
        except csv.Error as error:
            raise _malformed(begins, error) from None
        if cells is None:
            break
        if any(cell.strip() for cell in cells):
            yield begins, cells
            is_first = False
        begins = reader.line_num + 1
    if is_first:
        raise Refused("the file is empty", f"begin it with the line {','.join((*required, *optional[:5]))}")


def _malformed(line: int, error: csv.Error) -> Refused:
    if "field larger" in str(error):
        return _too_long(line, "")
    detail = "it is not well-formed: a quote is not closed, or stands in the middle of a cell"
    return RowRefused(line, "", detail, 'put the whole cell in "double quotes" and double each quote inside it')


def _check_columns(number: int, columns: Sequence[str], required: Sequence[str], optional: Sequence[str]) -> None:
    known = (*required, *optional)
    if len(columns) == 1 and columns[0] not in known:
        for separator, name in _SEPARATORS.items():
            if separator in columns[0]:
                detail = f"the columns are separated by {name}"
                raise RowRefused(number, "", detail, "save the file with commas between the columns")
    faults = [
        *(_unknown(number, name, place, known) for place, name in enumerate(columns, 1) if name not in known),
        *(
            RowRefused(number, name, f"it stands {columns.count(name)} times", "keep one of them")
            for name in dict.fromkeys(columns)
            if name in known and columns.count(name) > 1
        ),
        *(
            RowRefused(number, name, "it is missing", "add it to the header and to every row")
            for name in required
            if name not in columns
        ),
    ]
    if faults:
        raise Refusals(faults)


def _unknown(number: int, name: str, place: int, known: Sequence[str]) -> RowRefused:
    listed = f"known are {', '.join(known)}"
    if not name:
        return RowRefused(number, str(place), "it has no name", f"name it, or remove it from every row; {listed}")
    near = get_close_matches(name, known, n=1)
    remedy = f"did you mean {near[0]}?" if near else f"remove it; {listed}"
    return RowRefused(number, name[:_MOST_NAMED], "it is not known here", remedy)


def _faults(row: CsvRow) -> Iterable[RowRefused]:
    for name, cell in row.cells.items():
        if len(cell) > MOST_IN_A_CELL:
            yield _too_long(row.number, name)
            continue
        strange = next((found[0] for found in UNPRINTABLE.finditer(cell) if found[0] not in "\t\r\n"), None)
        if strange is not None:
            yield RowRefused(row.number, name, f"it holds the control character {strange!r}", "remove it")


def _too_long(number: int, column: str) -> RowRefused:
    remedy = "shorten it, or close the quote it begins with"
    return RowRefused(number, column, f"the cell is longer than {MOST_IN_A_CELL} characters", remedy)


def _plain(cell: str) -> str:
    """Trim a cell, and take off the apostrophe our own CSV puts before what looks like a formula."""
    text = cell.strip()
    return text[1:] if _GUARDED.match(text) else text


def _count(number: int, noun: str) -> str:
    return f"{number} {noun}" if number == 1 else f"{number} {noun}s"
