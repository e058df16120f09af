"""The log of an engine or machine as it stands in the history: nothing left out, corrected and voided entries too."""

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.meters import LifeFigure
from fleetcare.domain.quantities import COUNTED, Kind, plain, tenth
from fleetcare.operations.load import entry_lives, own_readings
from fleetcare.operations.rows import Row, fetch, figure, grouped, known_day
from fleetcare.operations.sheets_load import load_values
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.row import unit_of
from fleetcare.rules.explain import say_amount
from fleetcare.rules.explain_run import RUN, say_run

if TYPE_CHECKING:
    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class HistoryEntry:
    """One log entry as it stands in the history; superseded and voided ones stay readable.

    `tasks` names what it closed, `sheet` the kind of sheet it stands with, empty without one.
    """

    number: int
    on: date
    kind: str
    what: str
    by: str
    figures: str
    remark: str
    tasks: str = ""
    sheet: str = ""


@dataclass(frozen=True, slots=True)
class _Told:
    """What belongs to an entry: its tasks, the figures typed with it, the parts used, and its sheets."""

    tasks: Sequence[Row]
    figures: Sequence[Row]
    parts: Sequence[Row]
    sheets: Sequence[Row]


def item_history(connection: "Connection", facts: ItemFacts) -> list[HistoryEntry]:
    """Give the log of an item up to the day of its facts, newest first: by day, life total, then number."""
    entries = fetch(
        connection,
        'select entry.id, entry."on", entry.kind, entry.title, entry.note, entry.component, entry.downtime_hours,'
        " entry.litres, entry.litres_unit, coalesce(person.name, ''), entry.supersedes_id, entry.is_void, entry.why,"
        " later.id, later.is_void"
        " from log_entry entry left join person on person.id = entry.person_id"
        " left join log_entry later on later.supersedes_id = entry.id"
        ' where entry.item_id = :id and entry."on" <= :on',
        id=facts.item.id,
        on=facts.on.isoformat(),
    )
    told = _load_told(connection, facts.item.id, [row[0] for row in entries])
    own = own_readings(facts.counters)
    lives = {row[0]: entry_lives(facts.counters, own, row[0], known_day(row[1])) for row in entries}
    ordered = sorted(entries, key=lambda row: _place(row, lives[row[0]]), reverse=True)
    return [_entry(row, told[row[0]], _say_figures(row, told[row[0]], lives[row[0]], facts)) for row in ordered]


def _load_told(connection: "Connection", item_id: int, numbers: Sequence[int]) -> dict[int, _Told]:
    tasks = fetch(
        connection,
        "select entry_id, task.name, part_done, covered_by_id from log_task join task on task.id = log_task.task_id"
        " where entry_id in :ids order by log_task.id",
        ids=numbers,
    )
    figures = fetch(
        connection, "select entry_id, value, unit from reading where entry_id in :ids order by id", ids=numbers
    )
    parts = fetch(
        connection, "select entry_id, name, quantity from log_part where entry_id in :ids order by id", ids=numbers
    )
    sheets = fetch(
        connection,
        "select entry_id, kind, conditions, gauge, (select count(*) from sheet_value where sheet_id = sheet.id), id"
        " from sheet where entry_id in :ids order by id",
        ids=numbers,
    )
    told = [(*row, run) for row, run in zip(sheets, _say_runs(connection, item_id, sheets), strict=True)]
    found = [grouped(rows) for rows in (tasks, figures, parts, told)]
    return {number: _Told(*(rows.get(number, []) for rows in found)) for number in numbers}


def _say_runs(connection: "Connection", item_id: int, sheets: Sequence[Row]) -> list[str]:
    """Say what each sheet has of a test run, nothing of those of other kinds."""
    values = load_values(connection, [row[5] for row in sheets if row[1] == RUN])
    rated = fetch(connection, "select rated_kw from engine where item_id = :id", id=item_id) if values else []
    rated_kw = next((figure(row[0]) for row in rated), None)
    return [say_run(values.get(row[5], ()), rated_kw) for row in sheets]


def _place(row: Row, lives: Mapping[Kind, LifeFigure]) -> tuple[date, list[Decimal], int]:
    return known_day(row[1]), [lives[kind].value for kind in COUNTED if kind in lives], row[0]


def _say_figures(row: Row, told: _Told, lives: Mapping[Kind, LifeFigure], facts: ItemFacts) -> str:
    """Say the figures typed with an entry; without any, what work that counts is taken to have been done at."""
    if told.figures:
        return ", ".join(f"{plain(Decimal(value))} {unit}" for _, value, unit in told.figures)
    is_current = not row[11] and row[13] is None
    return ", ".join(_say_life(facts, kind, life) for kind, life in lives.items() if is_current and told.tasks)


def _say_life(facts: ItemFacts, kind: Kind, life: LifeFigure) -> str:
    """Say a life total as the dial now counting shows it, ~ before one that was not read."""
    unit, dial = unit_of(facts, kind), facts.counters[kind].dial_of(life.value)
    shown = f"{plain(tenth(dial))} {unit}" if dial is not None else f"{say_amount(life.value, unit)} of life"
    return f"~{shown}" if life.approximate else shown


def _entry(row: Row, told: _Told, figures: str) -> HistoryEntry:
    number, day, kind, title, note, component, downtime, litres, litres_unit, by, *chain = row
    names = [
        f"{name}{' (in part)' if part else ''}{' (covered)' if covered else ''}"
        for _, name, part, covered in told.tasks
    ]
    what = [
        ", ".join(names),
        title,
        component,
        f"{plain(Decimal(litres))} {litres_unit}" if litres else "",
        ", ".join(f"{plain(Decimal(quantity))} × {name}" for _, name, quantity in told.parts),
        ", ".join(_say_sheet(*sheet) for _, *sheet in told.sheets),
        f"{plain(Decimal(downtime))} h out of service" if downtime else "",
        note,
    ]
    return HistoryEntry(
        number=number,
        on=known_day(day),
        kind=kind,
        what=_joined(what, "; "),
        by=by,
        figures=figures,
        remark=_say_chain(*chain),
        tasks=", ".join(name for _, name, part, covered in told.tasks if not part and not covered),
        sheet=next((sheet for _, sheet, *_ in told.sheets), ""),
    )


def _say_sheet(kind: str, condition: str, gauge: str, values: int, _: int, run: str) -> str:
    """Name a sheet that came with an entry: "lash sheet, 24 values, cold, gauge F2", "run sheet, 35 min at 30 %, test"."""
    count = f"{values} {'value' if values == 1 else 'values'}"
    return _joined([f"{kind} sheet", run or count, condition, gauge and f"gauge {gauge}"], ", ")


def _say_chain(supersedes: int | None, is_void: bool, why: str, later: int | None, later_void: bool) -> str:
    """Say what an entry corrects or voids, why, and what became of it."""
    told = f"{'voids' if is_void else 'corrects'} entry {supersedes}" if supersedes else ""
    became = f"{'voided' if later_void else 'corrected'} by entry {later}" if later else ""
    return _joined([told, why, became], ", ")


def _joined(texts: Iterable[str], separator: str) -> str:
    return separator.join(text for text in texts if text)
