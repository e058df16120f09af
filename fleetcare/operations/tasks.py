"""Add, edit and remove tasks; a change is a new version in force from a day."""

from collections.abc import Mapping, Sequence
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING, Any

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import Task, TaskCover, TaskPart, TaskTrigger, TaskVersion
from fleetcare.domain.quantities import (
    Amount,
    Figure,
    Kind,
    Span,
    parse_interval,
    plain,
)
from fleetcare.drafts.reading_in import as_option, read_draft
from fleetcare.drafts.tasks import LastDoneDraft, TaskDraft, TriggerDraft, kind_of, origin_kind
from fleetcare.errors import FleetError, Refused
from fleetcare.operations.find import FoundItem, find_meters, find_task
from fleetcare.operations.log import refuse_future
from fleetcare.operations.rows import fetch
from fleetcare.operations.starts import set_last_done
from fleetcare.operations.stored_tasks import BOUND, FLAGS, grid_read_on, stored_task
from fleetcare.rules.due.covering import find_cycle

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session


def add_task(session: "Session", item: FoundItem, draft: TaskDraft, today: date) -> int:
    """Add a task to an item and give its id. Refuses a name the item has already, and a cycle in covering."""
    key = draft.name.casefold()
    if key in names_taken(session.connection(), item):
        raise Refused(
            f"{item.tag} has a task {draft.name!r} already", "choose another name, or use fleetcare task edit"
        )
    row = Task(item_id=item.id, name=draft.name, name_key=key)
    session.add(row)
    session.flush()
    # The first version holds on every day, whenever it was typed.
    _add_version(session, item, row.id, draft, date.min, grid_on=today)
    if draft.last_done:
        set_last_done(session, item, row.id, draft.last_done, today)
    return row.id


def edit_task(
    session: "Session",
    item: FoundItem,
    name: str,
    changes: Mapping[str, object],
    without: Sequence[Kind],
    on: date,
    today: date,
) -> str:
    """Make a new version of a task from a day on, and give its name: what is given changes, what is left out stays.

    An interval given replaces the one of its kind; `without` drops the intervals of some kinds with what binds to
    them. A last-done alone makes no version. Refuses an edit that says nothing.
    """
    task_id = find_task(session.connection(), item, name)
    if not changes and not without:
        raise Refused("nothing to edit", "give what should change, such as --every 250h")
    if without or changes.keys() - {"last_done"}:
        stored = _without(stored_task(session.connection(), task_id, on), without, name)
        bound = {field: _merged(field, stored[field], changes.get(field)) for field in BOUND}
        _change(
            session, item, task_id, stored | dict(changes) | bound, on, today, keeps_grid=not changes.get("grid_origin")
        )
    return _told_last_done(session, item, task_id, changes, today)


def restate_task(
    session: "Session", item: FoundItem, name: str, values: Mapping[str, object], on: date, today: date
) -> str:
    """Make a new version of a task from a day on in which these values stand, lists whole; give its name.

    None takes a value away, what is left out stays. A last-done alone makes no version. Refuses to change nothing.
    """
    task_id = find_task(session.connection(), item, name)
    if not values:
        raise Refused("nothing to edit", "change what should be otherwise")
    if values.keys() - {"last_done"}:
        stored = stored_task(session.connection(), task_id, on)
        _change(session, item, task_id, stored | dict(values), on, today, keeps_grid="grid_origin" not in values)
    return _told_last_done(session, item, task_id, values, today)


def _change(
    session: "Session",
    item: FoundItem,
    task_id: int,
    values: Mapping[str, object],
    on: date,
    today: date,
    *,
    keeps_grid: bool,
) -> None:
    """Store a version of all values; a grid that is kept goes on from the dial it was given at."""
    whole = {**values, "name": session.get_one(Task, task_id).name}
    draft = read_draft(TaskDraft, {key: value for key, value in whole.items() if key != "last_done"}, as_option)
    kept = grid_read_on(session.connection(), task_id, on) if keeps_grid else None
    _add_version(session, item, task_id, draft, on, grid_on=kept or today)


def _told_last_done(
    session: "Session", item: FoundItem, task_id: int, values: Mapping[str, object], today: date
) -> str:
    """Store when a task was last done, where that is told, and give the task's name."""
    if values.get("last_done"):
        told = read_draft(LastDoneDraft, {"last_done": values["last_done"]}, as_option)
        set_last_done(session, item, task_id, told.last_done, today)
    return session.get_one(Task, task_id).name


def remove_task(session: "Session", item: FoundItem, name: str, on: date, today: date) -> str:
    """End a task from a day on, and give its name; its history stays. Refuses a day that has not come yet."""
    refuse_future(on, today)
    task = session.get_one(Task, find_task(session.connection(), item, name))
    task.removed_on = on
    session.flush()
    return task.name


def _add_version(
    session: "Session", item: FoundItem, task_id: int, draft: TaskDraft, from_on: date, *, grid_on: date
) -> None:
    """Store a version; `grid_on` is the day whose dial a grid's origin was read off."""
    version = TaskVersion(
        task_id=task_id,
        from_on=from_on,
        combine=draft.combine,
        anchor=draft.anchor,
        not_later_than=_compact(draft.not_later_than) if draft.not_later_than else "",
        needs_sheet=draft.needs_sheet or "",
        deferrable=draft.is_deferrable,
        work=draft.work,
        labour_hours=draft.labour,
        caution=draft.caution,
        source=draft.source,
        **{flag: getattr(draft, flag) for flag in FLAGS},
    )
    session.add(version)
    session.flush()
    meters = {meter.kind: meter.unit for meter in find_meters(session.connection(), item.id, date.max)}
    for place, trigger in enumerate(draft.triggers()):
        session.add(_trigger_row(version.id, place, trigger, meters, grid_on))
    for name, quantity in draft.part:
        session.add(TaskPart(version_id=version.id, name=name, quantity=quantity))
    for covered in draft.covers:
        session.add(TaskCover(version_id=version.id, covered_id=find_task(session.connection(), item, covered)))
    session.flush()
    if draft.covers:  # no way round can come of what covers nothing
        _refuse_cycle(session, item, task_id)


def _trigger_row(
    version_id: int, place: int, trigger: TriggerDraft, meters: Mapping[Kind, str], grid_on: date
) -> TaskTrigger:
    row = TaskTrigger(
        version_id=version_id,
        place=place,
        kind=trigger.kind,
        once_each=trigger.once_each or "",
        window_days=trigger.window_days,
        month_end=trigger.month_end,
    )
    for field in BOUND:
        value: Amount | Span | None = getattr(trigger, field)
        if value is not None:
            number, unit = _entered(value)
            setattr(row, field, number)
            setattr(row, f"{field}_unit", unit)
    origin = trigger.grid_origin
    if isinstance(origin, Figure):
        row.grid_origin, row.grid_unit = plain(origin.value), origin.unit or meters.get(trigger.kind, "")
        row.grid_on = grid_on
    elif origin is not None:
        row.grid_origin = origin.isoformat()
    return row


def _refuse_cycle(session: "Session", item: FoundItem, task_id: int) -> None:
    """Refuse covering that comes back to where it began, naming the way round."""
    rows = fetch(
        session.connection(),
        "select version.task_id, cover.covered_id from task_cover cover"
        " join task_version version on version.id = cover.version_id join task on task.id = version.task_id"
        " where task.item_id = :item and task.removed_on is null"
        " and version.id = (select max(newest.id) from task_version newest where newest.task_id = task.id)",
        item=item.id,
    )
    covers: dict[int, list[int]] = {}
    for covering, covered in rows:
        covers.setdefault(covering, []).append(covered)
    way = find_cycle(covers, task_id)
    if way:
        names = {row.id: row.name for row in session.scalars(select(Task).where(col(Task.item_id) == item.id))}
        raise Refused(
            f"covering goes in a circle: {' covers '.join(names[step] for step in way)}",
            "leave out one of the --covers",
        )


def names_taken(connection: "Connection", item: FoundItem) -> set[str]:
    """Give the names, casefolded, of the tasks an item has."""
    rows = fetch(connection, "select name_key from task where item_id = :item and removed_on is null", item=item.id)
    return {row[0] for row in rows}


def _without(stored: dict[str, Any], kinds: Sequence[Kind], name: str) -> dict[str, Any]:
    """Take the intervals of some kinds out of a draft's values, with all that binds to them."""
    there = {kind_of(parse_interval(text)) for text in stored["every"]}
    for kind in kinds:
        if kind not in there:
            raise Refused(f"{name} has no interval counting {kind}", "leave out that --without")
    left = {field: [t for t in stored[field] if kind_of(parse_interval(t)) not in kinds] for field in BOUND}
    left["grid_origin"] = [text for text in stored["grid_origin"] if origin_kind(text) not in kinds]
    forms = ("once_each", "window", "through_month_end") if Kind.CALENDAR in kinds else ()
    return {**stored, **left, **dict.fromkeys(forms)}


def _merged(field: str, stored: Sequence[str], given: object) -> list[str]:
    """Lay intervals over stored ones: each given one replaces the one of its kind."""
    fresh = [str(text) for text in given] if isinstance(given, list | tuple) else []
    try:
        replaced = {kind_of(parse_interval(text)) for text in fresh}
    except FleetError as error:
        raise type(error)(f"{as_option(field)}: {error.detail}", error.remedy) from None
    return [text for text in stored if kind_of(parse_interval(text)) not in replaced] + fresh


def _entered(value: Amount | Span) -> tuple[Decimal, str]:
    return (value.value, value.unit) if isinstance(value, Amount) else (Decimal(value.count), value.unit)


def _compact(span: Span) -> str:
    return f"{span.count}{span.unit}"
