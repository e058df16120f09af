"""Lines of text as high as they are: each wrapped beside a mark, always literal."""

from collections.abc import Sequence
from typing import Any, ClassVar, NamedTuple

from rich.segment import Segment
from textual.strip import Strip
from textual.widget import Widget

from fleetcare.tui.looks import TONE_CLASSES, tone_style
from fleetcare.tui.widgets.text import CUT, fit, wrap

HERE = "▌"
"""The mark of where one is."""

_MARK = 2
_MARGIN = 1
_KEPT_FREE = 6  # lines of the terminal for what stands above and below


class SaidLine(NamedTuple):
    """Some text, in which tone, and the mark before it."""

    text: str
    tone: str = ""
    mark: str = ""


class SaidLines(Widget):
    """Lines, one below the other."""

    COMPONENT_CLASSES: ClassVar[set[str]] = {*TONE_CLASSES}

    def __init__(self) -> None:
        super().__init__()
        self._lines: tuple[SaidLine, ...] = ()

    def tell(self, lines: Sequence[SaidLine]) -> None:
        """Show other lines."""
        if tuple(lines) != self._lines:
            self._lines = tuple(lines)
            self.refresh(layout=True)

    @property
    def are_whole(self) -> bool:
        """Whether all of them have room."""
        return len(self._wrapped(self.size.width)) <= self.size.height

    def get_content_height(self, container: Any, viewport: Any, width: int) -> int:
        """As high as all of them, or as the terminal has room for."""
        return min(len(self._wrapped(width)), max(int(viewport.height) - _KEPT_FREE, 1))

    def render_line(self, y: int) -> Strip:
        """Draw one line; the last there is room for says that there are more."""
        width, lines = self.size.width, self._wrapped(self.size.width)
        text, tone, mark = lines[y] if y < len(lines) else SaidLine("")
        text = CUT if y == self.size.height - 1 < len(lines) - 1 else text
        text = f"{' ' * _MARGIN}{fit(mark, _MARK)}{text}"
        return Strip([Segment(fit(text, width), self.rich_style + tone_style(self, tone))], width)

    def _wrapped(self, width: int) -> list[SaidLine]:
        room = max(width - _MARK - 2 * _MARGIN, 1)
        return [
            SaidLine(part, line.tone, "" if number else line.mark)
            for line in self._lines
            for number, part in enumerate(wrap(line.text, room))
        ]
