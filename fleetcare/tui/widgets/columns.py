"""Columns of a list: what stands in them, and how they share the width there is."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Generic, NamedTuple, TypeVar

from fleetcare.tui.widgets.text import columns_of

GAP = 2

Row = TypeVar("Row")


class Cell(NamedTuple):
    """The text of one cell, and the tone it is shown in (see fleetcare.tui.looks); no tone is the plain one."""

    text: str
    tone: str = ""


@dataclass(frozen=True, slots=True)
class Column(Generic[Row]):
    """One column: as wide as its rows need, up to `most`, and where it is narrow down to `least` at the most.

    Where even that is too much, columns with a `drop` above 0 are left out, the highest first.
    """

    title: str
    cell: Callable[[Row], Cell | str]
    least: int
    most: int
    to_right: bool = False
    drop: int = 0

    def text_of(self, row: Row) -> str:
        """Give the text of a row in this column."""
        cell = self.cell(row)
        return cell.text if isinstance(cell, Cell) else cell


@dataclass(frozen=True, slots=True)
class Section(Generic[Row]):
    """Rows under one heading; without a title they have none."""

    title: str
    rows: Sequence[Row]
    tone: str = ""


def share(columns: Sequence[Column[Row]], rows: Sequence[Row], width: int) -> list[tuple[Column[Row], int]]:
    """Give the columns shown in a width, each with its own; `rows` are a few by which to tell what they need.

    What is left over goes to the first column until it has what it needs, then to the next.
    """
    needs = [
        min(max(columns_of(text) for text in (column.title, *map(column.text_of, rows))), column.most)
        for column in columns
    ]
    shown = list(zip(columns, needs, strict=True))
    while _least(shown) > width and any(column.drop for column, _ in shown):
        shown.remove(max(shown, key=lambda pair: pair[0].drop))
    widths = [min(column.least, need) for column, need in shown]
    over = width - _least(shown)
    for place, (_, need) in enumerate(shown):
        more = min(need - widths[place], max(over, 0))
        widths[place] += more
        over -= more
    return [(column, wide) for (column, _), wide in zip(shown, widths, strict=True)]


def _least(shown: Sequence[tuple[Column[Row], int]]) -> int:
    return sum(min(column.least, need) for column, need in shown) + GAP * (len(shown) - 1)
