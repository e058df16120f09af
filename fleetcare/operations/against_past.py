"""A dial figure held against its meter's past before it is stored: what it collides with, what would fall off."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain import meters as facts
from fleetcare.domain.meters import LifeReading
from fleetcare.domain.quantities import BASE_UNIT, Figure, from_base, plain, to_base
from fleetcare.errors import Doubted, Refused
from fleetcare.operations.find import FoundItem, FoundMeter
from fleetcare.operations.load import load_counters
from fleetcare.operations.settings import cap_per_day
from fleetcare.rules.meters import CounterHistory, counter_history
from fleetcare.rules.readings import breaks_rule, misfits, plausible_chain

if TYPE_CHECKING:
    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class NewReading:
    """A reading about to be stored, not yet held against the past."""

    on: date
    figure: Figure
    rolled_over: bool = False
    note: str = ""
    by: str | None = None
    entry_id: int | None = None
    import_key: str | None = None


@dataclass(frozen=True, slots=True)
class Collision:
    """Why the new reading at `place` cannot be true together with its neighbour."""

    place: int
    why: str
    neighbour: LifeReading


def hold_against_past(
    connection: "Connection", item: FoundItem, meter: FoundMeter, new: Sequence[NewReading]
) -> tuple[CounterHistory, list[Collision]]:
    """See a meter's readings with new ones among them, and what collides with its neighbour in time.

    In what comes back the new readings have the ids -1, -2, ... in the order given. Refuses a day on
    which the meter did not count.
    """
    history = load_counters(connection, [meter.owner_id], date.max)[meter.owner_id][meter.kind]
    added = tuple(
        facts.Reading(-1 - place, meter.id, one.on, dial_of(one.figure, meter), one.rolled_over, one.entry_id)
        for place, one in enumerate(new)
    )
    for one, reading in zip(new, added, strict=True):
        if history.life_at(reading.value, one.on) is None:
            raise Refused(
                f"the {meter.kind} meter of {item.tag} did not count on {one.on}", "check the day, or edit --in-service"
            )
    counter = history.counter
    trial = counter_history(replace(counter, readings=(*counter.readings, *added)), date.max)
    cap = cap_per_day(connection, meter.kind)
    figures = [(r.on, r.metered) for r in trial.readings]
    collisions = []
    for wrong, other in misfits(figures, [r.reading.id < 0 for r in trial.readings], cap).items():
        why = breaks_rule(figures[min(wrong, other)], figures[max(wrong, other)], cap, BASE_UNIT[meter.kind])
        assert why is not None
        collisions.append(Collision(-1 - trial.readings[wrong].reading.id, why, trial.readings[other]))
    return trial, collisions


def say_collision(item: FoundItem, meter: FoundMeter, new: NewReading, collision: Collision, other: str = "") -> str:
    """Say which stored reading a new one collides with, and how; `other` is what else the neighbour is called."""
    neighbour = collision.neighbour.reading
    return (
        f"{say_figure(new.figure, meter)} on {new.on} does not fit {other or f'reading {neighbour.id} of {item.tag}'}"
        f" ({plain(neighbour.value)} {meter.unit} on {neighbour.on}): {collision.why}"
    )


def what_falls_off(connection: "Connection", meter: FoundMeter, trial: CounterHistory) -> tuple[int, ...]:
    """Give the ids of readings that are not on the longest plausible chain that holds the new one of a trial."""
    figures = [(r.on, r.metered) for r in trial.readings]
    holding = next(place for place, r in enumerate(trial.readings) if r.reading.id < 0)
    kept = plausible_chain(figures, cap_per_day(connection, meter.kind), holding)
    return tuple(r.reading.id for place, r in enumerate(trial.readings) if place not in kept)


def refuse_unlike_dial(item: FoundItem, meter: FoundMeter, new: NewReading, trial: CounterHistory) -> None:
    """Refuse a figure the dial has no digits for, or one below the meter's first."""
    start = next(start for start in trial.starts if start.fit.meter.id == meter.id)
    modulus, dial = start.fit.meter.modulus, dial_of(new.figure, meter)
    if new.rolled_over and modulus is None:
        raise Refused(
            f"the digits of the {meter.kind} meter of {item.tag} are not known",
            f"give them first: fleetcare {'engine' if item.is_engine else 'machine'} edit"
            f" {item.tag} --meter-digits {meter.kind}:5.1",
        )
    if modulus is not None and dial >= modulus:
        raise Refused(
            f"{say_figure(new.figure, meter)} does not fit on {modulus.adjusted()} digits", "check the figure"
        )
    if dial < start.first and not any(turn.meter_id == meter.id for turn in trial.turns):
        raise Doubted(
            f"{say_figure(new.figure, meter)} lies below {plain(start.first)} {meter.unit}, the meter's first figure",
            "check the figure",
        )


def same_reading(trial: CounterHistory, meter: FoundMeter, new: NewReading) -> int | None:
    """Find the stored, accepted reading of the same day and figure among those of a trial.

    A log entry's own reading is stored all the same.
    """
    if new.entry_id is not None:
        return None
    dial = dial_of(new.figure, meter)
    for reading in trial.counter.readings:
        same = (reading.meter_id, reading.on, reading.value) == (meter.id, new.on, dial)
        if reading.id > 0 and same and reading.accepted and reading.rolled_over == new.rolled_over:
            return reading.id
    return None


def dial_of(figure: Figure, meter: FoundMeter) -> Decimal:
    """Give a figure in the meter's own unit."""
    if figure.unit in {None, meter.unit}:
        return figure.value
    return from_base(to_base(figure.value, figure.unit), meter.unit)


def say_figure(figure: Figure, meter: FoundMeter) -> str:
    """Say a figure with its own unit, else the meter's."""
    return f"{plain(figure.value)} {figure.unit or meter.unit}"
