"""The tasks of an engine or machine written down as a schedule of the shop's own, to be given to others like it."""

import json
import os
from collections.abc import Mapping, Sequence
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING, Any

from fleetcare.drafts.schedules import ScheduleOut, read_tasks
from fleetcare.errors import Refused
from fleetcare.operations.entering import Entered
from fleetcare.operations.find import FoundItem, find_item
from fleetcare.operations.load import item_facts
from fleetcare.operations.stored_tasks import stored_task
from fleetcare.rulebook.schedules import find_schedule

if TYPE_CHECKING:
    from sqlalchemy import Connection

_OF_ONE_ENGINE = ("grid_origin",)


def write_schedule(connection: "Connection", draft: ScheduleOut, on: date) -> Entered:
    """Write the tasks in force on a day to a file, and say so.

    A file that is there already is written over only where it is a schedule of the same name. Refuses an item without
    tasks, and a file that cannot be written; then nothing is changed.
    """
    item = find_item(connection, draft.tag, on=on)
    tasks = _tasks(connection, item, on)
    if not tasks:
        raise Refused(f"{item.tag} has no tasks to write down", "add one first")
    path = Path(draft.file)
    if path.exists() and find_schedule(draft.file).name != draft.name:
        raise Refused(f"{draft.file} is a schedule of another name", "choose another file, or that name")
    _write(path, _text(item, draft, tasks, on))
    count = "1 task" if len(tasks) == 1 else f"{len(tasks)} tasks"
    return Entered([f"{count} of {item.tag} written to {draft.file}; name that file to give them to another."])


def _tasks(connection: "Connection", item: FoundItem, on: date) -> list[tuple[str, dict[str, Any]]]:
    """Give the tasks in force with their options, each below the smaller jobs it covers; one-off jobs left out."""
    facts = item_facts(connection, on, [item.id])[0]
    in_force = [task for task in facts.tasks if task.removed_on is None or task.removed_on > on]
    options = {task.name: stored_task(connection, task.id, on) for task in in_force}
    return [(name, options[name]) for name in _smaller_first(options) if not options[name]["once"]]


def _smaller_first(options: Mapping[str, Mapping[str, Any]]) -> list[str]:
    ordered: list[str] = []

    def put(name: str) -> None:
        for covered in options[name]["covers"]:
            if covered in options and covered not in ordered:
                put(covered)
        if name not in ordered:
            ordered.append(name)

    for name in options:
        put(name)
    return ordered


def _text(item: FoundItem, draft: ScheduleOut, tasks: Sequence[tuple[str, dict[str, Any]]], on: date) -> str:
    """Give the TOML of a schedule: strings as JSON writes them are strings of TOML too."""
    names = {name for name, _ in tasks}
    head = {
        "name": draft.name,
        "source": draft.source,
        "note": f"the tasks of {item.tag} as of {on.isoformat()}; check them against the manual of each engine",
        "is_for_engines": item.is_engine,
    }
    lines = [_line(field, value) for field, value in head.items()]
    for name, options in tasks:
        covers = [covered for covered in options["covers"] if covered in names]
        given = {**options, "covers": covers, "source": options["source"] if options["source"] != draft.source else ""}
        lines += ["", "[[task]]", _line("name", name)]
        lines += [_line(field, value) for field, value in given.items() if value and field not in _OF_ONE_ENGINE]
    return "\n".join(lines) + "\n"


def _line(field: str, value: object) -> str:
    return f"{field} = {json.dumps(value, ensure_ascii=False)}"


def _write(path: Path, text: str) -> None:
    """Put a text in the place of a file, once it has shown that it can be read back as a schedule."""
    new = path.with_name(f"{path.stem}.new.toml")
    try:
        new.write_text(text, encoding="utf-8")
        read_tasks(find_schedule(str(new)))
        os.replace(new, path)
    except OSError as error:
        raise Refused(f"{path} cannot be written: {error.strerror}", "choose another file") from error
    finally:
        new.unlink(missing_ok=True)
