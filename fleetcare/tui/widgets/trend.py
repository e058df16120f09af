"""How a measure went over time: a list of its subjects, the one under the cursor in words, and its values as a plot."""

from collections.abc import Iterator, Sequence
from functools import partial
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
_FOUND, _LEFT, _BOUND, _FRESH = "○", "●", "▽", "◇"


def _columns(subject: str, *, has_rate: bool) -> tuple[Column["TrendRow"], ...]:
    rate: Column[TrendRow] = Column("PER 100 h", lambda row: row.rate, 9, 9, to_right=True, drop=1)
    return (
        Column(subject, lambda row: row.name, 10, 13),
        Column("LAST", lambda row: row.last, 10, 14, to_right=True),
        Column("STANDS", _stands, 9, 20),
        Column("ON", lambda row: row.on, 10, 10),
        *((rate,) if has_rate else ()),
        Column("CHANGE", lambda row: row.change, 8, 24),
    )


def _stands(row: "TrendRow") -> Cell:
    return Cell(f"{_MARKS.get(row.verdict, '?'):2} {row.stands}", _TONES.get(row.verdict, "quiet"))


class TrendPart(Vertical):
    """The trends of one kind of sheet, a part of a page; `subject` heads the column of those measured.

    One that `has_rate` has a column for what came per 100 h.
    """

    def __init__(self, subject: str, part: str, *, has_rate: bool = False) -> None:
        super().__init__(id=part)
        self._columns = _columns(subject, has_rate=has_rate)
        self._trends: Trends | None = None

    def compose(self) -> Iterator[Widget]:
        """List above, words and plot below."""
        yield LongList(self._columns, lambda row: row.name)
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
        is_drawn = row is not None and bool(row.segments or row.bounds)
        plot = plot_of(row, self._trends) if row is not None and is_drawn and self._trends is not None else None
        said = row.said if row is not None else ""
        self.query_one(Detail).tell((said, ""))
        self.query_one(Detail).display = plot is not None
        self.query_one(PlotView).show(plot, said)


def plot_of(row: "TrendRow", trends: "Trends") -> Plot:
    """Draw values as rings and what was left as dots, a line through each stretch between two breaks."""
    lines = [Line([(dot.x, dot.y) for dot in segment], 2, "strong") for segment in row.segments]
    dots = [dot for segment in row.segments for dot in segment]
    found = {dot.x: dot.y for dot in dots if not dot.is_left}
    marks = [
        Mark(dot.x, dot.y, _LEFT, "strong", found.get(dot.x)) if dot.is_left else Mark(dot.x, dot.y, _FOUND, "strong")
        for dot in dots
    ]
    marks += [Mark(dot.x, dot.y, _BOUND, "strong") for dot in row.bounds]
    marks += [Mark(dot.x, dot.y, _FRESH, "quiet") for dot in row.fresh]
    if row.ahead is not None:
        lines += _lines_ahead(row.ahead, dots[0].x)
    return Plot(
        lines=lines,
        levels=(),
        legend=_legend(row, trends),
        unit=row.unit or trends.unit,
        say=partial(_say_along, trends.begins) if trends.counts_hours else say_day,
        here=row.ahead.likely if row.ahead is not None else None,
        until=trends.until,
        marks=marks,
        limits=row.limits,
        settings=[row.setting] if row.setting is not None else [],
        places=row.places or trends.places,
    )


def _say_along(begins: Sequence[float], along: float) -> str:
    """Word hours, counted from the newest beginning before them."""
    return f"{along - max((begin for begin in begins if begin <= along), default=0):.0f} h"


def _legend(row: "TrendRow", trends: "Trends") -> str:
    """Say what lies along, and what each sign means that is drawn."""
    signs = (
        (f"{_FOUND} found", trends.is_adjusted),
        (f"{_LEFT} set to", trends.is_adjusted),
        (f"{_FOUND} measured", not trends.is_adjusted),
        (f"{_BOUND} at most", bool(row.bounds)),
        (f"{_FRESH} new oil", bool(row.fresh)),
        ("likely dotted", row.ahead is not None),
        (f"{row.left_out} not drawn", bool(row.left_out)),
    )
    along = "hours on the oil" if trends.begins else "hours of life" if trends.counts_hours else "days"
    return f"{row.name} over {along}: {', '.join(sign for sign, is_there in signs if is_there)}"


def _lines_ahead(ahead: "Ahead", first: float) -> Iterator[Line]:
    """Draw the likely way to the limit dotted and both ends of its range thin, no further ahead than was watched."""
    start, furthest = ahead.start, 2 * ahead.start.x - first
    for at, every, tone in ((ahead.likely, 3, ""), (ahead.early, 6, "quiet"), (ahead.late, 6, "quiet")):
        if at > start.x:
            along = min(at, furthest)
            value = start.y + (ahead.limit - start.y) * (along - start.x) / (at - start.x)
            yield Line([(start.x, start.y), (along, value)], every, tone)
