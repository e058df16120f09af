"""What every bench sum is made of: its options, and an answer as a sentence with its working and as named figures."""

from collections.abc import Callable
from dataclasses import dataclass
from decimal import Decimal
from enum import Enum
from types import SimpleNamespace
from typing import Any

from fleetcare.domain.numbers import parse_number, parse_whole
from fleetcare.domain.quantities import plain
from fleetcare.errors import Misread

Given = SimpleNamespace
"""What was given for the options of a sum, by their names with underscores; None for what was not."""


@dataclass(frozen=True, slots=True)
class Answer:
    """What a sum gives: a sentence with the working, and the figures by name, unrounded."""

    sentence: str
    keys: dict[str, Any]


class Takes(Enum):
    """What an option takes, with what reads it. Each raises Misread for anything else."""

    NUMBER = "number"
    WHOLE = "whole"
    NUMBERS = "numbers"
    TEXT = "text"

    def read(self, text: str) -> Any:
        """Read what was typed."""
        if self is Takes.NUMBER:
            return parse_number(text)
        if self is Takes.WHOLE:
            return parse_whole(text)
        return [parse_number(part) for part in text.split("-")] if self is Takes.NUMBERS else text.strip()


@dataclass(frozen=True, slots=True)
class Option:
    """One thing a sum asks for. `words` are the only ones it may be; `plate` names what of a nameplate it is."""

    name: str
    tells: str
    metavar: str | None = None
    takes: Takes = Takes.NUMBER
    is_required: bool = False
    default: Any = None
    words: tuple[str, ...] = ()
    plate: str = ""

    @property
    def field(self) -> str:
        """The name it is given by."""
        return self.name.replace("-", "_")

    def read(self, text: str) -> Any:
        """Read what was typed for it. Raises Misread for what it cannot be."""
        if self.words and text.strip() not in self.words:
            raise Misread(f"{text.strip()!r} is not known here", f"write {' or '.join(self.words)}")
        return self.takes.read(text)


@dataclass(frozen=True, slots=True)
class Sum:
    """A bench sum by its name. With `is_one_of` exactly one of its options is given."""

    name: str
    summary: str
    options: tuple[Option, ...]
    answer: Callable[[Given], Answer]
    is_one_of: bool = False


def given_of(wanted: Sum, texts: dict[str, str]) -> Given:
    """Read what was typed for the options of a sum, by their names. Raises Misread for what is wrong or missing."""
    values = {option.field: option.default for option in wanted.options}
    for option in wanted.options:
        if text := texts.get(option.name, "").strip():
            values[option.field] = option.read(text)
    missing = [option.name for option in wanted.options if option.is_required and values[option.field] is None]
    if missing:
        raise Misread(f"missing: {', '.join(missing)}", "give it")
    told = [option.name for option in wanted.options if values[option.field] is not None]
    if wanted.is_one_of and len(told) != 1:
        raise Misread(f"{len(told)} figures are given", "give exactly one of them")
    return Given(**values)


def all_or_none(given: Given, *options: str) -> bool:
    """Whether options that only make sense together were given. Raises Misread where some are missing."""
    missing = [option for option in options if getattr(given, option.replace("-", "_")) is None]
    if missing and len(missing) < len(options):
        raise Misread(
            f"missing: {', '.join(f'--{option}' for option in missing)}",
            f"give all of {', '.join(f'--{option}' for option in options)}, or none",
        )
    return not missing


def shown(value: Decimal) -> str:
    """Round for reading: four decimals at most, fewer where they are zeros."""
    return plain(round(value, 4))
