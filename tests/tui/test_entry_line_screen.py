"""The entry line on the screens: opened from anywhere, read back while it is typed, stored only as it was read back."""

from datetime import date
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.tui.screens.engines import EnginesScreen
from fleetcare.tui.screens.entry import EntryScreen
from fleetcare.tui.searching import FindLine
from tests.tui.conftest import Opened, line_with, press, seen, settle_down, type_in
from tests.tui.entry import said, type_line
from tests.tui.forms import stored

OIL = "ps1 oil 310 fenn"
OIL_BACK = "PS-1, oil and filter, 310 h on the dial, Fenn; next 560 h or 1 May 2027"


@pytest.mark.parametrize(
    "way",
    [(), ("2",), ("e",), ("2", "enter"), ("e", "h"), ("enter",), ("f",), ("x",), ("question_mark",)],
    ids=["due", "engines", "page", "page from engines", "history", "working", "narrow", "more", "keys"],
)
async def test_it_opens_over_every_screen_and_esc_gives_that_screen_back(opened: Opened, way: tuple[str, ...]) -> None:
    async with opened(*way, size=(60, 18)) as pilot:
        before, screen = seen(pilot), pilot.app.screen
        await press(pilot, "i")
        assert isinstance(pilot.app.screen, EntryScreen)
        assert seen(pilot)[:9] == before[:9]
        assert seen(pilot)[-1].startswith(" Enter store")
        await press(pilot, "escape")
        assert pilot.app.screen is screen
        assert seen(pilot) == before


async def test_letters_are_typed_and_do_nothing_else(opened: Opened) -> None:
    async with opened("i", *"2diq?1") as pilot:
        assert line_with(pilot, "▌entry line  2diq?1")
        assert pilot.app.is_running


async def test_what_is_typed_is_read_back_with_all_it_would_do(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened("i") as pilot:
        await pilot.press(*("space" if letter == " " else letter for letter in OIL))
        await settle_down(pilot)
        assert said(pilot).startswith(OIL_BACK)
        assert "Enter stores it." in said(pilot)
        assert line_with(pilot, "TR-1", "Hydraulic hoses")
    assert stored(db) == before


async def test_enter_stores_what_was_read_back_and_says_what_it_closed_and_moved(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened() as pilot:
        screen = await type_line(pilot, OIL)
        await press(pilot, "enter")
        assert "(scheduled) of PS-1 on 2026-05-01." in said(pilot)
        assert "Done: Oil and filter." in said(pilot)
        assert "→ 560 h on the dial" in said(pilot)
        assert screen.text == ""
        await press(pilot, "escape")
        assert not isinstance(pilot.app.screen, EntryScreen)
    assert stored(db) > before


async def test_the_screen_below_shows_at_once_what_was_stored(opened: Opened) -> None:
    async with opened("2", size=(100, 30)) as pilot:
        await type_line(pilot, "sb1 25")
        await press(pilot, "enter")
        assert line_with(pilot, "▌SB-1", "25 h", "2026-05-01")
        await press(pilot, "escape")
        assert isinstance(pilot.app.screen, EnginesScreen)


async def test_a_second_line_follows_the_first(opened: Opened, db: Path) -> None:
    async with opened() as pilot:
        await type_line(pilot, "sb1 25")
        await press(pilot, "enter")
        once = stored(db)
        await type_line(pilot, "tr1 4911")
        assert said(pilot).startswith("TR-1, 4911 h on the dial")
        await press(pilot, "enter")
        assert stored(db) > once


async def test_enter_before_the_line_was_read_back_stores_nothing(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened("i") as pilot:
        screen = pilot.app.screen
        assert isinstance(screen, EntryScreen)
        screen.editor.value = "sb1 25"
        screen.action_store()
        await settle_down(pilot)
        assert stored(db) == before
        assert said(pilot).startswith("SB-1, 25 h on the dial")
        await press(pilot, "enter")
        assert stored(db) > before


async def test_what_was_read_back_is_not_stored_for_another_text(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened() as pilot:
        screen = await type_line(pilot, "sb1 25")
        screen.editor.value = "sb1 257"
        screen.action_store()
        await settle_down(pilot)
    assert stored(db) == before


async def test_enter_stores_once_however_often_it_is_pressed(opened: Opened, db: Path) -> None:
    async with opened() as pilot:
        await type_line(pilot, "sb1 25")
        before = stored(db)
        await pilot.press("enter", "enter", "enter")
        await settle_down(pilot)
        once = stored(db)
        await press(pilot, "enter")
        assert before < once == stored(db)


async def test_what_another_window_changed_meanwhile_is_read_back_anew(opened: Opened, db: Path) -> None:
    async with opened() as pilot:
        screen = await type_line(pilot, OIL)
        back = screen.back
        type_in(db, "log", "PS-1", "Oil and filter", "--at", "305h", "--on", "2026-04-30")
        type_in(db, "task", "edit", "PS-1", "Oil and filter", "--every", "100h", "--on", "2026-04-30")
        before = stored(db)
        assert screen.back is back
        await press(pilot, "enter")
        assert "410 h" in said(pilot)
        assert stored(db) == before
        await press(pilot, "enter")
        assert stored(db) > before


async def test_the_line_is_read_again_when_the_file_changes(opened: Opened, db: Path) -> None:
    async with opened() as pilot:
        screen = await type_line(pilot, "sb1 25 zoe")
        assert "zoe: what is it?" in said(pilot)
        type_in(db, "log", "TR-1", "--note", "looked at", "--by", "Zoe")
        screen.follow()
        await settle_down(pilot)
        assert said(pilot).startswith("SB-1, 25 h on the dial, Zoe;")


async def test_esc_keeps_what_is_typed_for_the_next_time_and_ctrl_n_throws_it_away(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened() as pilot:
        await type_line(pilot, "ps1 oil 31")
        await press(pilot, "escape", "2", "i")
        assert "As you left it" in said(pilot)
        assert line_with(pilot, "▌entry line  ps1 oil 31")
        assert "PS-1, oil and filter, 31 h on the dial" in said(pilot)
        await press(pilot, "ctrl+n", "escape", "i")
        assert line_with(pilot, "▌entry line") == "▌entry line"
    assert stored(db) == before


async def test_what_was_stored_is_not_offered_again(opened: Opened) -> None:
    async with opened() as pilot:
        await type_line(pilot, "sb1 25")
        await press(pilot, "enter", "escape", "i")
        assert line_with(pilot, "▌entry line") == "▌entry line"


async def test_a_draft_that_cannot_be_read_or_kept_is_said_and_stops_nothing(opened: Opened, ctx: Context) -> None:
    async with opened() as pilot:
        await type_line(pilot, "sb1")
        await press(pilot, "escape")
        kept = next(ctx.drafts_folder.iterdir())
        kept.write_text("{", encoding="utf-8")
        await press(pilot, "i")
        assert "cannot be read any more" in said(pilot)
        await press(pilot, "escape")
        for path in ctx.drafts_folder.iterdir():
            path.unlink()
        ctx.drafts_folder.rmdir()
        ctx.drafts_folder.write_text("no folder", encoding="utf-8")
        await type_line(pilot, "sb1 25")
        await press(pilot, "enter")
        assert "Reading " in said(pilot)


async def test_an_empty_database_says_how_to_begin(opened: Opened, new_database: Path, tmp_path: Path) -> None:
    empty = Path(tmp_path / "empty.db")
    empty.write_bytes(new_database.read_bytes())
    context = Context(str(empty), date(2026, 5, 1), drafts=tmp_path / "drafts")
    async with opened("i", context=context) as pilot:
        assert "There is no engine yet" in said(pilot)
        await type_line(pilot, "p3 oil")
        assert "which engine or machine?" in said(pilot)


async def test_a_missing_file_says_how_to_begin_and_keeps_what_is_typed(opened: Opened, tmp_path: Path) -> None:
    context = Context(str(tmp_path / "none.db"), date(2026, 5, 1), drafts=tmp_path / "drafts")
    async with opened("i", context=context) as pilot:
        assert "There is no engine yet" in said(pilot)
        await type_line(pilot, "p3 oil")
        await press(pilot, "enter", "escape", "i")
        assert line_with(pilot, "▌entry line  p3 oil")
        assert not (tmp_path / "none.db").exists()


async def test_a_file_that_went_bad_is_said_and_the_line_stays(opened: Opened, db: Path) -> None:
    async with opened() as pilot:
        screen = await type_line(pilot, "sb1 2")
        db.write_bytes(b"not a database, but long enough to be one" * 100)
        await type_line(pilot, "5")
        assert screen.text == "sb1 25"
        assert "not a" in said(pilot)


async def test_hostile_names_are_shown_harmlessly_and_never_as_markup(opened: Opened, db: Path) -> None:
    nasty = "Oil \x1b[2J[red]"
    type_in(
        db, "engine", "add", "[/b]", "--meter", "hours", "--in-service", "2024-01-10", "--start-at", "0", "--as-new"
    )
    type_in(db, "task", "add", "[/b]", nasty, "--every", "250h")
    async with opened() as pilot:
        await type_line(pilot, 'engine "[/b]" ')
        assert line_with(pilot, "   Oil \\x1b[2J[red]")
        await press(pilot, "down", "enter")
        await type_line(pilot, " 20")
        assert said(pilot).startswith("[/b], oil \\x1b[2J[red], 20 h on the dial")
        await press(pilot, "enter")
        assert "Done: Oil \\x1b[2J[red]." in said(pilot)


async def test_a_window_too_small_to_show_all_of_it_stores_nothing(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened(size=(30, 9)) as pilot:
        await type_line(pilot, 'ps1 oil 310 fenn note "a long note that takes many lines of a narrow window"')
        assert "…" in said(pilot)
        await press(pilot, "enter")
        assert stored(db) == before
        await pilot.resize_terminal(80, 24)
        await press(pilot, "enter")
        assert stored(db) > before


async def test_help_shows_the_keys_of_the_line_and_the_line_is_not_opened_twice(opened: Opened) -> None:
    async with opened(size=(100, 40)) as pilot:
        screen = await type_line(pilot, "sb1")
        await press(pilot, "f1")
        assert "go to the answers to what is asked" in "\n".join(seen(pilot))
        await press(pilot, "i", "escape")
        assert pilot.app.screen is screen


async def test_what_is_pasted_cannot_drive_the_terminal(opened: Opened) -> None:
    async with opened() as pilot:
        screen = await type_line(pilot, "sb1 \x1b[2J\u202e 25")
        assert line_with(pilot, "▌entry line  sb1 \ufffd[2J\ufffd 25")
        assert screen.text == "sb1 \x1b[2J\u202e 25"
        assert "\\x1b[2J\\u202e: what is it?" in said(pilot)
    async with opened("slash") as pilot:
        pilot.app.screen.query_one(FindLine).insert_text_at_cursor("\x9b31m")
        await settle_down(pilot)
        assert line_with(pilot, "find \ufffd31m")
