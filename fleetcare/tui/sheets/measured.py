"""Sheets on the screen that the rule book judges: compression, leak-down, test run, spot readings, oil sample."""

from collections.abc import Iterator, Mapping, Sequence
from datetime import date
from functools import partial
from typing import TYPE_CHECKING

from fleetcare.domain.cautions import OF_SHEETS
from fleetcare.domain.days import parse_day
from fleetcare.domain.measured import COMPRESSION, OIL
from fleetcare.domain.measures import QUANTITIES
from fleetcare.domain.sheet_kinds import KINDS, Column, WordColumn
from fleetcare.domain.sheets import CellKey, Phase, Verdict
from fleetcare.errors import Misread
from fleetcare.operations.find import find_engine
from fleetcare.operations.measures_typed import (
    OpenMeasures,
    cells_of,
    is_wanted,
    open_measures,
    points_of,
    read_typed,
    rows_of,
    typed_of,
    unit_of,
)
from fleetcare.operations.sheet_ahead import EntryAhead
from fleetcare.tui.forms.base import Answer
from fleetcare.tui.sheets.base import Ask, OpenSheet, ReadSheet, SheetFor, SheetKind, Slip, Texts, say_of_cell
from fleetcare.tui.sheets.found import TONES, say_found, tell_found
from fleetcare.tui.sheets.layout import Flow, Listing, Matrix, MatrixRow, Shown

if TYPE_CHECKING:
    from sqlalchemy import Connection

    from fleetcare.operations.measures_typed import MeasuredRow

GAUGE = CellKey("gauge", "", Phase.NONE)
RECEIVED = CellKey("received", "", Phase.NONE)
LAB_NUMBER = CellKey("lab_no", "", Phase.NONE)
_WITH = (GAUGE, RECEIVED, LAB_NUMBER)
_TELLS = {
    GAUGE: "what it was measured with, such as the number of the gauge; another gauge is not a trend",
    RECEIVED: "the day the results came, such as 2026-05-01; some limits count days from it",
    LAB_NUMBER: "the number of the sample at the laboratory",
}
_PHASES = {"": "found", "new": "new"}
_SHORT = {"hours_on_oil": "hours", "oil_temperature": "oil temp.", "insolubles": "insol.", "flash_point": "flash"}
_FREE = 9  # columns for a word of one's own
_LEGEND = "·  in    <  below    >  above its limit    !  part of a pattern    ?  slip"


class OpenMeasured(OpenSheet):
    """An empty sheet of measurements of one kind."""

    def __init__(self, opened: OpenMeasures) -> None:
        self.opened = opened
        self.order = cells_of(opened.form)
        self.start = _start(opened)
        self.blocks = (_flow(opened), *_blocks(opened))
        self.lasts = {
            key: text for key, text in opened.last.items() if key in self.order and key.phase is not Phase.NEW
        }
        self.limits = (_LEGEND,)

    def read(self, texts: Texts, sure: frozenset[CellKey]) -> "ReadMeasured":
        """Read and judge what is typed."""
        return ReadMeasured(self, texts, sure)


class ReadMeasured(ReadSheet):
    """A sheet of measurements as far as it is typed."""

    def __init__(self, opened: OpenMeasured, texts: Texts, sure: frozenset[CellKey]) -> None:
        self._opened, self._order, self._texts, self._sure = opened.opened, opened.order, texts, sure
        self._aside = {key: texts.get(key, "").strip() for key in _WITH}
        self._received, self._no_day = _read_day(self._aside[RECEIVED])
        cells = {key: text for key, text in texts.items() if key not in _WITH}
        self._typed = read_typed(self._opened, cells, self._aside[GAUGE], self._received)
        self._found = say_found(self._typed.findings)

    def shown(self) -> Mapping[CellKey, Shown]:
        """Give what the cells show."""
        shown = {key: Shown(text.strip()) for key, text in self._texts.items() if text.strip()}
        shown |= {key: self._value(key, row) for key, row in self._typed.rows.items()}
        return shown | {key: Shown(self._texts[key], "?", "wrong") for key in self.wrong()}

    def _value(self, key: CellKey, row: "MeasuredRow") -> Shown:
        return Shown(row.value, "?" if key in self.slips() else _mark(row), TONES[Verdict(row.verdict)])

    def about(self, key: CellKey) -> Sequence[tuple[str, str]]:
        """Give lines about a cell: what the rules find by now, then what it holds, or what belongs there."""
        wrong, row = self.wrong().get(key), self._typed.rows.get(key)
        if wrong:
            return (self._found, (f"{self._name(key)}: {wrong}", "wrong"))
        if key in _TELLS:
            return (self._found, (f"{self._name(key)}: {_TELLS[key]}", ""))
        last = self._opened.last.get(key)
        before = f"last {last}" if last else ""
        if row is None:
            return (self._found, (f"{self._name(key)}: {', '.join(filter(None, (self._asked(key), before)))}", ""))
        told = f"{self._name(key)}: {row.figure} {row.verdict}, {row.why}"
        return (self._found, ("; ".join(filter(None, (told, before))), TONES[Verdict(row.verdict)]))

    def _asked(self, key: CellKey) -> str:
        word = self._opened.form.kind.word_column(key.quantity)
        if word is not None:
            return f"{', '.join(word.words)}; the first letters will do" if word.words else "in a few words"
        unit = unit_of(self._opened, self._texts, key)
        return f"in {unit}; another unit goes behind the figure" if unit else "a figure"

    def _name(self, key: CellKey) -> str:
        if key in _WITH:
            return key.quantity
        word = self._opened.form.kind.word_column(key.quantity)
        title = word.title if word is not None else QUANTITIES[key.quantity].title
        return " ".join(part for part in (title, key.phase, key.point and f"at {key.point}") if part)

    def below(self) -> Sequence[str]:
        """Give what the rules find, gravest first, and the cautions of the job."""
        return (*tell_found(self._typed.findings), *OF_SHEETS[self._opened.form.kind.name])

    def here(self, key: CellKey) -> frozenset[CellKey]:
        """Give the cells one is led to."""
        return frozenset(one for one in self._order if self._is_wanted(one))

    def wrong(self) -> Mapping[CellKey, str]:
        """Give the cells that are no values, and why."""
        wrong = {key: say_of_cell(error) for key, error in self._typed.wrong.items()}
        return wrong | ({RECEIVED: self._no_day} if self._no_day else {})

    def slips(self) -> Mapping[CellKey, Slip]:
        """Give the values that are likely slips."""
        doubts = self._typed.doubts.items()
        return {key: Slip(doubt.text, doubt.meant, doubt.is_possible) for key, doubt in doubts if key not in self._sure}

    def next(self, key: CellKey, step: int) -> CellKey | None:
        """Give the cell to fill in after one, or before it: where one was led to a cell those others are passed over.

        From a cell nobody is led to one goes on to the next of its phase.
        """
        if key not in self._order:
            return self._order[0] if step > 0 else None
        is_led = self._is_wanted(key)
        at = self._order.index(key) + step
        while 0 <= at < len(self._order):
            one = self._order[at]
            if self._is_wanted(one) if is_led else one.phase is key.phase:
                return one
            at += step
        return None

    def _is_wanted(self, key: CellKey) -> bool:
        return is_wanted(self._opened, self._typed, self._texts, key)

    def asks(self, about: SheetFor) -> Sequence[Ask]:
        """Ask what to do with a task the sheet does not close."""
        if not about.task or not self._typed.why_open:
            return ()
        stays = Answer("o", "keep what is typed; it stays open", {"leave_open": True})
        closes = Answer("s", "I am sure: close it as it stands", {"sure": True})
        words = f"{about.task} does not close with this sheet: {self._typed.why_open}."
        return (Ask("open", words, (stays, closes)),)

    def came(self, said: Mapping[str, bool]) -> Mapping[str, object]:
        """Give it as what comes along with an entry."""
        return {
            "sheet": rows_of(self._opened, self._order, self._texts, self._sure),
            "kind": self._opened.form.kind.name,
            "gauge": self._aside[GAUGE] or None,
            "received": self._received,
            "lab_no": self._aside[LAB_NUMBER] or None,
            **said,
        }


def _open(kind: str, connection: "Connection", about: SheetFor, today: date) -> OpenMeasured:
    entry = EntryAhead(about.figures, about.explained, about.topped_up, about.entry)
    return OpenMeasured(open_measures(connection, find_engine(connection, about.tag), kind, about.on, today, entry))


def _start(opened: OpenMeasures) -> Texts:
    """Give what a stored sheet opens with."""
    stored = opened.stored
    if stored is None:
        return {}
    received = stored.received_on.isoformat() if stored.received_on else ""
    given = {GAUGE: stored.gauge, RECEIVED: received, LAB_NUMBER: stored.lab_number}
    return {**typed_of(stored), **{key: text for key, text in given.items() if text}}


def _flow(opened: OpenMeasures) -> Flow:
    """Give the cells for what a sheet was taken with, and for what it says of the whole engine in words."""
    kind = opened.form.kind
    taken = (("Laboratory", GAUGE, 16), ("Sample", LAB_NUMBER, 10), ("Results came", RECEIVED, 10))
    words = [
        (
            word.title[0].upper() + word.title[1:],
            CellKey(word.quantity, "", Phase.NONE),
            max([_FREE, *map(len, word.words)]),
        )
        for word in kind.word_columns
        if points_of(opened.form, word) == ("",)
    ]
    return Flow((*(taken if kind.name == OIL else (("Gauge", GAUGE, 24),)), *words))


def _blocks(opened: OpenMeasures) -> Iterator[Matrix | Listing]:
    """Give the cells as they stand: cylinders in their banks, stages side by side, the rest in a list."""
    kind, points = (
        opened.form.kind,
        {one.quantity: points_of(opened.form, one) for one in opened.form.kind.every_column},
    )
    outer = [column for column in kind.columns if "" in points[column.quantity]]
    inner = [column for column in kind.every_column if points[column.quantity] != ("",)]
    of_stage = [column for column in inner if "" in points[column.quantity]]
    of_cylinder = [column for column in inner if column not in of_stage]
    listed = [_listing(outer)] if outer else []
    yield from listed if kind.name != COMPRESSION else []
    if of_stage:
        stages = [point for point in points[of_stage[0].quantity] if point]
        yield Matrix(tuple(stages), ("",), tuple(_row(column, stages, " of stage") for column in of_stage))
    for bank in opened.form.engine.banks if of_cylinder else ():
        cylinders = [str(cylinder) for cylinder in bank]
        phases = tuple(phase.value for phase in _phases(of_cylinder[0]))
        yield Matrix(tuple(cylinders), phases, tuple(_row(column, cylinders) for column in of_cylinder))
    yield from listed if kind.name == COMPRESSION else []


def _row(column: Column | WordColumn, points: Sequence[str], of: str = "") -> MatrixRow:
    cells = tuple(tuple(CellKey(column.quantity, point, phase) for phase in _phases(column)) for point in points)
    return MatrixRow(_label(column.quantity) + of, cells)


def _listing(columns: Sequence[Column]) -> Listing:
    most = max((_phases(column) for column in columns), key=len)
    heads = tuple(_PHASES[phase.value] for phase in most) if len(most) > 1 else ("",)
    items = tuple(
        (_label(column.quantity), tuple(CellKey(column.quantity, "", phase) for phase in _phases(column)))
        for column in columns
    )
    return Listing(heads, items)


def _label(quantity: str) -> str:
    return _SHORT.get(quantity, quantity.replace("_", " "))


def _phases(column: Column | WordColumn) -> tuple[Phase, ...]:
    return column.phases if isinstance(column, Column) else (Phase.NONE,)


def _mark(row: "MeasuredRow") -> str:
    if row.verdict not in {Verdict.ALERT, Verdict.ALARM}:
        return "·" if row.verdict == Verdict.IN else " "
    if row.measured is None or row.limit is None:
        return "!"
    return "<" if row.measured < row.limit else ">"


def _read_day(text: str) -> tuple[date | None, str]:
    """Read a day, and say why it is none."""
    try:
        return (parse_day(text), "") if text else (None, "")
    except Misread as error:
        return None, "; ".join(error.lines())


MEASURED_SHEETS = tuple(
    SheetKind(kind.name, f"{kind.title} of {{tag}}", partial(_open, kind.name)) for kind in KINDS.values()
)
