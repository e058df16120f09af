"""A program killed in the middle of a form, in a real terminal: what was on the screen a second before is there again."""

import os
import signal
import sys
from pathlib import Path

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
