"""Lists for people: engines, machines, tasks."""

import re
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.engines import status_on
from fleetcare.domain.quantities import Kind, Span, from_base, plain
from fleetcare.domain.schedules import Anchor, Combine, Task, TaskVersion, Trigger
from fleetcare.operations.find import find_item
from fleetcare.operations.load import item_facts, load_counters, load_items
from fleetcare.operations.rows import fetch
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.row import unit_of
from fleetcare.rules.explain import say_trigger

if TYPE_CHECKING:
    from sqlalchemy import Connection

_MARKS = ("law", "insurer", "once", "on_condition", "pause_while_laid_up", "deferrable")
_AGE_ALL_THE_SAME = re.compile(r"\b(oils?|coolants?|belts?|batter(y|ies)|drain(ed)?)\b", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class TaskRow:
    """A task in a list: its intervals in words, what else it is, and all of it as options of `task add`."""

    name: str
    every: str
    work: str
    also: str
    source: str
    options: dict[str, object]


def list_items(connection: "Connection", on: date, *, engines: bool) -> list[dict[str, object]]:
    """List engines or machines in use on a day, with where they are and what their meters showed last.

    `last_read` is a list with a dial figure, its unit and its day for each meter that was read.
    """
    items = [item for item in load_items(connection, on) if item.is_engine is engines]
    counters = load_counters(connection, [item.id for item in items], on)
    plates = {
        row[0]: row
        for row in fetch(
            connection,
            "select item_id, duty, cylinders, layout, fuel from engine where item_id in :ids",
            ids=[item.id for item in items],
        )
    }
    rows: list[dict[str, object]] = []
    for item in items:
        row: dict[str, object] = {"tag": item.tag, "name": item.name, "site": item.site}
        if engines:
            _, duty, cylinders, layout, fuel = plates[item.id]
            row |= {"machine": item.machine, "status": status_on(item.spells, on).value, "duty": duty}
            row |= {"cylinders": cylinders, "layout": layout, "fuel": fuel}
        row["in_service"] = item.in_service_on
        row["last_read"] = [
            {"meter": kind.value, "value": dial, "unit": counter.unit, "on": counter.latest.on}
            for kind, counter in counters.get(item.id, {}).items()
            if counter.latest is not None and (dial := counter.dial_of(counter.latest.life)) is not None
        ]
        rows.append(row)
    return rows


def pausing_tasks(connection: "Connection", tag: str, on: date) -> list[str]:
    """Give the tasks of an item that pause while laid up though what they care for ages all the same."""
    facts = item_facts(connection, on, [find_item(connection, tag, on=on).id])[0]
    return [task.name for task in _in_force(facts) if _should_not_pause(task.name, task.version_on(on))]


def _should_not_pause(name: str, version: TaskVersion) -> bool:
    is_pausing = version.pause_while_laid_up and version.calendar is not None
    return is_pausing and _AGE_ALL_THE_SAME.search(f"{name} {version.work}") is not None


def list_tasks(connection: "Connection", tag: str, on: date) -> list[TaskRow]:
    """List the tasks of an item in force on a day."""
    facts = item_facts(connection, on, [find_item(connection, tag, on=on).id])[0]
    names = {task.id: task.name for task in facts.tasks}
    return [_task_row(facts, task, names) for task in _in_force(facts)]


def _in_force(facts: ItemFacts) -> list[Task]:
    return [task for task in facts.tasks if task.removed_on is None or task.removed_on > facts.on]


def _task_row(facts: ItemFacts, task: Task, names: Mapping[int, str]) -> TaskRow:
    version = task.version_on(facts.on)
    every = ", ".join(say_trigger(trigger, unit_of(facts, trigger.kind)) for trigger in version.triggers)
    options = _options(facts, task.name, version, names)
    return TaskRow(
        name=task.name,
        every=every or "on condition",
        work=version.work,
        also="; ".join(_say_also(options)),
        source=version.source,
        options=options,
    )


def _options(facts: ItemFacts, name: str, version: TaskVersion, names: Mapping[int, str]) -> dict[str, object]:
    """Give a task as the options of `task add`, figures in the units of the meters; None where one is not given."""
    calendar = version.calendar
    bound = {
        field: [
            _text(facts, trigger, value)
            for trigger in version.triggers
            if (value := getattr(trigger, key)) is not None and (value or field != "grace")
        ]
        for field, key in (("every", "interval"), ("first", "first"), ("ahead", "ahead"), ("grace", "grace"))
    }
    marks = {mark: getattr(version, mark) for mark in _MARKS}
    options = bound | {
        "once_each": calendar.once_each if calendar is not None else None,
        "window": f"{calendar.window_days}d" if calendar is not None and calendar.window_days else None,
        "through_month_end": calendar is not None and calendar.month_end,
        "combine": version.combine,
        "anchor": version.effective_anchor,
        "grid_origin": [_text(facts, t, t.grid_origin) for t in version.triggers if t.grid_origin is not None],
        "not_later_than": _compact(version.not_later_than) if version.not_later_than else None,
        "needs_sheet": version.needs_sheet,
        "covers": [names[covered] for covered in version.covers],
        "labour": f"{plain(version.labour_hours)}h" if version.labour_hours is not None else None,
        "part": [f"{part}:{plain(quantity)}" for part, quantity in version.parts],
        "caution": version.caution,
        "source": version.source,
    }
    given = {field: value if value not in ("", []) else None for field, value in options.items()}
    return {"task": name, **given, "work": version.work or None, **marks}


def _text(facts: ItemFacts, trigger: Trigger, value: Decimal | Span | int | date) -> str:
    """Write what binds to a trigger as it is typed: 250h, 12mo, days as 30d."""
    match value:
        case Span():
            return _compact(value)
        case date():
            return value.isoformat()
        case Decimal() if trigger.kind is not Kind.CALENDAR:
            unit = unit_of(facts, trigger.kind)
            return f"{plain(from_base(value, unit))}{unit}"
    return f"{value}d"


def _compact(span: Span) -> str:
    return f"{span.count}{span.unit}"


def _say_also(options: Mapping[str, object]) -> list[str]:
    """Say in few words what else a task is."""
    words = [mark.replace("_", " ") for mark in _MARKS if options[mark] and mark not in {"deferrable", "on_condition"}]
    if options["needs_sheet"]:
        words.append(f"closes with its {options['needs_sheet']} sheet")
    if options["anchor"] != Anchor.FROM_DONE:
        words.append(f"anchor {options['anchor']}")
    for field in ("combine", "not_later_than", "ahead", "grace", "covers"):
        value = options[field]
        if value and value != Combine.FIRST:
            text = ", ".join(value) if isinstance(value, list) else value
            words.append(f"{field.replace('_', ' ')} {text}")
    return words
