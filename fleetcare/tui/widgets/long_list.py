"""A list that draws only what is visible: as quick with a million rows as with ten."""

from bisect import bisect_left, bisect_right
from collections.abc import Callable, Hashable, Sequence
from itertools import accumulate
from typing import ClassVar, Generic, NamedTuple

from rich.segment import Segment
from rich.style import Style
from textual import events
from textual.binding import Binding, BindingType
from textual.geometry import Region, Size
from textual.message import Message
from textual.reactive import reactive
from textual.scroll_view import ScrollView
from textual.strip import Strip

from fleetcare.tui.looks import TONE_CLASSES, tone_style
from fleetcare.tui.widgets.columns import GAP, Cell, Column, Row, Section, share
from fleetcare.tui.widgets.text import columns_of, fit, wrap

_HEAD = 1  # the line of column titles
_EDGE = "▌"
_LOOKED_AT = 100  # rows, spread over the list, that tell how wide columns must be


class _Held(NamedTuple):
    """A row, its key, how many lines below the topmost it stands, and whether the cursor is on it."""

    number: int
    key: Hashable
    below: int
    is_cursor: bool


class LongList(ScrollView, Generic[Row], can_focus=True, inherit_bindings=False):
    """Rows under headings with a cursor. The heading of the topmost row stays in sight.

    `key` names a row for good: when rows are shown anew the cursor stays on its row, and that row where it is.
    """

    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("up", "step(-1)", show=False),
        Binding("down", "step(1)", show=False),
        Binding("pageup", "page(-1)", show=False),
        Binding("pagedown", "page(1)", show=False),
        Binding("home", "to_row(0)", show=False),
        Binding("end", "to_row(-1)", show=False),
    ]
    COMPONENT_CLASSES: ClassVar[set[str]] = {
        "long-list--titles",
        "long-list--heading",
        "long-list--cursor",
        *TONE_CLASSES,
    }
    DEFAULT_CSS = "LongList { overflow-x: hidden; scrollbar-size-vertical: 1; }"

    cursor: reactive[int] = reactive(0)

    class Moved(Message):
        """The cursor stands on another row, or its row is shown with other words."""

    class Opened(Message):
        """A row was opened with the mouse."""

    def __init__(self, columns: Sequence[Column[Row]], key: Callable[[Row], Hashable]) -> None:
        super().__init__()
        self._columns = columns
        self._key = key
        self._sections: Sequence[Section[Row]] = ()
        self._first_rows: list[int] = []
        self._first_lines: list[int] = []
        self._count = 0
        self._empty = ""
        self._shares: tuple[int, list[tuple[Column[Row], int]]] = (-1, [])

    def show(self, sections: Sequence[Section[Row]], empty: str = "") -> None:
        """Show other rows; `empty` is said where there are none. Equal rows change nothing on screen."""
        sections = [section for section in sections if section.rows]
        if (sections, empty) == (self._sections, self._empty):
            return
        held, before = self._held(), self.current
        self._sections, self._empty, self._shares = sections, empty, (-1, [])
        self._first_rows = list(accumulate((len(section.rows) for section in sections), initial=0))
        self._first_lines = list(accumulate((len(s.rows) + bool(s.title) for s in sections), initial=0))
        self._count = self._first_rows[-1]
        self.virtual_size = Size(self.size.width, self._first_lines[-1] + _HEAD)
        place = min(self.cursor, max(self._count - 1, 0))
        place = self._find(self._key(before), place) if before is not None else place
        self.set_reactive(LongList.cursor, place)
        if held is not None and self._count:
            line = self._line_of(self._find(held.key, min(held.number, self._count - 1)))
            self.scroll_to(y=max(line - held.below, 0), animate=False, immediate=True)
        if held is None or held.is_cursor:
            self._keep_in_sight()
        self.refresh()
        self.post_message(self.Moved())

    @property
    def current(self) -> Row | None:
        """The row under the cursor, None where there are no rows."""
        return self.row(self.cursor) if self._count else None

    @property
    def count(self) -> int:
        """How many rows there are."""
        return self._count

    def row(self, number: int) -> Row:
        """The row of a number, counted from 0 over all sections."""
        place = bisect_right(self._first_rows, number) - 1
        return self._sections[place].rows[number - self._first_rows[place]]

    def validate_cursor(self, cursor: int) -> int:
        """Keep the cursor on a row."""
        return max(0, min(cursor, self._count - 1))

    def watch_cursor(self, old: int, new: int) -> None:
        """Draw the two rows anew and keep the cursor in sight."""
        if not self._count:
            return
        for number in (old, new):
            line = self._line_of(min(number, self._count - 1))
            self.refresh(Region(0, line - self.scroll_offset.y + _HEAD, self.size.width, 1))
        self._keep_in_sight()
        self.post_message(self.Moved())

    def on_resize(self) -> None:
        """Share the width out anew."""
        self.virtual_size = Size(self.size.width, self.virtual_size.height)
        self._keep_in_sight()

    def on_click(self, event: events.Click) -> None:
        """Put the cursor on the row clicked; a second click opens it."""
        line = event.y - _HEAD + self.scroll_offset.y
        place = self._place(line)
        if event.y < _HEAD or place is None or place[1] is None:
            return
        self.cursor = place[1]
        if event.chain > 1:
            self.post_message(self.Opened())

    def action_step(self, rows: int) -> None:
        """Move the cursor by some rows."""
        self.cursor += rows

    def action_page(self, pages: int) -> None:
        """Move the cursor by what is in sight, less a row to hold on to."""
        self.cursor += pages * max(self.size.height - 3, 1)

    def action_to_row(self, number: int) -> None:
        """Move the cursor to a row; -1 is the last."""
        self.cursor = number if number >= 0 else self._count - 1

    def action_to_section(self, step: int) -> None:
        """Move the cursor to the first row of the next heading, or back to that of this one or the one before."""
        here = bisect_right(self._first_rows, self.cursor) - 1
        if step < 0 and self.cursor > self._first_rows[here]:
            step = 0
        self.cursor = self._first_rows[max(0, min(here + step, len(self._sections) - 1))] if self._count else 0

    def render_line(self, y: int) -> Strip:
        """Draw one line of what is in sight: titles, then headings and rows."""
        width = self.scrollable_content_region.width
        if not self._count:
            return self._said(y, width)
        if y < _HEAD:
            return self._titles(width)
        place = self._place(y - _HEAD + self.scroll_offset.y)
        if place is None:
            return Strip.blank(width, self.rich_style)
        section, number = place
        if number is None or (y == _HEAD and section.title):
            return self._heading(section, width)
        return self._row(number, width)

    def _titles(self, width: int) -> Strip:
        style = self.rich_style + self._style("long-list--titles")
        cells = [fit(column.title, wide, to_right=column.to_right) for column, wide in self._shared(width)]
        return Strip([Segment(fit(" " + (" " * GAP).join(cells), width), style)], width)

    def _heading(self, section: Section[Row], width: int) -> Strip:
        style = self.rich_style + self._style("long-list--heading")
        count = f"  {len(section.rows)}"
        title = fit(f" {section.title}", min(columns_of(section.title) + 1, max(width - len(count), 1)))
        rest = fit(count, max(width - len(title), 0))
        return Strip([Segment(title, style + self._tone(section.tone)), Segment(rest, style)], width)

    def _row(self, number: int, width: int) -> Strip:
        row, at_cursor = self.row(number), number == self.cursor
        base = self.rich_style
        over = self._style("long-list--cursor") if at_cursor else Style.null()
        segments = [Segment(_EDGE if at_cursor and self.has_focus else " ", base + over)]
        for place, (column, wide) in enumerate(self._shared(width)):
            cell = column.cell(row)
            text, tone = cell if isinstance(cell, Cell) else (cell, "")
            if place:
                segments.append(Segment(" " * GAP, base + over))
            segments.append(Segment(fit(text, wide, to_right=column.to_right), base + self._tone(tone) + over))
        return Strip(segments).adjust_cell_length(width, base + over)

    def _said(self, y: int, width: int) -> Strip:
        lines = [line for part in self._empty.split("\n") for line in wrap(part, max(width - 4, 1))]
        text = lines[y - 2 * _HEAD] if 0 <= y - 2 * _HEAD < len(lines) else ""
        return Strip([Segment(fit(f"  {text}", width), self.rich_style)], width)

    def _shared(self, width: int) -> list[tuple[Column[Row], int]]:
        if self._shares[0] != width:
            step = max(self._count // _LOOKED_AT, 1)
            rows = [self.row(number) for number in range(0, self._count, step)]
            self._shares = (width, share(self._columns, rows, width - 1))
        return self._shares[1]

    def _style(self, name: str) -> Style:
        return self.get_component_rich_style(name, partial=True)

    def _tone(self, tone: str) -> Style:
        return tone_style(self, tone)

    def _place(self, line: int) -> tuple[Section[Row], int | None] | None:
        """Give the section a line belongs to, and the number of its row; None for a heading."""
        if not 0 <= line < self._first_lines[-1]:
            return None
        place = bisect_right(self._first_lines, line) - 1
        section = self._sections[place]
        within = line - self._first_lines[place] - bool(section.title)
        return section, None if within < 0 else self._first_rows[place] + within

    def _line_of(self, number: int) -> int:
        place = bisect_right(self._first_rows, number) - 1
        return self._first_lines[place] + bool(self._sections[place].title) + number - self._first_rows[place]

    def _find(self, key: Hashable, otherwise: int) -> int:
        """Look a row up by its key, those near its old place first."""
        order = [*range(otherwise, min(otherwise + 200, self._count)), *range(self._count)]
        return next((number for number in order if self._key(self.row(number)) == key), otherwise)

    def _held(self) -> "_Held | None":
        """Give the row that is to stay where it is: the one under the cursor, or if that is out of sight the topmost."""
        if not self._count:
            return None
        top = self.scroll_offset.y
        is_cursor = top <= self._line_of(self.cursor) < top + self.size.height - _HEAD
        topmost = min(bisect_left(range(self._count), top, key=self._line_of), self._count - 1)
        number = self.cursor if is_cursor else topmost
        return _Held(number, self._key(self.row(number)), self._line_of(number) - top, is_cursor)

    def _keep_in_sight(self) -> None:
        """Scroll as little as it takes for the cursor's row to stand below titles and heading, above the edge."""
        if not self._count or not self.size.height:
            return
        line = self._line_of(self.cursor)
        place = self._place(line)
        covered = 1 if place is not None and place[0].title else 0
        top = min(self.scroll_offset.y, line - covered)
        top = max(top, line + _HEAD + 1 - self.size.height)
        if top != self.scroll_offset.y:
            self.scroll_to(y=top, animate=False, immediate=True)
