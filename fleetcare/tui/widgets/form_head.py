"""What stands above the fields of a form: its title, and what is good to know before it is filled in."""

from collections.abc import Sequence
from typing import Any

from textual.content import Content
from textual.widget import Widget

from fleetcare.tui.widgets.text import columns_of, fit, wrap

_MOST_LINES = 12


class FormTitle(Widget):
    """What is being written down, and whose it is."""

    def __init__(self, title: str) -> None:
        super().__init__()
        self._title, self._whose = f" {title}", ""

    def tell(self, whose: str) -> None:
        """Say whose it is."""
        self._whose = whose
        self.refresh()

    def render(self) -> Content:
        """Draw it, literally."""
        title = fit(self._title, min(columns_of(self._title), self.size.width))
        room = max(self.size.width - columns_of(title) - 2, 0)
        return Content.assemble((title, "bold"), "  ", fit(self._whose, room))


class FormHead(Widget):
    """A heading with lines under it; without lines it takes no room."""

    def __init__(self) -> None:
        super().__init__()
        self._title: str = ""
        self._sentences: Sequence[str] = ()

    def tell(self, title: str, sentences: Sequence[str]) -> None:
        """Show other lines."""
        self._title, self._sentences = title, sentences
        self.display = bool(sentences)
        self.refresh(layout=True)

    def get_content_height(self, container: Any, viewport: Any, width: int) -> int:
        """As high as its lines, and one free below."""
        return len(self._lines(width)) + 1

    def render(self) -> Content:
        """Draw them, literally."""
        return Content("\n".join(self._lines(self.size.width)))

    def _lines(self, width: int) -> list[str]:
        lines = [line for said in self._sentences for line in wrap(said, max(width - 2, 1), most=2)]
        over = len(lines) - _MOST_LINES
        lines = [*lines[:_MOST_LINES], f"… and {over} lines more"] if over > 1 else lines
        return [f" {self._title}", *(f"  {line}" for line in lines)]


class FormFoot(FormHead):
    """What the fields, as they are filled in now, would bring; below them."""
