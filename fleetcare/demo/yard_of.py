"""A generated yard of any size, to try long lists on: ten tasks an engine, invented, the same again for the same size.

Its people began to use the tool on the anchor day: all its history is in the card index.
"""

from dataclasses import dataclass
from random import Random

from fleetcare.demo.items import Item, Kept, Meter, Values
from fleetcare.demo.plans import Counted, Dated, Each, Plan
from fleetcare.demo.plates import DIGGER, PUMP, SET, SMALL_DIESEL, TRACTOR, Plate
from fleetcare.demo.tasks import (
    AIR_FILTER,
    BATTERIES,
    BELTS,
    COOLANT,
    FUEL_FILTER,
    HOSES,
    LASH,
    LIFTING,
    OIL,
    WEEKLY,
)
from fleetcare.demo.use import Rhythm, digger, now_and_then, steady, tractor, winter_pump
from fleetcare.errors import Refused

MOST_ENGINES = 2000

_SITES = ("North Sluice", "Withy Lode", "Hern Corner", "Ousel Outfall", "Board Yard", "Mere Bank", "Gault Drove")
_CAME = (760, 820)
"""How many days ago engines came, from and to."""

_LATE = 12
"""In so many of a hundred tasks the work is overdue."""


@dataclass(frozen=True, slots=True)
class _Kind:
    """Engines of one kind: what their tags begin with, what they are called, their plate, and how they run."""

    prefix: str
    name: str
    plate: Plate
    rhythm: Rhythm


_KINDS = (
    _Kind("PD", "Pump diesel", PUMP, winter_pump),
    _Kind("TE", "Engine of a tractor", TRACTOR, tractor),
    _Kind("DE", "Engine of a digger", DIGGER, digger),
    _Kind("GS", "Generating set", SET, steady(20, 110, 0.5, every_day=True)),
    _Kind("CP", "Compressor", SMALL_DIESEL, now_and_then),
)

_LASH = {**LASH, "needs_sheet": ""}  # nothing is measured here: all work comes from files of cards
_COUNTED: tuple[tuple[Values, int], ...] = ((OIL, 250), (FUEL_FILTER, 500), (AIR_FILTER, 500), (_LASH, 1000))
"""Tasks by running hours, with how many."""

_DATED: tuple[tuple[Values, int], ...] = ((COOLANT, 24), (BATTERIES, 6), (BELTS, 12), (HOSES, 12), (LIFTING, 12))
"""Tasks by the calendar, with how many months."""


def yard_of(engines: int) -> tuple[Item, ...]:
    """Give so many engines with their meters, tasks and how they were kept up. Refuses none, and more than 2000."""
    if not 1 <= engines <= MOST_ENGINES:
        raise Refused(f"a yard of {engines} engines cannot be made up", f"give a number from 1 to {MOST_ENGINES}")
    return tuple(_engine(number, _KINDS[number % len(_KINDS)]) for number in range(1, engines + 1))


def _engine(number: int, kind: _Kind) -> Item:
    tag = f"{kind.prefix}-{number:04d}"
    random = Random(tag)
    return Item(
        tag,
        random.randint(*_CAME),
        {**kind.plate, "name": kind.name, "site": random.choice(_SITES)},
        (Meter("hours", "h", random.randint(0, 9000), kind.rhythm, unread=random.randint(0, 40)),),
        tasks=(
            *(Kept({**task, "every": [f"{hours}h"]}, _counted(random, hours)) for task, hours in _COUNTED),
            *(Kept({**task, "every": [f"{months}mo"]}, _dated(random, months)) for task, months in _DATED),
            Kept(WEEKLY, Each(0, skipped=random.choice((0, 0, 0, 1)), most=2)),
        ),
    )


def _counted(random: Random, hours: int) -> Plan:
    return Counted(hours, _left(random, hours), most=1)


def _dated(random: Random, months: int) -> Plan:
    return Dated(months, _left(random, months * 30), most=1)


def _left(random: Random, whole: int) -> int:
    """Give how much of an interval is left; a small part of it is gone by where the work is late."""
    return -random.randint(1, whole // 10) if random.randrange(100) < _LATE else random.randint(0, whole - 1)
