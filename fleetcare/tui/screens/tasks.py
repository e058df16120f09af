"""All tasks of an engine or machine, those without a line too, to change, end or add to."""

from collections.abc import Iterable
from typing import TYPE_CHECKING

from textual.widget import Widget

from fleetcare.tui.frame import TopBar, say_day
from fleetcare.tui.widgets.columns import Cell, Column, Section
from fleetcare.tui.widgets.detail import Detail
from fleetcare.tui.widgets.long_list import LongList
from fleetcare.tui.writing import WritingScreen

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection

    from fleetcare.operations.listing import TaskRow
    from fleetcare.tui.forms.base import Subject

COLUMNS: tuple[Column["TaskRow"], ...] = (
    Column("TASK", lambda row: Cell(row.name, "strong"), 16, 40),
    Column("EVERY", lambda row: row.every, 20, 60),
    Column("WORK", lambda row: row.work, 8, 14, drop=1),
    Column("ALSO", lambda row: Cell(row.also, "quiet"), 10, 60, drop=2),
)


class TasksScreen(WritingScreen):
    """What `fleetcare task list TAG` prints."""

    place = "tasks"

    def __init__(self, tag: str) -> None:
        super().__init__()
        self.tag = tag

    def body(self) -> Iterable[Widget]:
        """One list, and the task under the cursor in words."""
        yield LongList(COLUMNS, lambda row: row.name)
        yield Detail()

    def read(self, connection: "Connection", on: "date", *, is_future: bool) -> "list[TaskRow]":
        """Load them."""
        from fleetcare.operations.listing import list_tasks

        return list_tasks(connection, self.tag, on)

    def show(self, found: "list[TaskRow]") -> None:
        """Show them."""
        self.query_one(TopBar).tell(say_day(self.day))
        self.query_one(LongList).show([Section(f"Tasks of {self.tag}", found, "strong")], "No tasks yet; a adds one.")

    def on_long_list_moved(self) -> None:
        """Say what is under the cursor, whole."""
        row: TaskRow | None = self.query_one(LongList).current
        if row is not None:
            rest = "; ".join(word for word in (row.every, row.work, row.also, row.source) if word)
            self.query_one(Detail).tell((row.name, "strong"), (rest, ""))

    def on_long_list_opened(self) -> None:
        """Change a task with the mouse."""
        self.action_write("task-edit")

    def subject(self) -> "Subject":
        """Give the task under the cursor."""
        from fleetcare.tui.forms.base import Subject

        row: TaskRow | None = self.query_one(LongList).current
        return Subject(self.tag, row.name if row is not None else "")
