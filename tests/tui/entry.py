"""The entry line in tests: typed into, what stands below it, and the form an answer led to."""

from textual.pilot import Pilot

from fleetcare.tui.screens.entry import EntryScreen
from fleetcare.tui.screens.form import FormScreen
from tests.tui.conftest import press, seen, settle_down


async def type_line(pilot: Pilot[None], text: str) -> EntryScreen:
    """Type into the entry line, opening it first where it is not open."""
    if not isinstance(pilot.app.screen, EntryScreen):
        await press(pilot, "i")
    screen = pilot.app.screen
    assert isinstance(screen, EntryScreen)
    screen.editor.insert_text_at_cursor(text)
    await settle_down(pilot)
    return screen


def said(pilot: Pilot[None]) -> str:
    """Give what stands below the line typed, on one line."""
    lines = seen(pilot)
    place = next(number for number, line in enumerate(lines) if line.startswith("▌entry line"))
    return " ".join(" ".join(lines[place + 1 :]).split())


def form_in_front(pilot: Pilot[None]) -> FormScreen:
    """Give the form an answer led to."""
    screen = pilot.app.screen
    assert isinstance(screen, FormScreen)
    return screen
