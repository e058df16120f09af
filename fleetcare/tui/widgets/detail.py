"""Around the due list: how many lines stand how, what is left out, and the line under the cursor in words."""

from collections.abc import Sequence
from typing import Any, ClassVar

from rich.segment import Segment
from textual.strip import Strip
from textual.widget import Widget

from fleetcare.tui.looks import MARKS, TONE_CLASSES, tone_style
from fleetcare.tui.widgets.text import columns_of, fit, wrap


class Counts(Widget):
    """How many lines stand in each state, and in a second line what the list is narrowed to."""

    COMPONENT_CLASSES: ClassVar[set[str]] = {*TONE_CLASSES}

    def __init__(self) -> None:
        super().__init__()
        self._counts: Sequence[tuple[str, str, int]] = ()
        self._only = ""

    def tell(self, counts: Sequence[tuple[str, str, int]], only: str) -> None:
        """Show counts as (tone, word, number); what is 0 is left out. `only` says what is left out of the list."""
        if (counts, only) != (self._counts, self._only):
            self._counts, self._only = counts, only
            self.refresh(layout=True)

    def get_content_height(self, container: Any, viewport: Any, width: int) -> int:
        """A second line only where something is left out."""
        return 2 if self._only else 1

    def render_line(self, y: int) -> Strip:
        """Draw the counts, or what is left out."""
        style, width = self.rich_style, self.size.width
        if y:
            return Strip([Segment(fit(f" {self._only}", width), style + tone_style(self, "strong"))], width)
        segments, room = [Segment(" ", style)], width - 1
        for tone, word, number in self._counts:
            text = f"{MARKS[tone]} {number} {word}"
            if number and columns_of(text) <= room:
                segments.append(Segment(text + "  ", style + tone_style(self, tone)))
                room -= columns_of(text) + 2
        return Strip(segments).adjust_cell_length(width, style)


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
