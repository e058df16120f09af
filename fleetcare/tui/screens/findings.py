"""Findings: what the rules make of what was measured, those that want an answer first; and one of them, whole."""

from collections.abc import Iterable, Sequence
from typing import TYPE_CHECKING

from textual.widget import Widget

from fleetcare.errors import FleetError
from fleetcare.tui.forms.base import Subject
from fleetcare.tui.frame import FramedScreen, TopBar, say_day
from fleetcare.tui.looks import MARKS
from fleetcare.tui.searching import SearchingScreen
from fleetcare.tui.widgets.columns import Cell, Column, Section
from fleetcare.tui.widgets.detail import Detail
from fleetcare.tui.widgets.long_list import LongList
from fleetcare.tui.widgets.prose import Block, Prose

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection

    from fleetcare.operations.finding_rows import FindingRecord

OPEN = "open"
_OVER = ("cleared", "joined", "withdrawn")
_TONES = {"alarm": "overdue", "alert": "due"}
_WANTING = "that want an answer"
_NONE_OPEN = "No finding wants an answer. o shows all there ever were."
_NOTHING = "Nothing was found yet. Measure with x on an engine, or when logging work that needs a sheet."


def _severity(row: "FindingRecord") -> Cell:
    tone = _TONES[row.severity] if row.state == OPEN else "quiet"
    return Cell(f"{MARKS[_TONES[row.severity]]:<2} {row.severity}", tone)


def _figure(row: "FindingRecord") -> str:
    """Say what was measured, as its words do."""
    from fleetcare.operations.finding_rows import say_figure

    return say_figure(row.measured, row.unit) if row.measured is not None else ""


COLUMNS: tuple[Column["FindingRecord"], ...] = (
    Column("   HOW GRAVE", _severity, 12, 12),
    Column("ENGINE", lambda row: Cell(row.engine, "strong"), 8, 16),
    Column("WHAT", lambda row: row.cause, 18, 40),
    Column("WHERE", lambda row: row.subject, 10, 22),
    Column("MEASURED", _figure, 10, 18, to_right=True, drop=2),
    Column("SINCE", lambda row: row.since.isoformat(), 10, 10, drop=1),
    Column("STATE", lambda row: row.state, 10, 24, drop=3),
)


def in_words(row: "FindingRecord") -> tuple[tuple[str, str], ...]:
    """Say a finding in lines of (text, tone): whose and what, then the whole in a sentence with what to do next."""
    head = f"{row.engine}, {row.subject}: {row.cause} ({row.severity}, {row.state})"
    rest = "; ".join(
        part for part in (row.because, row.explanation, row.next_step and f"next: {row.next_step}") if part
    )
    return ((head, "strong"), (rest, ""))


def sections_of(rows: "Sequence[FindingRecord]") -> list[Section["FindingRecord"]]:
    """Put findings under headings by state, in their order."""
    states = dict.fromkeys(row.state for row in rows)
    return [
        Section(
            state.upper() if state != OPEN else f"OPEN, {_WANTING}",
            [one for one in rows if one.state == state],
            "strong",
        )
        for state in states
    ]


class FindingsScreen(SearchingScreen):
    """The list of findings."""

    place = "findings"

    def __init__(self) -> None:
        super().__init__()
        self.rows: list[FindingRecord] | None = None
        self.is_all = False

    def body(self) -> Iterable[Widget]:
        """The list, and the finding under the cursor in words."""
        yield LongList(COLUMNS, lambda row: row.id)
        yield Detail()

    def read(self, connection: "Connection", on: "date", *, is_future: bool) -> "list[FindingRecord]":
        """Load them."""
        from fleetcare.operations.finding_rows import finding_rows

        return finding_rows(connection, on, progress=self.tell_progress)

    def show(self, found: "list[FindingRecord]") -> None:
        """Show them, narrowed as before."""
        self.rows = found
        self.rearrange()

    def fail(self, error: FleetError) -> None:
        """Where there is no file yet, say how findings come about beside what is wrong."""
        super().fail(error)
        if self.rows is None:
            self.query_one(LongList).show([], "" if self.has_file else _NOTHING)

    def rearrange(self) -> None:
        """Show those that hold the words wanted; those that are over only where all are asked for."""
        words = self.text.casefold().split()
        rows = [
            row
            for row in self.rows or ()
            if (self.is_all or row.state not in _OVER)
            and all(word in " ".join(in_words(row)[0]).casefold() for word in words)
        ]
        only = f'only "{self.text}"' if self.text else "all, those over too" if self.is_all else ""
        self.query_one(TopBar).tell(say_day(self.day), only)
        self.query_one(LongList).show(sections_of(rows), _NONE_OPEN if self.rows else _NOTHING)
        self.on_long_list_moved()

    def on_long_list_moved(self) -> None:
        """Say what is under the cursor in words."""
        row: FindingRecord | None = self.query_one(LongList).current
        self.query_one(Detail).tell(*(in_words(row) if row is not None else (("", ""),)))

    def on_long_list_opened(self) -> None:
        """Open a finding with the mouse."""
        self.action_whole()

    def subject(self) -> Subject | None:
        """Give the finding the cursor is on."""
        row: FindingRecord | None = self.query_one(LongList).current
        return Subject(row.engine, row.id) if row is not None else None

    def action_whole(self) -> None:
        """Show the finding under the cursor with all its working."""
        row: FindingRecord | None = self.query_one(LongList).current
        if row is not None:
            self.app.push_screen(FindingScreen(row))

    def action_all(self) -> None:
        """Show those that are over too, or no longer."""
        self.is_all = not self.is_all
        self.rearrange()

    def action_item(self) -> None:
        """Open the page of the engine under the cursor."""
        from fleetcare.tui.screens.item import ItemScreen

        subject = self.subject()
        if subject is not None:
            self.app.push_screen(ItemScreen(subject.tag))


class FindingScreen(FramedScreen):
    """One finding, whole, as it was when it was opened."""

    place = "finding"

    def __init__(self, row: "FindingRecord") -> None:
        super().__init__()
        self.row = row

    def body(self) -> Iterable[Widget]:
        """One text."""
        yield Prose()

    def on_mount(self) -> None:
        """Fill it."""
        from fleetcare.operations.finding_rows import say_figures

        row = self.row
        self.query_one(TopBar).tell(say_day(self.context.today()))
        figures = [
            ("measured", say_figures(row)),
            ("since", row.since.isoformat()),
            ("state", row.state),
            ("because", row.because),
            ("due by", row.due_by.isoformat() if row.due_by else ""),
        ]
        parts = [("what", row.explanation), ("how worked out", row.working), ("measured values", row.evidence)]
        told = [("next step", row.next_step), ("rule", row.rule), ("source", row.source), ("caution", row.caution)]
        self.query_one(Prose).show(
            [
                Block(f"{row.id}  {row.engine}, {row.subject}: {row.cause}", [one for one in figures if one[1]]),
                Block("WORKING", [one for one in parts if one[1]]),
                Block("WHAT NOW", [one for one in told if one[1]]),
            ]
        )
