"""Sheets in tests: opened through the form of their work, filled in, and what was stored then."""

import sqlite3
from contextlib import closing

from textual.pilot import Pilot

from fleetcare.context import Context
from fleetcare.tui.forms.base import Subject
from fleetcare.tui.screens.sheet import SheetScreen
from tests.tui.conftest import press, seen
from tests.tui.forms import form_with

SIX = Subject("B-6", "Valve lash")
SINGLE = Subject("B-1", "Valve lash")
SMALL = (80, 24)


def rows(context: Context, query: str) -> list[tuple[object, ...]]:
    """Ask a database."""
    with closing(sqlite3.connect(context.path)) as connection:
        return connection.execute(query).fetchall()


def values_of(context: Context) -> list[tuple[object, ...]]:
    """Give the values stored, as point, phase and figure."""
    return rows(context, "select point, phase, coalesce(value, low || '..' || high) from sheet_value order by id")


async def sheet_of(pilot: Pilot[None], subject: Subject) -> SheetScreen:
    """Open the sheet of a task through the form its work is logged on."""
    await form_with(pilot, "log", subject, {"at": "1000", "by": "Fenn"})
    await press(pilot, "ctrl+s")
    screen = pilot.app.screen
    assert isinstance(screen, SheetScreen)
    return screen


def cell(screen: SheetScreen) -> tuple[str, str]:
    """Give point and phase of the cell under the cursor."""
    assert screen.grid.cursor is not None
    return screen.grid.cursor.point, screen.grid.cursor.phase


def said(pilot: Pilot[None]) -> str:
    """Give all that stands on the screen, in one line."""
    return " ".join(" ".join(seen(pilot)).split())


async def enter_all(pilot: Pilot[None], *texts: str) -> None:
    """Type values, Enter after each."""
    for text in texts:
        await press(pilot, *text, "enter")
