"""What is stored of a task on a day, under the names its draft knows: to lay an edit over, and as one would type it."""

from collections.abc import Sequence
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING, Any

from fleetcare.domain.quantities import plain
from fleetcare.operations.find import find_item, find_task
from fleetcare.operations.rows import Row, day, fetch

if TYPE_CHECKING:
    from sqlalchemy import Connection

FLAGS = ("law", "insurer", "once", "on_condition", "pause_while_laid_up")
BOUND = ("every", "first", "ahead", "grace")
"""The options that bind to one interval of a task, by its kind."""

_PLAIN = ("combine", "anchor", "not_later_than", "needs_sheet", "work", "caution", "source")


def stored_task(connection: "Connection", task_id: int, on: date) -> dict[str, Any]:
    """Give the version of a task in force on a day as the values of a draft."""
    version_id, *values = _version_on(connection, task_id, on, *_PLAIN, *FLAGS, '"deferrable"', "labour_hours")
    found = dict(zip((*_PLAIN, *FLAGS), values, strict=False))
    deferrable, labour = values[-2:]
    triggers = _triggers(connection, version_id)
    once_each = next((once for *_, once, _, _, _, _ in triggers if once), None)
    window = next((days for *_, days, _, _, _ in triggers if days is not None), None)
    usual = not (found["law"] or found["insurer"] or once_each)
    return {
        **found,
        **{flag: bool(found[flag]) for flag in FLAGS},
        **{name: _texts(triggers, place) for place, name in enumerate(BOUND)},
        "deferrable": None if bool(deferrable) is usual else _yes(deferrable),
        "labour": f"{plain(Decimal(labour))}h" if labour is not None else None,
        "once_each": once_each,
        "window": f"{window}d" if window is not None else None,
        "through_month_end": any(month_end for *_, month_end, _, _ in triggers),
        "grid_origin": [f"{origin}{unit}" for *_, origin, unit in triggers if origin],
        "part": [f"{name}:{plain(Decimal(quantity))}" for name, quantity in _parts(connection, version_id)],
        "covers": _covered(connection, version_id),
    }


def grid_read_on(connection: "Connection", task_id: int, on: date) -> date | None:
    """Give the day whose dial the grid's origin in force was read off, None where there is no such figure."""
    (version_id,) = _version_on(connection, task_id, on)
    rows = fetch(
        connection, "select grid_on from task_trigger where version_id = :id and grid_on is not null", id=version_id
    )
    return day(rows[0][0]) if rows else None


def task_as_typed(connection: "Connection", tag: str, name: str, on: date) -> dict[str, str]:
    """Give a task in force on a day as one would type it; refuses an unknown tag or task."""
    task_id = find_task(connection, find_item(connection, tag), name)
    return {
        **{field: _as_typed(value) for field, value in stored_task(connection, task_id, on).items()},
        "last_done": "; ".join(_last_done(connection, task_id)),
    }


def _as_typed(value: object) -> str:
    match value:
        case bool():
            return _yes(value)
        case list():
            return "; ".join(map(str, value))
    return "" if value is None else str(value)


def _version_on(connection: "Connection", task_id: int, on: date, *columns: str) -> Row:
    """Give the number of the version in force on a day, and columns of it."""
    rows = fetch(
        connection,
        f"select {', '.join(('id', *columns))} from task_version where task_id = :task and from_on <= :on"
        " order by from_on desc, id desc limit 1",
        task=task_id,
        on=on.isoformat(),
    )
    return rows[0]


def _triggers(connection: "Connection", version_id: int) -> Sequence[Row]:
    """Give what binds to each interval, figures and units, then its calendar form, then where its grid begins."""
    bound = ", ".join(f"{name}, {name}_unit" for name in BOUND)
    return fetch(
        connection,
        f"select {bound}, once_each, window_days, month_end, grid_origin, grid_unit"
        " from task_trigger where version_id = :id order by place",
        id=version_id,
    )


def _texts(triggers: Sequence[Row], place: int) -> list[str]:
    figures = [row[2 * place : 2 * place + 2] for row in triggers]
    return [f"{plain(Decimal(value))}{unit}" for value, unit in figures if value is not None]


def _parts(connection: "Connection", version_id: int) -> Sequence[Row]:
    return fetch(connection, "select name, quantity from task_part where version_id = :id order by id", id=version_id)


def _covered(connection: "Connection", version_id: int) -> list[str]:
    rows = fetch(
        connection,
        "select task.name from task_cover cover join task on task.id = cover.covered_id"
        " where cover.version_id = :id and task.removed_on is null order by cover.id",
        id=version_id,
    )
    return [row[0] for row in rows]


def _last_done(connection: "Connection", task_id: int) -> list[str]:
    """Give what was last said of when a task was done before the log began."""
    origins = fetch(
        connection, 'select id, "on" from task_origin where task_id = :id order by id desc limit 1', id=task_id
    )
    if not origins:
        return []
    origin, on = origins[0]
    figures = fetch(connection, "select value, unit from origin_figure where origin_id = :id order by id", id=origin)
    return [*([str(on)] if on else []), *(f"{plain(Decimal(value))}{unit}" for value, unit in figures)]


def _yes(value: object) -> str:
    return "yes" if value else "no"
