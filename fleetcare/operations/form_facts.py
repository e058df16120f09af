"""What a form shows before anything is typed: whose it is, what its meters showed last, and names known."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.quantities import COUNTED, plain
from fleetcare.errors import Refused
from fleetcare.operations.due_words import notes, say_due
from fleetcare.operations.rows import fetch
from fleetcare.operations.show import item_page
from fleetcare.rulebook.schedules import shipped_schedules

if TYPE_CHECKING:
    from sqlalchemy import Connection

    from fleetcare.rules.due.row import DueRow
    from fleetcare.rules.meters import CounterHistory


@dataclass(frozen=True, slots=True)
class FormFacts:
    """`known` are names by what they name, likeliest first; `waiting` the lines of the item, worst first, said.

    `typed` is what an entry says, as typed.
    """

    known: Mapping[str, tuple[str, ...]]
    whose: str = ""
    meters: str = ""
    waiting: tuple[str, ...] = ()
    typed: Mapping[str, str] = field(default_factory=dict)
    is_engine: bool = True


def form_facts(connection: "Connection", tag: str, on: date, entry: int | None = None) -> FormFacts:
    """Load what a form on an engine or machine shows; refuses an unknown tag, and an entry there is not.

    Without a tag, for something new, it is what is known of the whole yard.
    """
    if not tag:
        return FormFacts(known=_known(connection))
    page = item_page(connection, tag, on)
    item = page.facts.item
    due = [row.task for row in page.rows]
    tasks = [task.name for task in page.facts.tasks if task.removed_on is None]
    machine = f"in {item.machine}" if item.machine not in {"", item.tag} else ""
    return FormFacts(
        whose=", ".join(word for word in (f"{item.name} {machine}".strip(), item.site) if word),
        meters="; ".join(filter(None, map(_shown_last, page.facts.counters.values()))),
        known={**_known(connection), "task": tuple(dict.fromkeys([*due, *tasks]))},
        waiting=tuple(map(_waiting, page.rows)),
        is_engine=item.is_engine,
        typed=entry_as_typed(connection, entry) if entry is not None else {},
    )


def _known(connection: "Connection") -> dict[str, tuple[str, ...]]:
    """Give the names known in the yard by what they name; people last named first."""
    return {
        "people": _names(connection, "select name from person order by id desc"),
        "sites": _names(connection, "select name from site order by name"),
        "machines": _names(
            connection, "select tag from item where not is_engine and withdrawn_on is null order by tag"
        ),
        "parts": _names(connection, "select name from task_part union select name from log_part order by name"),
        "work kinds": _names(connection, "select distinct work from task_version where work <> '' order by work"),
        **words_known(),
    }


def words_known() -> dict[str, tuple[str, ...]]:
    """Give what is known without a yard: shipped schedules, and the words some fields are written in."""
    return {
        "schedules": tuple(schedule.id for schedule in shipped_schedules()),
        "meter kinds": tuple(COUNTED),
        "fuels": ("diesel", "petrol"),
    }


def entry_as_typed(connection: "Connection", number: int) -> dict[str, str]:
    """Give what an entry says as one would type it, by the fields of a correction; refuses a number that is no entry."""
    rows = fetch(
        connection,
        "select entry.\"on\", entry.kind, entry.title, entry.note, coalesce(person.name, ''), entry.litres,"
        " entry.litres_unit, entry.component, entry.downtime_hours from log_entry entry"
        " left join person on person.id = entry.person_id where entry.id = :id",
        id=number,
    )
    if not rows:
        raise Refused(f"there is no entry {number}", "see the history for the numbers of its entries")
    on, kind, title, note, by, litres, unit, component, downtime = rows[0]
    tasks = fetch(
        connection,
        "select task.name, part_done from log_task join task on task.id = log_task.task_id"
        " where entry_id = :id and covered_by_id is null order by log_task.id",
        id=number,
    )
    figures = fetch(connection, "select value, unit from reading where entry_id = :id order by id", id=number)
    parts = fetch(connection, "select name, quantity from log_part where entry_id = :id order by id", id=number)
    return {
        "on": on,
        "at": "; ".join(f"{plain(Decimal(value))}{unit}" for value, unit in figures),
        "by": by,
        "note": note,
        "task": "; ".join(name for name, _ in tasks),
        "part_done": "yes" if any(part for _, part in tasks) else "no",
        "part": "; ".join(f"{name}:{plain(Decimal(quantity))}" for name, quantity in parts),
        "component": component,
        "downtime": f"{plain(Decimal(downtime))}h" if downtime else "",
        "top_up": f"{plain(Decimal(litres))}{unit}" if litres else "",
        "repair": title if kind == "repair" else "",
        "defect": title if kind == "defect" else "",
    }


def _waiting(row: "DueRow") -> str:
    """Say a line as it stands now, without its engine's status, which all lines share."""
    words = [row.state, say_due(row), *notes(row)]
    return f"{row.task}: {'; '.join(dict.fromkeys(word for word in words if not word.startswith(row.engine_status)))}"


def _shown_last(counter: "CounterHistory") -> str:
    """Say what a meter showed last, as the dial now counting shows it."""
    latest = counter.latest
    dial = counter.dial_of(latest.life) if latest is not None else None
    return f"{plain(dial)} {counter.unit} on {latest.on.isoformat()}" if latest is not None and dial is not None else ""


def _names(connection: "Connection", query: str) -> tuple[str, ...]:
    return tuple(row[0] for row in fetch(connection, query))
