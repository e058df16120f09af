"""Follow-ups: what a defect raises, and the on-condition tasks it calls for."""

from collections.abc import Sequence
from datetime import date
from typing import TYPE_CHECKING

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import Task, TaskCall, TaskVersion
from fleetcare.domain.schedules import Combine
from fleetcare.drafts.work import LogDraft
from fleetcare.operations.find import FoundItem

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


def on_condition(session: "Session", task_ids: Sequence[int]) -> list[int]:
    """Give those of some tasks whose newest version is on condition."""
    found = []
    for task_id in task_ids:
        versions = session.scalars(
            select(TaskVersion)
            .where(col(TaskVersion.task_id) == task_id)
            .order_by(col(TaskVersion.from_on), col(TaskVersion.id))
        ).all()
        if versions[-1].on_condition:
            found.append(task_id)
    return found


def raise_follow_ups(
    session: "Session", item: FoundItem, draft: LogDraft, entry_id: int, called: Sequence[int]
) -> list[str]:
    """Call the on-condition tasks named, or else raise a follow-up of its own from the defect; say what was raised."""
    assert draft.defect is not None
    due_on = draft.until or draft.on
    raised = []
    for task_id in called or [_follow_up_task(session, item, draft.defect)]:
        session.add(TaskCall(task_id=task_id, entry_id=entry_id, on=draft.on, due_on=due_on, why=draft.defect))
        raised.append(f"{session.get_one(Task, task_id).name}, due {due_on}")
    session.flush()
    return raised


def _follow_up_task(session: "Session", item: FoundItem, defect: str) -> int:
    """Give the task that stands for a defect's follow-up, made where there is none of that name."""
    rows = session.scalars(select(Task).where(col(Task.item_id) == item.id, col(Task.removed_on).is_(None)))
    taken = {row.name_key: row.id for row in rows}
    name = defect
    while name.casefold() in taken and not on_condition(session, [taken[name.casefold()]]):
        name = f"{name} (follow-up)"
    if name.casefold() in taken:
        return taken[name.casefold()]
    row = Task(item_id=item.id, name=name, name_key=name.casefold())
    session.add(row)
    session.flush()
    session.add(
        TaskVersion(task_id=row.id, from_on=date.min, combine=Combine.FIRST, on_condition=True, work="follow-up")
    )
    session.flush()
    return row.id
