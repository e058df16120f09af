"""Schedules as data: named sets of tasks in TOML files, one a schedule, shipped ones beside this module.

A file has `name`, `source` and `note`, says in `engines`, `fuel` and `duty` what it is for, and lists its tasks under
`[[task]]` with the options of `task add`, hyphens written as underscores. What says when one engine's counting begins
(last done, grid origin) has no place in it. Here a file is held to its form; whether intervals make sense together is
for the drafts, which need more than a quick list should load.
"""

import re
import tomllib
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from difflib import get_close_matches
from pathlib import Path
from typing import Any

from fleetcare.errors import Refusals, Refused

FOLDER = Path(__file__).parent / "schedules"

_REQUIRED = ("name", "source", "note")
_DESCRIPTIVE = ("fuel", "duty", "engines")
_MARK = "true or false"
_TEXT = "text in quotes"
_TEXTS = "text in quotes, or a list of such in brackets"
_OPTIONS = {
    **dict.fromkeys(("every", "first", "ahead", "grace", "part", "covers"), _TEXTS),
    **dict.fromkeys(("combine", "anchor", "once_each", "window", "not_later_than", "work"), _TEXT),
    **dict.fromkeys(("needs_sheet", "deferrable", "labour", "caution", "source"), _TEXT),
    **dict.fromkeys(("through_month_end", "law", "insurer", "once", "on_condition", "pause_while_laid_up"), _MARK),
}


@dataclass(frozen=True, slots=True)
class Schedule:
    """A named set of tasks, with the options of each as written, those left out absent.

    `engines`, `fuel` and `duty` say in words what it is for; `is_for_engines` that its tasks hang on an engine, not on
    a machine. A task covers only tasks above it. The id of a shop's own is its path. `text` is the file it was read from.
    """

    id: str
    name: str
    source: str
    note: str
    fuel: str
    duty: str
    engines: str
    is_for_engines: bool
    tasks: tuple[Mapping[str, object], ...]
    text: str


def shipped_schedules() -> tuple[Schedule, ...]:
    """Give every schedule that comes with the program, by id."""
    return tuple(_read(path, path.stem) for path in sorted(FOLDER.glob("*.toml"), key=_by_number))


def is_file_name(name: str) -> bool:
    """Whether a schedule is named as a file of the shop's own rather than by id."""
    return name.lower().endswith(".toml") or "/" in name or "\\" in name


def find_schedule(name: str) -> Schedule:
    """Give a shipped schedule by id, or a shop's own from a TOML file. Refuses an unknown one and one not in form."""
    if is_file_name(name):
        return _read(Path(name), name)
    ids = {path.stem: path for path in FOLDER.glob("*.toml")}
    known = ids.get(name.strip().lower())
    if known is not None:
        return _read(known, known.stem)
    near = get_close_matches(name.strip().lower(), ids, n=3)
    remedy = f"did you mean {' or '.join(near)}?" if near else "see fleetcare schedule list, or name a .toml file"
    raise Refused(f"there is no schedule {name!r}", remedy)


def _read(path: Path, schedule_id: str) -> Schedule:
    """Read one file. Everything not in form is refused together, each with file, task and field."""
    try:
        text = path.read_text(encoding="utf-8-sig")
        content = tomllib.loads(text)
    except OSError as error:
        raise Refused(f"cannot read {schedule_id}: {error.strerror}", "name a TOML file that can be read") from None
    except UnicodeDecodeError:
        raise Refused(f"{schedule_id} is not UTF-8 text", "save it as UTF-8") from None
    except tomllib.TOMLDecodeError as error:
        raise Refused(f"{schedule_id} is not TOML: {error}", "correct it there") from None
    wrong = [Refused(f"{schedule_id}{detail}", remedy) for detail, remedy in _faults(content)]
    if wrong:
        raise wrong[0] if len(wrong) == 1 else Refusals(wrong)
    return Schedule(
        id=schedule_id,
        **{field: content.get(field, "") for field in (*_REQUIRED, *_DESCRIPTIVE)},
        is_for_engines=content.get("is_for_engines", False),
        # A task without a source of its own has the schedule's.
        tasks=tuple(task | {"source": task.get("source", content["source"])} for task in content["task"]),
        text=text,
    )


def _by_number(path: Path) -> list[int | str]:
    """Order item 4 of a table before item 10."""
    return [int(part) if part.isdigit() else part for part in re.split("([0-9]+)", path.stem)]


Fault = tuple[str, str]


def _faults(content: Mapping[str, Any]) -> Iterator[Fault]:
    """Say what of a file is not in form: where and what, and how to mend it."""
    for field in _REQUIRED:
        if not content.get(field):
            yield f": {field} is missing", "give it at the top of the file"
    for field, value in content.items():
        if field in (*_REQUIRED, *_DESCRIPTIVE):
            yield from _misfit(f": {field}", value, _TEXT)
        elif field == "is_for_engines":
            yield from _misfit(f": {field}", value, _MARK)
        elif field != "task":
            yield f": {field} is not known here", "leave it out, check its spelling, or put it under a [[task]]"
    tasks = content.get("task")
    if not isinstance(tasks, list) or not tasks or not all(isinstance(task, dict) for task in tasks):
        yield ": it has no tasks", "begin each with [[task]] on a line of its own"
        return
    above: set[str] = set()
    for number, task in enumerate(tasks, start=1):
        yield from _task_faults(number, task, above)


def _task_faults(number: int, task: Mapping[str, Any], above: set[str]) -> Iterator[Fault]:
    name = task.get("name", "")
    is_named = isinstance(name, str) and bool(name.strip())
    where = f", task {name!r}" if is_named else f", task {number}"
    if not is_named:
        yield f"{where}: name is missing", "give it, as text in quotes"
    for field, value in task.items():
        if field == "name":
            continue
        if field not in _OPTIONS:
            yield f"{where}: {field} is not known here", "use the options of fleetcare task add, with _ for -"
        else:
            yield from _misfit(f"{where}: {field}", value, _OPTIONS[field])
    covers = task.get("covers", ())
    for covered in [covers] if isinstance(covers, str) else covers if isinstance(covers, list) else ():
        if _key(covered) not in above:
            yield f"{where}: covers {covered!r}, which is no task above it", "put the smaller job above the bigger one"
    if is_named and _key(name) in above:
        yield f"{where}: the name is taken by a task above it", "give each task a name of its own"
    above.add(_key(name))


def _misfit(where: str, value: object, form: str) -> Iterator[Fault]:
    texts = value if form is _TEXTS and isinstance(value, list) else [value]
    wanted = bool if form is _MARK else str
    for text in texts:
        if not isinstance(text, wanted):
            yield f"{where} is {text!r}", f"write {form}"


def _key(name: object) -> str:
    return " ".join(str(name).split()).casefold()
