"""A sheet of measurements as somebody states it: rows of text, and what it was taken with."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Annotated, Any, Literal, Self

from pydantic import BeforeValidator, InstanceOf, model_validator

from fleetcare.domain.measured import SHEET_KINDS
from fleetcare.domain.sheets import LASH, SHIM, Phase
from fleetcare.drafts.fields import Day, Text
from fleetcare.drafts.reading_in import Draft, as_option
from fleetcare.errors import FleetError, Misread, Refused


@dataclass(frozen=True, slots=True)
class SheetRow:
    """One row as typed: its number, to name it by, its cells by column, and whether somebody is sure of an odd value."""

    number: int
    cells: Mapping[str, str]
    is_sure: bool = False


@dataclass(frozen=True, slots=True)
class SheetIn:
    """A sheet as typed; `faults` are the rows of a file that do not fit its header, refusals that know their row."""

    rows: tuple[SheetRow, ...]
    faults: tuple[FleetError, ...] = ()


def _one_of(words: Mapping[str, Any], otherwise: Callable[[str], FleetError]) -> Callable[[object], Any]:
    """Read one of some words, whatever its case."""

    def read(value: object) -> Any:
        word = str(value).strip().lower()
        if word not in words:
            raise otherwise(str(value).strip())
        return words[word]

    return read


_kind = _one_of(
    {kind: kind for kind in SHEET_KINDS},
    lambda text: Misread(f"{text!r} is no kind of sheet", f"use {', '.join(SHEET_KINDS)}"),
)


class SheetOptions(Draft):
    """What an entry may bring along: a sheet, what it was taken with and when results came, and that it is right as it is.

    Without a `kind` it is of the kind a task of the entry needs, else of the one its quantities belong to.
    """

    sheet: InstanceOf[SheetIn] | None = None
    kind: Annotated[str, BeforeValidator(_kind)] | None = None
    gauge: Text | None = None
    when: Literal["cold", "hot"] | None = None
    received: Day | None = None
    lab_no: Text | None = None
    sure: bool = False


class TakenSheet(SheetOptions):
    """A sheet that comes with an entry of its own day; what only a sheet has is refused without one."""

    @model_validator(mode="after")
    def _check_sheet(self) -> Self:
        told = ("gauge", "when", "received", "lab_no", "sure")
        given = [name for name in told if self.sheet is None and getattr(self, name)]
        if given:
            raise Refused(
                f"{as_option(given[0])} says how a sheet was taken", "give the sheet with --sheet FILE as well"
            )
        return self


_quantity = _one_of(
    {LASH: LASH, SHIM: SHIM},
    lambda text: Refused(f"{text!r} does not belong on a lash sheet", f"use {LASH}, or {SHIM} for the shim fitted"),
)
_phase = _one_of(
    {phase.value: phase for phase in (Phase.FOUND, Phase.LEFT)},
    lambda text: Refused(f"a lash is found or left, not {text!r}", "write found or left; empty means found"),
)
_unit = _one_of(
    {"mm": "mm", "in": "in"},
    lambda text: Misread(f"{text!r} is no unit of lash", "write mm or in; empty takes the unit of the engine's limits"),
)


class LashRow(Draft):
    """A row of a lash sheet; its value is read when its unit is known. An empty phase means found."""

    quantity: Annotated[str, BeforeValidator(_quantity)]
    point: Text
    phase: Annotated[Phase, BeforeValidator(_phase)] = Phase.FOUND
    value: Text
    unit: Annotated[Literal["mm", "in"], BeforeValidator(_unit)] | None = None


class MeasureRow(Draft):
    """A row of any other sheet, as typed: what each cell may be depends on its quantity, and on the engine."""

    quantity: Text
    point: str = ""
    phase: str = ""
    value: Text
    unit: str = ""
