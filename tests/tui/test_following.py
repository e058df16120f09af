"""Two windows on one file follow each other, and a file that cannot be read is said in a clear word."""

from datetime import UTC, datetime, timedelta
from pathlib import Path

import pytest
from textual.pilot import Pilot

from fleetcare.context import Context
from fleetcare.tui.app import FleetApp
from fleetcare.tui.loading import FOLLOW_EVERY, LoadingScreen
from tests.tui.conftest import TODAY, Opened, line_with, press, seen, settle_down, type_in


async def follow(pilot: Pilot[None]) -> None:
    """Let the screen in front look at the file, as its timer does every second."""
    assert isinstance(pilot.app.screen, LoadingScreen)
    pilot.app.screen.follow()
    await settle_down(pilot)


def test_the_file_is_looked_at_often_enough_to_follow_within_two_seconds() -> None:
    assert FOLLOW_EVERY <= 1


async def test_a_change_in_another_window_shows(opened: Opened, db: Path) -> None:
    async with opened(size=(80, 40)) as pilot:
        type_in(db, "reading", "TR-1", "4910", "--on", TODAY)
        await follow(pilot)
        assert line_with(pilot, "!  due", "TR-1", "Air filter", "0 h left")


async def test_the_timer_looks_by_itself(opened: Opened, db: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("fleetcare.tui.loading.FOLLOW_EVERY", 0.05)
    async with opened(size=(80, 40)) as pilot:
        type_in(db, "reading", "TR-1", "4910", "--on", TODAY)
        await pilot.pause(0.2)
        await settle_down(pilot)
        assert line_with(pilot, "!  due", "TR-1", "Air filter", "0 h left")


async def test_the_cursor_stays_on_its_line_when_lines_above_it_change(opened: Opened, db: Path) -> None:
    async with opened("end", "up", size=(80, 24)) as pilot:
        before = [line for line in seen(pilot) if line.startswith("▌")]
        place = [n for n, line in enumerate(seen(pilot)) if line.startswith("▌")]
        type_in(db, "log", "SB-1", "Exercise run", "--on", TODAY, "--at", "25h", "--by", "Fenn")
        await follow(pilot)
        assert [line for line in seen(pilot) if line.startswith("▌")] == before
        assert [n for n, line in enumerate(seen(pilot)) if line.startswith("▌")] == place


async def test_what_the_list_was_narrowed_to_is_kept(opened: Opened, db: Path) -> None:
    async with opened("slash", *"air", "enter", size=(80, 40)) as pilot:
        type_in(db, "reading", "TR-1", "4910", "--on", TODAY)
        await follow(pilot)
        assert line_with(pilot, 'only "air": 2 of 11 lines')
        assert line_with(pilot, "!  due", "TR-1")


async def test_a_working_and_a_page_follow_too(opened: Opened, db: Path) -> None:
    async with opened("n", "n", "enter", size=(120, 40)) as pilot:
        assert line_with(pilot, "state", "near; by hours, 5 h left")
        type_in(db, "reading", "TR-1", "4910", "--on", TODAY)
        await follow(pilot)
        assert line_with(pilot, "state", "due; by hours, 0 h left")
        await press(pilot, "e", "l")
        assert line_with(pilot, "!  due", "Air filter")
        type_in(db, "reading", "TR-1", "4912", "--on", TODAY)
        await follow(pilot)
        assert line_with(pilot, "!! overdue", "Air filter", "2 h over")


async def test_coming_back_to_a_list_shows_what_changed_meanwhile(opened: Opened, db: Path) -> None:
    async with opened("enter", size=(80, 40)) as pilot:
        type_in(db, "reading", "TR-1", "4910", "--on", TODAY)
        await press(pilot, "escape")
        assert line_with(pilot, "!  due", "TR-1", "Air filter", "0 h left")


async def test_nothing_is_read_while_nothing_changes(opened: Opened) -> None:
    async with opened() as pilot:
        screen = pilot.app.screen
        assert isinstance(screen, LoadingScreen)
        worker = screen._worker
        await follow(pilot)
        assert screen._worker is worker


async def test_at_midnight_the_list_is_that_of_the_new_day(opened: Opened, db: Path) -> None:
    now = datetime(2026, 5, 1, 12, tzinfo=UTC)

    class Clock:
        moment = now

        def __call__(self) -> datetime:
            return self.moment

    clock = Clock()
    async with opened(context=Context(str(db), clock=clock)) as pilot:
        assert seen(pilot)[0].endswith("Fri 2026-05-01")
        clock.moment = now + timedelta(days=1)
        await follow(pilot)
        assert seen(pilot)[0].endswith("Sat 2026-05-02")
        assert line_with(pilot, "Hydraulic hoses", "50 d over")


async def test_a_database_gone_while_open_is_said_and_what_was_read_stays(opened: Opened, db: Path) -> None:
    async with opened(size=(160, 24)) as pilot:
        hidden = db.rename(db.with_suffix(".gone"))
        await follow(pilot)
        assert line_with(pilot, f"there is no database at {db}; name one with --db, or add an engine to make it")
        assert line_with(pilot, "PS-1", "12 h over")
        hidden.rename(db)
        await follow(pilot)
        assert not [line for line in seen(pilot) if "there is no database" in line]


async def test_what_was_said_of_a_file_written_stays_while_the_list_follows(opened: Opened, db: Path) -> None:
    async with opened("c", size=(160, 24)) as pilot:
        type_in(db, "reading", "TR-1", "4910", "--on", TODAY)
        await follow(pilot)
        assert line_with(pilot, "11 lines written to")
        await press(pilot, "escape")
        assert not [line for line in seen(pilot) if "11 lines written to" in line]


async def test_a_file_that_could_not_be_read_is_tried_again_though_it_did_not_change(opened: Opened, db: Path) -> None:
    async with opened(size=(160, 24)) as pilot:
        hidden = db.rename(db.with_suffix(".gone"))
        await follow(pilot)
        screen = pilot.app.screen
        assert isinstance(screen, LoadingScreen)
        failed = screen._worker
        await follow(pilot)
        assert screen._worker is not failed
        hidden.rename(db)


async def test_a_working_of_a_line_that_is_gone_says_so(opened: Opened, db: Path) -> None:
    async with opened("down", "enter", size=(160, 24)) as pilot:
        type_in(db, "task", "remove", "PS-1", "Oil and filter")
        await follow(pilot)
        assert line_with(pilot, "state", "no line: ended on 2026-05-01")


@pytest.mark.parametrize("content", [b"", b"not a database at all" * 100], ids=["empty", "something else"])
async def test_a_file_that_is_no_database_is_said_with_the_way_out(
    opened: Opened, tmp_path: Path, content: bytes
) -> None:
    path = tmp_path / "other.db"
    path.write_bytes(content)
    async with opened(size=(160, 24), context=Context(str(path))) as pilot:
        assert line_with(pilot, str(path), "--db")
        is_new = [line for line in seen(pilot) if "There is nothing here yet." in line]
        assert bool(is_new) == (content == b"")
        assert isinstance(pilot.app, FleetApp)
        assert pilot.app.status() == 3


async def test_a_missing_database_says_how_to_begin_and_shows_when_it_is_made(opened: Opened, tmp_path: Path) -> None:
    path = tmp_path / "new.db"
    async with opened(size=(100, 30), context=Context(str(path))) as pilot:
        assert line_with(pilot, "Add a first engine: 2 shows the engines, and there a adds one.")
        assert not path.exists()
        type_in(path, "engine", "add", "P-01", "--in-service", "2024-01-10")
        await follow(pilot)
        assert line_with(pilot, "x gives the one under the cursor the tasks of a ready-made schedule")
        assert isinstance(pilot.app, FleetApp)
        assert pilot.app.status() == 0
