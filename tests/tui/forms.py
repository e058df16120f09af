"""Forms in tests: opened, filled in, and what was recorded then."""

import sqlite3
from collections.abc import Mapping
from contextlib import closing
from pathlib import Path

from textual.pilot import Pilot

from fleetcare.tui.forms.base import Subject
from fleetcare.tui.screens.form import FormScreen
from fleetcare.tui.writing import WritingScreen
from tests.tui.conftest import settle_down


async def form_with(pilot: Pilot[None], name: str, subject: Subject, values: Mapping[str, str]) -> FormScreen:
    """Open a form and put values in its fields as if they were typed."""
    screen = pilot.app.screen
    assert isinstance(screen, WritingScreen)
    screen.open_form(name, subject)
    await settle_down(pilot)
    form = pilot.app.screen
    assert isinstance(form, FormScreen)
    fill_in(form, values)
    await settle_down(pilot)
    return form


def fill_in(form: FormScreen, values: Mapping[str, str]) -> None:
    """Put values in the fields of a form as if they were typed."""
    for field, text in values.items():
        form.rows[field].editor.value = text


def stored(db: Path) -> int:
    """Give how much is recorded in a database."""
    with closing(sqlite3.connect(db)) as connection:
        return int(connection.execute("select count(*) from ledger").fetchone()[0])
