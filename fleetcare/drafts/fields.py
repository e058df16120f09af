"""Kinds of field that drafts share: each reads text into a typed value or says why it cannot."""

import re
from collections.abc import Callable, Iterable
from datetime import date
from decimal import Decimal
from typing import Annotated, Any

from pydantic import BeforeValidator

from fleetcare.domain.days import parse_day
from fleetcare.domain.numbers import parse_number, parse_whole
from fleetcare.domain.quantities import (
    COUNTED,
    UNITS,
    Amount,
    Figure,
    Kind,
    Span,
    parse_dial,
    parse_interval,
    parse_span,
)
from fleetcare.errors import Misread, Refused

FUEL_UNITS = ("L", "galus", "galimp")
_DIGITS = re.compile(r"[1-9](\.[0-9])?")


def _text(value: object) -> str:
    """Trim, and turn a run of white space, line breaks too, into one space; refuse nothing left."""
    text = " ".join(str(value).split())
    if not text:
        raise Refused("it is empty", "write at least one letter")
    return text


def _typed(parse: Callable[[str], Any], *kinds: type) -> Callable[[object], Any]:
    """Read text with a parser, and let a value through that is of the right kind already."""
    return lambda value: value if isinstance(value, kinds) else parse(str(value))


def _several(parse: Callable[[object], Any]) -> Callable[[object], Any]:
    """Read a list of values, or one text that joins them with semicolons as a CSV cell does."""

    def read(value: object) -> tuple[Any, ...]:
        if isinstance(value, str):
            return tuple(parse(part.strip()) for part in value.split(";") if part.strip())
        assert isinstance(value, Iterable)
        return tuple(parse(part) for part in value)

    return read


def _number(value: object) -> Decimal:
    return value if isinstance(value, Decimal) else parse_number(str(value).strip())


def _positive(value: object) -> Decimal:
    number = _number(value)
    if number <= 0:
        raise Refused(f"{value} cannot be right", "give a figure above 0")
    return number


def _count(value: object) -> int:
    count = value if isinstance(value, int) else parse_whole(str(value).strip())
    if count <= 0:
        raise Refused(f"{value} cannot be right", "give a whole number above 0")
    return count


def parse_day_or_dial(text: str) -> date | Figure:
    """Read a DATE or a VALUE: a day where it is written with hyphens, else a dial figure."""
    return parse_day(text) if text.count("-") == 2 else parse_dial(text)


def parse_kind(text: str) -> Kind:
    """Read a trigger kind by name."""
    try:
        return Kind(text.strip().lower())
    except ValueError:
        raise Misread(f"{text!r} is no kind of trigger", f"use one of {', '.join(Kind)}") from None


def parse_counted_kind(text: str) -> Kind:
    """Read a meter kind by name. Raises Misread, and Refused for the calendar."""
    name = text.strip().lower()
    remedy = f"use one of {', '.join(COUNTED)}"
    if name == Kind.CALENDAR:
        raise Refused("no meter counts the calendar", remedy)
    if name not in COUNTED:
        raise Misread(f"no meter counts {text.strip()!r}", remedy)
    return Kind(name)


def parse_litres(text: str) -> Amount:
    """Read a volume of oil or fuel: "8L", "2galus". Raises Misread for anything else."""
    figure = parse_dial(text)
    if figure.unit not in FUEL_UNITS:
        raise Misread(f"{text!r} is not a volume", "write it like 8L, 2galus or 2galimp")
    if figure.value <= 0:
        raise Refused(f"{text} cannot be right", "give a volume above 0")
    return Amount(figure.value, figure.unit)


def parse_hours(text: str) -> Decimal:
    """Read working time: "1.5h". Raises Misread for another unit."""
    figure = parse_dial(text)
    if figure.unit not in {None, "h"}:
        raise Misread(f"{text!r} is not working time", "write it like 1.5h")
    return figure.value


def parse_meter(text: str) -> tuple[Kind, str]:
    """Read KIND[:UNIT] as a kind and the unit its meter counts in."""
    name, _, symbol = text.partition(":")
    kind = parse_counted_kind(name)
    if not symbol:
        return kind, next(unit.symbol for unit in UNITS.values() if unit.kind is kind)
    unit = next((u for u in UNITS.values() if u.symbol.lower() == symbol.strip().lower()), None)
    if unit is None or unit.kind is not kind:
        fitting = ", ".join(u.symbol for u in UNITS.values() if u.kind is kind)
        raise Misread(f"{symbol!r} is no unit of {kind}", f"use one of {fitting}")
    return kind, unit.symbol


def parse_digits(text: str) -> tuple[Kind | None, int, int]:
    """Read [KIND:]BEFORE.AFTER as a kind (None where one meter goes without saying) and digits."""
    name, _, digits = text.rpartition(":")
    if not _DIGITS.fullmatch(digits):
        raise Misread(
            f"{text!r} is not digits of a dial", "write 1 to 9 digits before the point and those after, such as 5.1"
        )
    before, _, after = digits.partition(".")
    return parse_counted_kind(name) if name else None, int(before), int(after or 0)


def parse_part(text: str) -> tuple[str, Decimal]:
    """Read NAME[:QUANTITY] as a part and how many of it."""
    name, colon, quantity = text.rpartition(":")
    return (_text(name), _positive(quantity)) if colon else (_text(text), Decimal(1))


Text = Annotated[str, BeforeValidator(_text)]
Note = Annotated[str, BeforeValidator(lambda value: str(value).strip())]
Day = Annotated[date, BeforeValidator(_typed(parse_day, date))]
Number = Annotated[Decimal, BeforeValidator(_number)]
Positive = Annotated[Decimal, BeforeValidator(_positive)]
Count = Annotated[int, BeforeValidator(_count)]
Hours = Annotated[Decimal, BeforeValidator(_typed(parse_hours, Decimal))]
Litres = Annotated[Amount, BeforeValidator(_typed(parse_litres, Amount))]
SpanField = Annotated[Span, BeforeValidator(_typed(parse_span, Span))]
Dial = Annotated[Figure, BeforeValidator(_typed(parse_dial, Figure))]
KindField = Annotated[Kind, BeforeValidator(_typed(parse_kind, Kind))]
MeterKind = Annotated[Kind, BeforeValidator(_typed(parse_counted_kind, Kind))]
Texts = Annotated[tuple[str, ...], BeforeValidator(_several(_text))]
Dials = Annotated[tuple[Figure, ...], BeforeValidator(_several(_typed(parse_dial, Figure)))]
DaysOrDials = Annotated[tuple[date | Figure, ...], BeforeValidator(_several(_typed(parse_day_or_dial, date, Figure)))]
Intervals = Annotated[tuple[Amount | Span, ...], BeforeValidator(_several(_typed(parse_interval, Amount, Span)))]
Meters = Annotated[tuple[tuple[Kind, str], ...], BeforeValidator(_several(_typed(parse_meter, tuple)))]
Digits = Annotated[tuple[tuple[Kind | None, int, int], ...], BeforeValidator(_several(_typed(parse_digits, tuple)))]
Parts = Annotated[tuple[tuple[str, Decimal], ...], BeforeValidator(_several(_typed(parse_part, tuple)))]
