"""The keys of a place, with what each does."""

from collections.abc import Iterable

from textual.widget import Widget

from fleetcare.tui.actions import actions_of
from fleetcare.tui.frame import FramedScreen
from fleetcare.tui.looks import MARKS
from fleetcare.tui.widgets.prose import Block, Prose

_MOVING = [
    ("↑ ↓", "move from line to line"),
    ("PgUp PgDn", "move by what is in sight"),
    ("Home End", "move to the first or last line"),
    ("mouse", "a click puts the cursor on a line, a double click opens it, the wheel scrolls"),
    ("Ctrl P", "find any of these by typing what it does"),
]
_MEANT = {
    "overdue": "overdue: past its point and what is allowed beyond",
    "due": "due: its point is reached",
    "near": "near: soon due",
    "probably": "probably due: not by what was read, but by how the engine is likely used since",
    "unset": "unset: nothing says what to count from; the line tells what to enter",
    "before-return": "before return: waits for a laid-up engine to run again",
    "clear": "clear: nothing to do yet",
}


class KeysScreen(FramedScreen):
    """Help on one place."""

    place = "keys"

    def __init__(self, about: str) -> None:
        super().__init__()
        self.about = about

    def body(self) -> Iterable[Widget]:
        """One text."""
        yield Prose()

    def on_mount(self) -> None:
        """Fill it: nothing needs to be read."""
        own = [(" ".join(action.keys_said), action.tells) for action in actions_of(self.about)]
        marks = [(MARKS[tone], meaning) for tone, meaning in _MEANT.items()]
        blocks = [Block("KEYS", own), Block("MOVING", _MOVING), Block("MARKS", marks)]
        self.query_one(Prose).show(blocks)
