"""Engines: everything with a tag, by site, with what it needs most."""

from collections.abc import Iterable
from typing import TYPE_CHECKING

from textual.widget import Widget

from fleetcare.errors import FleetError
from fleetcare.tui.frame import TopBar, say_day
from fleetcare.tui.looks import MARKS, tone_of
from fleetcare.tui.screens.due import NO_MATCH
from fleetcare.tui.searching import SearchingScreen
from fleetcare.tui.widgets.columns import Cell, Column, Section
from fleetcare.tui.widgets.long_list import LongList

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection

    from fleetcare.operations.yard import YardRow
    from fleetcare.tui.forms.base import Subject

_WITHDRAWN = "withdrawn"
EMPTY = (
    "There is nothing here yet.\n \n"
    "a adds an engine, m a machine such as a lorry or a pump house that engines are fitted in. What an engine sits in "
    "comes first, if you keep tasks or meters of it."
)


def _needs(row: "YardRow") -> Cell:
    """Say the worst group a row has lines in, and how many."""
    if row.worst is None:
        return Cell("")
    tone = tone_of(row.worst)
    return Cell(f"{MARKS[tone]:<2} {row.groups[row.worst]} {row.worst.split(' by ')[0]}", tone)


def _status(row: "YardRow") -> Cell:
    return Cell("" if row.status == "in service" else row.status, "wrong" if row.status == "stood down" else "")


COLUMNS: tuple[Column["YardRow"], ...] = (
    Column("TAG", lambda row: Cell(row.tag, "strong"), 6, 20),
    Column("NAME", lambda row: row.name, 16, 40),
    Column("IN", lambda row: row.machine, 6, 12, drop=3),
    Column("STATUS", _status, 10, 10),
    Column("SHOWED LAST", lambda row: row.shown, 14, 24, to_right=True, drop=1),
    Column("ON", lambda row: row.read_on.isoformat() if row.read_on else "", 10, 10, drop=2),
    Column("NEEDS", _needs, 18, 18),
)


class EnginesScreen(SearchingScreen):
    """The list of engines and machines."""

    place = "engines"

    def __init__(self) -> None:
        super().__init__()
        self.rows: list[YardRow] | None = None

    def body(self) -> Iterable[Widget]:
        """One list."""
        yield LongList(COLUMNS, lambda row: (row.tag, row.status == _WITHDRAWN))

    def read(self, connection: "Connection", on: "date", *, is_future: bool) -> "list[YardRow]":
        """Load them."""
        from fleetcare.operations.yard import yard

        return yard(connection, on, is_future=is_future)

    def show(self, found: "list[YardRow]") -> None:
        """Show them, narrowed as before."""
        self.rows = found
        self.rearrange()

    def fail(self, error: FleetError) -> None:
        """Where there is no file yet, say how to begin beside what is wrong."""
        super().fail(error)
        if self.rows is None:
            self.query_one(LongList).show([], "" if self.has_file else EMPTY)

    def rearrange(self) -> None:
        """Show those that hold the words wanted, by site; withdrawn ones last."""
        from fleetcare.operations.yard import find_in

        if self.rows is None:
            return
        sites: dict[str, list[YardRow]] = {}
        for row in find_in(self.rows, self.text):
            sites.setdefault(_WITHDRAWN if row.status == _WITHDRAWN else row.site or "no site", []).append(row)
        self.query_one(TopBar).tell(say_day(self.day), f'only "{self.text}"' if self.text else "")
        sections = [Section(site, rows, "strong") for site, rows in sites.items()]
        self.query_one(LongList).show(sections, NO_MATCH if self.rows else EMPTY)

    def on_long_list_opened(self) -> None:
        """Open a page with the mouse."""
        self.action_item()

    def subject(self) -> "Subject | None":
        """Give what the cursor is on."""
        from fleetcare.tui.forms.base import Subject

        row: YardRow | None = self.query_one(LongList).current
        return Subject(row.tag) if row is not None else None

    def action_add(self, name: str) -> None:
        """Open a form that is about nothing there is yet, or about no engine."""
        from fleetcare.tui.forms.base import Subject

        self.open_form(name, Subject(""))

    def action_rename_site(self) -> None:
        """Give the site the cursor is in another name."""
        from fleetcare.tui.forms.base import Subject

        here: YardRow | None = self.query_one(LongList).current
        if here is not None and here.site:
            self.open_form("site-name", Subject("", preset={"known": here.site}))
        elif here is not None:
            self.notice.say(f"{here.tag} stands at no site yet; x, then e, gives it one.")

    def action_round(self) -> None:
        """Write down the meters of the site the cursor is in."""
        from fleetcare.tui.forms.base import Subject
        from fleetcare.tui.forms.round import round_form

        here: YardRow | None = self.query_one(LongList).current
        if here is not None and self.rows is not None:
            rows = [row for row in self.rows if row.site == here.site]
            self.show_form(round_form(here.site or "no site", rows), Subject(""))

    def action_item(self) -> None:
        """Open the page of the engine or machine under the cursor."""
        from fleetcare.tui.screens.item import ItemScreen

        row: YardRow | None = self.query_one(LongList).current
        if row is not None:
            self.app.push_screen(ItemScreen(row.tag))
