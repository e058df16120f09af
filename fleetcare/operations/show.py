"""One engine or machine on one page: nameplate, meters, readings, lines, history."""

from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.engines import status_on
from fleetcare.domain.lines import DueLine
from fleetcare.domain.quantities import plain
from fleetcare.operations.find import FoundItem, find_item, find_task
from fleetcare.operations.load import item_facts
from fleetcare.operations.plate_figures import derived_figures
from fleetcare.operations.rows import Row, fetch, grouped
from fleetcare.rules.due.due_list import in_order, item_lines
from fleetcare.rules.due.facts import ItemFacts
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
    ("adjuster", "adjuster", ""),
    ("oil_grade", "oil grade", ""),
    ("sump_l", "sump", " L"),
    ("rated_rpm", "rated speed", " rpm"),
    ("rated_kw", "rated power", " kW"),
    ("altitude_m", "altitude", " m"),
)


@dataclass(frozen=True, slots=True)
class HistoryEntry:
    """One log entry as it stands in the history; superseded and voided ones stay readable."""

    number: int
    on: date
    kind: str
    what: str
    by: str
    figures: str
    remark: str


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
    item = find_item(connection, tag, even_withdrawn=True)
    facts = item_facts(connection, on, [item.id])[0]
    lines = in_order(item_lines(facts, is_future))
    return ItemPage(
        facts=facts,
        nameplate=tuple(_nameplate(connection, item, facts, on)),
        meters=tuple(_meters(facts)),
        readings=tuple(_readings(connection, item, on)),
        lines=tuple(lines),
        rows=tuple(due_row(line, facts) for line in lines),
        history=tuple(_history(connection, item, on)),
    )


def task_working(
    connection: "Connection", tag: str, name: str, on: date, *, is_future: bool = False
) -> tuple[list[Label], list[Label]]:
    """Give a line's working, and what each entry did to its task, newest first."""
    item = find_item(connection, tag)
    task_id = find_task(connection, item, name)
    facts = item_facts(connection, on, [item.id])[0]
    line = next((line for line in item_lines(facts, is_future) if line.task.id == task_id), None)
    if line is None:
        return [("state", "no line: done once, ended, or not called for")], []
    past = [(f"entry {work.number}, {work.on.isoformat()}", say_past(work, line, facts)) for work in line.past]
    return explain(line, facts), past[::-1]


def _nameplate(connection: "Connection", item: FoundItem, facts: ItemFacts, on: date) -> list[Label]:
    found = facts.item
    labels = [("tag", found.tag), ("name", found.name), ("site", found.site)]
    if item.is_engine:
        labels += [("machine", found.machine), ("status", status_on(found.spells, on).value)]
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
        shown = f"{plain(dial)} {unit} on the dial, " if dial is not None else ""
        labels.append((kind.value, f"{shown}{say_amount(latest.life, unit)} of life, read {latest.on.isoformat()}"))
    return labels


def _readings(connection: "Connection", item: FoundItem, on: date) -> list[ReadingLine]:
    """Give the readings of an item's meters, newest first."""
    rows = fetch(
        connection,
        'select reading.id, reading."on", reading.value, reading.unit, reading.rolled_over, reading.note,'
        " reading.entry_id, (select mark || ': ' || why from reading_mark where reading_id = reading.id"
        " order by id desc limit 1) from reading where meter_id in (select meter_id from meter_fit where item_id = :id)"
        ' and reading."on" <= :on order by reading."on" desc, reading.id desc',
        id=item.id,
        on=on.isoformat(),
    )
    lines = []
    for number, day, value, unit, rolled, note, entry, mark in rows:
        remarks = [mark or "", "rolled over" if rolled else "", note, f"entry {entry}" if entry else ""]
        remark = ", ".join(text.rstrip(": ") for text in remarks if text)
        lines.append(ReadingLine(number, date.fromisoformat(str(day)), f"{plain(Decimal(value))} {unit}", remark))
    return lines


def _history(connection: "Connection", item: FoundItem, on: date) -> list[HistoryEntry]:
    """Give the log of an item, newest first, corrected and voided entries with what became of them."""
    entries = fetch(
        connection,
        'select entry.id, entry."on", entry.kind, entry.title, entry.note, entry.litres, entry.litres_unit,'
        " coalesce(person.name, ''), entry.supersedes_id, entry.is_void, entry.why, later.id, later.is_void"
        " from log_entry entry left join person on person.id = entry.person_id"
        " left join log_entry later on later.supersedes_id = entry.id"
        ' where entry.item_id = :id and entry."on" <= :on order by entry."on" desc, entry.id desc',
        id=item.id,
        on=on.isoformat(),
    )
    numbers = [row[0] for row in entries]
    tasks = grouped(
        fetch(
            connection,
            "select entry_id, task.name, part_done, covered_by_id from log_task join task on task.id = log_task.task_id"
            " where entry_id in :ids order by log_task.id",
            ids=numbers,
        )
    )
    figures = grouped(
        fetch(connection, "select entry_id, value, unit from reading where entry_id in :ids order by id", ids=numbers)
    )
    return [_entry(row, tasks.get(row[0], []), figures.get(row[0], [])) for row in entries]


def _entry(row: Row, tasks: list[Row], figures: list[Row]) -> HistoryEntry:
    number, day, kind, title, note, litres, litres_unit, by, supersedes, is_void, why, later, later_void = row
    names = [
        f"{name}{' (in part)' if part else ''}{' (covered)' if covered else ''}" for _, name, part, covered in tasks
    ]
    what = [", ".join(names), title, f"{plain(Decimal(litres))} {litres_unit}" if litres else "", note]
    remarks = [
        f"voids entry {supersedes}" if is_void else (f"corrects entry {supersedes}" if supersedes else ""),
        why,
        f"{'voided' if later_void else 'corrected'} by entry {later}" if later else "",
    ]
    return HistoryEntry(
        number,
        date.fromisoformat(str(day)),
        kind,
        "; ".join(text for text in what if text),
        by,
        ", ".join(f"{plain(Decimal(value))} {unit}" for _, value, unit in figures),
        ", ".join(text for text in remarks if text),
    )
