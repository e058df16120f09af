"""A program that ends between storing and letting the draft go: what it stored is known again and not stored twice.

The kill is played by a draft that cannot be dropped: what a kill leaves is the entry in the file, and the draft beside it.
"""

from collections.abc import Container, Iterator
from contextlib import contextmanager

import pytest
from textual.pilot import Pilot

from fleetcare.context import Context
from fleetcare.tui.drafts_kept import DraftKey, KeptDrafts
from fleetcare.tui.forms.base import Subject
from fleetcare.tui.screens.due import DueScreen
from fleetcare.tui.screens.form import FormScreen
from fleetcare.tui.screens.sheet import SheetScreen
from tests.tui.conftest import Opened, line_with, press
from tests.tui.forms import form_with, stored
from tests.tui.sheets import SINGLE, SMALL, enter_all, rows, said, sheet_of

REPAIR = {"at": "1000", "by": "Fenn", "repair": "Fuel pipe"}
ENGINE = Subject("B-1")


@contextmanager
def killed_before_drop() -> Iterator[None]:
    """Leave drafts where they are, as a kill does."""

    def nothing(self: KeptDrafts, key: DraftKey) -> None:
        """Come too late."""

    def nothing_stored(self: KeptDrafts, database: str, import_keys: Container[str]) -> None:
        """Come too late."""

    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(KeptDrafts, "drop", nothing)
        patch.setattr(KeptDrafts, "drop_stored", nothing_stored)
        yield


async def log_and_be_killed(opened: Opened, bench: Context) -> None:
    """Log a repair; the program is gone before its draft is."""
    async with opened(size=SMALL, context=bench) as pilot:
        await type_repair(pilot)
        with killed_before_drop():
            await press(pilot, "ctrl+s")
        assert "Entry 1" in said(pilot)


async def type_repair(pilot: Pilot[None]) -> FormScreen:
    """Type a repair, leave it, and come back to it as it was kept."""
    await form_with(pilot, "log", ENGINE, REPAIR)
    await press(pilot, "escape")
    return await form_with(pilot, "log", ENGINE, {})


def drafts(bench: Context) -> dict[DraftKey, str]:
    """What is kept for the bench."""
    return KeptDrafts(bench.drafts_folder).of(str(bench.path.absolute()))


async def test_the_next_start_lets_go_of_what_was_stored_before_the_kill(opened: Opened, bench: Context) -> None:
    await log_and_be_killed(opened, bench)
    assert len(drafts(bench)) == 1
    async with opened(size=SMALL, context=bench) as pilot:
        assert "Half typed" not in said(pilot)
        form = await form_with(pilot, "log", ENGINE, {})
        assert not form.values["repair"]
    assert drafts(bench) == {}


async def test_what_is_sent_again_all_the_same_is_known_and_its_draft_goes(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await type_repair(pilot)
        with killed_before_drop():
            await press(pilot, "ctrl+s")
        before = stored(bench.path)
        form = await form_with(pilot, "log", ENGINE, {})
        assert form.values["repair"] == "Fuel pipe"
        await press(pilot, "ctrl+s")
        assert isinstance(pilot.app.screen, DueScreen)
        assert "Nothing new: that is stored already, as entry 1; correct that entry if it is wrong." in said(pilot)
    assert stored(bench.path) == before
    assert drafts(bench) == {}


async def test_a_sheet_and_the_work_it_closes_are_known_again_both(opened: Opened, bench: Context) -> None:
    with killed_before_drop():
        async with opened(size=SMALL, context=bench) as pilot:
            await sheet_of(pilot, SINGLE)
            await enter_all(pilot, "25", "", "45", "")
            while len(drafts(bench)) < 2:  # a sheet is kept a moment after a key
                await pilot.pause()
            await press(pilot, "ctrl+s")
            assert "Done: Valve lash." in said(pilot)
    assert len(drafts(bench)) == 2
    async with opened(size=SMALL, context=bench) as pilot:
        assert "Half typed" not in said(pilot)
    assert drafts(bench) == {}


async def test_measurements_sent_again_from_the_sheet_are_known_too(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await form_with(pilot, "lash", ENGINE, {"at": "1000"})
        await press(pilot, "escape")
        form = await form_with(pilot, "lash", ENGINE, {})
        await press(pilot, "ctrl+s")
        assert isinstance(pilot.app.screen, SheetScreen)
        await enter_all(pilot, "25", "", "45", "")
        with killed_before_drop():
            await press(pilot, "ctrl+s")
        other = await form_with(pilot, "lash", ENGINE, {})
        assert other.import_key == form.import_key
        await press(pilot, "ctrl+s")
        assert "that is stored already, as entry 1" in said(pilot)
    assert rows(bench, "select count(*) from log_entry") == [(1,)]
    assert drafts(bench) == {}


async def test_the_next_entry_has_a_key_of_its_own(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        for _ in range(2):
            await form_with(pilot, "log", ENGINE, {"repair": "Fuel pipe"})
            await press(pilot, "ctrl+s")
    assert rows(bench, "select count(*), count(distinct import_key) from log_entry") == [(2, 2)]


async def test_begun_anew_it_is_another_entry(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await type_repair(pilot)
        with killed_before_drop():
            await press(pilot, "ctrl+s")
        await form_with(pilot, "log", ENGINE, {})
        await press(pilot, "ctrl+n")
        form = pilot.app.screen
        assert isinstance(form, FormScreen)
        form.rows["repair"].editor.value = "Water pump"
        await press(pilot, "ctrl+s")
    assert rows(bench, "select title from log_entry") == [("Fuel pipe",), ("Water pump",)]


async def type_line(pilot: Pilot[None], text: str) -> None:
    """Type on the entry line and store it."""
    await press(pilot, *("space" if letter == " " else letter for letter in text), "enter")


async def test_an_entry_line_is_known_again(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await press(pilot, "i")
        await type_line(pilot, "b-1 note wet")
        assert rows(bench, "select count(*) from log_entry") == [(1,)]
        (key,) = rows(bench, "select import_key from log_entry")[0]
        folder = KeptDrafts(bench.drafts_folder)
        folder.keep(DraftKey(str(bench.path.absolute()), "entry", ""), {"text": "b-1 note wet", "import_key": str(key)})
        await press(pilot, "escape", "i")
        assert line_with(pilot, "▌entry line  b-1 note wet")
        await press(pilot, "enter")
        assert "stored already, as entry 1" in said(pilot)
        await type_line(pilot, "b-1 note dry")
    assert rows(bench, "select note from log_entry") == [("wet",), ("dry",)]
