"""The due list as a file to take away."""

from collections.abc import Iterable
from datetime import date
from pathlib import Path

from fleetcare.exchange.csv_out import csv_text, write_new
from fleetcare.operations.due import COLUMNS, DueRow


def due_csv(rows: Iterable[DueRow]) -> str:
    """Give rows as CSV, in their order, every column."""
    return csv_text(COLUMNS, [[getattr(row, name) for name in COLUMNS] for row in rows])


def write_shown(rows: Iterable[DueRow], folder: Path, on: date) -> Path:
    """Write rows to a new CSV file in a folder, named after the day, and give its path; no file is written over."""
    return write_new(folder, f"due-{on.isoformat()}.csv", due_csv(rows))
