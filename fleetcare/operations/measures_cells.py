"""One cell of a sheet other than the lash sheet: what was typed, read as what its quantity may be at that engine."""

import re
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.measured import OIL, MeasuredEngine
from fleetcare.domain.numbers import parse_number
from fleetcare.domain.sheet_kinds import GRADE, ISO4406, KINDS, NEVER_WITHOUT, At, Column, SheetKind, WordColumn
from fleetcare.domain.sheets import NOT_DETECTED, Phase, SheetValue
from fleetcare.errors import Misread, Refused
from fleetcare.operations.find import FoundItem
from fleetcare.operations.measured import load_grades, load_measured_engine
from fleetcare.rules.iso4406 import read_code
from fleetcare.rules.judging.values import title
from fleetcare.rules.sheet_doubts import MeasureDoubt, doubt_grade, doubt_measure

if TYPE_CHECKING:
    from sqlalchemy import Connection

MOST_CYLINDERS = 99
"""Where the nameplate does not say how many there are."""

_GROUPED = re.compile(r"[+-]?[1-9][0-9]{0,2}(,[0-9]{3})+")
_NOTHING = frozenset({"-", "--", "n/a", "na", "none", "nil", "neg", "negative", "trace"})
_MOST_IN_A_WORD = 60


@dataclass(frozen=True, slots=True)
class MeasureForm:
    """What a sheet of a kind is read and judged by: the engine it was taken on, the day, and of oil the grades known."""

    kind: SheetKind
    engine: MeasuredEngine
    on: date
    grades: frozenset[str] = frozenset()

    def doubt(self, value: SheetValue) -> MeasureDoubt | None:
        """Give the doubt about a value or a grade, None where there is none."""
        return doubt_grade(value, self.grades) if value.quantity == GRADE else doubt_measure(value, self.engine)


def measure_form(connection: "Connection", item: FoundItem, kind: str, on: date) -> MeasureForm:
    """Load what a sheet of an engine on a day is read by. Refuses a machine."""
    engine = load_measured_engine(connection, item.id)
    if engine is None:
        raise Refused(f"{item.tag} is a machine, and only engines are measured", "name one of its engines")
    return MeasureForm(KINDS[kind], engine, on, load_grades(connection, on) if kind == OIL else frozenset())


def read_column(kind: SheetKind, name: str) -> Column | WordColumn:
    """Find what a quantity is on a kind of sheet, whatever its case. Refuses one that does not belong there."""
    wanted = name.strip().casefold()
    for column in kind.every_column:
        if column.quantity.casefold() == wanted:
            return column
    elsewhere = [other.name for other in KINDS.values() if wanted in {one.casefold() for one in other.quantities}]
    remedy = f"it belongs on a sheet of {' or '.join(elsewhere)}" if elsewhere else f"use {_list(kind.quantities)}"
    raise Refused(f"{name.strip()!r} does not belong on a sheet of {kind.name}", remedy)


def read_point(form: MeasureForm, column: Column | WordColumn, text: str) -> str:
    """Read where something was measured: a cylinder, a stage of a run, or nothing, for the engine."""
    point, at = text.strip(), column.at
    if not point and (at is not At.CYLINDER or isinstance(column, WordColumn) or column.shared):
        return ""
    if at is At.ENGINE:
        raise Refused(f"{column.quantity} is of the whole engine, not of {point!r}", "leave the point empty")
    if not point:
        raise Misread("it is missing", "give the number of the cylinder")
    what, most = ("stage", 9) if at is At.STAGE else ("cylinder", form.engine.cylinders or MOST_CYLINDERS)
    if not (point.isascii() and point.isdigit() and len(point) <= 3 and 1 <= int(point) <= most):
        whose = "a run" if at is At.STAGE else form.engine.tag
        raise Refused(f"{whose} has no {what} {point!r}", f"write its number, 1 to {most}")
    return str(int(point))


def read_phase(column: Column, text: str) -> Phase:
    """Read the phase of a value; an empty one is the usual of its quantity."""
    wanted = text.strip().lower()
    if not wanted:
        return column.phases[0]
    for phase in column.phases:
        if phase.value == wanted:
            return phase
    named = [phase.value for phase in column.phases if phase.value]
    remedy = f"write {' or '.join(named)}, or leave it empty" if named else "leave it empty"
    raise Refused(f"{column.quantity} has no phase {text.strip()!r}", remedy)


def read_figure(column: Column, text: str) -> tuple[str, Decimal | None]:
    """Read a figure, a bound such as <1, or ND: the qualifier and the figure."""
    typed = text.strip()
    if typed.upper() == NOT_DETECTED or typed.startswith("<"):
        if not column.is_lab:
            raise Refused(f"{text!r} is for what a laboratory did not detect", "write the figure, or leave the row out")
        if typed.upper() == NOT_DETECTED:
            if column.quantity in NEVER_WITHOUT:
                raise Refused(f"no oil is without {title(column.quantity)}", "leave the row out where it was not told")
            return NOT_DETECTED, None
        bound = _number(typed[1:].strip())
        if bound <= 0:
            raise Misread(f"{text!r} is not a bound", "write < and a figure above 0, or ND")
        return "<", bound
    if ".." in typed:
        raise Misread(f"{text!r} is a range", "write one figure; only a gap lies between two blades")
    if typed.casefold() in _NOTHING:
        raise Misread(f"{text!r} is not a figure", "leave the row out, or write ND for not detected")
    return "", _number(typed)


def _number(text: str) -> Decimal:
    if _GROUPED.fullmatch(text):
        raise Misread(f"{text!r} can be read in two ways", "write a point for decimals, and nothing between thousands")
    return parse_number(text.replace(",", "."))


def read_word(column: WordColumn, text: str) -> str:
    """Read what is said in a word: one of those there are, or any short text."""
    said = " ".join(text.split())
    if column.quantity == ISO4406:
        return read_code(said)
    if column.words and said.casefold() not in column.words:
        raise Refused(f"{said!r} is no word of {column.quantity}", f"use {_list(column.words)}")
    if len(said) > _MOST_IN_A_WORD:
        raise Refused(f"{column.quantity} is longer than {_MOST_IN_A_WORD} characters", "shorten it")
    return said.casefold() if column.words else said


def _list(names: tuple[str, ...]) -> str:
    return f"{', '.join(names[:-1])} or {names[-1]}" if len(names) > 1 else names[0]
