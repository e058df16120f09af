"""A row of the due list in words: what the table and the screens say alike."""

from collections.abc import Iterable
from enum import StrEnum

from fleetcare.domain.quantities import plain, tenth
from fleetcare.rules.due.row import DueRow
from fleetcare.rules.explain import say_left


class Group(StrEnum):
    """Where a row stands in the morning's list, in the order it is gone through.

    What waits for a laid-up engine to return stands apart from what runs, and what is only estimated from
    what is known.
    """

    OVERDUE = "overdue"
    DUE = "due"
    NEAR = "near"
    PROBABLY = "probably due by estimate"
    UNSET = "unset"
    BEFORE_RETURN = "before return"
    CLEAR = "clear"


def group_of(row: DueRow) -> Group:
    """Give the group a row stands in."""
    if row.is_before_return:
        return Group.BEFORE_RETURN
    return Group.PROBABLY if row.is_probably_due else Group(row.state)


def grouped(rows: Iterable[DueRow]) -> dict[Group, list[DueRow]]:
    """Give the rows of each group, in order, every group named."""
    groups: dict[Group, list[DueRow]] = {group: [] for group in Group}
    for row in rows:
        groups[group_of(row)].append(row)
    return groups


def say_counted(row: DueRow) -> str:
    """Say a row's counted point: what the dial shows there, with the life total where it differs."""
    if row.next_due_at is None:
        return ""
    life = f"{plain(tenth(row.next_due_at))} {row.meter_unit}"
    if row.next_due_dial is None:
        return f"{life} of life"
    if row.next_due_dial == row.next_due_at:
        return life
    return f"{say_dial(row)} on the dial ({life} of life)"


def say_dial(row: DueRow) -> str:
    """Say in short what the dial shows at a row's counted point; the life total where no dial comes to it."""
    if row.next_due_dial is not None:
        return f"{plain(tenth(row.next_due_dial))} {row.meter_unit}"
    return f"{plain(tenth(row.next_due_at))} {row.meter_unit} of life" if row.next_due_at is not None else ""


def say_remaining(row: DueRow) -> str:
    """Say what remains until the deciding point, or by how much it is past."""
    return say_left(row.remaining, row.unit) if row.remaining is not None else ""


def say_due(row: DueRow) -> str:
    """Say a row's point as a sentence, the deciding trigger first: "due at 1484 h on the dial, 12 h over"."""
    counted = say_counted(row)
    if counted and row.next_due_dial == row.next_due_at:
        counted += " on the dial"
    at = f"due at {counted}" if counted else ""
    on = f"due on {row.next_due_on.isoformat()}" if row.next_due_on is not None else ""
    first, second = (at, on) if row.unit != "d" else (on, at)
    words = [f"{first}, {say_remaining(row)}" if first and row.remaining is not None else first, second]
    return "; ".join(word for word in words if word) or row.state


def say_likely(row: DueRow) -> str:
    """Say when a counted point still ahead is likely reached, and the range it is reached in four times in five."""
    is_ahead = row.unit != "d" and row.remaining is not None and row.remaining > 0
    if row.likely_date is None or not is_ahead:
        return ""
    early = row.early_date.isoformat() if row.early_date is not None else "open"
    late = row.late_date.isoformat() if row.late_date is not None else "open"
    return f"likely {row.likely_date.isoformat()} ({early} to {late})"


def notes(row: DueRow) -> list[str]:
    """Say what else bears on a row: its engine's status, an estimate, a deferral, what covers it, its reason."""
    found = [
        row.state if row.is_before_return else "",
        f"{row.engine_status}: not to be run" if row.engine_status == "stood down" else "",
        f"by estimate {row.estimated}" if row.estimated else "",
        f"deferred until {row.deferred_until}" if row.deferred_until else "",
        f"with {row.covered_by}" if row.covered_by else "",
        row.reason,
    ]
    return [note for note in found if note]
