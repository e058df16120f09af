"""Lists for people: engines, machines, tasks."""

import re
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.engines import status_on
from fleetcare.domain.schedules import TaskVersion
from fleetcare.operations.find import find_item
from fleetcare.operations.load import item_facts, load_counters, load_items
from fleetcare.operations.rows import fetch
from fleetcare.rules.due.row import unit_of
from fleetcare.rules.explain import say_trigger

if TYPE_CHECKING:
    from sqlalchemy import Connection

_AGE_ALL_THE_SAME = re.compile(r"\b(oils?|coolants?|belts?|batter(y|ies)|drain)\b", re.IGNORECASE)


def list_items(connection: "Connection", on: date, *, engines: bool) -> list[dict[str, object]]:
    """List engines or machines in use on a day, with where they are and what their meters showed last."""
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
        readings = []
        for counter in counters.get(item.id, {}).values():
            latest = counter.latest
            dial = counter.dial_of(latest.life) if latest is not None else None
            if latest is not None and dial is not None:
                readings.append(f"{dial:f} {counter.unit} on {latest.on}")
        row["last_read"] = ", ".join(readings)
        rows.append(row)
    return rows


def pausing_tasks(connection: "Connection", tag: str, on: date) -> list[str]:
    """Give the tasks of an item that pause while laid up though what they care for ages all the same."""
    facts = item_facts(connection, on, [find_item(connection, tag, on=on).id])[0]
    return [task.name for task in facts.tasks if _should_not_pause(task.name, task.version_on(on))]


def _should_not_pause(name: str, version: TaskVersion) -> bool:
    return version.pause_while_laid_up and _AGE_ALL_THE_SAME.search(f"{name} {version.work}") is not None


def list_tasks(connection: "Connection", tag: str, on: date) -> list[dict[str, object]]:
    """List the tasks of an item in force on a day, with their intervals in words."""
    facts = item_facts(connection, on, [find_item(connection, tag, on=on).id])[0]
    rows: list[dict[str, object]] = []
    for task in facts.tasks:
        if task.removed_on is not None and task.removed_on <= on:
            continue
        version = task.version_on(on)
        rows.append(
            {
                "task": task.name,
                "every": ", ".join(say_trigger(trigger, unit_of(facts, trigger.kind)) for trigger in version.triggers),
                "work": version.work,
                "source": version.source,
            }
        )
    return rows
