"""The cells of a sheet: drawn as they are laid out, typed into, and each marked with where its value lies."""

from collections.abc import Mapping, Sequence
from typing import ClassVar, Protocol

from rich.segment import Segment
from rich.style import Style
from textual import events
from textual.geometry import Region, Size
from textual.scroll_view import ScrollView
from textual.strip import Strip

from fleetcare.domain.sheets import CellKey
from fleetcare.tui.looks import TONE_CLASSES, tone_style
from fleetcare.tui.sheets.layout import Blocks, Flow, Laid, Place, Shown, lay_out
from fleetcare.tui.widgets.text import columns_of, fit, wrap

_CURSOR = "▌"
_LINE = "_"
_LEAST_DIGITS = 4
_MOST_DIGITS = 7
_MOST_TYPED = 40
_STEPS = {"enter": 1, "tab": 1, "shift+tab": -1}
_BESIDE = {"left": -1, "right": 1}
_BEYOND = {"up": -1, "down": 1}


class GridOwner(Protocol):
    """Whoever the cells belong to: told at once of what happens in them."""

    def cell_typed(self) -> None:
        """What stands in the cell under the cursor changed."""

    def cell_moved(self) -> None:
        """The cursor stands on another cell."""

    def cell_left(self, step: int) -> None:
        """The cell was left for the next one to fill in, or with -1 for the one before."""


class Grid(ScrollView, can_focus=True, inherit_bindings=False):
    """Cells in blocks with a cursor. What is typed on a cell takes the place of what stood there; Backspace mends it."""

    COMPONENT_CLASSES: ClassVar[set[str]] = {"grid--cursor", *TONE_CLASSES}
    DEFAULT_CSS = "Grid { overflow-x: hidden; scrollbar-size-vertical: 1; }"

    def __init__(self, owner: GridOwner) -> None:
        super().__init__()
        self.texts: dict[CellKey, str] = {}
        self.cursor: CellKey | None = None
        self._owner = owner
        self._blocks: Blocks = ()
        self._lasts: Mapping[CellKey, str] = {}
        self._flowing: set[CellKey] = set()  # cells as wide as they are, whatever the others hold
        self._below: Sequence[str] = ()
        self._shown: Mapping[CellKey, Shown] = {}
        self._here: frozenset[CellKey] = frozenset()
        self._laid = Laid(())
        self._is_fresh = True  # whether the next letter begins the cell anew

    def draw(self, blocks: Blocks, lasts: Mapping[CellKey, str]) -> None:
        """Show other blocks, and what their cells showed last."""
        self._blocks, self._lasts = blocks, lasts
        self._flowing = {key for block in blocks if isinstance(block, Flow) for _, key, _ in block.items}
        self._lay()

    def tell(self, shown: Mapping[CellKey, Shown], here: frozenset[CellKey], below: Sequence[str]) -> None:
        """Show other values and marks, and lines to read below; cells filled in `here`, with that under the cursor, are lined."""
        self._shown, self._here, self._below = shown, here, below
        self._lay()

    def go(self, key: CellKey) -> None:
        """Put the cursor on a cell, in sight."""
        is_other, self.cursor, self._is_fresh = key != self.cursor, key, True
        self._lay()
        if key in self._laid.line_of:
            line = self._laid.line_of[key]
            above = 2 if line <= 3 else 0  # the heads of the first rows stay with them
            self.scroll_to_region(Region(0, line - above, 1, 1 + above), animate=False, force=True)
        if is_other:
            self._owner.cell_moved()

    def check_consume_key(self, key: str, character: str | None) -> bool:
        """Keep letters from meaning anything else."""
        return character is not None and character.isprintable()

    def on_key(self, event: events.Key) -> None:
        """Type a letter, move, or leave the cell. All here and at once, so that keys typed ahead keep their order."""
        key, here = event.key, self.cursor
        if here is None:
            return
        if key in _STEPS:
            self._owner.cell_left(_STEPS[key])
        elif key in _BESIDE:
            self.go(self._laid.beside(here, _BESIDE[key]))
        elif key in _BEYOND:
            self.go(self._laid.beyond(here, _BEYOND[key]))
        elif key == "backspace":
            self._put(self.texts.get(here, "")[:-1])
        elif key == "delete":
            self._put("")
        elif event.character is not None and event.is_printable:
            before = "" if self._is_fresh else self.texts.get(here, "")
            self._put((before + event.character)[:_MOST_TYPED])
        else:
            return
        event.stop()
        event.prevent_default()

    def on_paste(self, event: events.Paste) -> None:
        """Take the first line of what is pasted."""
        if self.cursor is not None:
            first = event.text.strip().partition("\n")[0]
            self._put("".join(letter for letter in first if letter.isprintable())[:_MOST_TYPED])
            event.stop()

    def on_click(self, event: events.Click) -> None:
        """Put the cursor where the mouse is."""
        number = event.y + self.scroll_offset.y
        line = self._laid.lines[number] if number < len(self._laid.lines) else ()
        for place in line:
            if isinstance(place, Place) and place.at <= event.x <= place.at + place.width + 1:
                self.go(place.key)

    def on_resize(self) -> None:
        """Lay out anew."""
        self._lay()

    def render_line(self, y: int) -> Strip:
        """Draw one line of what is in sight."""
        number, width = y + self.scroll_offset.y, self.scrollable_content_region.width
        base, laid = self.rich_style, self._laid.lines
        segments: list[Segment] = []
        at = 0
        for part in laid[number] if number < len(laid) else ():
            segments.append(Segment(" " * (part.at - at), base))
            drawn = (
                self._cell(part)
                if isinstance(part, Place)
                else [Segment(part.words, base + tone_style(self, part.tone))]
            )
            segments += drawn
            at = part.at + sum(columns_of(segment.text) for segment in drawn)
        below = number - len(laid) - 1
        if 0 <= below < len(self._read_below()):
            segments = [Segment(f" {self._read_below()[below]}", base + tone_style(self, "quiet"))]
        return Strip(segments).adjust_cell_length(width, base)

    def _cell(self, place: Place) -> list[Segment]:
        shown = self._shown.get(place.key, Shown(self.texts.get(place.key, "")))
        is_here = place.key == self.cursor
        words = self.texts.get(place.key, "") if is_here and not self._is_fresh else _short(shown.words)
        style: Style = self.rich_style + tone_style(self, shown.tone)
        if is_here:
            style += self.get_component_rich_style("grid--cursor", partial=True)
        if place.key in self._here and not words and not is_here:
            words, style = _LINE * place.width, self.rich_style + tone_style(self, "quiet")
        over = columns_of(words) - place.width
        words = words[over:] if is_here and over > 0 else words  # what is being typed shows its end
        return [
            Segment(_CURSOR if is_here else " ", self.rich_style),
            Segment(fit(words, place.width), style),
            Segment(shown.mark, self.rich_style + tone_style(self, shown.tone)),
        ]

    def _put(self, text: str) -> None:
        if self.cursor is not None:
            self.texts[self.cursor], self._is_fresh = text, False
            self._owner.cell_typed()
            self.refresh()

    def _lay(self) -> None:
        size = self.size
        if not self._blocks or size.width < 1:
            return
        lasts = {key: _short(last) for key, last in self._lasts.items()}
        words = [_short(shown.words) for key, shown in self._shown.items() if key not in self._flowing]
        digits = min(max([_LEAST_DIGITS, *map(columns_of, [*words, *lasts.values()])]), _MOST_DIGITS)
        self._laid = lay_out(self._blocks, size.width - 1, size.height, digits, lasts)
        below = self._read_below()
        self.virtual_size = Size(size.width, len(self._laid.lines) + (1 + len(below) if below else 0))
        self.refresh()

    def _read_below(self) -> list[str]:
        return [line for said in self._below for line in wrap(said, max(self.size.width - 3, 1))]


def _short(words: str) -> str:
    """Give a figure without the 0 before its point where it is long: .152, .008."""
    return words[1:] if words.startswith("0.") and len(words) > _LEAST_DIGITS else words
