"""The working of one line: everything it takes to check it with a pencil."""

from collections.abc import Iterable
from typing import TYPE_CHECKING

from textual.widget import Widget

from fleetcare.domain.cautions import GENERAL
from fleetcare.tui.frame import TopBar, say_day
from fleetcare.tui.loading import LoadingScreen
from fleetcare.tui.widgets.prose import Block, Prose

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection

    from fleetcare.tui.widgets.text import Label

Working = tuple[list["Label"], list["Label"]]


class WorkingScreen(LoadingScreen):
    """What `fleetcare show TAG TASK` prints."""

    place = "working"

    def __init__(self, tag: str, task: str) -> None:
        super().__init__()
        self.tag, self.task_name = tag, task

    def body(self) -> Iterable[Widget]:
        """One text."""
        yield Prose()

    def read(self, connection: "Connection", on: "date", *, is_future: bool) -> Working:
        """Load working and history."""
        from fleetcare.operations.show import task_working

        return task_working(connection, self.tag, self.task_name, on, is_future=is_future)

    def show(self, found: Working) -> None:
        """Lay them out."""
        working, past = found
        self.query_one(TopBar).tell(say_day(self.day))
        self.query_one(Prose).show(
            [
                Block(f"{self.tag}  {self.task_name}", working),
                *([Block("HISTORY", past)] if past else []),
                Block(text=GENERAL, tone="quiet"),
            ]
        )

    def action_item(self) -> None:
        """Open the page of the engine or machine."""
        from fleetcare.tui.screens.item import ItemScreen

        self.app.push_screen(ItemScreen(self.tag))
