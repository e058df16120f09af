"""Sheet files: CSV with a value a row, from a file or from standard input."""

import sys
from pathlib import Path

from fleetcare.drafts.sheets import SheetIn, SheetRow
from fleetcare.errors import Refused
from fleetcare.exchange.csv_in import MOST_BYTES, read_file, read_rows

REQUIRED, OPTIONAL = ("quantity", "value"), ("point", "phase", "unit")


def read_sheet(name: str) -> SheetIn:
    """Read a sheet file, or standard input where its name is "-". Raises Refused for what is no such file."""
    data = _standard_input() if name == "-" else read_file(Path(name))
    return sheet_of(data)


def sheet_of(data: bytes) -> SheetIn:
    """Give the rows of a sheet file, trimmed and otherwise as they stand there. Refuses a file without any."""
    file = read_rows(data, REQUIRED, OPTIONAL)
    if not file.rows and not file.faults:
        raise Refused("the sheet has no values", "give one a row: quantity, point, phase, value, unit")
    return SheetIn(tuple(SheetRow(row.number, row.cells) for row in file.rows), file.faults)


def _standard_input() -> bytes:
    if sys.stdin is None:
        raise Refused("there is no standard input to read", "name a CSV file")
    data = sys.stdin.buffer.read(MOST_BYTES + 1)
    if len(data) > MOST_BYTES:
        raise Refused(f"standard input is longer than {MOST_BYTES // 1024 // 1024} MB", "give a smaller file")
    return data
