"""What else can be written down about an engine or machine: a short list, each with its key."""

from collections.abc import Iterable

from textual.widget import Widget

from fleetcare.tui.actions import Action, actions_of
from fleetcare.tui.frame import FramedScreen, TopBar, say_day
from fleetcare.tui.widgets.columns import Cell, Column, Section
from fleetcare.tui.widgets.long_list import LongList

COLUMNS: tuple[Column[Action], ...] = (
    Column("KEY", lambda action: Cell(action.keys_said[0], "strong"), 3, 3),
    Column("WRITE DOWN", lambda action: action.word, 12, 20),
    Column("", lambda action: action.tells, 20, 80),
)


_OPENS = ("write(", "tasks")


class MoreScreen(FramedScreen):
    """The list. It is left with what was chosen, as the screen below does it, or with None."""

    place = "more"

    def __init__(self, tag: str) -> None:
        super().__init__()
        self.tag = tag

    def body(self) -> Iterable[Widget]:
        """One list."""
        yield LongList(COLUMNS, lambda action: action.key)

    def on_mount(self) -> None:
        """Fill it."""
        self.query_one(TopBar).tell(say_day(self.context.today()))
        forms = [action for action in actions_of(self.place) if action.method.startswith(_OPENS)]
        self.query_one(LongList).show([Section(self.tag, forms, "strong")])

    def on_long_list_opened(self) -> None:
        """Choose what was clicked twice."""
        self.action_choose()

    def action_choose(self) -> None:
        """Choose what is under the cursor."""
        action: Action | None = self.query_one(LongList).current
        if action is not None:
            self.dismiss(action.method)

    def action_write(self, name: str) -> None:
        """Choose a form."""
        self.dismiss(f"write('{name}')")

    def action_tasks(self) -> None:
        """Choose the tasks."""
        self.dismiss("tasks")

    def action_back(self) -> None:
        """Choose nothing."""
        self.dismiss(None)
