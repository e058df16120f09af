"""What the page of an engine or machine is made of: its parts by name, their columns, and its plots."""

from typing import TYPE_CHECKING

from textual.content import Content
from textual.widget import Widget

from fleetcare.domain.printable import clean
from fleetcare.tui.due_columns import COLUMNS
from fleetcare.tui.screens.findings import COLUMNS as FINDING_COLUMNS
from fleetcare.tui.widgets.columns import Cell, Column
from fleetcare.tui.widgets.plot import Line, Plot
from fleetcare.tui.widgets.plot import say_day as say_along
from fleetcare.tui.widgets.text import columns_of, fit

if TYPE_CHECKING:
    from collections.abc import Mapping
    from datetime import date

    from sqlalchemy.orm import Session

    from fleetcare.operations.entering import Entered
    from fleetcare.operations.life_plot import LifeCurve
    from fleetcare.operations.show import HistoryEntry, ReadingLine

PARTS = ("plate", "meters", "lines", "history", "findings", "lash", "compression", "oil")
TRENDS = ("lash", "compression", "oil")
"""The parts that draw what was measured over time."""

LINES = tuple(column for column in COLUMNS if column.title not in {"ENGINE", "SITE"})
READINGS: tuple[Column["ReadingLine"], ...] = (
    Column("READING", lambda line: str(line.number), 7, 8, to_right=True),
    Column("ON", lambda line: line.on.isoformat(), 10, 10),
    Column("SHOWN", lambda line: line.shown, 10, 16, to_right=True),
    Column("REMARK", lambda line: line.remark, 10, 70),
)
FINDINGS = tuple(column for column in FINDING_COLUMNS if column.title != "ENGINE")
HISTORY: tuple[Column["HistoryEntry"], ...] = (
    Column("ENTRY", lambda entry: str(entry.number), 5, 7, to_right=True),
    Column("ON", lambda entry: entry.on.isoformat(), 10, 10),
    Column("KIND", lambda entry: entry.kind, 10, 10, drop=3),
    Column("WHAT", lambda entry: entry.what, 14, 60),
    Column("FIGURES", lambda entry: entry.figures, 24, 24, to_right=True),
    Column("BY", lambda entry: entry.by, 5, 12, drop=1),
    Column("REMARK", lambda entry: Cell(entry.remark, "quiet"), 12, 50, drop=2),
)


class PartsBar(Widget):
    """Whose page it is and whether it may run, and the parts of the page, the one in front marked."""

    def __init__(self) -> None:
        super().__init__()
        self.tag, self.status, self.rest, self.part = "", "", "", PARTS[0]

    def tell(self, tag: str, status: str, rest: str, part: str) -> None:
        """Show other words or another part."""
        self.tag, self.status, self.rest, self.part = tag, status, rest, part
        self.refresh()

    def render(self) -> Content:
        """Draw them, what was typed by people literally."""
        title = [f" {clean(self.tag)}  ", self.status and f"{self.status}  "]
        room = max(self.size.width - sum(map(columns_of, title)), 0)
        words = Content.assemble(
            (title[0], "bold"), (title[1], "bold $error"), fit(self.rest, room) if room else "", "\n "
        )
        marked = {part: "bold reverse" if part == self.part else "bold" for part in PARTS}
        has_room = sum(len(part) + 2 for part in PARTS) <= self.size.width
        beside = " " if has_room else ""
        return Content.assemble(
            words,
            *(
                Content.from_markup(
                    f"[{style} @click=screen.part('{part}')]{beside}{part.capitalize()}{beside}[/]{'' if has_room else ' '}"
                )
                for part, style in marked.items()
            ),
        )


def mend_sheet(entry: int, today: "date", session: "Session", came: "Mapping[str, object]") -> "Entered":
    """Correct the sheet of an entry; what it was taken with is as it stands there now, emptied or not."""
    from fleetcare.drafts.work import CorrectionDraft
    from fleetcare.operations.entering import enter_correction

    given = {name: value for name, value in came.items() if value is not None}
    if given.pop("leave_open", False):
        given["part_done"] = True
    emptied = {name: None for name, value in came.items() if value is None}
    draft = CorrectionDraft.model_validate({"entry": entry, **given}).model_copy(update=emptied)
    return enter_correction(session, draft, today)


def plot_of(curve: "LifeCurve", today: "date") -> Plot:
    """Draw a life total as read in full, what is likely dotted, the range thinly, and what falls due across."""
    read = [(day.toordinal(), total) for day, total in curve.read]
    lines = [Line(read, 1, "strong")]
    if curve.ahead:
        start = read[-1]
        late = [(day, total) for total, _, _, day in curve.ahead if day is not None]
        horizon = max(likely for _, _, likely, _ in curve.ahead)
        lines += [
            Line([start, *((likely.toordinal(), total) for total, _, likely, _ in curve.ahead)], 2),
            Line([start, *((early.toordinal(), total) for total, early, _, _ in curve.ahead)], 5, "quiet"),
            Line([start, *((day.toordinal(), total) for day, total in late if day <= horizon)], 5, "quiet"),
        ]
    said = "likely dotted, its range thin" if curve.ahead else f"no forecast: {curve.why_not}"
    levels = [(total, task) for total, task in curve.marks]
    legend = f"{curve.kind} of life: read solid, {said}"
    return Plot(lines, levels, legend, curve.unit, say_along, today.toordinal())
