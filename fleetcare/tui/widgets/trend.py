"""How a measure went over time: a list of its subjects, the one under the cursor in words, and its values as a plot."""

from collections.abc import Iterator
from typing import TYPE_CHECKING

from textual.containers import Vertical
from textual.widget import Widget

from fleetcare.tui.widgets.columns import Cell, Column, Section
from fleetcare.tui.widgets.detail import Detail
from fleetcare.tui.widgets.long_list import LongList
from fleetcare.tui.widgets.plot import Line, Mark, Plot, PlotView, say_day

if TYPE_CHECKING:
    from fleetcare.operations.lash_past import Ahead, TrendRow, Trends

_TONES = {"in": "clear", "alert": "due", "alarm": "overdue"}
_MARKS = {"in": "-", "alert": "!", "alarm": "!!"}
_FOUND, _LEFT = "○", "●"


def _columns(subject: str) -> tuple[Column["TrendRow"], ...]:
    return (
        Column(subject, lambda row: row.name, 5, 12),
        Column("LAST", lambda row: row.last, 7, 14, to_right=True),
        Column("STANDS", _stands, 9, 20),
        Column("ON", lambda row: row.on, 10, 10),
        Column("CHANGE", lambda row: row.change, 8, 24),
    )


def _stands(row: "TrendRow") -> Cell:
    return Cell(f"{_MARKS.get(row.verdict, '?'):2} {row.stands}", _TONES.get(row.verdict, "quiet"))


class TrendPart(Vertical):
    """The trends of one kind of sheet, a part of a page; `subject` heads the column of those measured."""

    def __init__(self, subject: str, part: str) -> None:
        super().__init__(id=part)
        self._subject = subject
        self._trends: Trends | None = None

    def compose(self) -> Iterator[Widget]:
        """List above, words and plot below."""
        yield LongList(_columns(self._subject), lambda row: row.name)
        yield Detail()
        yield PlotView()

    def show(self, trends: "Trends") -> None:
        """Show other trends; the cursor stays on its subject."""
        self._trends = trends
        self.query_one(LongList).show([Section("", trends.rows)], trends.why_none)
        self.query_one(PlotView).display = bool(trends.rows)
        self._draw()

    def step(self) -> None:
        """Go on to the next subject, from the last to the first."""
        rows = self.query_one(LongList)
        rows.cursor = (rows.cursor + 1) % max(rows.count, 1)

    def on_long_list_moved(self) -> None:
        """Draw the subject under the cursor."""
        self._draw()

    def _draw(self) -> None:
        row: TrendRow | None = self.query_one(LongList).current
        plot = plot_of(row, self._trends) if row is not None and row.segments and self._trends is not None else None
        said = row.said if row is not None else ""
        self.query_one(Detail).tell((said, ""))
        self.query_one(Detail).display = plot is not None
        self.query_one(PlotView).show(plot, said)


def plot_of(row: "TrendRow", trends: "Trends") -> Plot:
    """Draw what was found as rings and what was left as dots, a line through each stretch between two adjustments."""
    lines = [Line([(dot.x, dot.y) for dot in segment], 2, "strong") for segment in row.segments]
    dots = [dot for segment in row.segments for dot in segment]
    found = {dot.x: dot.y for dot in dots if not dot.is_left}
    marks = [
        Mark(dot.x, dot.y, _LEFT, "strong", found.get(dot.x)) if dot.is_left else Mark(dot.x, dot.y, _FOUND, "strong")
        for dot in dots
    ]
    if row.ahead is not None:
        lines += _lines_ahead(row.ahead, dots[0].x)
    over = "hours of life" if trends.counts_hours else "days"
    aside = f", {row.left_out} not drawn" if row.left_out else ""
    return Plot(
        lines=lines,
        levels=(),
        legend=f"{row.name} over {over}: {_FOUND} found, {_LEFT} set to{', likely dotted' if row.ahead else ''}{aside}",
        unit=trends.unit,
        say=(lambda along: f"{along:.0f} h") if trends.counts_hours else say_day,
        here=row.ahead.likely if row.ahead is not None else None,
        until=trends.until,
        marks=marks,
        limits=row.limits,
        settings=[row.setting] if row.setting is not None else [],
        places=trends.places,
    )


def _lines_ahead(ahead: "Ahead", first: float) -> Iterator[Line]:
    """Draw the likely way to the limit dotted and both ends of its range thin, no further ahead than was watched."""
    start, furthest = ahead.start, 2 * ahead.start.x - first
    for at, every, tone in ((ahead.likely, 3, ""), (ahead.early, 6, "quiet"), (ahead.late, 6, "quiet")):
        if at > start.x:
            along = min(at, furthest)
            value = start.y + (ahead.limit - start.y) * (along - start.x) / (at - start.x)
            yield Line([(start.x, start.y), (along, value)], every, tone)
