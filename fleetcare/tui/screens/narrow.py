"""What of the due list to show: states, sites, kinds of work and engines to choose from."""

from collections.abc import Iterable
from typing import TYPE_CHECKING

from textual.widget import Widget

from fleetcare.tui.frame import FramedScreen, TopBar, say_day
from fleetcare.tui.widgets.columns import Cell, Column, Section
from fleetcare.tui.widgets.long_list import LongList

if TYPE_CHECKING:
    from fleetcare.operations.review import Facet, Review

Chosen = frozenset[tuple["Facet", str]]
Choice = tuple["Facet", str, int, bool]


COLUMNS: tuple[Column[Choice], ...] = (
    Column("", lambda choice: "[x]" if choice[3] else "[ ]", 3, 3),
    Column("SHOW ONLY", lambda choice: Cell(choice[1] or "none stated", "strong" if choice[3] else ""), 12, 60),
    Column("LINES", lambda choice: str(choice[2]), 5, 7, to_right=True),
)


class NarrowScreen(FramedScreen):
    """Chosen values of one kind add up, those of different kinds must all hold."""

    place = "narrow"

    def __init__(self, review: "Review", chosen: Chosen) -> None:
        super().__init__()
        self.review, self.chosen = review, chosen

    def body(self) -> Iterable[Widget]:
        """One list."""
        yield LongList(COLUMNS, lambda choice: choice[:2])

    def on_mount(self) -> None:
        """Fill it."""
        self.query_one(TopBar).tell(say_day(self.review.on), "what to show")
        self._show()

    def on_long_list_opened(self) -> None:
        """Choose what was clicked twice."""
        self.action_choose()

    def action_choose(self) -> None:
        """Choose what is under the cursor, or no longer."""
        choice: Choice | None = self.query_one(LongList).current
        if choice is not None:
            self.chosen = self.chosen ^ {choice[:2]}
            self._show()

    def action_none(self) -> None:
        """Choose nothing."""
        self.chosen = frozenset()
        self._show()

    def action_back(self) -> None:
        """Show the lines chosen."""
        self.dismiss(self.chosen)

    def _show(self) -> None:
        from fleetcare.operations.review import Facet, choices

        found = choices(self.review.lines)
        gone = [
            (facet, value, 0) for facet, value in sorted(self.chosen) if (facet, value) not in {c[:2] for c in found}
        ]
        rows: list[Choice] = [(f, value, n, (f, value) in self.chosen) for f, value, n in (*found, *gone)]
        self.query_one(LongList).show(
            [Section(facet.upper(), [row for row in rows if row[0] is facet], "strong") for facet in Facet]
        )
