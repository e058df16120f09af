"""Bench sums on the screen: a list of them, and one worked out while its figures are typed, filled from the nameplate."""

from collections.abc import Iterable, Mapping
from typing import TYPE_CHECKING

from textual.containers import VerticalScroll
from textual.events import DescendantFocus
from textual.widget import Widget

from fleetcare.errors import FleetError
from fleetcare.sums import SUMS
from fleetcare.sums.base import Sum, given_of
from fleetcare.tui.forms.base import Field
from fleetcare.tui.frame import FramedScreen, TopBar, say_day
from fleetcare.tui.loading import LoadingScreen
from fleetcare.tui.widgets.columns import Cell, Column, Section
from fleetcare.tui.widgets.form_fields import FieldRow, TextField
from fleetcare.tui.widgets.form_head import FormTitle
from fleetcare.tui.widgets.long_list import LongList
from fleetcare.tui.widgets.prose import Block, Prose

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection

COLUMNS: tuple[Column[Sum], ...] = (
    Column("SUM", lambda one: Cell(one.name, "strong"), 18, 20),
    Column("WHAT IT TELLS", lambda one: one.summary, 20, 80),
)


class SumsScreen(FramedScreen):
    """The list of sums, for an engine or for none."""

    place = "sums"

    def __init__(self, tag: str) -> None:
        super().__init__()
        self.tag = tag

    def body(self) -> Iterable[Widget]:
        """One list."""
        yield LongList(COLUMNS, lambda one: one.name)

    def on_mount(self) -> None:
        """Fill it."""
        self.query_one(TopBar).tell(say_day(self.context.today()))
        title = f"BENCH SUMS, filled from the nameplate of {self.tag}" if self.tag else "BENCH SUMS"
        self.query_one(LongList).show([Section(title, SUMS, "strong")])

    def on_long_list_opened(self) -> None:
        """Open what was clicked twice."""
        self.action_open()

    def action_open(self) -> None:
        """Open the sum under the cursor."""
        wanted: Sum | None = self.query_one(LongList).current
        if wanted is not None:
            self.app.push_screen(SumScreen(wanted, self.tag))


class SumScreen(LoadingScreen):
    """One sum: its figures, and below them the answer to what is typed so far."""

    place = "sum"
    AUTO_FOCUS = "TextField"

    def __init__(self, wanted: Sum, tag: str) -> None:
        super().__init__()
        self.wanted, self.tag = wanted, tag
        self.rows = {
            option.name: FieldRow(Field(option.name, option.name.replace("-", " "), option.tells))
            for option in wanted.options
        }

    def body(self) -> Iterable[Widget]:
        """Its name, its figures, and the answer."""
        yield FormTitle(self.wanted.name)
        yield VerticalScroll(*self.rows.values(), can_focus=False)
        yield Prose()

    def read(self, connection: "Connection", on: "date", *, is_future: bool) -> Mapping[str, str]:
        """Load the nameplate."""
        from fleetcare.operations.plate_figures import plate_values

        return plate_values(connection, self.tag) if self.tag else {}

    def show(self, found: Mapping[str, str]) -> None:
        """Fill in what the nameplate says, where nobody typed, and the cursor where something is still to be typed."""
        self.query_one(TopBar).tell(say_day(self.day))
        self.query_one(FormTitle).tell(f"{self.wanted.summary}{f', {self.tag}' if self.tag else ''}")
        for option in self.wanted.options:
            row = self.rows[option.name]
            if not row.value:
                row.fill(found.get(option.plate, "" if option.default is None else str(option.default)))
        empty = (row for row in self.rows.values() if not row.value)
        next(empty, next(iter(self.rows.values()))).editor.focus()
        self._work_out()

    def on_input_changed(self, event: TextField.Changed) -> None:
        """Work it out anew."""
        self._work_out()

    def on_descendant_focus(self, event: DescendantFocus) -> None:
        """Mark the line the cursor is in."""
        for row in self.rows.values():
            row.mark(row.editor is event.widget)

    def action_next(self, step: int) -> None:
        """Go to the next figure or the one before."""
        if step > 0:
            self.focus_next("TextField")
        else:
            self.focus_previous("TextField")

    def action_help(self) -> None:
        """Show the keys."""
        self.fleet_app.action_keys()

    def _work_out(self) -> None:
        """Say beside each figure what is wrong with it, and give the answer where nothing is."""
        texts = {name: row.value for name, row in self.rows.items()}
        for option in self.wanted.options:
            wrong = ""
            try:
                _ = option.read(texts[option.name]) if texts[option.name].strip() else None
            except FleetError as error:
                wrong = "; ".join(error.lines())
            self.rows[option.name].say_wrong(wrong)
        try:
            answer = Block("ANSWER", text=self.wanted.answer(given_of(self.wanted, texts)).sentence)
        except FleetError as error:
            answer = Block("ANSWER", text="; ".join(error.lines()).replace("--", ""), tone="quiet")
        asked = [(option.name.replace("-", " "), option.tells) for option in self.wanted.options]
        self.query_one(Prose).show([answer, Block("WHAT IS ASKED", asked)])
