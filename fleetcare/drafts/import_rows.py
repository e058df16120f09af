"""Rows of the import files; each field is a column of the same name."""

from typing import Annotated, Self

from pydantic import BeforeValidator, model_validator

from fleetcare.domain.quantities import UNITS, Figure
from fleetcare.drafts.fields import Day, Dial, Dials, MeterKind, Note, Text
from fleetcare.drafts.reading_in import Draft
from fleetcare.errors import Misread, Refused

_SYMBOLS = {symbol.lower(): symbol for symbol in UNITS}


def _unit(value: object) -> str:
    """Read the unit of a meter, whatever its case."""
    text = str(value).strip()
    if text.lower() == "gal":
        raise Misread(f"{text!r} does not say which gallon", "write galus or galimp")
    if text.lower() not in _SYMBOLS:
        raise Misread(f"{text!r} is no unit of a meter", f"use one of {', '.join(UNITS)}")
    return _SYMBOLS[text.lower()]


class ReadingRow(Draft):
    """What a meter showed on a day; the unit stands behind the value or in a column of its own."""

    engine: Text
    meter: MeterKind | None = None
    on: Day
    value: Dial
    unit: Annotated[str, BeforeValidator(_unit)] | None = None
    note: Note = ""

    @model_validator(mode="after")
    def _check_unit(self) -> Self:
        if None not in {self.unit, self.value.unit} and self.unit != self.value.unit:
            raise Refused(f"--value is in {self.value.unit}, --unit says {self.unit}", "leave one of them out")
        return self

    @property
    def figure(self) -> Figure:
        """The value with its unit, wherever that stands."""
        return Figure(self.value.value, self.value.unit or self.unit)


class LogRow(Draft):
    """A task done on a day, before the tool was there or elsewhere."""

    engine: Text
    task: Text
    on: Day
    at: Dials = ()
    by: Text | None = None
    note: Note = ""
