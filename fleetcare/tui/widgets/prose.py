"""A text of labelled sentences to read and scroll: a working, a nameplate, the keys."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import ClassVar

from rich.segment import Segment
from textual.geometry import Size
from textual.scroll_view import ScrollView
from textual.strip import Strip

from fleetcare.tui.looks import TONE_CLASSES, tone_style
from fleetcare.tui.widgets.text import Label, fit, wrap, wrap_labels

_MARGIN = 1
_WIDEST = 110  # columns; longer lines are hard to follow with the eye


@dataclass(frozen=True, slots=True)
class Block:
    """A heading, labelled sentences under it, and plain text under those; each may be empty."""

    title: str = ""
    labels: Sequence[Label] = ()
    text: str = ""
    tone: str = ""


class Prose(ScrollView, can_focus=True):
    """Blocks of text, wrapped to the width there is, always literal."""

    COMPONENT_CLASSES: ClassVar[set[str]] = {*TONE_CLASSES, "prose--heading"}
    DEFAULT_CSS = "Prose { overflow-x: hidden; scrollbar-size-vertical: 1; }"

    def __init__(self) -> None:
        super().__init__()
        self._blocks: Sequence[Block] = ()
        self._lines: list[list[tuple[str, str]]] = []

    def show(self, blocks: Sequence[Block]) -> None:
        """Show other blocks; the place stays."""
        if list(blocks) != list(self._blocks):
            self._blocks = blocks
            self._lay_out()

    def on_resize(self) -> None:
        """Wrap anew."""
        self._lay_out()

    def render_line(self, y: int) -> Strip:
        """Draw one line of what is in sight."""
        number, width = y + self.scroll_offset.y, self.scrollable_content_region.width
        segments = [Segment(" " * _MARGIN, self.rich_style)]
        for text, tone in self._lines[number] if number < len(self._lines) else ():
            style = self.get_component_rich_style("prose--heading", partial=True) if tone == "heading" else None
            segments.append(Segment(text, self.rich_style + (style or tone_style(self, tone if not style else ""))))
        return Strip(segments).adjust_cell_length(width, self.rich_style)

    def _lay_out(self) -> None:
        width = min(self.size.width - 2 * _MARGIN, _WIDEST)
        self._lines = []
        for block in self._blocks if width > 0 else ():
            if self._lines:
                self._lines.append([])
            if block.title:
                self._lines.append([(fit(block.title, width), "heading")])
            for label, line in wrap_labels(list(block.labels), width):
                self._lines.append([(label, "quiet"), (line, block.tone)])
            for part in block.text.split("\n") if block.text else ():
                self._lines.extend([(line, block.tone)] for line in wrap(part, width))
        self.virtual_size = Size(self.size.width, len(self._lines))
        self.refresh()
