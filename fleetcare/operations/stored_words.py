"""What was stored, in sentences: what commands print and forms say alike."""

from collections.abc import Iterable, Iterator
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.lines import State
from fleetcare.domain.quantities import plain, tenth
from fleetcare.operations.due_words import say_counted

if TYPE_CHECKING:
    from fleetcare.operations.due import Moved
    from fleetcare.operations.log import Logged
    from fleetcare.operations.readings import Recorded
    from fleetcare.rules.due.row import DueRow


def moved_words(moves: "Iterable[Moved]") -> Iterator[str]:
    """Say each line whose due point moved, old and new; the own one where only that moved under a deferral."""
    for move in moves:
        row = move.after or move.before
        assert row is not None
        before, after = say_point(move.before), say_point(move.after)
        if before == after and move.before is not None and move.after is not None:
            before, after = f"own point {_say_own(move.before)}", f"{_say_own(move.after)}, deferred all the same"
        yield f"{row.engine}  {row.task}: {before} → {after}"


def say_point(row: "DueRow | None") -> str:
    """Say a line's due point: on the dial first, then its day."""
    if row is None:
        return "no line"
    parts = [say_counted(row), row.next_due_on.isoformat() if row.next_due_on else ""]
    return " or ".join(part for part in parts if part) or f"{row.state}, {row.reason}"


def say_line(row: "DueRow") -> str:
    """Say how a line stands: its state, then its point or what to enter."""
    point = say_point(row)
    return point if row.state == State.UNSET else f"{row.state}, {point}"


def logged_words(logged: "Logged", what: str) -> Iterator[str]:
    """Say what an entry closed and covered, and what it did not; `what` follows the entry's number."""
    yield from (f"Note: {note}." for note in logged.notes)
    yield from (f"Entry {number} ({kind}) of {logged.item.tag} {what}." for number, kind in logged.entries)
    if logged.closed:
        yield f"Done: {', '.join(logged.closed)}."
    yield from (f"Done along with {big}: {small}." for small, big in logged.covered)
    yield from (f"Done in part, still open: {name}." for name in logged.part_done)
    yield from (f"Follow-up raised: {raised}." for raised in logged.raised)


def recorded_words(recorded: "Recorded", on: date) -> Iterator[str]:
    """Say what came of a reading."""
    if recorded.is_new:
        yield f"Reading {recorded.id}: {recorded.shown} on {on}."
    else:
        yield f"Nothing new: reading {recorded.id} says the same."
    yield from suspect_words(recorded.suspects)


def suspect_words(suspects: Iterable[int]) -> Iterator[str]:
    """Say which readings count for nothing any more because a later one was taken for sure."""
    for suspect in suspects:
        yield f"Reading {suspect} is suspect now and counts for nothing; --restore {suspect} brings it back."


def pausing_words(name: str) -> str:
    """Warn of a task that stands still while laid up though what it cares for does not."""
    return f"Note: the calendar of {name} pauses while laid up; oil, coolant, belts and batteries age all the same."


def _say_own(row: "DueRow") -> str:
    counted = f"{plain(tenth(row.own_due_at))} {row.meter_unit}" if row.own_due_at is not None else ""
    return " or ".join(part for part in (counted, row.own_due_on.isoformat() if row.own_due_on else "") if part)
