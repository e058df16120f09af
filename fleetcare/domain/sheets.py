"""Measurements taken together, the limits they are held against, and what that says of each."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal
from enum import StrEnum
from typing import NamedTuple

from fleetcare.domain.engines import Side

LASH = "lash"
SHIM = "shim"

NOT_DETECTED = "ND"
"""The qualifier of a value below all that could be detected."""


class Phase(StrEnum):
    """When a value was taken: before or after the work, in a dry or wet test, of fresh oil."""

    NONE = ""
    FOUND = "found"
    LEFT = "left"
    DRY = "dry"
    WET = "wet"
    NEW = "new"


class Verdict(StrEnum):
    """What a value calls for (words of ISO 13372)."""

    IN = "in"
    ALERT = "alert"
    ALARM = "alarm"
    NOT_JUDGED = "not judged"


class Place(StrEnum):
    """Where a value lies against its limits; an interval that straddles one is undecided."""

    IN = "in"
    BELOW = "below"
    ABOVE = "above"
    UNDECIDED = "undecided"


class Unjudged(StrEnum):
    """Why a value is kept and not judged."""

    NO_SPEC = "no spec"
    NO_RANGE = "no range"
    OTHER_CONDITION = "other condition"
    UNDECIDED = "undecided"
    NO_LIMIT_OF_ITS_OWN = "no limit of its own"


class CellKey(NamedTuple):
    """Which value of a sheet: what is measured, at which point, and when."""

    quantity: str
    point: str
    phase: Phase


@dataclass(frozen=True, slots=True)
class LashPoint:
    """Where a gap is measured: one valve, or the bridge over two of them (`valves` 2)."""

    name: str
    cylinder: int
    side: Side
    valves: int = 1


@dataclass(frozen=True, slots=True)
class SheetValue:
    """One value as entered, in its own unit: a figure, or `low` (goes) and `high` (does not go).

    `qualifier` is "<" for a bound, "ND" for nothing detected; something said in a word has that word for it, and no value.
    """

    quantity: str
    point: str
    phase: Phase
    value: Decimal | None
    low: Decimal | None
    high: Decimal | None
    unit: str
    qualifier: str = ""

    @property
    def ends(self) -> tuple[Decimal, Decimal]:
        """The least and the most it can be; the same twice for a plain figure, 0 twice for nothing detected."""
        if self.low is not None and self.high is not None:
            return self.low, self.high
        most = self.value or Decimal(0)
        return (Decimal(0) if self.qualifier else most), most

    def __str__(self) -> str:
        """The value as a sheet file has it: 0.25, 0.25..0.30, <0.05."""
        if self.low is not None and self.high is not None:
            return f"{self.low:f}..{self.high:f}"
        return self.qualifier + (f"{self.value:f}" if self.value is not None else "")


@dataclass(frozen=True, slots=True)
class Sheet:
    """Measurements taken together on a day, known by the entry they came with.

    `condition` is cold, hot or empty where nobody said. `received_on` is the day results came, where they came later.
    """

    entry: int
    kind: str
    on: date
    values: tuple[SheetValue, ...]
    condition: str = ""
    gauge: str = ""
    by: str = ""
    note: str = ""
    lab_number: str = ""
    received_on: date | None = None


@dataclass(frozen=True, slots=True)
class LashSpec:
    """Check ranges (least and most, both in) and settings of the valve lash from a day on, in one unit, mm or in.

    `condition` is cold, hot or any. A side without an entry has no range, or no setting.
    """

    from_on: date
    unit: str
    condition: str = "any"
    ranges: Mapping[Side, tuple[Decimal, Decimal]] = field(default_factory=dict)
    settings: Mapping[Side, Decimal] = field(default_factory=dict)


def spec_on(specs: tuple[LashSpec, ...], day: date) -> LashSpec | None:
    """Give the spec in force on a day, None before the first. Specs are in date order."""
    begun = [spec for spec in specs if spec.from_on <= day]
    return begun[-1] if begun else None


@dataclass(frozen=True, slots=True)
class Judgement:
    """What the limits say of one value.

    `limits` are its check range and `unit` theirs; `limit` is the end it breaks or is nearest to. `margin` is how far
    inside that it lies, below 0 outside, an interval by its worse end; `off_least` how far outside it lies at least.
    `taken` is cold, hot or any, as the sheet says or else as its limits ask; `asked` is what those ask.
    """

    value: SheetValue
    verdict: Verdict
    place: Place | None = None
    limits: tuple[Decimal, Decimal] | None = None
    limit: Decimal | None = None
    margin: Decimal | None = None
    off_least: Decimal = Decimal(0)
    unit: str = ""
    unjudged: Unjudged | None = None
    taken: str = ""
    asked: str = ""

    @property
    def is_out(self) -> bool:
        """Whether the value lies outside its limits for certain."""
        return self.verdict in {Verdict.ALERT, Verdict.ALARM}


@dataclass(frozen=True, slots=True)
class LashStand:
    """What a sheet says of the whole engine, each a tuple of names of points as the engine stands.

    `missing` have no value; `found_out` were found outside their range; `unset` were found outside, or could not be
    told, and have no left value; `left_out` are outside as they now stand; `untold` could not be judged as they stand.
    """

    missing: tuple[str, ...] = ()
    found_out: tuple[str, ...] = ()
    unset: tuple[str, ...] = ()
    left_out: tuple[str, ...] = ()
    untold: tuple[str, ...] = ()

    @property
    def is_complete(self) -> bool:
        """Whether every point was left alone for good reason, or set."""
        return not self.missing and not self.unset
