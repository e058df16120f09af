"""Which tasks a sheet closes: those that need one of its kind, where it says of every point how it was left."""

import shlex
from collections.abc import Mapping, Sequence
from datetime import date
from types import MappingProxyType
from typing import TYPE_CHECKING, Protocol

from fleetcare.domain.schedules import Task
from fleetcare.domain.sheets import Sheet
from fleetcare.errors import Refused, SheetWanted
from fleetcare.operations.find import FoundItem
from fleetcare.operations.rows import fetch
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.facts import ItemFacts

if TYPE_CHECKING:
    from sqlalchemy import Connection

Sheets = Mapping[str, str]
"""The kinds of sheet that came along with an entry, each with why it closes no task, empty where it does."""

NONE_CAME: Sheets = MappingProxyType({})

_WITHOUT = "give --part-done to keep a note of the work until the sheet is there, or give it with --sheet FILE"
_INCOMPLETE = "add what is wanting, or give --sure to close it as it stands, or --part-done to keep it open"


class ComesAlong(Protocol):
    """A sheet of whatever kind, and why it closes no task."""

    @property
    def sheet(self) -> Sheet:
        """The sheet."""

    def why_open(self) -> str:
        """Say why it closes no task, empty where it does."""


def needed_sheets(connection: "Connection", item: FoundItem, names: Sequence[str], on: date) -> frozenset[str]:
    """Give the kinds of sheet that some tasks of an item, as somebody names them, needed on a day."""
    rows = fetch(
        connection,
        "select task.id, version.needs_sheet, version.from_on from task join task_version version"
        " on version.task_id = task.id where task.item_id = :item and task.name_key in :names"
        " order by version.from_on, version.id",
        item=item.id,
        names=[" ".join(name.split()).casefold() for name in names],
    )
    needed: dict[int, str] = {}
    for task, kind, from_on in rows:
        if task not in needed or from_on <= on.isoformat():
            needed[task] = kind
    return frozenset(filter(None, needed.values()))


def came_along(sheet: ComesAlong | None, *, sure: bool) -> Sheets:
    """Give the kind of a sheet and why it closes no task; where somebody is sure it closes as it stands."""
    return NONE_CAME if sheet is None else {sheet.sheet.kind: "" if sure else sheet.why_open()}


def why_open(task: Task, on: date, sheets: Sheets) -> str:
    """Say why a task that needed a sheet on a day is not closed, empty where nothing keeps it open."""
    kind = task.version_on(on).needs_sheet
    if not kind:
        return ""
    if kind not in sheets:
        return f"closes only with its {kind} sheet"
    return sheets[kind] and f"does not close with this {kind} sheet: {sheets[kind]}"


def refuse_without_sheet(task: Task, on: date, sheets: Sheets = NONE_CAME) -> None:
    """Refuse work on a task that needed a sheet on its day, where none that closes it came along."""
    why, kind = why_open(task, on, sheets), task.version_on(on).needs_sheet
    if why and kind in sheets:
        raise Refused(f"{task.name} {why}", _INCOMPLETE)
    if why:
        raise SheetWanted(f"{task.name} {why}", _WITHOUT, kind, task.name)


def say_still_open(
    facts: ItemFacts, entry: int, on: date, done: Sequence[str], covered: Sequence[str], sheets: Sheets
) -> list[str]:
    """Say which tasks the sheet of an entry could close and did not, and the command that does.

    `done` are the tasks the entry names, `covered` those it did along with them.
    """
    if "" not in sheets.values():
        return []
    lines = {line.task.id for line in item_lines(facts, recorded_only=True)}
    still = [
        task.name
        for task in facts.tasks
        if task.id in lines and task.name not in {*done, *covered} and sheets.get(task.version_on(on).needs_sheet) == ""
    ]
    words = ["fleetcare", "correct", str(entry), *(word for name in done for word in ("--task", name))]
    return [
        f"{name} stays open; to close it with this sheet give {shlex.join([*words, '--task', name])}" for name in still
    ]
