"""What is under the cursor, in words."""

from collections.abc import Sequence
from typing import ClassVar

from rich.segment import Segment
from textual.strip import Strip
from textual.widget import Widget

from fleetcare.tui.looks import TONE_CLASSES, tone_style
from fleetcare.tui.widgets.text import fit, wrap


class Detail(Widget):
    """A few lines about what is under the cursor."""

    COMPONENT_CLASSES: ClassVar[set[str]] = {*TONE_CLASSES}

    def __init__(self) -> None:
        super().__init__()
        self._lines: Sequence[tuple[str, str]] = ()

    def tell(self, *lines: tuple[str, str]) -> None:
        """Show lines of (text, tone); where there is room the last one wraps."""
        if lines != self._lines:
            self._lines = lines
            self.refresh()

    def render_line(self, y: int) -> Strip:
        """Draw one line."""
        width, height = self.size.width, self.size.height
        room = max(width - 2, 1)
        *first, last = self._lines or (("", ""),)
        wrapped = [*first, *((text, last[1]) for text in wrap(last[0], room, most=max(height - len(first), 1)))]
        text, tone = wrapped[y] if y < len(wrapped) else ("", "")
        return Strip([Segment(fit(f" {fit(text, room)}", width), self.rich_style + tone_style(self, tone))], width)
