"""One engine or machine on one page: nameplate, meters, readings, lines, history."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.engines import Status, StatusSpell, status_on
from fleetcare.domain.lines import DueLine
from fleetcare.domain.measured import SHEET_KINDS
from fleetcare.domain.quantities import plain, tenth
from fleetcare.domain.schedules import Task
from fleetcare.operations.find import FoundItem, find_item, find_task
from fleetcare.operations.history import HistoryEntry as HistoryEntry
from fleetcare.operations.history import item_history
from fleetcare.operations.load import item_facts
from fleetcare.operations.plate_figures import derived_figures
from fleetcare.operations.rows import fetch
from fleetcare.operations.sheet_report import SheetReport, last_report
from fleetcare.rules.due.due_list import in_order, item_lines
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.replay import replay
from fleetcare.rules.due.row import DueRow, due_row
from fleetcare.rules.explain import Label, explain, say_amount, say_past

if TYPE_CHECKING:
    from sqlalchemy import Connection

# Columns of the nameplate with their labels and units, in the order shown.
_NAMEPLATE = (
    ("duty", "duty", ""),
    ("fuel", "fuel", ""),
    ("cylinders", "cylinders", ""),
    ("layout", "layout", ""),
    ("numbering", "numbering", ""),
    ("firing_order", "firing order", ""),
    ("bore_mm", "bore", " mm"),
    ("stroke_mm", "stroke", " mm"),
    ("rod_mm", "rod", " mm"),
    ("compression_ratio", "compression ratio", ""),
    ("valves_per_cylinder", "valves per cylinder", ""),
    ("intake_closes_deg", "intake closes", "° after bottom dead centre"),
    ("bridged", "bridged valves", ""),
    ("adjuster", "adjuster", ""),
    ("screw_pitch_mm", "screw pitch", " mm"),
    ("screw_at", "screw at", ""),
    ("rocker_ratio", "rocker ratio", ""),
    ("shim_step_mm", "shim step", " mm"),
    ("oil_grade", "oil grade", ""),
    ("sump_l", "sump", " L"),
    ("rated_rpm", "rated speed", " rpm"),
    ("rated_kw", "rated power", " kW"),
    ("altitude_m", "altitude", " m"),
)


@dataclass(frozen=True, slots=True)
class ReadingLine:
    """One reading as entered, with what was decided about it."""

    number: int
    on: date
    shown: str
    remark: str


@dataclass(frozen=True, slots=True)
class ItemPage:
    """Everything about one item on one day."""

    facts: ItemFacts
    nameplate: tuple[Label, ...]
    meters: tuple[Label, ...]
    readings: tuple[ReadingLine, ...]
    lines: tuple[DueLine, ...]
    rows: tuple[DueRow, ...]
    history: tuple[HistoryEntry, ...]


def item_page(connection: "Connection", tag: str, on: date, *, is_future: bool = False) -> ItemPage:
    """Load the page of an engine or machine as of a day."""
    item = find_item(connection, tag, on=on, even_withdrawn=True)
    facts = item_facts(connection, on, [item.id])[0]
    lines = in_order(item_lines(facts, is_future))
    return ItemPage(
        facts=facts,
        nameplate=tuple(_nameplate(connection, item, facts, on)),
        meters=tuple(_meters(facts)),
        readings=tuple(_readings(connection, item, on)),
        lines=tuple(lines),
        rows=tuple(due_row(line, facts) for line in lines),
        history=tuple(item_history(connection, facts)),
    )


def task_working(
    connection: "Connection", tag: str, name: str, on: date, *, is_future: bool = False
) -> tuple[list[Label], list[Label]]:
    """Give a line's working, and what each entry did to its task, newest first; of a task without a line the latter."""
    item = find_item(connection, tag, on=on, even_withdrawn=True)
    task_id = find_task(connection, item, name, on=on, even_ended=True)
    facts = item_facts(connection, on, [item.id])[0]
    task = next(task for task in facts.tasks if task.id == task_id)
    line = next((line for line in item_lines(facts, is_future) if line.task.id == task_id), None)
    working = explain(line, facts) if line is not None else [("state", f"no line: {_why_no_line(facts, task)}")]
    past = [(f"entry {work.number}, {work.on.isoformat()}", say_past(work, facts)) for work in replay(facts, task).past]
    return working, past[::-1]


def task_sheet(connection: "Connection", tag: str, name: str, on: date) -> SheetReport | None:
    """Give the newest sheet of the kind a task is about, judged; None where it is about none, or there is none yet."""
    item = find_item(connection, tag, on=on, even_withdrawn=True)
    task_id = find_task(connection, item, name, on=on, even_ended=True)
    task = next(task for task in item_facts(connection, on, [item.id])[0].tasks if task.id == task_id)
    version = task.version_on(on)
    kind = next((kind for kind in (version.needs_sheet, version.work) if kind in SHEET_KINDS), "")
    return last_report(connection, item, on, kind) if kind and item.is_engine else None


def _why_no_line(facts: ItemFacts, task: Task) -> str:
    if status_on(facts.item.spells, facts.on) is Status.WITHDRAWN:
        return f"{facts.item.tag} is withdrawn"
    if task.removed_on is not None and task.removed_on <= facts.on:
        return f"ended on {task.removed_on.isoformat()}"
    return "not called for" if task.version_on(facts.on).on_condition else "done once"


def _nameplate(connection: "Connection", item: FoundItem, facts: ItemFacts, on: date) -> list[Label]:
    found = facts.item
    labels = [("tag", found.tag), ("name", found.name), ("site", found.site)]
    if item.is_engine:
        position = _position(connection, item, on)
        labels += [("machine", f"{found.machine}, {position}" if position else found.machine)]
        labels.append(("status", _say_status(found.spells, on)))
    if found.in_service_on is not None:
        labels.append(("in service", f"{found.in_service_on.isoformat()}{', counted as new' if found.as_new else ''}"))
    columns = ", ".join(column for column, _, _ in _NAMEPLATE)
    for row in fetch(connection, f"select {columns} from engine where item_id = :id", id=item.id):
        labels += [
            (label, f"{value}{unit}")
            for (_, label, unit), value in zip(_NAMEPLATE, row, strict=True)
            if value is not None
        ]
        labels += derived_figures({column: value for (column, _, _), value in zip(_NAMEPLATE, row, strict=True)})
    labels += _lash(connection, item, on)
    labels += [
        ("duty factor", f"{factor.kind} × {plain(factor.factor)} from {factor.from_on.isoformat()}: {factor.why}")
        for factor in found.factors
        if factor.from_on <= on
    ]
    return [(label, text) for label, text in labels if text]


def _position(connection: "Connection", item: FoundItem, on: date) -> str:
    """Give where in its machine an engine is fitted, empty where nobody said."""
    rows = fetch(
        connection,
        "select position from fitting where engine_id = :id and from_on <= :on and (to_on is null or to_on > :on)"
        " order by from_on, id",
        id=item.id,
        on=on.isoformat(),
    )
    return str(rows[-1][0]) if rows else ""


def _say_status(spells: Sequence[StatusSpell], on: date) -> str:
    """Say an engine's status, and where it was ever changed since when, why and by whom."""
    begun = [spell for spell in spells if spell.from_on <= on]
    if not begun:
        return Status.IN_SERVICE.value
    spell = begun[-1]
    why = f": {spell.why}" if spell.why else ""
    return f"{spell.status} since {spell.from_on.isoformat()}{why}{f' ({spell.by})' if spell.by else ''}"


def _lash(connection: "Connection", item: FoundItem, on: date) -> list[Label]:
    rows = fetch(
        connection,
        "select unit, intake_low, intake_high, exhaust_low, exhaust_high, set_intake, set_exhaust, condition"
        " from lash_spec where item_id = :id and from_on <= :on order by from_on, id",
        id=item.id,
        on=on.isoformat(),
    )
    if not rows:
        return []
    unit, intake_low, intake_high, exhaust_low, exhaust_high, set_intake, set_exhaust, condition = rows[-1]
    labels = []
    for name, low, high, setting in (
        ("lash intake", intake_low, intake_high, set_intake),
        ("lash exhaust", exhaust_low, exhaust_high, set_exhaust),
    ):
        parts = [f"check {low} to {high} {unit}" if low is not None else "", f"set {setting} {unit}" if setting else ""]
        text = ", ".join(part for part in parts if part)
        labels.append((name, f"{text}, {condition}" if text else ""))
    return labels


def _meters(facts: ItemFacts) -> list[Label]:
    labels = []
    for kind, counter in facts.counters.items():
        latest, unit = counter.latest, counter.unit
        if latest is None or unit is None:
            labels.append((kind.value, "not read yet"))
            continue
        dial = counter.dial_of(latest.life)
        shown = f"{plain(tenth(dial))} {unit} on the dial, " if dial is not None else ""
        labels.append((kind.value, f"{shown}{say_amount(latest.life, unit)} of life, read {latest.on.isoformat()}"))
    return labels


def _readings(connection: "Connection", item: FoundItem, on: date) -> list[ReadingLine]:
    """Give the readings of an item's own meters, and of others while they counted for it, newest first."""
    rows = fetch(
        connection,
        'select reading.id, reading."on", reading.value, reading.unit, reading.rolled_over, reading.note,'
        " reading.entry_id, coalesce(person.name, ''), (select mark || ': ' || why from reading_mark where reading_id = reading.id"
        " order by id desc limit 1) from reading join meter on meter.id = reading.meter_id"
        " left join person on person.id = reading.person_id"
        ' where reading."on" <= :on and (meter.item_id = :id or exists (select 1 from meter_fit fit'
        " where fit.meter_id = meter.id and fit.item_id = :id"
        ' and (fit.from_on is null or fit.from_on <= reading."on") and (fit.to_on is null or fit.to_on >= reading."on")))'
        ' order by reading."on" desc, reading.id desc',
        id=item.id,
        on=on.isoformat(),
    )
    lines = []
    for number, day, value, unit, rolled, note, entry, by, mark in rows:
        remarks = [
            mark or "",
            "rolled over" if rolled else "",
            note,
            f"entry {entry}" if entry else "",
            f"by {by}" if by else "",
        ]
        remark = ", ".join(text.rstrip(": ") for text in remarks if text)
        lines.append(ReadingLine(number, date.fromisoformat(str(day)), f"{plain(Decimal(value))} {unit}", remark))
    return lines
