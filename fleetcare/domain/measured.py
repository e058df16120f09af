"""What was measured on an engine, as the rules see it: sheets of any kind, and what of the engine they ask for."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal
from typing import Any, NamedTuple

from fleetcare.domain.sheets import SheetValue

LASH = "lash"
COMPRESSION = "compression"
LEAKDOWN = "leakdown"
RUN = "run"
SPOT = "spot"
OIL = "oil"

SHEET_KINDS = (LASH, COMPRESSION, LEAKDOWN, RUN, SPOT, OIL)


@dataclass(frozen=True, slots=True)
class SheetWord:
    """Something a sheet says in a word: the purpose of a run, where air is heard at a point, the method of a test."""

    quantity: str
    text: str
    point: str = ""


class TopUp(NamedTuple):
    """Oil topped up by the log: at so many hours of life, so many litres."""

    life: Decimal
    litres: Decimal


@dataclass(frozen=True, slots=True)
class MeasuredSheet:
    """Measurements taken together on a day, known by the entry they came with; values as entered, in their own units.

    `gauge` is the gauge, tester or laboratory. `engine_hours` is the life total of the engine then. `received_on` is the
    day results came, where they came later. `logged_top_up` are the litres the log has as topped up on the oil of a sample
    that does not state them itself, None where it has none.
    `condition` is cold, hot or empty where nobody said.
    """

    entry: int
    kind: str
    on: date
    values: tuple[SheetValue, ...]
    words: tuple[SheetWord, ...] = ()
    gauge: str = ""
    engine_hours: Decimal | None = None
    received_on: date | None = None
    logged_top_up: Decimal | None = None
    condition: str = ""
    memo: dict[tuple[str, str], Any] = field(default_factory=dict, init=False, repr=False, compare=False)
    """What rules look up on this very sheet again and again, worked out once; no part of what was measured."""


@dataclass(frozen=True, slots=True)
class MeasuredEngine:
    """What rules ask of an engine: empty, 0 or None where the nameplate does not say.

    `banks` are its cylinders as they stand, row by row; `sump` is in L, `rated_kw` in kW, `altitude` of its
    site in m.
    """

    tag: str
    fuel: str = ""
    cylinders: int = 0
    banks: tuple[tuple[int, ...], ...] = ()
    adjuster: str = ""
    duty: str = ""
    oil_grade: str = ""
    sump: Decimal | None = None
    rated_kw: Decimal | None = None
    altitude: Decimal | None = None
    is_marine: bool | None = None


@dataclass(frozen=True, slots=True)
class Pools:
    """Earlier samples that say what is usual, by quantity, in the unit of the quantity: figures only, no bounds."""

    own: Mapping[str, tuple[Decimal, ...]] = field(default_factory=dict)
    family: Mapping[str, tuple[Decimal, ...]] = field(default_factory=dict)


NO_POOLS = Pools()
