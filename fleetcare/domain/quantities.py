"""Figures with a unit: what people type, and the one base unit per kind that arithmetic uses.

Base units are h, km, L and starts. Factors are exact; their sources stand beside them.
Spans of time (d, w, mo, y) are calendar spans, never a number of hours.
"""

import re
from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum
from typing import Literal, assert_never

from fleetcare.errors import Misread, Refused


class Kind(StrEnum):
    """What a trigger counts. All but CALENDAR are counted by a meter."""

    HOURS = "hours"
    DISTANCE = "distance"
    FUEL = "fuel"
    STARTS = "starts"
    CALENDAR = "calendar"


COUNTED = (Kind.HOURS, Kind.DISTANCE, Kind.FUEL, Kind.STARTS)

BASE_UNIT = {Kind.HOURS: "h", Kind.DISTANCE: "km", Kind.FUEL: "L", Kind.STARTS: "starts"}


@dataclass(frozen=True, slots=True)
class Unit:
    """A unit a meter may count in; `to_base` turns a figure into the base unit of its kind."""

    symbol: str
    kind: Kind
    to_base: Decimal


# Miles and gallons: NIST SP 811 (2008), Appendix B, exact factors.
UNITS = {
    unit.symbol: unit
    for unit in (
        Unit("h", Kind.HOURS, Decimal(1)),
        Unit("km", Kind.DISTANCE, Decimal(1)),
        Unit("mi", Kind.DISTANCE, Decimal("1.609344")),
        Unit("L", Kind.FUEL, Decimal(1)),
        Unit("galus", Kind.FUEL, Decimal("3.785411784")),
        Unit("galimp", Kind.FUEL, Decimal("4.54609")),
        Unit("starts", Kind.STARTS, Decimal(1)),
    )
}

SpanUnit = Literal["d", "w", "mo", "y"]
SPAN_UNITS: tuple[SpanUnit, ...] = ("d", "w", "mo", "y")


@dataclass(frozen=True, slots=True)
class Amount:
    """A counted figure as entered: exact value and unit."""

    value: Decimal
    unit: str

    @property
    def kind(self) -> Kind:
        """The kind of meter that counts this unit."""
        return UNITS[self.unit].kind

    @property
    def base(self) -> Decimal:
        """The figure in the base unit of its kind (h, km, L or starts)."""
        return to_base(self.value, self.unit)

    def __str__(self) -> str:
        return f"{plain(self.value)} {self.unit}"


@dataclass(frozen=True, slots=True)
class Figure:
    """A dial figure as typed: a bare number takes the unit of the meter it is read off."""

    value: Decimal
    unit: str | None = None

    @property
    def kind(self) -> Kind | None:
        """The kind of meter its unit belongs to, None for a bare number."""
        return UNITS[self.unit].kind if self.unit else None

    def __str__(self) -> str:
        return f"{plain(self.value)} {self.unit}" if self.unit else plain(self.value)


@dataclass(frozen=True, slots=True)
class Span:
    """A calendar span as entered: 12 mo, 1 y, 2 w, 90 d."""

    count: int
    unit: SpanUnit

    @property
    def months(self) -> int:
        """Whole months of a span in mo or y; 0 for one in d or w."""
        match self.unit:
            case "mo":
                return self.count
            case "y":
                return 12 * self.count
            case "d" | "w":
                return 0
            case _:
                assert_never(self.unit)

    @property
    def days(self) -> int:
        """Whole days of a span in d or w; 0 for one in mo or y."""
        match self.unit:
            case "d":
                return self.count
            case "w":
                return 7 * self.count
            case "mo" | "y":
                return 0
            case _:
                assert_never(self.unit)

    @property
    def nominal_days(self) -> int:
        """Length for shares and default warnings: a month counts 30 days, a year 365."""
        return self.count * {"d": 1, "w": 7, "mo": 30, "y": 365}[self.unit]

    def __str__(self) -> str:
        return f"{self.count} {self.unit}"


_PLACES = 15
"""Decimals kept in a base unit: far more than any dial has, few enough to drop what dividing left behind."""


def to_base(value: Decimal, unit: str) -> Decimal:
    """Turn a figure in `unit` into the base unit of its kind.

    Exact for every figure a person types; one that came out of `from_base` comes back as it went in.
    """
    base = value * UNITS[unit].to_base
    rounded = round(base, _PLACES)
    return base if base == rounded else rounded


def from_base(value: Decimal, unit: str) -> Decimal:
    """Turn a figure in the base unit into `unit`; exact where it divides, else to 28 digits."""
    return value / UNITS[unit].to_base


def plain(value: Decimal) -> str:
    """Write a figure without exponent or trailing zeros: 1484, 0.25, 1193.4."""
    text = format(value, "f")
    if "." in text:
        text = text.rstrip("0").rstrip(".")
    return "0" if text in {"-0", ""} else text


def tenth(value: Decimal) -> Decimal:
    """Round to the tenth for showing, away from 0 where that would hide a remainder."""
    rounded = round(value, 1)
    if rounded == 0 and value != 0:
        return Decimal("0.1") if value > 0 else Decimal("-0.1")
    return rounded


_FIGURE = re.compile(r"\s*(?P<number>[0-9]+(?:\.[0-9]+)?|\.[0-9]+)\s*(?P<unit>[A-Za-z]*)\s*", re.ASCII)
_CANONICAL = {symbol.lower(): symbol for symbol in (*UNITS, *SPAN_UNITS)}
_ALL_UNITS = "h km mi L galus galimp starts d w mo y"
# Limits of sense, far beyond any engine: they stop slipped keys, and keep every day reached within the calendar.
_MOST = 999_999_999
_LONGEST_DAYS = 36_500


def parse_figure(text: str) -> tuple[Decimal, str | None]:
    """Read "250h", "1234.5" or "12 mo" as a number and its unit, None where no unit stands.

    Raises Misread for anything else, a bare `gal` included: it does not say whose gallon; Refused for a
    figure no dial shows.
    """
    found = _FIGURE.fullmatch(text)
    if not found:
        raise Misread(
            f"{text!r} is not a figure", "write digits, a point for decimals, and a unit, such as 250h or 12mo"
        )
    unit = found["unit"].lower()
    if unit == "gal":
        raise Misread(f"{text!r} does not say which gallon", "write galus or galimp")
    if unit and unit not in _CANONICAL:
        raise Misread(f"{text!r} has the unknown unit {found['unit']!r}", f"use one of {_ALL_UNITS}")
    number = Decimal(found["number"])
    if number > _MOST:
        raise Refused(f"{text} cannot be right", f"give a figure up to {_MOST}")
    return number, _CANONICAL[unit] if unit else None


def parse_interval(text: str) -> Amount | Span:
    """Read an interval with its unit: "250h" or "12mo".

    Raises Misread where there is no unit, or a calendar span is not a whole number.
    """
    number, unit = parse_figure(text)
    if unit is None:
        raise Misread(f"{text!r} has no unit", f"add one of {_ALL_UNITS}, such as {plain(number)}h")
    if unit in UNITS:
        return Amount(number, unit)
    return parse_span(text)


def parse_dial(text: str) -> Figure:
    """Read a dial figure: "1234", "1234.5h", "5600 km". Raises Misread for a span of time."""
    number, unit = parse_figure(text)
    if unit is not None and unit not in UNITS:
        raise Misread(f"{text!r} is a span of time, not a dial figure", "write what the dial shows, such as 1234h")
    return Figure(number, unit)


def parse_span(text: str) -> Span:
    """Read a calendar span: "12mo", "2w". Raises Misread for anything else, Refused for more than a century."""
    number, unit = parse_figure(text)
    for span_unit in SPAN_UNITS:
        if unit == span_unit and number == int(number):
            span = Span(int(number), span_unit)
            if span.nominal_days > _LONGEST_DAYS:
                raise Refused(f"{text} cannot be right", "give a span of up to 100 years")
            return span
    raise Misread(f"{text!r} is not a whole number of days, weeks, months or years", "write it like 90d, 2w, 6mo or 1y")
