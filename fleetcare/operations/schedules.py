"""Give engines and machines the tasks of a schedule, all of them or none."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.db.tables import Item
from fleetcare.domain.quantities import Kind
from fleetcare.drafts.schedules import StartDraft, read_tasks
from fleetcare.drafts.tasks import TaskDraft
from fleetcare.errors import Refusals, Refused
from fleetcare.operations.due import DueRow, Filters, due_rows
from fleetcare.operations.find import FoundItem, find_item, find_meters
from fleetcare.operations.load_tasks import load_start_figures
from fleetcare.operations.rows import fetch
from fleetcare.operations.starts import set_last_done, set_start
from fleetcare.operations.tasks import add_task, names_taken
from fleetcare.rulebook.schedule_words import say_every
from fleetcare.rulebook.schedules import Schedule, find_schedule

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session


@dataclass(frozen=True, slots=True)
class Applied:
    """What a schedule gave to one item.

    `rows` are the due lines of the tasks added, in the schedule's order; on-condition ones have none yet. `left_out`
    are tasks the item cannot need, `uncounted` the added ones by the kinds they count that no meter of the item counts.
    """

    item: FoundItem
    added: tuple[str, ...]
    rows: tuple[DueRow, ...]
    left_out: tuple[str, ...]
    uncounted: Mapping[Kind, tuple[str, ...]]


def apply_schedule(
    session: "Session", schedule: Schedule, tags: Sequence[str], start: StartDraft, today: date
) -> list[Applied]:
    """Add all tasks of a schedule to each item, counting from a stated start, and say what came of it.

    An item that counts as new needs none stated: its tasks count from its start. Everything that stands against it,
    on any of the items, is refused together.
    """
    drafts = read_tasks(schedule)
    found = [find_item(session.connection(), tag) for tag in tags]
    items = list({item.id: item for item in found}.values())
    wrong = [error for item in items for error in _objections(session, item, schedule, drafts, start)]
    if wrong:
        raise wrong[0] if len(wrong) == 1 else Refusals(wrong)
    return [_apply(session, item, drafts, start, today) for item in items]


def _objections(
    session: "Session", item: FoundItem, schedule: Schedule, drafts: Sequence[TaskDraft], start: StartDraft
) -> list[Refused]:
    if schedule.is_for_engines and not item.is_engine:
        return [Refused(f"{schedule.id} is for engines and {item.tag} is a machine", "name the engine fitted in it")]
    row = session.get_one(Item, item.id)
    wrong = []
    taken = names_taken(session.connection(), item)
    there = [draft.name for draft in drafts if draft.name.casefold() in taken]
    if there:
        wrong.append(
            Refused(
                f"{item.tag} has these of {schedule.id} already: {', '.join(there)}",
                f"end them with fleetcare task remove {item.tag} NAME, or take them out of a file of your own:"
                f" fleetcare schedule show {schedule.id} --toml --out FILE.toml",
            )
        )
    if start.word == "start":
        wrong.extend(_missing_start(session, row, item, drafts))
    elif not start.counts_from and not row.as_new:
        wrong.append(
            Refused(
                f"{item.tag} does not count as new, so where its tasks begin must be said",
                "give --from start, --from unset, or when they were last done: --from DATE, --from VALUE or both",
            )
        )
    return wrong


def _missing_start(session: "Session", row: Item, item: FoundItem, drafts: Sequence[TaskDraft]) -> list[Refused]:
    """Say what an item lacks for its tasks to count from its start."""
    edit = f"fleetcare {'engine' if item.is_engine else 'machine'} edit {item.tag} --in-service DATE"
    if row.in_service_on is None:
        return [
            Refused(
                f"{item.tag} has no in-service day for --from start to count from",
                f"give it with {edit} --start-at VALUE",
            )
        ]
    known = load_start_figures(session.connection(), [item.id]).get(item.id, {})
    metered = {meter.kind for meter in find_meters(session.connection(), item.id, date.max)}
    missing = sorted((_counted(drafts) & metered) - set(known))
    if not missing:
        return []
    return [
        Refused(
            f"{item.tag} has no start figure of {', '.join(missing)} for --from start to count from",
            f"give it with {edit} --start-at VALUE",
        )
    ]


def _apply(session: "Session", item: FoundItem, drafts: Sequence[TaskDraft], start: StartDraft, today: date) -> Applied:
    sheets = {draft.name: draft.needs_sheet for draft in drafts}
    left_out = _not_needed(session.connection(), item, sheets)
    kept = [draft for draft in drafts if draft.name not in left_out]
    for draft in kept:
        covers = tuple(name for name in draft.covers if name.casefold() not in {out.casefold() for out in left_out})
        task_id = add_task(session, item, draft.model_copy(update={"covers": covers}), today)
        if start.word is not None:
            set_start(session, task_id, today, as_new=start.word == "start")
        elif start.last_done:
            set_last_done(session, item, task_id, start.last_done, today, "--from")
    rows = {row.task: row for row in due_rows(session.connection(), today, Filters(engine=item.tag))}
    metered = {meter.kind for meter in find_meters(session.connection(), item.id, today)}
    return Applied(
        item,
        added=tuple(draft.name for draft in kept),
        rows=tuple(rows[draft.name] for draft in kept if draft.name in rows),
        left_out=left_out,
        uncounted={
            kind: tuple(draft.name for draft in kept if kind in _counted([draft]))
            for kind in sorted(_counted(kept) - metered)
        },
    )


def what_it_adds(connection: "Connection", tag: str, name: str) -> tuple[list[str], str]:
    """Say each task a schedule would give an engine or machine and what stands against it, and where it comes from.

    Nothing is stored. Refuses an unknown schedule or tag, and a file that is not in order.
    """
    schedule, item = find_schedule(name), find_item(connection, tag)
    drafts = {draft.name: draft for draft in read_tasks(schedule)}
    taken = names_taken(connection, item)
    left_out = _not_needed(connection, item, {task: draft.needs_sheet for task, draft in drafts.items()})
    against = dict.fromkeys(left_out, "left out, hydraulic adjusters keep the lash")
    against |= {task: f"{item.tag} has one already" for task in drafts if task.casefold() in taken}
    tasks = [
        "; ".join(filter(None, (f"{task}: {say_every(options)}", against.get(task, ""))))
        for task, options in zip(drafts, schedule.tasks, strict=True)
    ]
    return tasks, schedule.source


def _not_needed(connection: "Connection", item: FoundItem, sheets: Mapping[str, str | None]) -> tuple[str, ...]:
    """Give the tasks that set the lash, of some with the sheets they need, where hydraulic adjusters keep it."""
    hydraulic = fetch(connection, "select 1 from engine where item_id = :id and adjuster = 'hydraulic'", id=item.id)
    return tuple(name for name, sheet in sheets.items() if sheet == "lash") if hydraulic else ()


def _counted(drafts: Sequence[TaskDraft]) -> set[Kind]:
    """Give the kinds that tasks need a meter for."""
    return {trigger.kind for draft in drafts for trigger in draft.triggers()} - {Kind.CALENDAR}
