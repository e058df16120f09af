"""A sheet of measurements as somebody states it: rows of text, and what it was taken with."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Annotated, Any, Literal, Self

from pydantic import BeforeValidator, InstanceOf, model_validator

from fleetcare.domain.sheets import LASH, SHIM, Phase
from fleetcare.drafts.fields import Text
from fleetcare.drafts.reading_in import Draft
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


class SheetOptions(Draft):
    """What an entry may bring along: a sheet, the gauge and condition it was taken with, and that it is right as it is."""

    sheet: InstanceOf[SheetIn] | None = None
    gauge: Text | None = None
    when: Literal["cold", "hot"] | None = None
    sure: bool = False


class TakenSheet(SheetOptions):
    """A sheet that comes with an entry of its own day; what only a sheet has is refused without one."""

    @model_validator(mode="after")
    def _check_sheet(self) -> Self:
        given = [name for name in ("gauge", "when", "sure") if self.sheet is None and getattr(self, name)]
        if given:
            raise Refused(f"--{given[0]} says how a sheet was taken", "give the sheet with --sheet FILE as well")
        return self


def _one_of(words: Mapping[str, Any], otherwise: Callable[[str], FleetError]) -> Callable[[object], Any]:
    """Read one of some words, whatever its case."""

    def read(value: object) -> Any:
        word = str(value).strip().lower()
        if word not in words:
            raise otherwise(str(value).strip())
        return words[word]

    return read


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
