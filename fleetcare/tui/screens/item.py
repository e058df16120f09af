"""The page of an engine or machine: plate, meters, lines, history and trends, to read."""

from collections.abc import Iterable
from functools import partial
from typing import TYPE_CHECKING

from textual.containers import Vertical
from textual.widget import Widget

from fleetcare.domain.cautions import GENERAL
from fleetcare.domain.engines import Status, status_on
from fleetcare.tui.due_columns import in_words
from fleetcare.tui.frame import TopBar, say_day
from fleetcare.tui.screens.findings import in_words as finding_in_words
from fleetcare.tui.screens.findings import sections_of
from fleetcare.tui.screens.item_parts import (
    FINDINGS,
    HISTORY,
    LINES,
    PARTS,
    READINGS,
    TRENDS,
    PartsBar,
    mend_sheet,
    plot_of,
)
from fleetcare.tui.widgets.columns import Section
from fleetcare.tui.widgets.detail import Detail
from fleetcare.tui.widgets.long_list import LongList
from fleetcare.tui.widgets.plot import PlotView
from fleetcare.tui.widgets.prose import Block, Prose
from fleetcare.tui.widgets.trend import TrendPart
from fleetcare.tui.writing import WritingScreen

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection

    from fleetcare.operations.finding_rows import FindingRecord
    from fleetcare.operations.page import FullPage
    from fleetcare.operations.review import ReviewLine
    from fleetcare.operations.show import HistoryEntry, ReadingLine
    from fleetcare.tui.forms.base import Subject

_STANDING = {
    Status.IN_SERVICE: "",
    Status.LAID_UP: "LAID UP",
    Status.STOOD_DOWN: "STOOD DOWN: NOT TO BE RUN",
    Status.WITHDRAWN: "WITHDRAWN",
}

_MOST_METERS = 4  # lines; with more of them one scrolls


class ItemScreen(WritingScreen):
    """What `fleetcare show TAG` prints, in parts."""

    place = "item"

    def __init__(self, tag: str) -> None:
        super().__init__()
        self.tag = tag
        self.part = PARTS[0]
        self.meter = 0
        self.page: FullPage | None = None

    def body(self) -> Iterable[Widget]:
        """The title, and a container for each part."""
        yield PartsBar()
        with_parts = (
            Vertical(Prose(), id="plate"),
            Vertical(Prose(), PlotView(), LongList(READINGS, lambda line: line.number), id="meters"),
            Vertical(LongList(LINES, lambda line: line.key), Detail(), id="lines"),
            Vertical(LongList(HISTORY, lambda entry: entry.number), Detail(), id="history"),
            Vertical(LongList(FINDINGS, lambda row: row.id), Detail(), id="findings"),
            TrendPart("POINT", "lash"),
            TrendPart("CYLINDER", "compression"),
            TrendPart("OIL", "oil", has_rate=True),
        )
        for part in with_parts:
            part.display = part.id == self.part
            yield part

    def read(self, connection: "Connection", on: "date", *, is_future: bool) -> "FullPage":
        """Load the page."""
        from fleetcare.operations.page import full_page

        return full_page(connection, self.tag, on, is_future=is_future)

    def show(self, found: "FullPage") -> None:
        """Fill every part."""
        self.page = found
        self.query_one(TopBar).tell(say_day(self.day))
        page = found.item
        cautions = [Block("CAUTIONS", found.cautions)] if found.cautions else []
        self.query_one("#plate Prose", Prose).show(
            [Block(labels=page.nameplate), *cautions, Block(text=GENERAL, tone="quiet")]
        )
        meters = self.query_one("#meters Prose", Prose)
        meters.styles.height = min(max(len(page.meters), 1), _MOST_METERS)
        meters.show([Block(labels=page.meters, text="" if page.meters else "no meter")])
        self.query_one("#meters LongList", LongList).show([Section("", page.readings)], "No readings yet.")
        self.query_one("#lines LongList", LongList).show([Section("", found.lines)], "No tasks yet.")
        self.query_one("#history LongList", LongList).show([Section("", page.history)], "Nothing was logged yet.")
        self.query_one("#findings LongList", LongList).show(sections_of(found.findings), "Nothing was found so far.")
        for part, trends in zip(TRENDS, (found.lash, found.measured.compression, found.measured.oil), strict=True):
            self.query_one(f"#{part}", TrendPart).show(trends)
        self._plot()
        self._title()

    def on_long_list_moved(self) -> None:
        """Say what is under the cursor of lines and history in words, whole."""
        line: ReviewLine | None = self.query_one("#lines LongList", LongList).current
        if line is not None:
            self.query_one("#lines Detail", Detail).tell(in_words(line)[-1])
        entry: HistoryEntry | None = self.query_one("#history LongList", LongList).current
        if entry is not None:
            first = " ".join(f"entry {entry.number}, {entry.on.isoformat()}, {entry.kind} {entry.by}".split())
            rest = "; ".join(word for word in (entry.what, entry.figures, entry.remark) if word)
            self.query_one("#history Detail", Detail).tell((first, "strong"), (rest, ""))
        finding: FindingRecord | None = self.query_one("#findings LongList", LongList).current
        if finding is not None:
            self.query_one("#findings Detail", Detail).tell(*finding_in_words(finding))

    def on_long_list_opened(self) -> None:
        """Open the working of a line with the mouse."""
        self.action_working()

    def action_part(self, part: str) -> None:
        """Bring a part to the front; the meters again show the next meter, a trend the next of its subjects."""
        if part == "meters" == self.part:
            self.meter += 1
            self._plot()
        if part in TRENDS and part == self.part:
            self.query_one(f"#{part}", TrendPart).step()
        self.part = part
        for one in PARTS:
            self.query_one(f"#{one}").display = one == part
        self.query_one(f"#{part}").query("LongList, Prose").last().focus()
        self._title()

    def action_turn(self, step: int) -> None:
        """Turn to the part beside."""
        self.action_part(PARTS[(PARTS.index(self.part) + step) % len(PARTS)])

    def subject(self) -> "Subject":
        """Give the engine or machine, with the line under the cursor where lines are in front."""
        from fleetcare.tui.forms.base import Subject

        line: ReviewLine | None = self.query_one("#lines LongList", LongList).current
        finding: FindingRecord | None = self.query_one("#findings LongList", LongList).current
        if finding is not None and self.part == "findings":
            return Subject(self.tag, finding.id)
        return Subject(self.tag, line.row.task if line is not None and self.part == "lines" else "")

    def action_entry(self, form: str) -> None:
        """Open a form on the entry under the cursor of the history."""
        from fleetcare.tui.forms.base import Subject

        entry: HistoryEntry | None = self.query_one("#history LongList", LongList).current
        if self.part == "history" and entry is not None:
            self.open_form(form, Subject(self.tag, entry=entry.number))
        else:
            self.notice.say("Turn to the history (h) and put the cursor on an entry.")

    def action_take_back(self) -> None:
        """Take back the reading under the cursor where meters are in front, else the entry."""
        if self.part == "meters":
            self._write_on_reading("void-reading")
        else:
            self.action_entry("void")

    def action_bring_back(self) -> None:
        """Let the reading under the cursor count again."""
        self._write_on_reading("restore-reading")

    def _write_on_reading(self, form: str) -> None:
        from fleetcare.tui.forms.base import Subject

        reading: ReadingLine | None = self.query_one("#meters LongList", LongList).current
        if self.part == "meters" and reading is not None:
            self.open_form(form, Subject(self.tag, reading=reading.number))
        else:
            self.notice.say("Turn to the meters (m) and put the cursor on a reading.")

    def action_answer(self, form: str) -> None:
        """Answer the finding under the cursor."""
        if self.part == "findings" and self.query_one("#findings LongList", LongList).current is not None:
            self.action_write(form)
        else:
            self.notice.say("Turn to the findings (f) and put the cursor on one.")

    def action_sheet(self) -> None:
        """Open the sheet of the entry under the cursor of the history, to read or to mend."""
        entry: HistoryEntry | None = self.query_one("#history LongList", LongList).current
        if self.part == "history" and entry is not None and entry.sheet:
            self.open_sheet(entry)
        else:
            self.notice.say("Turn to the history (h) and put the cursor on an entry with a sheet.")

    def open_sheet(self, entry: "HistoryEntry") -> None:
        """Open the sheet of an entry."""
        from fleetcare.tui.screens.sheet import SheetScreen
        from fleetcare.tui.sheets.all import SHEETS
        from fleetcare.tui.sheets.base import SheetFor

        whose = self.page.item.facts.item.name if self.page is not None else ""
        about = SheetFor(self.tag, entry.on, entry.tasks, f"entry {entry.number}  {whose}", entry.number)
        enter = partial(mend_sheet, entry.number, self.context.today())
        self.app.push_screen(SheetScreen(SHEETS[entry.sheet], about, enter), self._written)

    def action_sums(self) -> None:
        """Open the bench sums, filled from the nameplate."""
        from fleetcare.tui.screens.sums import SumsScreen

        self.app.push_screen(SumsScreen(self.tag))

    def action_working(self) -> None:
        """Show how the line or the finding under the cursor comes about."""
        from fleetcare.tui.screens.findings import FindingScreen
        from fleetcare.tui.screens.working import WorkingScreen

        line = self.query_one("#lines LongList", LongList).current
        finding = self.query_one("#findings LongList", LongList).current
        if self.part == "findings" and finding is not None:
            self.app.push_screen(FindingScreen(finding))
        if self.part == "lines" and line is not None:
            self.app.push_screen(WorkingScreen(line.row.engine, line.row.task))

    def _title(self) -> None:
        if self.page is None:
            return
        item = self.page.item.facts.item
        machine = f"in {item.machine}" if item.machine not in {"", item.tag} else ""
        rest = "  ".join(word for word in (item.name, item.site, machine) if word)
        status = _STANDING[status_on(item.spells, self.day)] if item.is_engine else ""
        self.query_one(PartsBar).tell(item.tag, status, rest, self.part)

    def _plot(self) -> None:
        curves = self.page.curves if self.page is not None else ()
        plot = plot_of(curves[self.meter % len(curves)], self.day) if curves else None
        self.query_one("#meters PlotView", PlotView).show(plot)
