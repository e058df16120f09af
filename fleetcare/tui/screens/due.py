"""Due: what each engine needs next, worst first, with what is only probable or unknown told apart."""

from collections.abc import Iterable, Mapping
from contextlib import suppress
from datetime import date
from functools import partial
from pathlib import Path
from typing import TYPE_CHECKING

from textual.message import Message
from textual.widget import Widget
from textual.worker import get_current_worker

from fleetcare.errors import FleetError
from fleetcare.operations.due_words import Group
from fleetcare.operations.open_findings import OpenFindings, open_findings
from fleetcare.operations.review import Facet, Order, Review, ReviewLine, Wanted, arrange, review
from fleetcare.tui.due_columns import COLUMNS, in_words
from fleetcare.tui.frame import TopBar, say_day
from fleetcare.tui.loading import Stopped
from fleetcare.tui.looks import tone_of
from fleetcare.tui.searching import SearchingScreen
from fleetcare.tui.widgets.columns import Section
from fleetcare.tui.widgets.counts import Counts
from fleetcare.tui.widgets.detail import Detail
from fleetcare.tui.widgets.long_list import LongList

if TYPE_CHECKING:
    from sqlalchemy import Connection

    from fleetcare.tui.drafts_kept import DraftKey
    from fleetcare.tui.forms.base import Subject

EMPTY = (
    "There is nothing here yet.\n \n"
    "Add a first engine: 2 shows the engines, and there a adds one. Then x gives it the tasks of a ready-made "
    "schedule (d), or a task of your own (t), and from then on its lines stand here.\n \n"
    "Or look around first in a fleet that is made up: fleetcare demo"
)
NO_LINES = (
    "No engine has a task that is due by anything.\n \n"
    "2 shows the engines; there x gives the one under the cursor the tasks of a ready-made schedule (d), or a task (t)."
)
NO_MATCH = "No line is like that. The key a shows all again."


class DueScreen(SearchingScreen):
    """The due list."""

    place = "due"

    class Kept(Message):
        """What is half typed, with the import key of each, and the entries stored under those keys."""

        def __init__(self, kept: "Mapping[DraftKey, str]", stored: "Mapping[str, int]") -> None:
            super().__init__()
            self.kept, self.stored = kept, stored

    class Counted(Message):
        """How many findings want an answer, beside a review; None where that cannot be told."""

        def __init__(self, found: OpenFindings | None, beside: Review) -> None:
            super().__init__()
            self.found, self.beside = found, beside

    def __init__(self) -> None:
        super().__init__()
        self.review: Review | None = None
        self.shown: tuple[ReviewLine, ...] = ()
        self.chosen: frozenset[tuple[Facet, str]] = frozenset()
        self.alarmed: frozenset[str] = frozenset()
        self.turns = 0

    def body(self) -> Iterable[Widget]:
        """Counts, the list, and the line under the cursor in words."""
        yield Counts()
        yield LongList(COLUMNS, lambda line: line.key)
        yield Detail()

    def on_mount(self) -> None:
        """Say what lies half typed since last time; what of it is stored all the same is looked for in a thread."""
        super().on_mount()
        kept = self.fleet_app.drafts.of(self._database)
        if any(kept.values()):
            self.run_worker(partial(self._find_stored, kept), thread=True, group="kept", exit_on_error=False)
        else:
            self.on_due_screen_kept(self.Kept(kept, {}))

    def on_due_screen_kept(self, message: Kept) -> None:
        """Let go what was stored before the program ended, and say what is still half typed."""
        self.fleet_app.drafts.drop_stored(self._database, message.stored)
        half = [key for key, import_key in message.kept.items() if import_key not in message.stored]
        if half:
            what = ", ".join(f"{key.form} {key.subject}".strip() for key in half)
            self.notice.say(f"Half typed and kept: {what}. Open it again to go on, or Ctrl N there throws it away.")

    @property
    def _database(self) -> str:
        return str(self.context.path.absolute())

    def _find_stored(self, kept: "Mapping[DraftKey, str]") -> None:
        from fleetcare.operations.entries import stored_under

        stored: dict[str, int] = {}
        with suppress(FleetError), self.context.read() as connection:  # said by the reading of the list
            stored = stored_under(connection, filter(None, kept.values()))
        self.post_message(self.Kept(kept, stored))

    def read(self, connection: "Connection", on: date, *, is_future: bool) -> Review:
        """Load the review."""
        return review(connection, on, is_future=is_future)

    def show(self, found: Review) -> None:
        """Show the review, narrowed and arranged as before."""
        self.review = found
        self.query_one(TopBar).tell(say_day(found.on), found.shop)
        self.query_one(Counts).expect_findings(found.is_measured)
        self.rearrange()
        if found.is_measured:  # counted once the lines stand on the screen: it may mean to judge a yard anew
            self.call_after_refresh(self._count_findings, found)

    def on_due_screen_counted(self, message: Counted) -> None:
        """Say how many findings want an answer, and where the line under the cursor is of an engine with an alarm."""
        if message.beside is not self.review:
            return
        self.query_one(Counts).tell_findings(message.found)
        self.alarmed = message.found.alarmed if message.found is not None else frozenset()
        self.on_long_list_moved()

    def _count_findings(self, beside: Review) -> None:
        self.run_worker(partial(self._run_count, beside), thread=True, group="findings", exit_on_error=False)

    def _run_count(self, beside: Review) -> None:
        """Count in a thread; judging a whole yard anew ends where nobody waits for it any more."""
        worker = get_current_worker()

        def go_on(done: int, of: int) -> None:
            if worker.is_cancelled or beside is not self.review:
                raise Stopped

        with suppress(FleetError, Stopped), self.context.read() as connection:  # said by the reading of the list
            self.post_message(self.Counted(open_findings(connection, beside.on, go_on), beside))

    def fail(self, error: FleetError) -> None:
        """Where there is no file yet, say how to begin beside what is wrong."""
        super().fail(error)
        if self.review is None:
            self.rows.show([], "" if self.has_file else EMPTY)

    @property
    def rows(self) -> LongList[ReviewLine]:
        """The list."""
        return self.query_one(LongList)

    @property
    def order(self) -> Order:
        """How the lines are arranged."""
        return list(Order)[self.turns % len(Order)]

    @property
    def wanted(self) -> Wanted:
        """What of the lines to show."""
        return Wanted(self.text, self.chosen)

    def rearrange(self) -> None:
        """Show the lines wanted, under the headings of the order."""
        if self.review is None:
            return
        parts = arrange(filter(self.wanted.takes, self.review.lines), self.order, self.review.on)
        self.shown = tuple(line for part in parts for line in part.lines)
        sections = [
            Section(
                part.title.upper() if part.group else part.title,
                part.lines,
                tone_of(part.group) if part.group else "strong",
            )
            for part in parts
        ]
        self.rows.show(sections, NO_MATCH if self.review.lines else NO_LINES if self.review.items else EMPTY)
        self.query_one(Counts).tell(self._counts(), self._only())

    def on_long_list_moved(self) -> None:
        """Say the line under the cursor in words."""
        line = self.rows.current
        words = in_words(line, has_alarm=line.row.engine in self.alarmed) if line is not None else ()
        self.query_one(Detail).tell(*words)

    def on_long_list_opened(self) -> None:
        """Open the working of a line."""
        self.action_working()

    def subject(self) -> "Subject | None":
        """Give the line under the cursor."""
        from fleetcare.tui.forms.base import Subject

        line = self.rows.current
        return Subject(line.row.engine, line.row.task) if line is not None else None

    def action_working(self) -> None:
        """Show how the line under the cursor comes about."""
        from fleetcare.tui.screens.working import WorkingScreen

        if (line := self.rows.current) is not None:
            self.app.push_screen(WorkingScreen(line.row.engine, line.row.task))

    def action_item(self) -> None:
        """Open the page of the engine or machine under the cursor."""
        from fleetcare.tui.screens.item import ItemScreen

        if (line := self.rows.current) is not None:
            self.app.push_screen(ItemScreen(line.row.engine))

    def action_narrow(self) -> None:
        """Choose what to show."""
        from fleetcare.tui.screens.narrow import NarrowScreen

        if self.review is not None:
            self.app.push_screen(NarrowScreen(self.review, self.chosen), self._narrowed)

    def action_show_all(self) -> None:
        """Show all lines again."""
        self.text, self.chosen = "", frozenset()
        self.rearrange()

    def action_arrange(self) -> None:
        """Arrange by the next order."""
        self.turns += 1
        self.rearrange()

    def action_csv(self) -> None:
        """Write the lines shown, and say where."""
        from fleetcare.operations.due_file import write_shown

        if self.review is None:
            return
        try:
            path = write_shown([line.row for line in self.shown], Path(), self.review.on)
        except FleetError as error:
            self.notice.say(*error.lines(), is_wrong=True)
        else:
            self.notice.say(f"{len(self.shown)} {'line' if len(self.shown) == 1 else 'lines'} written to {path}")

    def _narrowed(self, chosen: frozenset[tuple[Facet, str]] | None) -> None:
        if chosen is not None:
            self.chosen = chosen
            self.rearrange()

    def _counts(self) -> list[tuple[str, str, int]]:
        return [
            (
                tone_of(group),
                "probably due" if group is Group.PROBABLY else group.value,
                sum(line.group is group for line in self.shown),
            )
            for group in Group
        ]

    def _only(self) -> str:
        """Say what is left out, and by what other order than the usual the lines stand."""
        assert self.review is not None
        parts = []
        if self.wanted.words:
            some = f"{len(self.shown)} of {len(self.review.lines)} lines"
            parts.append(f"only {', '.join(self.wanted.words)}: {some}, a shows all")
        if self.order is not Order.URGENCY:
            parts.append(f"by {self.order}")
        return "; ".join(parts)
