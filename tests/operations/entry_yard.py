"""A yard to try the entry line on, as of 20 April 2026, set up once and copied."""

import shutil
from collections.abc import Callable
from datetime import date
from functools import cache
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.domain.engines import Status
from fleetcare.drafts.items import EngineDraft, MachineDraft
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.tasks import TaskDraft
from fleetcare.drafts.work import LogDraft, ReadingDraft
from fleetcare.operations.entry_line import ReadBack, read_back, store_line
from fleetcare.operations.find import find_engine, find_item
from fleetcare.operations.items import add_item
from fleetcare.operations.log import record_work
from fleetcare.operations.readings import record_reading
from fleetcare.operations.rows import fetch
from fleetcare.operations.spells import change_status
from fleetcare.operations.tasks import add_task, remove_task
from tests.conftest import NOW, counted_uids

TODAY = date(2026, 4, 20)

_NEW = {"in_service": "2024-01-10", "as_new": True}
_ITEMS: tuple[tuple[type[EngineDraft | MachineDraft], dict[str, object]], ...] = (
    (EngineDraft, {"tag": "P-03", "meter": ["hours"], "start_at": ["0"], **_NEW}),
    (MachineDraft, {"tag": "LR-1", "meter": ["distance"], "start_at": ["50000"], **_NEW}),
    (EngineDraft, {"tag": "LE-1", "machine": "LR-1", "meter": ["hours"], "in_service": "2024-01-10", "start_at": ["0h"]}),
    (EngineDraft, {"tag": "R-1", "meter": ["hours"], "meter_digits": ["4.1"], "start_at": ["9000"], "in_service": "2020-01-10"}),
    (EngineDraft, {"tag": "G-9", "meter": ["hours"]}),
    (EngineDraft, {"tag": "OLD-1"}),
)  # fmt: skip
_TASKS: tuple[tuple[str, str, dict[str, object]], ...] = (
    ("P-03", "Oil and filter", {"every": ["250h", "12mo"], "last_done": ["2025-10-01", "1000h"]}),
    ("P-03", "Air filter", {"every": ["500h"], "last_done": ["1000h"]}),
    ("P-03", "Valve lash", {"every": ["1000h"], "needs_sheet": "lash", "last_done": ["400h"]}),
    ("P-03", "Look", {"every": ["6mo"], "window": "10d", "last_done": ["2026-02-01"]}),
    ("P-03", "Test", {"once_each": "month", "last_done": ["2026-03-10"]}),
    ("P-03", "Bleed", {"on_condition": True}),
    ("P-03", "Wipe", {"every": ["1mo"], "last_done": ["2026-04-01"]}),
    ("P-03", "Annual service", {"every": ["1y"], "last_done": ["2025-05-01"], "covers": ["Oil and filter", "Valve lash", "Look", "Bleed", "Wipe"]}),
    ("P-03", "Retighten", {"every": ["50h"], "once": True}),
    ("P-03", "Gasket", {"every": ["300h", "2y"], "combine": "last", "not_later_than": "5y", "last_done": ["2025-01-01"]}),
    ("P-03", "Belts", {"every": ["2y"]}),
    ("LE-1", "Oil", {"every": ["10000km", "400h"], "last_done": ["55000km", "500h"]}),
    ("LR-1", "Brakes", {"every": ["20000km"], "last_done": ["50000km"]}),
    ("R-1", "Oil", {"every": ["250h"], "last_done": ["9900h"]}),
    ("G-9", "Oil", {"every": ["100h"]}),
    ("G-9", "Wash", {"every": ["1y", "500km"]}),
)  # fmt: skip
_READINGS = (
    ("P-03", "1000", "2025-10-01"),
    ("P-03", "1200", "2026-04-01"),
    ("LE-1", "600h", "2026-04-01"),
    ("LR-1", "61000", "2026-04-01"),
    ("R-1", "9990", "2026-04-18"),
)


@cache
def _made(empty: Path) -> Path:
    """Set the yard up beside an empty database, once a worker; never written to again."""
    path = Path(shutil.copy(empty, empty.with_name("entry.db")))
    with Context(str(path), TODAY, clock=lambda: NOW).write() as session:
        for draft, values in _ITEMS:
            add_item(session, read_draft(draft, values), TODAY)
        for tag, value, on in _READINGS:
            record_reading(session, read_draft(ReadingDraft, {"tag": tag, "value": value, "on": on}))
        for tag, name, values in _TASKS:
            item = find_item(session.connection(), tag)
            add_task(session, item, read_draft(TaskDraft, {"name": name, **values}), TODAY)
        remove_task(session, find_item(session.connection(), "P-03"), "Belts", TODAY, TODAY)
        change_status(
            session, find_engine(session.connection(), "OLD-1"), Status.WITHDRAWN, TODAY, why="worn out", by=None
        )
        round_note = {"tag": "P-03", "note": "first round", "by": "Fenn", "on": "2026-04-02"}
        record_work(session, read_draft(LogDraft, round_note), TODAY)
    return path


@pytest.fixture
def ctx(new_database: Path, tmp_path: Path) -> Context:
    """A copy of the yard, the test's own."""
    return Context(
        str(shutil.copy(_made(new_database), tmp_path / "yard.db")), TODAY, clock=lambda: NOW, uids=counted_uids()
    )


Reader = Callable[[str], ReadBack]


@pytest.fixture
def back(ctx: Context) -> Reader:
    """A function that reads a line back."""

    def read(text: str) -> ReadBack:
        with ctx.read() as connection:
            return read_back(connection, text, TODAY)

    return read


def store(ctx: Context, seen: ReadBack) -> list[str]:
    """Store a line as it was read back, and give all that was said of what came of it."""
    with ctx.write() as session:
        return store_line(session, seen, TODAY).sentences()


def rows(ctx: Context, query: str) -> list[tuple[object, ...]]:
    """Give what a query finds."""
    with ctx.read() as connection:
        return [tuple(row) for row in fetch(connection, query)]
