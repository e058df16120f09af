"""CSV for spreadsheets and other programs."""

import csv
import io
import re
from collections.abc import Iterable, Sequence
from pathlib import Path
from typing import Any

from fleetcare.domain.printable import cell_text, clean
from fleetcare.errors import Refused

# What a spreadsheet may run as a formula; the last four are the wide forms of = + - @.
_FORMULA = re.compile("[=+\\-@\t\r\uff1d\uff0b\uff0d\uff20]")
_NUMBER = re.compile(r"[+-]?[0-9]+(\.[0-9]+)?", re.ASCII)
_MOST_NAMES = 1000


def csv_text(headers: Sequence[str], rows: Iterable[Sequence[Any]]) -> str:
    """Give rows as CSV (RFC 4180: CRLF, quoted where needed), ISO dates, point decimals, None as empty.

    Text a spreadsheet could take for a formula gets a leading apostrophe; numbers are left alone.
    """
    buffer = io.StringIO()
    writer = csv.writer(buffer, lineterminator="\r\n")
    writer.writerow(headers)
    writer.writerows([_csv_cell(cell) for cell in row] for row in rows)
    return buffer.getvalue()


def write_new(folder: Path, name: str, text: str) -> Path:
    """Write text as UTF-8 to a new file in a folder, and give its path.

    Where the name is taken a number is put behind it: due-2026-05-01-2.csv; no file is ever written over, and none is
    left half written. Raises Refused where the folder cannot be written to.
    """
    wanted = folder / name
    try:
        wanted = wanted.absolute()  # fails where the current folder is gone
        for number in range(1, _MOST_NAMES):
            path = wanted if number == 1 else wanted.with_stem(f"{wanted.stem}-{number}")
            try:
                file = path.open("xb")
            except FileExistsError:
                continue
            return _filled(path, file, text)
    except OSError as error:
        raise Refused(
            f"cannot write {wanted}: {error.strerror}", "start fleetcare in a folder you may write to"
        ) from None
    raise Refused(f"{wanted} and {_MOST_NAMES - 2} after it are there already", "clear some of them away")


def _filled(path: Path, file: io.BufferedWriter, text: str) -> Path:
    try:
        with file:
            file.write(text.encode())
    except BaseException:
        path.unlink(missing_ok=True)
        raise
    return path


def _csv_cell(cell: Any) -> str:
    text = cell_text(cell)
    risky = isinstance(cell, str) and _FORMULA.match(text) and not _NUMBER.fullmatch(text)
    # A line break inside a cell is lawful in CSV; every other control character is shown instead.
    return ("'" if risky else "") + "\n".join(clean(line) for line in text.split("\n"))
