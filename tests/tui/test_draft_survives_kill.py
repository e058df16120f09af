"""A program killed while somebody types, in a real terminal: what was on the screen a second before is there again."""

import os
import signal
import sys
from pathlib import Path

from fleetcare.context import Context
from fleetcare.domain.sheets import CellKey, Phase
from fleetcare.tui.screens.sheet import SheetScreen
from tests.benchmarks.first_paint import in_terminal, read_away, read_until
from tests.tui.conftest import TODAY, Opened, line_with
from tests.tui.forms import stored


async def test_what_was_typed_a_second_before_a_kill_is_there_again(opened: Opened, db: Path) -> None:
    before = stored(db)
    command = (sys.executable, "-m", "fleetcare", "--db", str(db), "--as-of", TODAY)
    with in_terminal(*command) as (process, terminal, _):
        read_until(terminal, "OVERDUE")
        os.write(terminal, b"w")
        read_until(terminal, "showed last")
        os.write(terminal, b"4911\rQui")
        read_until(terminal, "takes Quill")
        read_away(terminal, 1)
        os.kill(process, signal.SIGKILL)
    async with opened("w", size=(100, 30)) as pilot:
        assert line_with(pilot, "Log work on TR-1")
        assert line_with(pilot, " Meter", "4911")
        assert line_with(pilot, "By ", "Qui")
        assert line_with(pilot, "As you left it")
    assert stored(db) == before


async def test_an_entry_line_half_typed_before_a_kill_is_there_again_and_was_not_stored(
    opened: Opened, db: Path
) -> None:
    before = stored(db)
    command = (sys.executable, "-m", "fleetcare", "--db", str(db), "--as-of", TODAY)
    with in_terminal(*command) as (process, terminal, _):
        read_until(terminal, "OVERDUE")
        os.write(terminal, b"i")
        read_until(terminal, "in any order")
        os.write(terminal, b"tr1 air 4911 qui")
        read_until(terminal, "Enter stores it")
        read_away(terminal, 1)
        os.kill(process, signal.SIGKILL)
    async with opened("i") as pilot:
        assert line_with(pilot, "▌entry line  tr1 air 4911 qui")
        assert line_with(pilot, "TR-1, air filter, 4911 h on the dial, Quill")
        assert line_with(pilot, "As you left it")
    assert stored(db) == before


async def test_a_half_typed_sheet_is_there_again_with_its_unfinished_cell(opened: Opened, bench: Context) -> None:
    before = stored(bench.path)
    command = (sys.executable, "-m", "fleetcare", "--db", str(bench.path), "--as-of", TODAY)
    with in_terminal(*command) as (process, terminal, _):
        read_until(terminal, "NEAR")
        os.write(terminal, b"w")
        read_until(terminal, "showed last")
        os.write(terminal, b"1000\rFenn\x13")
        read_until(terminal, "Stop 1 of 1")
        os.write(terminal, b"25\r\r4")
        read_until(terminal, "alert")
        read_away(terminal, 1)
        os.kill(process, signal.SIGKILL)
    async with opened("w", "ctrl+s", size=(80, 24), context=bench) as pilot:
        screen = pilot.app.screen
        assert isinstance(screen, SheetScreen)
        assert line_with(pilot, " I ", "0.25·", "same")
        assert screen.texts[CellKey("lash", "1E", Phase.FOUND)] == "4"
        assert line_with(pilot, "As you left it")
    assert stored(bench.path) == before
