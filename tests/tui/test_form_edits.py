"""Forms on what is there already: opened filled in, stored as changed, and what was wrong taken back."""

from pathlib import Path

import pytest

from fleetcare.tui.forms.base import Subject
from fleetcare.tui.screens.engines import EnginesScreen
from fleetcare.tui.screens.item import ItemScreen
from fleetcare.tui.screens.tasks import TasksScreen
from tests.tui.conftest import Opened, line_with, press, seen, type_in
from tests.tui.forms import form_with, stored
from tests.tui.test_forms import rows

OIL = Subject("PS-1", "Oil and filter")


def said(lines: list[str]) -> str:
    """What stands on the screen, as one line."""
    return " ".join(" ".join(lines).split())


async def test_a_nameplate_opens_with_what_is_in_force_and_only_what_changed_is_sent(opened: Opened, db: Path) -> None:
    async with opened() as pilot:
        form = await form_with(pilot, "edit", Subject("PS-1"), {})
        filled = {name: value for name, value in form.values.items() if value not in {"", "no"}}
        assert filled == {
            "name": "Pump diesel",
            "in_service": "2024-01-10",
            "start_at": "0h",
            "as_new": "yes",
            "duty": "pump",
            "fuel": "diesel",
            "cylinders": "6",
            "firing_order": "1-5-3-6-2-4",
            "bore": "114",
            "stroke": "135",
            "rated_rpm": "1500",
            "oil_grade": "15W-40",
        }
        type_in(db, "engine", "edit", "PS-1", "--sump", "14")
        form.rows["lash_intake"].editor.value = "0.20-0.30"
        await press(pilot, "ctrl+s")
        assert line_with(pilot, "PS-1 edited.")
    assert rows(db, "select sump_l from engine where sump_l is not null") == [("14",)]
    assert rows(db, "select intake_low, intake_high from lash_spec") == [("0.20", "0.30")]


async def test_a_lash_figure_in_another_unit_is_said_beside_it(opened: Opened) -> None:
    async with opened() as pilot:
        lash = {"lash_intake": "0.20-0.30", "lash_set_exhaust": "0.018in"}
        form = await form_with(pilot, "edit", Subject("PS-1"), lash)
        await press(pilot, "ctrl+s")
        assert "“Set exhaust” is in inches, another lash figure in mm; give all of them in one unit" in said(
            seen(pilot)
        )
        assert form.rows["lash_set_exhaust"].editor.has_focus


async def test_first_day_and_figure_are_sent_together(opened: Opened, db: Path) -> None:
    async with opened() as pilot:
        await form_with(pilot, "edit", Subject("TR-2"), {"in_service": "2023-05-01"})
        await press(pilot, "ctrl+s")
        assert line_with(pilot, "TR-2 edited.")
    assert rows(db, "select in_service_on from item where tag = 'TR-2'") == [("2023-05-01",)]


async def test_of_a_machine_only_what_a_machine_has_is_asked(opened: Opened, db: Path) -> None:
    async with opened() as pilot:
        form = await form_with(pilot, "edit", Subject("PH-1"), {})
        assert [name for name, row in form.rows.items() if row.display] == [
            *("name", "site", "in_service", "start_at", "as_new", "meter", "meter_digits"),
        ]
        assert not [line for line in seen(pilot) if "ENGINE" in line]
        form.rows["meter"].editor.value = "starts"
        await press(pilot, "ctrl+s")
        assert line_with(pilot, "PH-1 edited.")
    assert rows(db, "select count(*) from meter where kind = 'starts'") == [(1,)]


async def test_every_field_of_a_long_form_comes_into_sight_with_the_cursor(opened: Opened) -> None:
    async with opened() as pilot:
        form = await form_with(pilot, "edit", Subject("PS-1"), {})
        for row in form.rows.values():
            assert line_with(pilot, f"▌{row.field.label}")
            await press(pilot, "enter")


async def test_a_task_is_changed_from_a_day_on(opened: Opened, db: Path) -> None:
    async with opened() as pilot:
        form = await form_with(pilot, "task-edit", OIL, {"every": "200h; 12mo", "part": "", "on": "2026-04-30"})
        assert form.rows["work"].value == "drain"
        await press(pilot, "ctrl+s")
        assert "Oil and filter of PS-1 changed from 2026-04-30." in said(seen(pilot))
        assert "290 h on the dial" in said(seen(pilot))
    assert rows(db, "select count(*) from task_part") == [(1,)]


async def test_what_cannot_be_changed_any_more_says_so_when_its_form_opens(opened: Opened) -> None:
    async with opened() as pilot:
        await form_with(pilot, "edit", Subject("PS-9"), {})
        assert "PS-9 is withdrawn since 2026-01-31; add it anew: 2, then a" in said(seen(pilot))


async def test_all_that_is_wrong_with_a_file_of_ones_own_is_said_beside_it(opened: Opened) -> None:
    Path("mine.toml").write_text('name = "Mine"\nsource = "us"\n[[task]]\nname = "Oil"\nevery = 5\n', encoding="utf-8")
    async with opened() as pilot:
        await form_with(pilot, "schedule", Subject("TR-2"), {"name": "mine.toml", "counts_from": "unset"})
        await press(pilot, "ctrl+s")
        assert "! mine.toml: note is missing; give it at the top of the file ! mine.toml, task" in said(seen(pilot))


async def test_parts_and_kinds_of_work_named_before_are_suggested(opened: Opened) -> None:
    async with opened() as pilot:
        form = await form_with(pilot, "task", Subject("PS-1"), {})
        for field, text, suggested in (("part", "oil", "Oil filter"), ("work", "cool", "coolant")):
            form.rows[field].editor.focus()
            await press(pilot, *text)
            assert line_with(pilot, f"→ takes {suggested}")


async def test_tasks_without_a_line_are_changed_and_ended_from_their_list(opened: Opened, db: Path) -> None:
    type_in(db, "task", "add", "PS-1", "Governor", "--on-condition")
    async with opened("down", "x", "k") as pilot:
        assert isinstance(pilot.app.screen, TasksScreen)
        assert line_with(pilot, "Governor", "on condition")
        await press(pilot, "down", "down", "down", "enter")
        assert line_with(pilot, "Change Governor of PS-1")
        await press(pilot, "escape", "v", "ctrl+s")
        assert line_with(pilot, "Governor of PS-1 ended on 2026-05-01; its history stays.")
        assert not [line for line in seen(pilot) if "on condition" in line]


async def test_a_schedule_shows_what_it_would_add_before_it_does(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened() as pilot:
        await form_with(pilot, "schedule", Subject("PS-1"), {"name": "diesel-genset"})
        assert line_with(pilot, "WOULD ADD")
        assert "has one already" in line_with(pilot, "Oil and filter:", "250h")
    assert stored(db) == before


async def test_a_machine_is_added(opened: Opened) -> None:
    async with opened("2", "m", *"PH-2", "ctrl+s") as pilot:
        assert line_with(pilot, "PH-2 added.")


async def test_a_site_gets_another_name(opened: Opened) -> None:
    async with opened("2", "s") as pilot:
        assert line_with(pilot, " Site ", "Board Yard")
        await press(pilot, *"Yard", "ctrl+s")
        assert line_with(pilot, "Board Yard is called Yard now.")
        assert isinstance(pilot.app.screen, EnginesScreen)


async def test_what_stands_at_no_site_is_said_how_to_give_one(opened: Opened) -> None:
    async with opened("2", "m", *"PH-2", "ctrl+s", *("up",) * 5, "s") as pilot:
        assert line_with(pilot, "PH-2 stands at no site yet; x, then e, gives it one.")


async def test_a_person_gets_another_name(opened: Opened, db: Path) -> None:
    async with opened("2", "b", *"Qui", "right", "enter", *"Quill Marsh", "ctrl+s") as pilot:
        assert line_with(pilot, "Quill is called Quill Marsh now.")
    assert rows(db, "select count(*) from person where name = 'Quill Marsh'") == [(1,)]


async def test_a_reading_is_taken_back_and_brought_back(opened: Opened) -> None:
    async with opened("down", "e", "m", "v", *"misread", "ctrl+s") as pilot:
        assert isinstance(pilot.app.screen, ItemScreen)
        assert "Reading 12 of PS-1 is void." in said(seen(pilot))
        assert line_with(pilot, "302 h", "void: misread")
        await press(pilot, "v", *"again", "ctrl+s")
        assert line_with(pilot, "reading 12 is voided already; bring it back: b on its page")
        await press(pilot, "escape", "b", "ctrl+s")
        assert "Reading 12 of PS-1 counts again." in said(seen(pilot))


async def test_a_reading_that_no_longer_fits_is_asked_about_before_it_comes_back(opened: Opened, db: Path) -> None:
    type_in(db, "reading", "--void", "12", "--why", "misread")
    type_in(db, "reading", "PS-1", "290", "--on", "2026-04-30")
    type_in(db, "reading", "PS-1", "291", "--on", "2026-05-01")
    async with opened() as pilot:
        await form_with(pilot, "restore-reading", Subject("PS-1", reading=12), {})
        await press(pilot, "ctrl+s")
        assert "302 h on 2026-04-30 does not fit reading" in said(seen(pilot))
        await press(pilot, "r")
        assert "Reading 12 of PS-1 counts again." in said(seen(pilot))
        assert "b on its page brings it back" in said(seen(pilot))


@pytest.mark.parametrize("key", ["v", "b"])
async def test_without_an_entry_or_a_reading_under_the_cursor_the_way_there_is_told(opened: Opened, key: str) -> None:
    async with opened("down", "e", key) as pilot:
        assert [line for line in seen(pilot) if "Turn to the" in line]


async def test_a_task_form_without_a_task_tells_the_way(opened: Opened) -> None:
    async with opened("down", "e", "o") as pilot:
        assert "Put the cursor on a line of a task first" in said(seen(pilot))


OURS = {"name": "Sluice pumps", "source": "shop rule 4", "file": "ours.toml"}


async def test_the_tasks_of_an_engine_become_a_schedule_for_others(opened: Opened, db: Path) -> None:
    async with opened(size=(100, 30)) as pilot:
        await form_with(pilot, "schedule-out", Subject("PS-1"), OURS)
        await press(pilot, "ctrl+s")
        assert "3 tasks of PS-1 written to ours.toml" in said(seen(pilot))
        await form_with(pilot, "schedule", Subject("SB-1"), {"name": "ours.toml", "counts_from": "start"})
        await press(pilot, "ctrl+s")
    every = "select count(*) from task t join item i on i.id = t.item_id where i.tag = 'SB-1' and t.name = '{}'"
    assert [rows(db, every.format(name)) for name in ("Oil and filter", "Valve lash", "Coolant")] == [[(1,)]] * 3


async def test_a_schedule_is_written_over_by_one_of_its_name_and_by_no_other(opened: Opened, tmp_path: Path) -> None:
    async with opened(size=(100, 30)) as pilot:
        await form_with(pilot, "schedule-out", Subject("PS-1"), OURS)
        await press(pilot, "ctrl+s")
        first = (tmp_path / "ours.toml").read_text(encoding="utf-8")
        await form_with(pilot, "schedule-out", Subject("TR-2"), OURS)
        await press(pilot, "ctrl+s")
        assert (tmp_path / "ours.toml").read_text(encoding="utf-8") != first
        await form_with(pilot, "schedule-out", Subject("PS-1"), {**OURS, "name": "Others"})
        await press(pilot, "ctrl+s")
        assert "ours.toml is a schedule of another name" in said(seen(pilot))
    assert [path.name for path in tmp_path.glob("*.toml")] == ["ours.toml"]
