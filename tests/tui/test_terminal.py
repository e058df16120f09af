"""The program in a real pseudo-terminal: it takes the screen, gives it back, and says how it ended."""

import fcntl
import os
import pty
import select
import struct
import subprocess
import sys
import termios
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from tests.tui.conftest import TODAY

PATIENCE = 60.0
TAKEN, GIVEN_BACK = b"\x1b[?1049h", b"\x1b[?1049l"  # xterm control sequences: alternate screen buffer


class Terminal:
    """A program in a terminal of 80 by 24."""

    def __init__(self, *words: str) -> None:
        self.terminal, inside = pty.openpty()
        fcntl.ioctl(inside, termios.TIOCSWINSZ, struct.pack("HHHH", 24, 80, 0, 0))
        command = (sys.executable, "-m", "fleetcare", *words)
        self.process = subprocess.Popen(command, stdin=inside, stdout=inside, stderr=inside, start_new_session=True)
        os.close(inside)
        self.got = b""

    def read(self) -> bool:
        """Take what comes next; False where the program has ended."""
        assert select.select([self.terminal], [], [], PATIENCE)[0], self.got
        try:
            more = os.read(self.terminal, 65536)
        except OSError:  # what Linux says of a terminal nobody holds any more
            return False
        self.got += more
        return bool(more)

    def until(self, text: bytes) -> None:
        """Read until a text has come."""
        while text not in self.got:
            assert self.read(), self.got

    def status(self) -> int:
        """Read to the end and give the exit status."""
        while self.read():
            pass
        return self.process.wait(PATIENCE)


@contextmanager
def running(*words: str) -> Iterator[Terminal]:
    """Start the program, and take its terminal away afterwards."""
    terminal = Terminal(*words)
    try:
        yield terminal
    finally:
        os.close(terminal.terminal)
        terminal.process.kill()
        terminal.process.wait()


def test_without_a_command_the_due_list_stands_on_the_screen_and_q_gives_the_terminal_back(db: Path) -> None:
    with running("--db", str(db), "--as-of", TODAY) as terminal:
        terminal.until(b"Hydraulic hoses")
        os.write(terminal.terminal, b"q")
        assert terminal.status() == 0
    assert terminal.got.index(TAKEN) < terminal.got.index(b"OVERDUE") < terminal.got.index(GIVEN_BACK)


def test_a_database_that_cannot_be_read_is_said_on_the_screen_and_by_the_status(tmp_path: Path) -> None:
    path = tmp_path / "notes.db"
    path.write_text("no database, but long enough to be looked at " * 20)
    with running("--db", str(path)) as terminal:
        terminal.until(b"FLEETCARE_DB")
        os.write(terminal.terminal, b"q")
        assert terminal.status() == 3
    assert b"Traceback" not in terminal.got


def test_an_address_that_is_no_file_is_refused_before_the_screen_is_taken() -> None:
    with running("--db", "postgresql://shop/yard") as terminal:
        assert terminal.status() == 3
    assert TAKEN not in terminal.got
    assert terminal.got.count(b"\n") == 1
