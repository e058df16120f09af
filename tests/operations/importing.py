"""A small yard, and files brought into it."""

from collections.abc import Sequence
from datetime import date
from decimal import Decimal
from itertools import zip_longest

import pytest

from fleetcare.context import Context
from fleetcare.drafts.items import EngineDraft, MachineDraft
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.tasks import TaskDraft
from fleetcare.drafts.work import CorrectionDraft, LogDraft, ReadingDraft
from fleetcare.errors import Refused
from fleetcare.exchange.csv_in import read_rows
from fleetcare.operations.correct import correct_entry
from fleetcare.operations.due import due_rows
from fleetcare.operations.find import find_item
from fleetcare.operations.imports import import_columns, store_import
from fleetcare.operations.imports_rows import Imported
from fleetcare.operations.items import add_item
from fleetcare.operations.log import record_work
from fleetcare.operations.readings import record_reading
from fleetcare.operations.rows import fetch
from fleetcare.operations.tasks import add_task
from fleetcare.operations.upkeep import check

TODAY = date(2026, 5, 1)


def engine(ctx: Context, tag: str, **options: object) -> None:
    """Add an engine."""
    with ctx.write() as session:
        add_item(session, read_draft(EngineDraft, {"tag": tag, **options}), TODAY)


def machine(ctx: Context, tag: str, **options: object) -> None:
    """Add a machine."""
    with ctx.write() as session:
        add_item(session, read_draft(MachineDraft, {"tag": tag, **options}), TODAY)


def task(ctx: Context, tag: str, name: str, **options: object) -> None:
    """Add a task."""
    with ctx.write() as session:
        item = find_item(session.connection(), tag)
        add_task(session, item, read_draft(TaskDraft, {"name": name, **options}), TODAY)


def reading(ctx: Context, tag: str, on: str, value: str, **options: object) -> int:
    """Write down a reading and give its id."""
    with ctx.write() as session:
        return record_reading(session, read_draft(ReadingDraft, {"tag": tag, "on": on, "value": value, **options})).id


def take_in(ctx: Context, kind: str, header: str, *rows: str) -> Imported:
    """Import a file of some rows."""
    file = read_rows("\n".join([header, *rows]).encode(), *import_columns(kind))
    with ctx.write() as session:
        return store_import(session, kind, file, TODAY)


def refusals(ctx: Context, kind: str, header: str, *rows: str) -> list[str]:
    """The lines a file is refused with; nothing of it may be stored."""
    before = check(ctx)
    with pytest.raises(Refused) as error:
        take_in(ctx, kind, header, *rows)
    assert check(ctx) == before
    assert error.value.exit_code == 1
    return error.value.lines()


def readings(ctx: Context) -> list[tuple[str, str, str]]:
    """Every reading as meter owner, day and figure as entered, start figures left out."""
    with ctx.read() as connection:
        rows = fetch(
            connection,
            'select item.tag, reading."on", reading.value, reading.unit from reading'
            " join meter on meter.id = reading.meter_id join item on item.id = meter.item_id"
            " where note <> 'start figure' order by item.tag, reading.\"on\", reading.value_sort, reading.id",
        )
    return [(tag, on, f"{value}{unit}") for tag, on, value, unit in rows]


def points(ctx: Context) -> dict[str, tuple[Decimal | None, date | None]]:
    """The due point of each line: on the meter and on the calendar."""
    with ctx.read() as connection:
        rows = due_rows(connection, TODAY)
    return {f"{row.engine} {row.task}": (row.next_due_at, row.next_due_on) for row in rows}


def entries(ctx: Context) -> list[tuple[int, str, str, str, str]]:
    """Every entry as number, day, tasks with covered ones in brackets, person and note."""
    with ctx.read() as connection:
        rows = fetch(
            connection,
            "select entry.id, entry.\"on\", coalesce(person.name, ''), note from log_entry entry"
            " left join person on person.id = entry.person_id order by entry.id",
        )
        tasks = fetch(
            connection,
            "select entry_id, name, covered_by_id from log_task join task on task.id = task_id order by log_task.id",
        )
    names: dict[int, list[str]] = {}
    for entry, name, covered in tasks:
        names.setdefault(entry, []).append(f"({name})" if covered else name)
    return [(number, on, " ".join(names.get(number, ())), by, note) for number, on, by, note in rows]


def log(ctx: Context, on: str, *names: str, **values: object) -> int:
    """Log work by hand and give the entry's number."""
    with ctx.write() as session:
        draft = read_draft(LogDraft, {"tag": "P-01", "task": list(names), "on": on, **values})
        return record_work(session, draft, TODAY).entries[0][0]


def correct(ctx: Context, entry: int, **values: object) -> None:
    """Correct an entry by hand."""
    with ctx.write() as session:
        correct_entry(session, read_draft(CorrectionDraft, {"entry": entry, **values}), TODAY)


def yard_with_a_log(ctx: Context) -> Context:
    """P-01, read at 1500 h on 1 May 2026, with four tasks that nobody knows when were last done."""
    engine(ctx, "P-01", meter=["hours"])
    reading(ctx, "P-01", "2026-05-01", "1500")
    task(ctx, "P-01", "Oil", every=["250h", "12mo"])
    task(ctx, "P-01", "Lash", every=["1000h"], needs_sheet="lash")
    task(ctx, "P-01", "Belts", every=["24mo"])
    task(ctx, "P-01", "Big service", every=["1000h"], covers=["Oil", "Lash", "Belts"])
    return ctx


def beginnings(lines: Sequence[str], wanted: Sequence[str]) -> list[str]:
    """As much of each line as is wanted of it, to be compared with what is wanted."""
    return [line[: len(want)] if want else line for line, want in zip_longest(lines, wanted, fillvalue="")]
