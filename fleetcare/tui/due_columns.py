"""A line of the due list on the screens: its cells, and the whole of it in words."""

from datetime import date

from fleetcare.operations.due_words import notes, say_dial, say_due, say_likely, say_remaining
from fleetcare.operations.review import ReviewLine
from fleetcare.tui.looks import MARKS, tone_of
from fleetcare.tui.widgets.columns import Cell, Column


def state_cell(line: ReviewLine) -> Cell:
    """Say mark and state of a line; by estimate it is due with a ~ before."""
    tone = tone_of(line.group)
    word = line.row.estimated if tone == "probably" else line.row.state
    return Cell(f"{MARKS[tone]:<2} {word}", tone)


def _left(line: ReviewLine) -> Cell:
    tone = tone_of(line.group)
    return Cell(say_remaining(line.row), tone if tone in {"overdue", "due"} else "")


def _dial(line: ReviewLine) -> str:
    return say_dial(line.row)


def _notes(line: ReviewLine) -> list[str]:
    """Give the notes of a line, less the state, which stands in its own column here."""
    return [note for note in notes(line.row) if note != line.row.state]


def _note(line: ReviewLine) -> str:
    return "; ".join(_notes(line))


def _iso(day: date | None) -> str:
    return day.isoformat() if day is not None else ""


COLUMNS: tuple[Column[ReviewLine], ...] = (
    Column("   STATE", state_cell, 10, 10),
    Column("ENGINE", lambda line: Cell(line.row.engine, "strong"), 8, 16),
    Column("TASK", lambda line: line.row.task, 16, 34),
    Column("DIAL", _dial, 20, 20, to_right=True, drop=2),
    Column("BY DAY", lambda line: _iso(line.row.next_due_on), 10, 10, to_right=True, drop=3),
    Column("LEFT", _left, 16, 16, to_right=True),
    Column("LIKELY", lambda line: _iso(line.row.likely_date), 10, 10, to_right=True, drop=4),
    Column("SITE", lambda line: line.row.site, 12, 20, drop=5),
    Column("NOTE", _note, 30, 200, drop=6),
)


def in_words(line: ReviewLine, *, has_alarm: bool = False) -> tuple[tuple[str, str], ...]:
    """Say a line in three lines of (text, tone): what, on whose engine, and when with all that bears on it.

    An engine that has an alarm nobody answered is said to.
    """
    row = line.row
    machine = f"in {row.machine}" if row.machine not in {"", row.engine} else ""
    whose = ", ".join(word for word in (f"{line.name} {machine}".strip(), row.site) if word)
    rest = "; ".join(word for word in (say_due(row), say_likely(row), *_notes(line)) if word)
    if has_alarm:
        whose = f"{whose}; !! an alarm of it is open".removeprefix("; ")
    lines = (f"{row.engine}  {row.task}", "strong"), (whose, "overdue" if has_alarm else "quiet"), (rest, "")
    return tuple(line for line in lines if line[0])
