"""A sheet of measurements, filled in cell by cell: judged as it is typed, asked about, stored with its entry."""

from collections.abc import Callable, Iterable, Mapping
from typing import TYPE_CHECKING

from textual.content import Content
from textual.widget import Widget
from textual.widgets import Static

from fleetcare.domain.printable import clean
from fleetcare.domain.sheets import CellKey, Phase
from fleetcare.errors import Refusals, Refused
from fleetcare.tui.drafts_kept import IMPORT_KEY, DraftKey
from fleetcare.tui.filling import KEEP_AFTER
from fleetcare.tui.forms.base import Answer
from fleetcare.tui.frame import TopBar, say_day
from fleetcare.tui.sheets.base import OpenSheet, ReadSheet, SheetFor, SheetKind, say_of_cell
from fleetcare.tui.storing import StoringScreen
from fleetcare.tui.widgets.detail import Detail
from fleetcare.tui.widgets.form_head import FormTitle
from fleetcare.tui.widgets.grid import Grid
from fleetcare.tui.widgets.question import Question

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection
    from sqlalchemy.orm import Session
    from textual.timer import Timer

    from fleetcare.operations.entering import Entered

_LEFT = "As you left it; Ctrl N throws it away and begins anew."
_RIGHT = Answer("r", "it is right as it stands", {"right": True})
_MEANT_KEYS = "mn"


class SheetScreen(StoringScreen):
    """A sheet of an engine, of the day of its entry. It is left with what was stored, in sentences, or with None."""

    place = "sheet"
    AUTO_FOCUS = "Grid"

    def __init__(
        self, kind: SheetKind, about: SheetFor, enter: "Callable[[Session, Mapping[str, object]], Entered]"
    ) -> None:
        super().__init__()
        self.kind, self.about = kind, about
        self.texts: dict[CellKey, str] = {}
        self.read_sheet: ReadSheet | None = None
        self._enter_with = enter
        self._opened: OpenSheet | None = None
        self._sure: frozenset[CellKey] = frozenset()
        self._said: dict[str, Mapping[str, bool]] = {}
        self._asked: CellKey | str = ""
        self._meant: Mapping[str, str] = {}  # by the key that answers so
        self._is_storing, self._is_done = False, False
        self._timer: Timer | None = None

    def body(self) -> Iterable[Widget]:
        """Title, cells with the cautions below, what the cursor is on, and the place for a question."""
        yield FormTitle(self.kind.title.format(tag=self.about.tag))
        yield Static("", markup=False)
        yield Grid(self)
        yield Detail()
        yield Question()

    @property
    def holds_keys(self) -> bool:
        """What is typed waits for cells, and while it is stored."""
        return self._is_storing or (self._opened is None and not self._has_failed)

    @property
    def grid(self) -> Grid:
        """The cells."""
        return self.query_one(Grid)

    @property
    def key(self) -> DraftKey:
        """What is typed here is kept under this."""
        return DraftKey(
            str(self.context.path.absolute()),
            f"sheet {self.kind.name}",
            " ".join(filter(None, (self.about.tag, str(self.about.entry or "")))),
        )

    def on_mount(self) -> None:
        """Fill in what was kept."""
        super().on_mount()
        self.query_one(TopBar).tell(say_day(self.about.on))
        self.grid.texts = self.texts
        try:
            kept = self.fleet_app.drafts.find(self.key)
        except Refused as error:
            self.notice.say(*error.lines(), is_wrong=True)
            return
        self.texts.update({key: text for name, text in kept.items() if (key := _key_of(name)) is not None})
        if kept:
            self.notice.say(_LEFT)

    def read(self, connection: "Connection", on: "date", *, is_future: bool) -> OpenSheet:
        """Load the empty sheet of the day it was taken."""
        return self.kind.open(connection, self.about, on)

    def show(self, found: OpenSheet) -> None:
        """Draw it, with what is typed in it."""
        is_first, self._opened = self._opened is None, found
        self.query_one(FormTitle).tell(self.about.whose)
        self.query_one(Static).update(Content("\n".join(f" {clean(line)}" for line in found.limits)))
        self.grid.draw(found.blocks, found.lasts)
        if is_first and not self.texts:
            self.texts.update(found.start)
        self._judge()
        if is_first:
            self.grid.go(self._to_fill_in(found.order[0]))

    def cell_typed(self) -> None:
        """Judge what is typed, keep it soon, and forget what was answered, or is being asked, about other values."""
        self._said.clear()
        self._asked, self.query_one(Question).display = "", False
        if self.grid.cursor in self._sure:
            self._sure -= {self.grid.cursor}
        self._judge()
        if self._timer is None:
            self._timer = self.set_timer(KEEP_AFTER, self._keep)

    def cell_moved(self) -> None:
        """Say what the cursor is on."""
        self._say_here()

    def on_unmount(self) -> None:
        """Keep what is typed however the screen is left."""
        self._keep()

    def action_back(self) -> None:
        """Leave; what is typed is kept."""
        if not self._is_storing:
            self.dismiss(None)

    def action_next(self, step: int) -> None:
        """Go to the next cell to fill in, or the one before."""
        self.cell_left(step)

    def cell_left(self, step: int) -> None:
        """Go to the next cell to fill in, or the one before; ask first about what is likely a slip."""
        key, read = self.grid.cursor, self.read_sheet
        if key is None or read is None or self.query_one(Question).display or self._ask_of_slip(key):
            return
        wanted = read.next(key, step)
        is_last = wanted is None and step > 0
        self.notice.say(*(["That was the last one; Ctrl S stores it."] if is_last else []))
        self.grid.go(wanted or key)

    def action_anew(self) -> None:
        """Throw away what was typed and begin anew."""
        self.fleet_app.drafts.drop(self.key)
        self.texts.clear()
        self.texts.update(self._opened.start if self._opened is not None else {})
        self._sure, self._said = frozenset(), {}
        self.notice.say()
        self._judge()
        if self._opened is not None:
            self.grid.go(self._opened.order[0])

    def action_scroll(self, step: int) -> None:
        """Scroll by what is in sight."""
        self.grid.scroll_relative(y=step * max(self.grid.size.height - 1, 1), animate=False)

    def action_help(self) -> None:
        """Show the keys."""
        self.fleet_app.action_keys()

    def action_store(self) -> None:
        """Store it, once the keys typed before are in their cells."""
        self.call_after_refresh(self._check)

    def _check(self) -> None:
        """Store it, unless a cell is wrong or something is to be asked first."""
        read = self.read_sheet
        if read is None or self._is_storing or self.query_one(Question).display:
            return
        self.notice.say()
        if wrong := read.wrong():
            count = "a value" if len(wrong) == 1 else f"{len(wrong)} values"
            self.notice.say(f"Nothing is stored yet: {count} cannot be read.", is_wrong=True)
            self.grid.go(next(iter(wrong)))
            return
        if any(self._ask_of_slip(key) for key in read.slips()):
            return
        for ask in read.asks(self.about):
            if ask.name not in self._said:
                self._asked = ask.name
                self.query_one(Question).ask(ask.words, ask.answers)
                return
        self._is_storing = True
        said = {name: is_so for answer in self._said.values() for name, is_so in answer.items()}
        came = read.came(said)
        self.store(lambda session: self._enter_with(session, came))

    def _ask_of_slip(self, key: CellKey) -> bool:
        """Ask about a value that is likely a slip, unless somebody is sure of it; tell whether anything is asked."""
        slip = self.read_sheet.slips().get(key) if self.read_sheet is not None else None
        if slip is None:
            return False
        self.grid.go(key)
        self._asked = key
        self._meant = dict(zip(_MEANT_KEYS, slip.meant, strict=False))
        meant = [Answer(letter, f"it is {text}") for letter, text in self._meant.items()]
        self.query_one(Question).ask(slip.words, [*meant, *([_RIGHT] if slip.can_be_right else [])])
        return True

    def on_question_answered(self, message: Question.Answered) -> None:
        """Do as answered: put in what was meant, let it stand, or go back to the cells."""
        answer, asked = message.answer, self._asked
        self._asked = ""
        self.grid.focus()
        if isinstance(asked, CellKey):
            self._answer_slip(asked, answer)
        elif answer.key != "c":
            self._said[asked] = answer.says
            self._check()

    def _answer_slip(self, key: CellKey, answer: Answer) -> None:
        if answer == _RIGHT:
            self._sure |= {key}
            self._judge()
        elif answer.key in self._meant:
            self.texts[key] = self._meant[answer.key]
            self.cell_typed()
        else:
            return
        self.action_next(1)

    def on_storing_screen_stored(self, message: StoringScreen.Stored) -> None:
        """Go back with what was stored."""
        self._is_done = True
        self.fleet_app.drafts.drop(self.key)
        self.dismiss(message.sentences)

    def on_storing_screen_not_stored(self, message: StoringScreen.NotStored) -> None:
        """Say why, the cursor on the cell it is about."""
        self._is_storing = False
        self.fleet_app.typed_ahead.forget()
        self._said.clear()
        error = message.error
        first = error.errors[0] if isinstance(error, Refusals) else error
        self.notice.say(say_of_cell(first), is_wrong=True)
        number = getattr(first, "number", None)
        if isinstance(number, int) and self._opened is not None:
            self.grid.go(self._opened.order[number])

    def _judge(self) -> None:
        """Read and judge all that is typed, and show it."""
        if self._opened is None:
            return
        self.read_sheet = self._opened.read(self.texts, self._sure)
        self._say_here()

    def _say_here(self) -> None:
        key = self.grid.cursor
        if self.read_sheet is not None and key is not None:
            self.query_one(Detail).tell(*self.read_sheet.about(key))
            self.grid.tell(self.read_sheet.shown(), self.read_sheet.here(key), self.read_sheet.below())

    def _to_fill_in(self, first: CellKey) -> CellKey:
        """Give the first empty cell one is led to after the last typed, else the first empty one, else the first."""
        led, key = [first], self.read_sheet.next(first, 1) if self.read_sheet is not None else None
        while key is not None and self.read_sheet is not None:
            led.append(key)
            key = self.read_sheet.next(key, 1)
        last = max((place for place, one in enumerate(led) if self.texts.get(one)), default=-1)
        return next((one for one in (*led[last + 1 :], *led) if not self.texts.get(one)), first)

    def _keep(self) -> None:
        """Keep what is typed."""
        self._timer = None
        if self._is_done:
            return
        typed = {_name_of(key): text for key, text in self.texts.items() if text}
        start = self._opened.start if self._opened is not None else {}
        try:
            if typed == {_name_of(key): text for key, text in start.items()}:
                self.fleet_app.drafts.drop(self.key)
            else:
                self.fleet_app.drafts.keep(self.key, {**typed, IMPORT_KEY: self.about.import_key})
        except Refused as error:
            self.notice.say(*error.lines(), is_wrong=True)


def _name_of(key: CellKey) -> str:
    return "|".join(key)


def _key_of(name: str) -> CellKey | None:
    """Read the name a cell was kept under; None for what is no cell."""
    parts = name.split("|")
    if len(parts) != len(CellKey._fields) or parts[-1] not in set(Phase):
        return None
    return CellKey(parts[0], parts[1], Phase(parts[2]))
