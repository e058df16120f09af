"""Engines, the machines they sit in, and the dated facts about them."""

from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from enum import StrEnum

from fleetcare.domain.quantities import Kind


class Layout(StrEnum):
    """How the cylinders stand."""

    INLINE = "inline"
    V = "v"
    OPPOSED = "opposed"
    SINGLE = "single"


class Side(StrEnum):
    """What a valve lets through: fresh charge in, or exhaust out."""

    INTAKE = "intake"
    EXHAUST = "exhaust"


class Bridged(StrEnum):
    """On which side two valves of a cylinder hang under one bridge, so that there is one gap for both."""

    NONE = "none"
    INTAKE = "intake"
    EXHAUST = "exhaust"
    BOTH = "both"


class Status(StrEnum):
    """What may be asked of an engine on a day."""

    IN_SERVICE = "in service"
    LAID_UP = "laid up"
    STOOD_DOWN = "stood down"
    WITHDRAWN = "withdrawn"


@dataclass(frozen=True, slots=True)
class StatusSpell:
    """A status from `from_on` (counted) until the next spell begins (its day not counted)."""

    status: Status
    from_on: date
    why: str = ""
    by: str = ""


@dataclass(frozen=True, slots=True)
class DutyFactor:
    """Shortens the intervals of one kind from `from_on` until the next factor of that kind; 0 < factor <= 1."""

    kind: Kind
    factor: Decimal
    from_on: date
    why: str


@dataclass(frozen=True, slots=True)
class Adjuster:
    """How the lash is set, as far as the nameplate says: `kind` is screw, shim, hydraulic or empty; lengths in mm.

    `screw_at` is where on the rocker the screw sits: pushrod, valve, centre or empty.
    """

    kind: str = ""
    screw_pitch: Decimal | None = None
    screw_at: str = ""
    rocker_ratio: Decimal | None = None
    shim_step: Decimal | None = None


@dataclass(frozen=True, slots=True)
class ValveTrain:
    """What of an engine decides where its valves are, when they may be set, and how."""

    cylinders: int
    valves_per_cylinder: int
    bridged: Bridged = Bridged.NONE
    layout: Layout | None = None
    numbering: str = ""
    firing_order: tuple[int, ...] = ()
    adjuster: Adjuster = Adjuster()


@dataclass(frozen=True, slots=True)
class Item:
    """An engine or a machine: whatever carries a tag, meters and tasks.

    `machine` is the tag of the machine an engine is fitted in on the day asked about, and a
    machine's own tag for a machine. `start_at` are the figures the item came with, base units.
    """

    id: int
    tag: str
    is_engine: bool
    name: str = ""
    site: str = ""
    machine: str = ""
    in_service_on: date | None = None
    as_new: bool = False
    spells: tuple[StatusSpell, ...] = ()
    factors: tuple[DutyFactor, ...] = ()


def status_on(spells: tuple[StatusSpell, ...], day: date) -> Status:
    """Give the status in force on a day; in service where no spell says otherwise. Spells are in date order."""
    current = Status.IN_SERVICE
    for spell in spells:
        if spell.from_on > day:
            break
        current = spell.status
    return current


def factor_on(factors: tuple[DutyFactor, ...], kind: Kind, day: date) -> Decimal:
    """Give the duty factor of a kind in force on a day; 1 where none is. Factors are in date order."""
    current = Decimal(1)
    for factor in factors:
        if factor.kind is kind and factor.from_on <= day:
            current = factor.factor
    return current
