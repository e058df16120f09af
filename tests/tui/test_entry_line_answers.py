"""What the entry line asks: answers taken with arrow and Enter, and the forms some of them lead to."""

from pathlib import Path

import pytest

from tests.tui.conftest import Opened, line_with, press, settle_down, type_in
from tests.tui.entry import form_in_front, said, type_line
from tests.tui.forms import stored


async def test_what_is_unclear_is_asked_and_an_answer_taken_with_arrow_and_enter(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened() as pilot:
        screen = await type_line(pilot, "sb1 zoe 25")
        assert "zoe: what is it?" in said(pilot)
        await press(pilot, "enter")
        assert screen.text == "sb1 zoe 25"
        assert line_with(pilot, "▌ done by zoe, a new name")
        await press(pilot, "enter")
        assert screen.text == "sb1 by zoe 25"
        assert said(pilot).startswith("SB-1, 25 h on the dial, zoe (a new name);")
    assert stored(db) == before


async def test_the_mark_goes_up_to_none_and_down_to_the_last_answer(opened: Opened) -> None:
    async with opened() as pilot:
        screen = await type_line(pilot, "ps1 ")
        assert "what was done, or what does the dial show?" in said(pilot)
        await press(pilot, "up")
        assert screen.marked == -1
        await press(pilot, "down", "down", "down", "down", "down")
        assert line_with(pilot, "▌ Coolant")
        await press(pilot, "enter")
        assert screen.text.split() == ["ps1", "task", "Coolant"]
        assert said(pilot).startswith("PS-1, coolant; next 1 May 2029")
        await press(pilot, "down")
        assert said(pilot).startswith("PS-1, coolant; next 1 May 2029")


async def test_many_answers_are_gone_through_a_few_at_a_time(opened: Opened, db: Path) -> None:
    for name in ("Belts", "Hoses", "Anodes", "Mounts", "Injectors", "Starter", "Exhaust"):
        type_in(db, "task", "add", "SB-1", name, "--every", "2y")
    async with opened() as pilot:
        await type_line(pilot, "sb1")
        assert "Exhaust" not in said(pilot)
        await press(pilot, *["down"] * 9)
        assert line_with(pilot, "▌ Exhaust")
        assert "9 answers" in said(pilot)


async def test_how_many_questions_follow_is_said(opened: Opened) -> None:
    async with opened() as pilot:
        await type_line(pilot, "sb1 25 xyz uvw")
        assert "xyz: what is it?" in said(pilot)
        assert "then 1 more to answer" in said(pilot)


async def test_a_question_without_answers_is_left_standing_by_enter(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened() as pilot:
        screen = await type_line(pilot, "25")
        assert "which engine or machine?" in said(pilot)
        await press(pilot, "enter", "down", "enter")
        assert screen.text == "25"
    assert stored(db) == before


async def test_a_figure_that_breaks_with_the_past_is_asked_about_and_may_be_sure(opened: Opened, db: Path) -> None:
    async with opened() as pilot:
        screen = await type_line(pilot, "tr1 4811")
        assert "4811 h on 2026-05-01 does not fit" in said(pilot)
        await press(pilot, "enter")
        assert line_with(pilot, "▌ it is right")
        await press(pilot, "enter")
        assert screen.text == "tr1 4811h sure"
        assert "set aside as suspect" in said(pilot)


async def test_a_new_meter_is_written_down_first_and_the_line_comes_back(opened: Opened, db: Path) -> None:
    async with opened(size=(100, 30)) as pilot:
        screen = await type_line(pilot, 'tr1 3 note "windy"')
        await press(pilot, "down", "down", "enter")
        form = form_in_front(pilot)
        assert form.form.name == "swap"
        assert {form.values["on"], form.values["value"], form.values["note"]} == {"2026-05-01", "3", ""}
        await press(pilot, "escape")
        assert screen.text == 'tr1 3 note "windy"'
        await press(pilot, "enter")
        form = form_in_front(pilot)
        form.rows["old_last"].editor.value, form.rows["new_first"].editor.value = "4905", "0"
        await press(pilot, "ctrl+s")
        assert "shows 3 h on 2026-05-01" in said(pilot)
        assert said(pilot).startswith('TR-1, 3 h on the dial, note "windy"; next ')


async def test_work_that_needs_its_sheet_goes_on_in_the_form_with_what_was_understood(opened: Opened, db: Path) -> None:
    type_in(db, "task", "add", "SB-1", "Lash check", "--every", "500h", "--needs-sheet", "lash")
    async with opened(size=(100, 30)) as pilot:
        await type_line(pilot, 'sb1 lash 25 fenn top-up 2L note "rain"')
        assert "Lash check closes only with its lash sheet" in said(pilot)
        await press(pilot, "down", "enter")
        form = form_in_front(pilot)
        assert (form.form.name, form.subject.tag) == ("log", "SB-1")
        filled = {name: value for name, value in form.values.items() if value not in {"", "no"}}
        assert filled == {
            "task": "Lash check",
            "on": "2026-05-01",
            "at": "25 h",
            "by": "Fenn",
            "top_up": "2 L",
            "note": "rain",
        }


async def test_a_line_whose_form_was_stored_is_done(opened: Opened, db: Path) -> None:
    type_in(db, "task", "add", "SB-1", "Lash check", "--every", "500h", "--needs-sheet", "lash")
    async with opened(size=(100, 30)) as pilot:
        screen = await type_line(pilot, "sb1 lash 25 fenn")
        await press(pilot, "down", "enter")
        form = form_in_front(pilot)
        form.dismiss(["Entry 9 (scheduled) of SB-1."])
        await settle_down(pilot)
        assert screen.text == ""
        assert "Entry 9 (scheduled) of SB-1." in said(pilot)


async def test_without_colour_the_answer_marked_can_be_told(opened: Opened, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("NO_COLOR", "1")
    async with opened() as pilot:
        await type_line(pilot, "ps1")
        await press(pilot, "down")
        assert line_with(pilot, "▌ Oil and filter")
