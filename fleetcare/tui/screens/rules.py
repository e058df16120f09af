"""Rules: the rule book as it stands in the shop, each rule with its limits, its source and the engines it judges."""

from collections.abc import Iterable
from dataclasses import asdict
from typing import TYPE_CHECKING

from textual.widget import Widget

from fleetcare.domain.cautions import GENERAL
from fleetcare.errors import FleetError
from fleetcare.tui.frame import FramedScreen, TopBar, say_day
from fleetcare.tui.searching import SearchingScreen
from fleetcare.tui.widgets.columns import Cell, Column, Section
from fleetcare.tui.widgets.detail import Detail
from fleetcare.tui.widgets.long_list import LongList
from fleetcare.tui.widgets.prose import Block, Prose

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection

    from fleetcare.operations.rule_rows import RuleRow
    from fleetcare.tui.forms.base import Subject

_IN_FORCE = "in force"


def _engines(row: "RuleRow") -> str:
    return str(len(row.engines.split(", "))) if row.engines else ""


COLUMNS: tuple[Column["RuleRow"], ...] = (
    Column("RULE", lambda row: Cell(row.id, "strong" if row.state == _IN_FORCE else "quiet"), 22, 34),
    Column("JUDGES", lambda row: row.judges, 16, 40),
    Column("LIMITS", lambda row: row.limits, 23, 44),
    Column("ENGINES", _engines, 7, 7, to_right=True, drop=1),
    Column("STATE", lambda row: "" if row.state == _IN_FORCE else row.state, 12, 20, drop=2),
)


class RulesScreen(SearchingScreen):
    """The list of rules."""

    place = "rules"

    def __init__(self) -> None:
        super().__init__()
        self.rows: list[RuleRow] = []

    def body(self) -> Iterable[Widget]:
        """The list, and the rule under the cursor in words."""
        yield LongList(COLUMNS, lambda row: row.id)
        yield Detail()

    def read(self, connection: "Connection", on: "date", *, is_future: bool) -> "list[RuleRow]":
        """Load them."""
        from fleetcare.operations.rule_rows import rule_rows

        return rule_rows(connection, on)

    def show(self, found: "list[RuleRow]") -> None:
        """Show them, narrowed as before."""
        self.rows = found
        self.rearrange()

    def fail(self, error: FleetError) -> None:
        """Say what is wrong."""
        super().fail(error)
        if not self.rows:
            self.query_one(LongList).show([], "")

    def rearrange(self) -> None:
        """Show those that hold the words wanted, by kind of sheet."""
        words = self.text.casefold().split()
        kinds: dict[str, list[RuleRow]] = {}
        for row in self.rows:
            if all(word in " ".join((row.id, row.judges, row.cause, row.kinds)).casefold() for word in words):
                kinds.setdefault(row.kinds, []).append(row)
        self.query_one(TopBar).tell(say_day(self.day), f'only "{self.text}"' if self.text else "")
        self.query_one(LongList).show(
            [Section(kind.upper(), rows, "strong") for kind, rows in kinds.items()], "No rule."
        )
        self.on_long_list_moved()

    def on_long_list_moved(self) -> None:
        """Say what is under the cursor in words."""
        row: RuleRow | None = self.query_one(LongList).current
        if row is not None:
            told = "; ".join(part for part in (row.state, row.origin, row.because, row.limits) if part)
            self.query_one(Detail).tell((f"{row.id}: {row.cause}", "strong"), (told, "quiet"), (row.source, ""))

    def on_long_list_opened(self) -> None:
        """Open a rule with the mouse."""
        self.action_whole()

    def subject(self) -> "Subject | None":
        """Nothing is written down about a rule here."""
        return None

    def action_whole(self) -> None:
        """Show the rule under the cursor, whole."""
        row: RuleRow | None = self.query_one(LongList).current
        if row is not None:
            self.app.push_screen(RuleScreen(row))


class RuleScreen(FramedScreen):
    """One rule, whole."""

    place = "rule"

    def __init__(self, row: "RuleRow") -> None:
        super().__init__()
        self.row = row

    def body(self) -> Iterable[Widget]:
        """One text."""
        yield Prose()

    def on_mount(self) -> None:
        """Fill it."""
        self.query_one(TopBar).tell(say_day(self.context.today()))
        labels = [(name.replace("_", " "), text) for name, text in asdict(self.row).items() if text and name != "id"]
        self.query_one(Prose).show([Block(self.row.id, labels), Block(text=GENERAL, tone="quiet")])
