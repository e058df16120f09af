"""A list that can be narrowed to lines with some words in them."""

from typing import ClassVar

from textual.binding import Binding, BindingType
from textual.containers import Horizontal
from textual.widgets import Input, Static

from fleetcare.tui.frame import Notice
from fleetcare.tui.widgets.plain_input import PlainInput
from fleetcare.tui.writing import WritingScreen


class FindLine(PlainInput):
    """What is typed narrows the list at once; Enter keeps it, Esc takes it back."""

    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape", "take_back", show=False)]

    def __init__(self, text: str) -> None:
        super().__init__(text, placeholder="words, in any order", compact=True)

    async def action_take_back(self) -> None:
        """Find nothing in particular any more."""
        self.value = ""
        await self.action_submit()

    async def action_submit(self) -> None:
        """Keep what was found and give the keys back to the list."""
        await self.screen.query(FindBar).remove()


class FindBar(Horizontal):
    """A line to type in, with a word before it that says what for."""

    def __init__(self, text: str) -> None:
        super().__init__(Static("find"), FindLine(text))


class SearchingScreen(WritingScreen):
    """A screen with a line to type words in."""

    def __init__(self) -> None:
        super().__init__()
        self.text = ""

    def rearrange(self) -> None:
        """Show what holds the words in `text`."""
        raise NotImplementedError

    async def action_find(self) -> None:
        """Open the line to type in."""
        await self.mount(FindBar(self.text), before=self.query_one(Notice))
        self.query_one(FindLine).focus()

    def on_input_changed(self, event: Input.Changed) -> None:
        """Narrow to what is typed so far."""
        self.text = event.value
        self.rearrange()
