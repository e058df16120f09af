"""Forms: filled in with few keys, stored, said in one line, and never lost."""

import sqlite3
from contextlib import closing
from datetime import date
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.tui.forms.base import Subject
from fleetcare.tui.screens.due import DueScreen
from fleetcare.tui.screens.form import FormScreen
from fleetcare.tui.screens.item import ItemScreen
from fleetcare.tui.screens.sheet import SheetScreen
from tests.tui.conftest import Opened, line_with, press, seen, settle_down, type_in
from tests.tui.forms import form_with, stored

OIL = Subject("PS-1", "Oil and filter")


def rows(db: Path, query: str) -> list[tuple[object, ...]]:
    """Ask a database."""
    with closing(sqlite3.connect(db)) as connection:
        return connection.execute(query).fetchall()


async def test_work_on_the_line_under_the_cursor_is_logged_with_figure_and_name(opened: Opened, db: Path) -> None:
    async with opened("down", "w", *"305", "enter", *"Fenn", "ctrl+s", size=(100, 30)) as pilot:
        assert isinstance(pilot.app.screen, DueScreen)
        foot = " ".join(seen(pilot)[-4:-1])
        assert "Entry 6 (scheduled) of PS-1 on 2026-05-01. Done: Oil and filter." in foot
        assert "PS-1 Oil and filter: 290 h on the dial" in " ".join(foot.split())
        assert "→ 555 h on the dial" in foot
        assert [line for line in seen(pilot) if "PS-1" in line and "Oil and filter" in line and "555 h" in line]


async def test_the_cursor_stands_where_something_is_still_to_be_typed(opened: Opened) -> None:
    async with opened("down", "w", size=(100, 30)) as pilot:
        assert line_with(pilot, "▌Meter")
        assert line_with(pilot, "Tasks", "Oil and filter")
        assert line_with(pilot, "Day", "2026-05-01")
        assert line_with(pilot, "showed last: 302 h on 2026-04-30")


async def test_the_name_is_filled_in_again_until_the_screens_are_left(opened: Opened) -> None:
    async with opened("down", "w", *"305", "enter", *"Fenn", "ctrl+s", size=(100, 30)) as pilot:
        await form_with(pilot, "reading", Subject("TR-1"), {})
        assert line_with(pilot, " By", "Fenn")


async def test_a_known_name_is_taken_with_one_key_and_another_one_is_not_refused(opened: Opened, db: Path) -> None:
    async with opened("down", "w", *"305", "enter", *"f", size=(100, 30)) as pilot:
        assert line_with(pilot, "→ takes Fenn")
        await press(pilot, "right")
        assert line_with(pilot, "▌By", "Fenn")
        await press(pilot, *" junior", "ctrl+s")
        assert isinstance(pilot.app.screen, DueScreen)
    assert rows(db, "select name from person where name = 'Fenn junior'")


async def test_several_tasks_each_take_their_name_after_a_semicolon(opened: Opened, db: Path) -> None:
    async with opened(size=(100, 30)) as pilot:
        form = await form_with(pilot, "log", OIL, {"at": "305"})
        form.rows["task"].editor.focus()
        await press(pilot, *";cool", "right")
        assert form.rows["task"].value == "Oil and filter; Coolant"
        await press(pilot, "ctrl+s")
        assert "Done: Oil and filter, Coolant." in " ".join(seen(pilot))


async def test_enter_down_tab_and_up_go_from_field_to_field(opened: Opened) -> None:
    async with opened(size=(100, 30)) as pilot:
        form = await form_with(pilot, "reading", Subject("PS-1"), {})
        for key, field in (("enter", "on"), ("down", "by"), ("tab", "note"), ("up", "by"), ("shift+tab", "on")):
            await press(pilot, key)
            assert form.rows[field].editor.has_focus, key


async def test_letters_that_do_something_elsewhere_are_only_letters_in_a_form(opened: Opened) -> None:
    async with opened(size=(100, 30)) as pilot:
        form = await form_with(pilot, "log", OIL, {})
        form.rows["part_done"].editor.focus()
        await press(pilot, "q", "1", "2", "d", "question_mark")
        assert pilot.app.screen is form
        await press(pilot, "y")
        assert form.rows["part_done"].value == "yes"
        await press(pilot, "space")
        assert form.rows["part_done"].value == "no"


@pytest.mark.parametrize(
    ("key", "said"), [("r", "Reading 12 is suspect now"), ("c", "▌Meter"), ("escape", "▌Meter")], ids=str
)
async def test_a_figure_below_the_last_is_asked_about(opened: Opened, db: Path, key: str, said: str) -> None:
    before = stored(db)
    async with opened(size=(100, 30)) as pilot:
        await form_with(pilot, "reading", Subject("PS-1"), {"value": "30"})
        await press(pilot, "ctrl+s")
        assert line_with(pilot, "30 h on 2026-05-01 does not fit reading 12 of PS-1 (302 h on 2026-04-30)")
        assert stored(db) == before
        await press(pilot, key)
        assert [line for line in seen(pilot) if said in line]
        assert not [line for line in seen(pilot) if "does not fit" in line]
    assert (stored(db) > before) == (key == "r")


async def test_a_dial_that_went_round_is_said_with_one_key(opened: Opened, db: Path) -> None:
    async with opened(size=(100, 30)) as pilot:
        await form_with(pilot, "log", Subject("TR-2", "Oil and filter"), {"at": "2"})
        await press(pilot, "ctrl+s", "g")
        assert "digits of the hours meter of TR-2 are not known" in " ".join(seen(pilot))


async def test_work_at_a_figure_that_is_right_as_it_stands_is_logged_with_it(opened: Opened, db: Path) -> None:
    async with opened(size=(100, 30)) as pilot:
        await form_with(pilot, "log", OIL, {"at": "30"})
        await press(pilot, "ctrl+s", "r")
        assert isinstance(pilot.app.screen, DueScreen)
    assert rows(db, "select value from reading where entry_id = 6") == [("30",)]


async def test_a_figure_said_otherwise_than_it_was_typed_is_asked_about_too(opened: Opened) -> None:
    async with opened(size=(100, 30)) as pilot:
        await form_with(pilot, "log", OIL, {"at": "30.50h"})
        await press(pilot, "ctrl+s")
        assert line_with(pilot, "30.5 h on 2026-05-01 does not fit reading 12 of PS-1 (302 h on 2026-04-30)")
        assert line_with(pilot, "r  it is right as it stands")


async def test_a_new_meter_is_written_down_in_the_place_of_a_reading(opened: Opened, db: Path) -> None:
    async with opened(size=(100, 30)) as pilot:
        await form_with(pilot, "reading", Subject("PS-1"), {"value": "3"})
        await press(pilot, "ctrl+s", "n")
        assert line_with(pilot, "A new meter on PS-1")
        assert line_with(pilot, "Shows now", "3")
        await press(pilot, *"302.5", "enter", "0", "ctrl+s")
        assert isinstance(pilot.app.screen, DueScreen)
        assert "PS-1 shows 3 h on 2026-05-01" in " ".join(seen(pilot))


async def test_the_before_return_group_is_shown_before_an_engine_is_returned(opened: Opened) -> None:
    async with opened(size=(100, 30)) as pilot:
        await form_with(pilot, "return", Subject("PS-2"), {"by": "Harbin"})
        assert line_with(pilot, "BEFORE RETURN  1")
        assert line_with(pilot, "Oil and filter:", "overdue")
        await press(pilot, "ctrl+s")
        assert "PS-2 is in service from 2026-05-01." in " ".join(seen(pilot))


async def test_what_else_there_is_to_write_down_is_chosen_from_a_list(opened: Opened, db: Path) -> None:
    async with opened("2", "x", "m", *"PH-1", "ctrl+s", size=(100, 30)) as pilot:
        assert "SB-1 fitted in PH-1 on 2026-05-01." in " ".join(seen(pilot))


async def test_a_line_is_put_off_with_reason_and_name(opened: Opened) -> None:
    async with opened("down", "o", *"310h", "enter", *"rain", "enter", *"Harbin", "ctrl+s", size=(100, 30)) as pilot:
        said = " ".join(seen(pilot))
        assert "Oil and filter of PS-1 deferred until 310 h by Harbin: rain" in said


async def test_a_correction_opens_with_what_the_entry_says_and_sends_only_what_changed(
    opened: Opened, db: Path
) -> None:
    async with opened("down", "e", "h", "c", size=(100, 30)) as pilot:
        form = pilot.app.screen
        assert isinstance(form, FormScreen)
        assert {name: value for name, value in form.values.items() if value} == {
            "task": "Oil and filter",
            "on": "2025-12-01",
            "at": "40h",
            "by": "Fenn",
            "part_done": "no",
        }
        form.rows["note"].editor.focus()
        await press(pilot, *"filter dented", "ctrl+s")
        assert isinstance(pilot.app.screen, ItemScreen)
        assert "Entry 6 (scheduled) of PS-1 corrects entry 1." in " ".join(seen(pilot))
    assert rows(db, "select note, supersedes_id from log_entry where id = 6") == [("filter dented", 1)]


async def test_a_correction_does_not_leave_out_what_an_entry_says(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened(size=(100, 30)) as pilot:
        await form_with(pilot, "correct", Subject("PS-1", entry=1), {"by": ""})
        await press(pilot, "ctrl+s")
        assert line_with(pilot, "Fenn cannot be left out; take the entry back and log the work anew")
    assert stored(db) == before


async def test_an_entry_is_taken_back_with_a_reason(opened: Opened) -> None:
    async with opened("down", "e", "h", "v", *"wrong engine", "ctrl+s", size=(100, 30)) as pilot:
        assert "Entry 6 (scheduled) of PS-1 voids entry 1." in " ".join(seen(pilot))


async def test_a_newcomer_gets_from_an_empty_folder_to_a_due_line_and_logged_work(
    opened: Opened, tmp_path: Path
) -> None:
    new = Context(str(tmp_path / "new.db"), date(2026, 5, 1))
    async with opened(context=new, size=(100, 30)) as pilot:
        assert [
            line for line in seen(pilot) if "Add a first engine: 2 shows the engines, and there a adds one." in line
        ]
        await press(pilot, "2", "a", *"P-01", "enter", "enter", "enter", "enter", "right", "enter", *"2024-01-10")
        await press(pilot, "enter", "0", "enter", "space", "ctrl+s")
        assert line_with(pilot, "P-01 added.")
        await press(pilot, "x", "t", *"Oil", "enter", *"250h; 12mo", "ctrl+s")
        assert "Oil added to P-01. P-01 Oil: overdue, 250 h or 2025-01-10" in " ".join(" ".join(seen(pilot)).split())
        await press(pilot, "1", "w", *"1234", "enter", *"Fenn", "ctrl+s")
        assert line_with(pilot, "clear", "P-01", "Oil", "1484 h", "2027-05-01")


async def test_an_engine_gets_the_tasks_of_a_schedule(opened: Opened) -> None:
    async with opened(
        "2", "down", "x", "d", *"diesel-g", "right", "enter", *"2026-02-10; 4800h", "ctrl+s", size=(100, 30)
    ) as pilot:
        assert "tasks of diesel-genset added." in " ".join(seen(pilot))


async def test_what_is_half_typed_is_there_again_and_stored_only_by_the_key(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened("down", "w", *"305", "enter", *"Fe", "escape", "w", size=(100, 30)) as pilot:
        assert line_with(pilot, " Meter", "305")
        assert line_with(pilot, "By ", "Fe")
        assert line_with(pilot, "As you left it; Ctrl N throws it away and begins anew.")
    assert stored(db) == before
    async with opened("down", "w", size=(100, 30)) as pilot:
        assert line_with(pilot, " Meter", "305")
        await press(pilot, "ctrl+n")
        assert not [line for line in seen(pilot) if "305" in line or "As you left it" in line]
        await press(pilot, "escape", "w")
        assert not [line for line in seen(pilot) if "As you left it" in line]


async def test_what_is_half_typed_on_one_line_of_an_engine_is_there_from_its_page_too(opened: Opened) -> None:
    async with opened("down", "w", *"305", "escape", "e", "w", size=(100, 30)) as pilot:
        assert line_with(pilot, " Meter", "305")
        assert line_with(pilot, "As you left it")


async def test_what_was_stored_is_not_offered_again(opened: Opened) -> None:
    async with opened("down", "w", *"305", "ctrl+s", "w", size=(100, 30)) as pilot:
        assert line_with(pilot, "Log work on")
        assert not [line for line in seen(pilot) if "As you left it" in line]


async def test_a_form_left_as_it_opened_keeps_nothing(opened: Opened) -> None:
    async with opened("down", "w", "escape", "w", size=(100, 30)) as pilot:
        assert not [line for line in seen(pilot) if "As you left it" in line]


async def test_a_form_open_while_the_file_changes_keeps_what_is_typed(opened: Opened, db: Path) -> None:
    async with opened("down", "w", *"305", size=(100, 30)) as pilot:
        type_in(db, "reading", "PS-1", "303", "--on", "2026-05-01")
        form = pilot.app.screen
        assert isinstance(form, FormScreen)
        form.follow()
        await settle_down(pilot)
        assert line_with(pilot, "▌Meter", "305")
        assert line_with(pilot, "showed last: 303 h on 2026-05-01")


async def test_work_that_needs_a_sheet_goes_on_to_it(opened: Opened, db: Path) -> None:
    type_in(db, "task", "edit", "PS-1", "Valve lash", "--needs-sheet", "lash", "--on", "2026-01-01")
    async with opened(size=(100, 30)) as pilot:
        await form_with(pilot, "log", Subject("PS-1", "Valve lash"), {"at": "305"})
        await press(pilot, "ctrl+s")
        assert isinstance(pilot.app.screen, SheetScreen)
        assert line_with(pilot, "Valve lash of PS-1")
