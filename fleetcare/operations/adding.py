"""What is new in the yard, stored and said: an engine or machine, a task, the tasks of a schedule."""

from collections.abc import Sequence
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

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

    from fleetcare.drafts.items import ItemDraft
    from fleetcare.drafts.schedules import StartDraft
    from fleetcare.drafts.tasks import TaskDraft
    from fleetcare.operations.schedules import Applied
    from fleetcare.rulebook.schedules import Schedule


def enter_item(session: "Session", draft: "ItemDraft", today: date) -> Entered:
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


def enter_schedule(
    session: "Session", schedule: "Schedule", tags: Sequence[str], start: "StartDraft", today: date
) -> list[Entered]:
    """Give engines and machines all tasks of a schedule, and say of each what came of it; the caution comes last."""
    entered = [_applied(one, schedule) for one in apply_schedule(session, schedule, tags, start, today)]
    entered[-1].notes.append(schedule.note)
    return entered


def _applied(one: "Applied", schedule: "Schedule") -> Entered:
    tag, group = one.item.tag, "engine" if one.item.is_engine else "machine"
    rows = {row.task: row for row in one.rows}
    lines = {name: say_line(rows[name]) if name in rows else "no line until it is called for" for name in one.added}
    return Entered(
        [f"{tag}: {len(one.added)} tasks of {schedule.id} added."],
        [f"{tag}  {name}: {line}" for name, line in lines.items()],
        [
            *(f"{tag}  {name}: left out, its hydraulic adjusters keep the lash" for name in one.left_out),
            *(
                f"{tag}  no meter counts {kind}, so {', '.join(names)} cannot fall due by {kind};"
                f" add one with fleetcare {group} edit {tag} --meter {kind}"
                for kind, names in one.uncounted.items()
            ),
        ],
    )
