"""A line of text to type in that shows whatever is in it harmlessly."""

from rich.segment import Segment
from textual.strip import Strip
from textual.widgets import Input

from fleetcare.domain.printable import UNPRINTABLE

_SHOWN = "\ufffd"


class PlainInput(Input):
    """An Input in which a character that could drive the terminal, pasted or kept from before, shows as one that cannot."""

    def render_line(self, y: int) -> Strip:
        """Draw the line."""
        strip = super().render_line(y)
        if not UNPRINTABLE.search(strip.text):
            return strip
        harmless = [Segment(UNPRINTABLE.sub(_SHOWN, text), style, control) for text, style, control in strip]
        return Strip(harmless).adjust_cell_length(strip.cell_length, self.rich_style)
