"""A plot in braille dots: lines of points over days, told apart by how dense their dots are, not by colour."""

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from datetime import date
from itertools import groupby, pairwise
from operator import itemgetter
from typing import ClassVar

from rich.segment import Segment
from textual.strip import Strip
from textual.widget import Widget

from fleetcare.tui.looks import TONE_CLASSES, tone_style
from fleetcare.tui.widgets.text import columns_of, fit

# A braille character holds 2 × 4 dots (Unicode chapter 21.1): bit of the dot in column x, row y.
_BLANK = 0x2800
_BITS = ((0x01, 0x02, 0x04, 0x40), (0x08, 0x10, 0x20, 0x80))
_TICKS = 4


@dataclass(frozen=True, slots=True)
class Line:
    """Points over days, joined; of the dots along the line every `every`-th is drawn."""

    points: Sequence[tuple[date, float]]
    every: int = 1
    tone: str = ""


@dataclass(frozen=True, slots=True)
class Plot:
    """Lines, levels drawn across with a word before each, a day marked, and a legend below."""

    lines: Sequence[Line]
    levels: Sequence[tuple[float, str]]
    today: date
    legend: str
    unit: str


class PlotView(Widget):
    """Shows a plot in whatever room there is; without room or points it says so."""

    COMPONENT_CLASSES: ClassVar[set[str]] = {*TONE_CLASSES}

    def __init__(self) -> None:
        super().__init__()
        self._plot: Plot | None = None
        self._drawn: tuple[tuple[int, int], list[list[tuple[str, str]]]] = ((0, 0), [])

    def show(self, plot: Plot | None) -> None:
        """Show another plot."""
        self._plot, self._drawn = plot, ((0, 0), [])
        self.refresh()

    def render_line(self, y: int) -> Strip:
        """Draw one line."""
        size = self.size.width, self.size.height
        if self._drawn[0] != size:
            self._drawn = size, draw(self._plot, *size) if self._plot is not None else []
        parts = self._drawn[1][y] if y < len(self._drawn[1]) else []
        style = self.rich_style
        segments = [Segment(text, style + tone_style(self, tone)) for text, tone in parts]
        return Strip(segments).adjust_cell_length(self.size.width, style)


def draw(plot: Plot, width: int, height: int) -> list[list[tuple[str, str]]]:
    """Draw a plot into so many columns and lines, each line as parts of (text, tone)."""
    points = [point for line in plot.lines for point in line.points]
    rows = height - 2  # days and legend stand below
    if not points or rows < 3 or width < 30:
        return [[(fit(" no room for the plot" if points else " nothing read yet", width), "quiet")]]
    low, high = min(value for _, value in points), max(value for _, value in points)
    high = high if high > low else low + 1
    first, last = min(day for day, _ in points), max(day for day, _ in points)
    labels = {
        round((rows - 1) * n / (_TICKS - 1)): f"{high - (high - low) * n / (_TICKS - 1):.0f} {plot.unit}"
        for n in range(_TICKS)
    }
    left = max(columns_of(label) for label in labels.values()) + 1
    field = _Field(width - left - 1, rows, first, last, low, high)
    for line in plot.lines:
        field.draw(line)
    lines = [
        [(fit(labels.get(row, ""), left, to_right=True), "quiet"), ("┤" if row in labels else "│", "quiet"), *parts]
        for row, parts in enumerate(field.lines(plot.levels, plot.today))
    ]
    days = _days_below(first, last, plot.today, field)
    return [*lines, [(" " * (left + 1) + days, "quiet")], [(fit(f" {plot.legend}", width), "quiet")]]


class _Field:
    """The dots of a plot, and which tone was drawn last in each cell."""

    def __init__(self, width: int, height: int, first: date, last: date, low: float, high: float) -> None:
        self.width, self.height = width, height
        self._first, self._days = first, max((last - first).days, 1)
        self._low, self._range = low, high - low
        self._dots: dict[tuple[int, int], int] = {}
        self._tones: dict[tuple[int, int], str] = {}

    def column(self, day: date) -> float:
        """The dot column of a day."""
        return (day - self._first).days / self._days * (2 * self.width - 1)

    def row(self, value: float) -> float:
        """The dot row of a value, counted from the top."""
        return (1 - (value - self._low) / self._range) * (4 * self.height - 1)

    def draw(self, line: Line) -> None:
        """Set the dots along a line."""
        places = [(self.column(day), self.row(value)) for day, value in line.points]
        for number, (x, y) in enumerate(_along(places)):
            if number % line.every == 0:
                cell = x // 2, y // 4
                self._dots[cell] = self._dots.get(cell, 0) | _BITS[x % 2][y % 4]
                self._tones.setdefault(cell, line.tone)

    def lines(self, levels: Iterable[tuple[float, str]], today: date) -> Iterator[list[tuple[str, str]]]:
        """Give each line as parts; a level is drawn where no dot is, after its word."""
        words: dict[int, str] = {}
        for value, word in levels:
            if self._low <= value <= self._low + self._range:
                words.setdefault(int(self.row(value)) // 4, word)
        now = int(self.column(today)) // 2
        for row in range(self.height):
            word = fit(f" {words[row]} ", min(columns_of(words[row]) + 2, self.width // 2)) if row in words else ""
            begin = columns_of(word)
            cells = [self._cell(x, row, "╌" if word else "┊" if x == now else " ") for x in range(begin, self.width)]
            yield [(word, "quiet"), *_runs(cells)]

    def _cell(self, x: int, row: int, otherwise: str) -> tuple[str, str]:
        """Give one cell and its tone: its dots, or what stands there without any."""
        dots = self._dots.get((x, row))
        return (chr(_BLANK + dots), self._tones[x, row]) if dots else (otherwise, "quiet")


def _runs(cells: Iterable[tuple[str, str]]) -> Iterator[tuple[str, str]]:
    """Join neighbours of one tone."""
    for tone, run in groupby(cells, key=itemgetter(1)):
        yield "".join(text for text, _ in run), tone


def _along(places: Sequence[tuple[float, float]]) -> Iterator[tuple[int, int]]:
    """Give the dots on the straight lines from each place to the next."""
    for (x0, y0), (x1, y1) in pairwise(places):
        steps = max(round(abs(x1 - x0)), round(abs(y1 - y0)), 1)
        for n in range(steps):
            yield round(x0 + (x1 - x0) * n / steps), round(y0 + (y1 - y0) * n / steps)
    if places:
        yield round(places[-1][0]), round(places[-1][1])


def _days_below(first: date, last: date, today: date, field: _Field) -> str:
    """Write first, last and today's day below the columns they belong to, as far as there is room."""
    line = fit(first.isoformat(), field.width - 10) + last.isoformat()
    place = int(field.column(today)) // 2 - 5
    return line[:place] + today.isoformat() + line[place + 10 :] if 11 <= place <= field.width - 22 else line
