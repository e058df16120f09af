"""Keys typed without waiting for a screen: they land where they were aimed at, or nowhere."""

from textual.events import Key
from textual.pilot import Pilot

from fleetcare.context import Context
from fleetcare.tui.forms.base import Subject
from fleetcare.tui.screens.due import DueScreen
from fleetcare.tui.screens.form import FormScreen
from fleetcare.tui.screens.sheet import SheetScreen
from fleetcare.tui.widgets.question import Question
from tests.tui.conftest import Opened, press, settle_down
from tests.tui.forms import form_with
from tests.tui.sheets import SMALL

NAMED = {".": "full_stop", " ": "space"}


async def type_fast(pilot: Pilot[None], *keys: str) -> None:
    """Send keys all at once, as a terminal hands on what came in one piece."""
    for key in keys:
        pilot.app.post_message(Key(NAMED.get(key, key), key if len(key) == 1 else None))
    await settle_down(pilot)
    while pilot.app.typed_ahead._waiting:  # type: ignore[attr-defined]
        await settle_down(pilot)


def typed_in(screen: SheetScreen) -> list[str]:
    """Give what stands in the cells, in the order they were typed in."""
    return [text for text in screen.texts.values() if text]


async def test_what_is_typed_after_storing_a_form_lands_in_the_sheet_it_opens(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        form = await form_with(pilot, "compression", Subject("B-6"), {"at": "1000", "by": "Fenn"})
        before = form.values
        await type_fast(pilot, "ctrl+s", *"2650", "enter", *"2700", "enter")
        screen = pilot.app.screen
        assert isinstance(screen, SheetScreen)
        assert typed_in(screen) == ["2650", "2700"]
        assert form.values == before


async def test_the_whole_way_to_a_sheet_can_be_typed_in_one_go(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await type_fast(pilot, "x", "c", "ctrl+s", *"2650", "enter", *"2700", "enter")
        screen = pilot.app.screen
        assert isinstance(screen, SheetScreen)
        assert typed_in(screen) == ["2650", "2700"]


async def test_what_is_typed_after_a_form_that_is_wrong_lands_in_no_field(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        form = await form_with(pilot, "compression", Subject("B-6"), {"at": "much", "by": "Fenn"})
        before = form.values
        await type_fast(pilot, "ctrl+s", *"26", "enter")
        assert pilot.app.screen is form
        assert form.values == before
        await press(pilot, "7")
        assert "much7" in form.values.values()


async def test_what_is_typed_after_a_form_without_a_sheet_goes_nowhere(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        form = await form_with(pilot, "log", Subject("B-1"), {"by": "Fenn", "repair": "Fuel pipe"})
        await type_fast(pilot, "ctrl+s", *"26")
        assert isinstance(pilot.app.screen, DueScreen)
        assert form.values["by"] == "Fenn"
        assert pilot.app.shift["by"] == "Fenn"  # type: ignore[attr-defined]
        await press(pilot, "2")
        assert pilot.app.current_mode == "engines"


async def test_what_is_typed_ahead_answers_no_question(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await form_with(pilot, "compression", Subject("B-6"), {"at": "1000", "by": "Fenn"})
        await type_fast(pilot, "ctrl+s", *"26.5", "enter", "m", "4")
        screen = pilot.app.screen
        assert isinstance(screen, SheetScreen)
        assert screen.query_one(Question).display
        assert typed_in(screen) == ["26.5"]
        await press(pilot, "m")
        assert typed_in(screen) == ["26.5 bar"]


async def test_keys_typed_ahead_still_fill_in_a_form_field_by_field(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await type_fast(pilot, "r", *"1234", "enter", *"30")
        form = pilot.app.screen
        assert isinstance(form, FormScreen)
        assert "1234" in form.values.values()
