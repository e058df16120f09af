"""What is new in the yard, stored and said: an engine or machine, a task, the tasks of a schedule."""

from datetime import date
from typing import TYPE_CHECKING

from fleetcare.operations.due import watch_moves
from fleetcare.operations.entering import Entered
from fleetcare.operations.find import find_item
from fleetcare.operations.items import add_item
from fleetcare.operations.listing import pausing_tasks
from fleetcare.operations.schedules import apply_schedule
from fleetcare.operations.stored_words import moved_words, pausing_words, say_line
from fleetcare.operations.tasks import add_task
from fleetcare.rulebook.schedules import find_schedule

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

    from fleetcare.drafts.items import EngineDraft, MachineDraft
    from fleetcare.drafts.schedules import ApplyDraft
    from fleetcare.drafts.tasks import TaskDraft


def enter_item(session: "Session", draft: "EngineDraft | MachineDraft", today: date) -> Entered:
    """Add an engine or a machine."""
    item = add_item(session, draft, today)
    return Entered([f"{item.tag} added."])


def enter_task(session: "Session", tag: str, draft: "TaskDraft", today: date) -> Entered:
    """Add a task, and say how its line stands."""
    item = find_item(session.connection(), tag)
    with watch_moves(session, item.tag, today) as moves:
        add_task(session, item, draft, today)
    pausing = pausing_tasks(session.connection(), item.tag, today)
    new = [move.after for move in moves.moved if move.before is None and move.after is not None]
    return Entered(
        [f"{draft.name} added to {item.tag}.", *(pausing_words(name) for name in pausing if name == draft.name)],
        [
            *(f"{item.tag}  {row.task}: {say_line(row)}" for row in new),
            *moved_words(move for move in moves.moved if move.before is not None),
        ],
    )


def enter_schedule(session: "Session", tag: str, draft: "ApplyDraft", today: date) -> Entered:
    """Give an engine or machine all tasks of a schedule."""
    schedule = find_schedule(draft.name)
    (applied,) = apply_schedule(session, schedule, [tag], draft, today)
    entered = Entered([f"{applied.item.tag}: {len(applied.added)} tasks of {schedule.id} added."])
    entered.notes = [f"{name} left out, its hydraulic adjusters keep the lash." for name in applied.left_out]
    entered.notes += [
        f"No meter counts {kind}, so {', '.join(names)} cannot fall due by {kind}."
        for kind, names in applied.uncounted.items()
    ]
    entered.notes.append(schedule.note)
    return entered
