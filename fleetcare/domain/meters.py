"""Meters and what was read off them.

Dial figures are in the meter's own unit; life totals are in the base unit of the kind.
"""

from dataclasses import dataclass
from datetime import date
from decimal import Decimal

from fleetcare.domain.quantities import Kind


@dataclass(frozen=True, slots=True)
class Meter:
    """A counter. `modulus` is the dial figure at which it rolls over, None where its digits are unknown."""

    id: int
    kind: Kind
    unit: str
    modulus: Decimal | None = None


@dataclass(frozen=True, slots=True)
class MeterFit:
    """A stretch of time in which a meter counted for an item.

    `from_on` None means since ever. `first` and `last` are dial figures at its ends; `unmetered` is
    what ran after the end without being counted, in the meter's unit.
    """

    meter: Meter
    from_on: date | None
    first: Decimal
    to_on: date | None = None
    last: Decimal | None = None
    unmetered: Decimal = Decimal(0)


@dataclass(frozen=True, slots=True)
class Reading:
    """A dated dial figure. Readings that are suspect or voided are not `accepted` and count for nothing."""

    id: int
    meter_id: int
    on: date
    value: Decimal
    rolled_over: bool = False
    entry_id: int | None = None
    accepted: bool = True


@dataclass(frozen=True, slots=True)
class Counter:
    """All that counts one kind for one item: the figure it came with (base unit), fits in date order, readings."""

    kind: Kind
    came_with: Decimal
    fits: tuple[MeterFit, ...]
    readings: tuple[Reading, ...]


@dataclass(frozen=True, slots=True)
class LifeReading:
    """A reading seen as a life total (base unit). `metered` leaves out what ran unmetered."""

    reading: Reading
    on: date
    life: Decimal
    metered: Decimal


@dataclass(frozen=True, slots=True)
class LifeFigure:
    """A life total (base unit) on a day; `approximate` where it was interpolated, shown with ~."""

    value: Decimal
    approximate: bool = False
