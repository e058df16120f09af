"""A plot in braille dots: lines of points over days or hours, told apart by how dense their dots are, not by colour."""

from collections.abc import Callable, Iterable, Iterator, Sequence
from dataclasses import dataclass
from datetime import date
from itertools import groupby, pairwise
from operator import itemgetter
from typing import ClassVar

from rich.segment import Segment
from textual.strip import Strip
from textual.widget import Widget

from fleetcare.tui.looks import TONE_CLASSES, tone_style
from fleetcare.tui.widgets.text import columns_of, fit, wrap

# A braille character holds 2 × 4 dots (Unicode chapter 21.1): bit of the dot in column x, row y.
_BLANK = 0x2800
_BITS = ((0x01, 0x02, 0x04, 0x40), (0x08, 0x10, 0x20, 0x80))
_TICKS = 4


@dataclass(frozen=True, slots=True)
class Line:
    """Points (along, value), joined; of the dots along the line every `every`-th is drawn."""

    points: Sequence[tuple[float, float]]
    every: int = 1
    tone: str = ""


@dataclass(frozen=True, slots=True)
class Mark:
    """A sign on one point (along, value); with `since` a bar stands between it and that value."""

    along: float
    value: float
    sign: str
    tone: str = ""
    since: float | None = None


@dataclass(frozen=True, slots=True)
class Plot:
    """Lines and marks, levels drawn across with a word before each, one place along marked, and a legend below.

    `say` words a place along; it reaches at least `until`. Levels show where the points reach. `limits`, drawn across,
    and `settings`, only marked, have their words at the right edge and are always in sight.
    """

    lines: Sequence[Line]
    levels: Sequence[tuple[float, str]]
    legend: str
    unit: str
    say: Callable[[float], str]
    here: float | None = None
    until: float | None = None
    marks: Sequence[Mark] = ()
    limits: Sequence[tuple[float, str]] = ()
    settings: Sequence[tuple[float, str]] = ()
    places: int = 0


def say_day(along: float) -> str:
    """Word a place along days, counted as `date.toordinal` does."""
    return date.fromordinal(round(along)).isoformat()


class PlotView(Widget):
    """Shows a plot in whatever room there is; without room or points it says so."""

    COMPONENT_CLASSES: ClassVar[set[str]] = {*TONE_CLASSES}

    def __init__(self) -> None:
        super().__init__()
        self._plot: Plot | None = None
        self._instead = ""
        self._drawn: tuple[tuple[int, int], list[list[tuple[str, str]]]] = ((0, 0), [])

    def show(self, plot: Plot | None, instead: str = "") -> None:
        """Show another plot, or where there is none some words instead."""
        self._plot, self._instead, self._drawn = plot, instead, ((0, 0), [])
        self.refresh()

    def render_line(self, y: int) -> Strip:
        """Draw one line."""
        size = self.size.width, self.size.height
        if self._drawn[0] != size:
            said = [[(f" {line}", "")] for line in wrap(self._instead, max(size[0] - 2, 1))]
            self._drawn = size, draw(self._plot, *size) if self._plot is not None else said
        parts = self._drawn[1][y] if y < len(self._drawn[1]) else []
        style = self.rich_style
        segments = [Segment(text, style + tone_style(self, tone)) for text, tone in parts]
        return Strip(segments).adjust_cell_length(self.size.width, style)


def draw(plot: Plot, width: int, height: int) -> list[list[tuple[str, str]]]:
    """Draw a plot into so many columns and lines, each line as parts of (text, tone)."""
    points = [point for line in plot.lines for point in line.points]
    points += [(mark.along, mark.value) for mark in plot.marks]
    rows = height - 2  # what lies along and the legend stand below
    if not points or rows < 3 or width < 30:
        return [[(fit(" no room for the plot" if points else " nothing read yet", width), "quiet")]]
    edges = [*((value, f"◂ {word}") for value, word in plot.settings), *plot.limits]
    values = [value for _, value in points] + [value for value, _ in edges]
    low, high = min(values), max(values)
    high = high if high > low else low + 1
    labels = _labels(plot, low, high, rows)
    left = max(columns_of(label) for label in labels.values()) + 1
    edge = max((columns_of(word) + 1 for _, word in edges), default=0)
    along = [along for along, _ in points] + ([plot.until] if plot.until is not None else [])
    first, last = min(along), max(along)
    field = _Field(width - left - 1 - edge, rows, first, last, low, high)
    for line in plot.lines:
        field.draw(line)
    for mark in plot.marks:
        field.put(mark)
    at_edge = {int(field.row(value)) // 4: [(f" {word}", "quiet")] for value, word in edges}
    lines = [
        [
            (fit(labels.get(row, ""), left, to_right=True), "quiet"),
            ("┤" if row in labels else "│", "quiet"),
            *parts,
            *at_edge.get(row, []),
        ]
        for row, parts in enumerate(field.lines(plot))
    ]
    below = " " * (left + 1) + _along_below(first, last, plot, field)
    return [*lines, [(below, "quiet")], [(fit(f" {plot.legend}", width), "quiet")]]


def _labels(plot: Plot, low: float, high: float, rows: int) -> dict[int, str]:
    """Give the rows that have a value at their side, evenly from the top to the bottom."""
    steps = _TICKS - 1
    return {
        round((rows - 1) * n / steps): f"{high - (high - low) * n / steps:.{plot.places}f} {plot.unit}"
        for n in range(_TICKS)
    }


class _Field:
    """The dots of a plot, and which tone was drawn last in each cell."""

    def __init__(self, width: int, height: int, first: float, last: float, low: float, high: float) -> None:
        self.width, self.height = width, height
        self._first, self._span = first, (last - first) or 1
        self._low, self._range = low, high - low
        self._dots: dict[tuple[int, int], int] = {}
        self._tones: dict[tuple[int, int], str] = {}
        self._signs: dict[tuple[int, int], tuple[str, str]] = {}

    def column(self, along: float) -> float:
        """The dot column of a place along."""
        return (along - self._first) / self._span * (2 * self.width - 1)

    def row(self, value: float) -> float:
        """The dot row of a value, counted from the top."""
        return (1 - (value - self._low) / self._range) * (4 * self.height - 1)

    def draw(self, line: Line) -> None:
        """Set the dots along a line."""
        places = [(self.column(along), self.row(value)) for along, value in line.points]
        for number, (x, y) in enumerate(_along(places)):
            if number % line.every == 0:
                cell = x // 2, y // 4
                self._dots[cell] = self._dots.get(cell, 0) | _BITS[x % 2][y % 4]
                self._tones.setdefault(cell, line.tone)

    def put(self, mark: Mark) -> None:
        """Set a sign, over whatever is drawn there, and the bar that leads to it."""
        x, y = int(self.column(mark.along)) // 2, int(self.row(mark.value)) // 4
        from_y = int(self.row(mark.since)) // 4 if mark.since is not None else y
        for between in range(min(y, from_y) + 1, max(y, from_y)):
            self._signs.setdefault((x, between), ("│", "quiet"))
        self._signs[x, y] = (mark.sign, mark.tone)

    def lines(self, plot: Plot) -> Iterator[list[tuple[str, str]]]:
        """Give each line as parts; a level is drawn where no dot is, after its word, and so is a limit, without one."""
        words: dict[int, str] = {}
        for value, word in plot.levels:
            if self._low <= value <= self._low + self._range:
                words.setdefault(int(self.row(value)) // 4, word)
        limits = {int(self.row(value)) // 4 for value, _ in plot.limits}
        now = int(self.column(plot.here)) // 2 if plot.here is not None else -1
        for row in range(self.height):
            word = fit(f" {words[row]} ", min(columns_of(words[row]) + 2, self.width // 2)) if row in words else ""
            begin = columns_of(word)
            is_level = bool(word) or row in limits
            cells = [
                self._cell(x, row, "╌" if is_level else "┊" if x == now else " ") for x in range(begin, self.width)
            ]
            yield [(word, "quiet"), *_runs(cells)]

    def _cell(self, x: int, row: int, otherwise: str) -> tuple[str, str]:
        """Give one cell and its tone: a sign, else its dots, or what stands there without any."""
        if (x, row) in self._signs:
            return self._signs[x, row]
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


def _along_below(first: float, last: float, plot: Plot, field: _Field) -> str:
    """Word first, last and the marked place below the columns they belong to, as far as there is room."""
    ends, here = (plot.say(first), plot.say(last)), plot.say(plot.here) if plot.here is not None else ""
    line = fit(ends[0], field.width - columns_of(ends[1])) + ends[1]
    if plot.here is None:
        return line
    place, wide = int(field.column(plot.here)) // 2 - columns_of(here) // 2, columns_of(here)
    is_free = columns_of(ends[0]) < place <= field.width - columns_of(ends[1]) - wide - 2
    return line[:place] + here + line[place + wide :] if is_free else line
