"""The valve lash sheet on the screen."""

from collections.abc import Iterator, Mapping, Sequence
from datetime import date
from itertools import groupby
from typing import TYPE_CHECKING

from fleetcare.domain.cautions import LASH as CAUTIONS
from fleetcare.domain.sheets import LASH, SHIM, CellKey, LashPoint, Phase, Place, Verdict
from fleetcare.operations.find import find_engine
from fleetcare.operations.sheet_ahead import EntryAhead, SheetAhead, sheet_ahead
from fleetcare.operations.sheets_judge import sheet_of_entry
from fleetcare.operations.sheets_load import LashForm, open_form
from fleetcare.operations.sheets_typed import (
    cells_of,
    findings_on,
    is_wanted,
    last_shown,
    points_here,
    read_typed,
    say_cell,
    say_here,
    sheet_in,
    typed_of,
)
from fleetcare.tui.forms.base import Answer
from fleetcare.tui.sheets.base import Ask, OpenSheet, ReadSheet, SheetFor, SheetKind, Slip, Texts, say_of_cell
from fleetcare.tui.sheets.found import TONES, say_found, tell_found
from fleetcare.tui.sheets.layout import Flow, Matrix, MatrixRow, Shown

if TYPE_CHECKING:
    from sqlalchemy import Connection

    from fleetcare.operations.sheets_judge import JudgedRow

WHEN = CellKey("when", "", Phase.NONE)
GAUGE = CellKey("gauge", "", Phase.NONE)
UNIT = CellKey("unit", "", Phase.NONE)
_WORDS: Mapping[CellKey, Mapping[str, str]] = {
    WHEN: {"": "", "c": "cold", "cold": "cold", "h": "hot", "hot": "hot"},
    UNIT: {"": "", "mm": "mm", "in": "in"},
}
_PHASES = (Phase.FOUND, Phase.LEFT)
_MARKS = {Place.IN: "·", Place.BELOW: "<", Place.ABOVE: ">", Place.UNDECIDED: "?"}
_LEGEND = "·  in    <  below    >  above    ?  slip, or not told    ____  at this stop"


class OpenLash(OpenSheet):
    """An empty valve lash sheet."""

    def __init__(self, form: LashForm, ahead: SheetAhead, start: Texts) -> None:
        self.form, self.ahead, self.start = form, ahead, start
        self.order = cells_of(form)
        self.blocks = (Flow((("Engine cold or hot", WHEN, 5), ("Unit", UNIT, 3), ("Gauge", GAUGE, 24))), *_banks(form))
        self.lasts = {key: last for key in self.order if (last := last_shown(form, key))}
        nothing = "" if form.spec and form.spec.ranges else "; on the engine, x and then e give it"
        self.limits = (f"{read_typed(form, {}).judged.limits}{nothing}", *form.notes, _LEGEND)

    def read(self, texts: Texts, sure: frozenset[CellKey]) -> "ReadLash":
        """Read and judge what is typed."""
        return ReadLash(self, texts, sure)


class ReadLash(ReadSheet):
    """A valve lash sheet as far as it is typed."""

    def __init__(self, opened: OpenLash, texts: Texts, sure: frozenset[CellKey]) -> None:
        self._form, self._order, self._texts, self._sure = opened.form, opened.order, texts, sure
        words = {key: texts.get(key, "").strip().lower() for key in _WORDS}
        self._told = {key: _WORDS[key].get(word, "") for key, word in words.items()}
        self._unread = {key: word for key, word in words.items() if word not in _WORDS[key]}
        self._gauge = texts.get(GAUGE, "").strip()
        cells = {key: text for key, text in texts.items() if key.quantity in {LASH, SHIM}}
        self._typed = read_typed(opened.form, cells, self._told[WHEN], self._gauge, self._told[UNIT] or None)
        self._findings = findings_on(opened.ahead, self._typed)

    def shown(self) -> Mapping[CellKey, Shown]:
        """Give what the cells show."""
        rows = {CellKey(row.quantity, row.point, Phase(row.phase)): row for row in self._typed.judged.rows}
        shown = {key: self._value(key, row) for key, row in rows.items()}
        shown |= {key: self._same(key) for key in self._order if key.phase is Phase.LEFT and self._is_same(key, shown)}
        shown |= {key: Shown(self._texts[key], "?", "wrong") for key in self.wrong()}
        return shown | {key: Shown(word) for key, word in self._told.items() if word}

    def _is_same(self, key: CellKey, shown: Mapping[CellKey, Shown]) -> bool:
        return key not in shown and key._replace(phase=Phase.FOUND) in shown

    def _same(self, key: CellKey) -> Shown:
        """Show a cell of what is left as found: out of limits is worse then."""
        is_out = key.quantity == LASH and self._typed.is_out(key.point, Phase.FOUND)
        return Shown("same", "!" if is_out else " ", "overdue" if is_out else "quiet")

    def _value(self, key: CellKey, row: "JudgedRow") -> Shown:
        mark = "?" if key in self.slips() else _MARKS[Place(row.place)] if row.place else " "
        return Shown(row.value, mark, TONES[Verdict(row.verdict)])

    def about(self, key: CellKey) -> Sequence[tuple[str, str]]:
        """Give lines about a cell: where the crank stands for it, then what it holds."""
        if key in self._unread:
            return ((self.wrong()[key], "wrong"), ("", ""))
        if key == WHEN:
            asked = self._form.spec.condition if self._form.spec else "any"
            told = f"; its limits are for a {asked} engine" if asked != "any" else ""
            return (
                ("c for cold, h for hot; empty: nobody says", ""),
                (f"How the engine was when measured{told}", "quiet"),
            )
        if key == UNIT:
            unit = self._form.spec.unit if self._form.spec else "mm"
            return ((f"mm or in, as the blades are marked; empty: {unit}", ""), ("", ""))
        if key == GAUGE:
            return (("the feeler gauge used, such as its number", ""), ("Another gauge is not a trend.", "quiet"))
        row = self._typed.row(key)
        tone = "wrong" if key in self._typed.wrong else TONES[Verdict(row.verdict)] if row else ""
        what = f"{key.point} {'shim ' if key.quantity == SHIM else ''}{key.phase}"
        found, found_tone = say_found(self._findings)
        here = say_here(self._form, key)
        return (
            (f"{here}; {found}", found_tone) if self._findings else (here, "quiet"),
            (f"{what}: {', '.join(say_cell(self._form, self._typed, key))}", tone),
        )

    def below(self) -> Sequence[str]:
        """Give what the rules find, gravest first, and the cautions of the job."""
        return (*tell_found(self._findings), *CAUTIONS)

    def here(self, key: CellKey) -> frozenset[CellKey]:
        """Give the cells that are filled in with the crank as it stands for one."""
        if key not in self._order:
            return frozenset((WHEN, UNIT, GAUGE))
        points = points_here(self._form, key)
        return frozenset(one for one in self._order if one.point in points)

    def wrong(self) -> Mapping[CellKey, str]:
        """Give the cells that are no values, and why."""
        wrong = {key: say_of_cell(error) for key, error in self._typed.wrong.items()}
        for key, word in self._unread.items():
            wrong[key] = (
                f"{word!r} is not known here; write {' or '.join(dict.fromkeys(filter(None, _WORDS[key].values())))}, or leave it empty"
            )
        return wrong

    def slips(self) -> Mapping[CellKey, Slip]:
        """Give the gaps that are likely slips."""
        doubts = self._typed.doubts.items()
        return {key: Slip(doubt.text, doubt.meant, doubt.is_possible) for key, doubt in doubts if key not in self._sure}

    def next(self, key: CellKey, step: int) -> CellKey | None:
        """Give the cell to fill in after one, or before it, passing over those not wanted."""
        if key not in self._order:
            return self._order[0] if step > 0 else None
        at = self._order.index(key) + step
        while 0 <= at < len(self._order):
            if is_wanted(self._form, self._typed, self._order[at]):
                return self._order[at]
            at += step
        return None

    def asks(self, about: SheetFor) -> Sequence[Ask]:
        """Ask what to do with a task the sheet does not close, and about what is left out of limits."""
        judged, asks = self._typed.judged, []
        why, defect = judged.why_open(), judged.defect()
        if about.task and why:
            stays = Answer("o", "keep what is typed; it stays open", {"leave_open": True})
            closes = Answer("s", "I am sure: close it as it stands", {"sure": True})
            asks.append(Ask("open", f"{about.task} does not close with this sheet: {why}.", (stays, closes)))
        if defect and about.entry is None:
            raise_it = Answer("f", "raise a follow-up, due at once", {"follow_up": True})
            asks.append(Ask("defect", f"{defect}.", (raise_it, Answer("w", "store it without one"))))
        return asks

    def came(self, said: Mapping[str, bool]) -> Mapping[str, object]:
        """Give it as what comes along with an entry, with the defect it shows where a follow-up is to be raised."""
        came: dict[str, object] = {
            "sheet": sheet_in(self._order, self._texts, self._sure, self._told[UNIT]),
            "when": self._told[WHEN] or None,
            "gauge": self._gauge or None,
        }
        return {**came, **said, **({"defect": self._typed.judged.defect()} if said.get("follow_up") else {})}


def _open(connection: "Connection", about: SheetFor, today: date) -> OpenLash:
    engine = find_engine(connection, about.tag)
    entry = EntryAhead(about.figures, about.explained, about.topped_up, about.entry)
    ahead = sheet_ahead(connection, engine, LASH, about.on, today, entry)
    if about.entry is None:
        return OpenLash(open_form(connection, engine, about.on), ahead, {})
    stored = sheet_of_entry(connection, engine, about.entry)
    typed, unit = typed_of(stored.sheet)
    asked = stored.form.spec.unit if stored.form.spec else "mm"
    given = {WHEN: stored.sheet.condition, GAUGE: stored.sheet.gauge, UNIT: unit if unit != asked else ""}
    return OpenLash(stored.form, ahead, {**typed, **{key: text for key, text in given.items() if text}})


def _banks(form: LashForm) -> Iterator[Matrix]:
    """Give a block for each bank: a column for each cylinder, a row for each of its points."""
    of_cylinder = {
        cylinder: tuple(points) for cylinder, points in groupby(form.points, key=lambda point: point.cylinder)
    }
    quantities = (LASH, SHIM) if form.train.adjuster.kind == SHIM else (LASH,)
    for bank in form.banks:
        if not bank:
            continue
        rows = tuple(
            MatrixRow(
                _row_label(of_cylinder[bank[0]][place], quantity),
                tuple(_cells(of_cylinder[cylinder][place], quantity) for cylinder in bank),
            )
            for place in range(len(of_cylinder[bank[0]]))
            for quantity in quantities
        )
        yield Matrix(tuple(map(str, bank)), _PHASES, rows)


def _cells(point: LashPoint, quantity: str) -> tuple[CellKey, ...]:
    return tuple(CellKey(quantity, point.name, phase) for phase in _PHASES)


def _row_label(point: LashPoint, quantity: str) -> str:
    return point.name.removeprefix(str(point.cylinder)) if quantity == LASH else "shim"


LASH_SHEET = SheetKind(LASH, "Valve lash of {tag}", _open)
