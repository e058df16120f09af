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
from fleetcare.drafts.work import ReadingDraft
from fleetcare.errors import Refused
from fleetcare.exchange.csv_in import read_rows
from fleetcare.operations.due import due_rows
from fleetcare.operations.find import find_item
from fleetcare.operations.imports import import_columns, store_import
from fleetcare.operations.imports_rows import Imported
from fleetcare.operations.items import add_item
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


def beginnings(lines: Sequence[str], wanted: Sequence[str]) -> list[str]:
    """As much of each line as is wanted of it, to be compared with what is wanted."""
    return [line[: len(want)] if want else line for line, want in zip_longest(lines, wanted, fillvalue="")]
