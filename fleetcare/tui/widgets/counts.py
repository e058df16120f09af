"""Above the due list: how many lines stand how, how many findings want an answer, and what is left out."""

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any, ClassVar

from rich.segment import Segment
from textual.strip import Strip
from textual.widget import Widget

from fleetcare.tui.looks import MARKS, TONE_CLASSES, tone_style
from fleetcare.tui.widgets.text import columns_of, fit

if TYPE_CHECKING:
    from fleetcare.operations.open_findings import OpenFindings

Said = tuple[tuple[str, str], ...]
"""Words side by side, each with its tone."""

_COUNTING: Said = (("findings …", "quiet"),)


class Counts(Widget):
    """How many lines stand in each state; below it the findings that want an answer, and what the list is narrowed to."""

    COMPONENT_CLASSES: ClassVar[set[str]] = {*TONE_CLASSES}

    def __init__(self) -> None:
        super().__init__()
        self._counts: Sequence[tuple[str, str, int]] = ()
        self._findings: Said = ()
        self._only = ""

    def tell(self, counts: Sequence[tuple[str, str, int]], only: str) -> None:
        """Show counts as (tone, word, number); what is 0 is left out. `only` says what is left out of the list."""
        if (counts, only) != (self._counts, self._only):
            self._counts, self._only = counts, only
            self.refresh(layout=True)

    def expect_findings(self, is_measured: bool) -> None:
        """Keep a line for findings where there may be any, so that nothing moves once they are counted."""
        if bool(self._findings) is not is_measured:
            self._findings = _COUNTING if is_measured else ()
            self.refresh(layout=True)

    def tell_findings(self, found: "OpenFindings | None") -> None:
        """Say how many findings want an answer, and the key that shows them; None where that cannot be told."""
        self._findings = _say(found)
        self.refresh()

    def get_content_height(self, container: Any, viewport: Any, width: int) -> int:
        """A line more for findings, and one where something is left out."""
        return 1 + bool(self._findings) + bool(self._only)

    def render_line(self, y: int) -> Strip:
        """Draw the counts, the findings, or what is left out."""
        if y == 0:
            told = [(f"{MARKS[tone]} {number} {word}", tone) for tone, word, number in self._counts if number]
            return self._line(told)
        return self._line(self._findings if self._findings and y == 1 else ((self._only, "strong"),))

    def _line(self, words: Sequence[tuple[str, str]]) -> Strip:
        """Draw words side by side, those there is room for; the first in any case."""
        style, width = self.rich_style, self.size.width
        segments, room = [Segment(" ", style)], width - 1
        for place, (text, tone) in enumerate(words):
            shown = text if place else fit(text, min(columns_of(text), room))
            if columns_of(shown) <= room:
                segments.append(Segment(shown + "  ", style + tone_style(self, tone)))
                room -= columns_of(shown) + 2
        return Strip(segments).adjust_cell_length(width, style)


def _say(found: "OpenFindings | None") -> Said:
    if found is None:
        return (("which findings want an answer cannot be told: 3 says why", "quiet"),)
    counts = ((found.alarms, "alarm", "overdue"), (found.alerts, "alert", "due"))
    told = [(f"{MARKS[tone]} {count} {word}{'s' * (count > 1)}", tone) for count, word, tone in counts if count]
    return (*told, ("to answer; 3 shows them", "quiet")) if told else (("no finding wants an answer", "quiet"),)
