"""Write down what a meter shows: held against its past, explained, doubted, voided, restored."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from datetime import date
from decimal import Decimal
from itertools import pairwise
from typing import TYPE_CHECKING

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import Item, Meter, Reading, ReadingMark
from fleetcare.domain import meters as facts
from fleetcare.domain.meters import LifeReading
from fleetcare.domain.quantities import BASE_UNIT, Figure, Kind, from_base, plain, to_base
from fleetcare.drafts.work import ReadingDraft
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem, FoundMeter, find_item, find_meters, pick_meter
from fleetcare.operations.load import load_counters
from fleetcare.operations.names import person_id
from fleetcare.operations.settings import cap_per_day
from fleetcare.operations.swap_meters import swap_meter
from fleetcare.rules.meters import CounterHistory, counter_history
from fleetcare.rules.readings import breaks_rule, misfits, plausible_chain

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

_EXPLAIN = "check it; if it is right give --sure, or explain it with --rolled-over or --replaced OLD_LAST NEW_FIRST"


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


@dataclass(frozen=True, slots=True)
class Recorded:
    """What came of a reading: its id, what it says, and the ids of readings now suspect because it was taken for sure."""

    id: int
    shown: str
    suspects: tuple[int, ...] = ()
    is_new: bool = True


def record_reading(session: "Session", draft: ReadingDraft) -> Recorded:
    """Store a reading. Refuses one that breaks with the meter's past, unless explained or sure."""
    item = find_item(session.connection(), draft.tag)
    meters = find_meters(session.connection(), item.id, draft.on)
    meter = pick_meter(meters, draft.value, item.tag, draft.meter)
    if draft.replaced is not None:
        meter = _replace_meter(session, item, meter, draft)
    new = NewReading(draft.on, draft.value, draft.rolled_over, draft.note, draft.by, import_key=draft.import_key)
    return store_reading(session, item, meter, new, sure=draft.sure)


def store_reading(
    session: "Session",
    item: FoundItem,
    meter: FoundMeter,
    new: NewReading,
    *,
    sure: bool = False,
    remedy: str = _EXPLAIN,
) -> Recorded:
    """Store one reading of a meter, or find the one that says the same already."""
    trial, collisions = hold_against_past(session, item, meter, [new])
    refuse_unlike_dial(item, meter, new, trial)
    if collisions and not sure:
        raise Refused(say_collision(item, meter, new, collisions[0]), remedy)
    shown = f"{item.tag} shows {_shown(new.figure, meter)}"
    known = _same_reading(session, meter, new)
    if known is not None:
        return Recorded(known, shown, is_new=False)
    (reading_id,) = insert_readings(session, [(meter, new)])
    suspects = _doubt_what_falls_off(session, meter, trial, new.on) if collisions else ()
    return Recorded(reading_id, shown, suspects)


def insert_readings(session: "Session", found: Iterable[tuple[FoundMeter, NewReading]]) -> list[int]:
    """Store readings as entered, unchecked, and give their ids."""
    rows = [
        Reading(
            meter_id=meter.id,
            on=new.on,
            value=new.figure.value,
            unit=new.figure.unit or meter.unit,
            rolled_over=new.rolled_over,
            entry_id=new.entry_id,
            note=new.note,
            person_id=person_id(session, new.by),
            import_key=new.import_key,
        )
        for meter, new in found
    ]
    session.add_all(rows)
    session.flush()
    return [row.id for row in rows]


def hold_against_past(
    session: "Session", item: FoundItem, meter: FoundMeter, new: Sequence[NewReading]
) -> tuple[CounterHistory, list[Collision]]:
    """See a meter's readings with new ones among them, and what collides with its neighbour in time.

    In what comes back the new readings have the ids -1, -2, ... in the order given. Refuses a day on
    which the meter did not count.
    """
    connection = session.connection()
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
        f"{_shown(new.figure, meter)} on {new.on} does not fit {other or f'reading {neighbour.id} of {item.tag}'}"
        f" ({plain(neighbour.value)} {meter.unit} on {neighbour.on}): {collision.why}"
    )


def item_of_reading(session: "Session", reading_id: int) -> FoundItem:
    """Give whose meter a reading was read off; refuses a number that is no reading."""
    return _owner(session, _reading(session, reading_id))


def void_reading(session: "Session", reading_id: int, why: str, on: date) -> None:
    """Void a reading, with a reason; it counts for nothing from now on. Refuses one that others rest on."""
    row = _reading(session, reading_id)
    if _mark_of(session, reading_id) == "void":
        raise Refused(f"reading {reading_id} is voided already", f"bring it back with --restore {reading_id}")
    session.add(ReadingMark(reading_id=row.id, mark="void", why=why, on=on))
    session.flush()
    if row.rolled_over:
        _refuse_fall(session, row)


def _refuse_fall(session: "Session", row: Reading) -> None:
    """Refuse to void the reading that tells of a turn of the dial while later ones need that turn."""
    meter = session.get_one(Meter, row.meter_id)
    history = load_counters(session.connection(), [meter.item_id], date.max)[meter.item_id][Kind(meter.kind)]
    for earlier, later in pairwise(history.readings):
        if later.metered < earlier.metered:
            raise Refused(
                f"reading {later.reading.id} rests on the turn of the dial that reading {row.id} tells of",
                "void that one first, or enter another reading with --rolled-over before it",
            )


def restore_reading(session: "Session", reading_id: int, on: date, *, why: str = "", sure: bool = False) -> Recorded:
    """Let a suspect or voided reading count again. Refuses one that breaks with the meter's past, unless sure."""
    row = _reading(session, reading_id)
    if _mark_of(session, reading_id) not in {"suspect", "void"}:
        raise Refused(f"reading {reading_id} counts already", "nothing needs to be done")
    item = _owner(session, row)
    owner = session.get_one(Meter, row.meter_id)
    meter = FoundMeter(owner.id, Kind(owner.kind), owner.unit, owner.item_id)
    again = NewReading(row.on, Figure(row.value, row.unit), row.rolled_over)
    trial, collisions = hold_against_past(session, item, meter, [again])
    if collisions and not sure:
        raise Refused(say_collision(item, meter, again, collisions[0]), "void that one first, or give --sure")
    session.add(ReadingMark(reading_id=row.id, mark="restored", why=why, on=on))
    session.flush()
    suspects = _doubt_what_falls_off(session, meter, trial, on) if collisions else ()
    return Recorded(row.id, f"{item.tag} shows {_shown(again.figure, meter)}", suspects)


def _doubt_what_falls_off(session: "Session", meter: FoundMeter, trial: CounterHistory, on: date) -> tuple[int, ...]:
    """Mark as suspect what is not on the longest plausible chain that holds the new reading."""
    cap = cap_per_day(session.connection(), meter.kind)
    figures = [(r.on, r.metered) for r in trial.readings]
    holding = next(place for place, r in enumerate(trial.readings) if r.reading.id < 0)
    kept = plausible_chain(figures, cap, holding)
    fallen = tuple(r.reading.id for place, r in enumerate(trial.readings) if place not in kept)
    for reading_id in fallen:
        session.add(ReadingMark(reading_id=reading_id, mark="suspect", why="a later reading was taken for sure", on=on))
    session.flush()
    return fallen


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
        raise Refused(f"{_shown(new.figure, meter)} does not fit on {modulus.adjusted()} digits", "check the figure")
    if dial < start.first and not any(turn.meter_id == meter.id for turn in trial.turns):
        raise Refused(
            f"{_shown(new.figure, meter)} lies below {plain(start.first)} {meter.unit}, the meter's first figure",
            "check the figure",
        )


def _replace_meter(session: "Session", item: FoundItem, old: FoundMeter, draft: ReadingDraft) -> FoundMeter:
    """End the old meter at its last figure, which becomes a reading, and begin the new one."""
    assert draft.replaced is not None
    last, first = draft.replaced
    unmetered = draft.unmetered or Figure(Decimal(0))
    for figure in (last, first, unmetered):
        if figure.kind not in {None, old.kind}:
            raise Refused(f"{figure} is not a figure of the {old.kind} meter", "give it in the meter's unit")
    ending = NewReading(draft.on, last, note="last figure of a replaced meter", by=draft.by)
    trial, _ = hold_against_past(session, item, old, [])
    later = next((r.reading for r in trial.readings if r.reading.meter_id == old.id and r.on > draft.on), None)
    if later is not None:
        raise Refused(
            f"reading {later.id} was read off the old meter of {item.tag} on {later.on}, after {draft.on}",
            "give the day the meter was changed, or void that reading",
        )
    store_reading(session, item, old, ending, remedy="check OLD_LAST, or void the reading it collides with")
    last_dial, first_dial, unmetered_dial = (dial_of(figure, old) for figure in (last, first, unmetered))
    return swap_meter(session, old, draft.on, last=last_dial, first=first_dial, unmetered=unmetered_dial)


def _same_reading(session: "Session", meter: FoundMeter, new: NewReading) -> int | None:
    """Find an accepted reading of the same day and figure; a log entry's own reading is stored all the same."""
    if new.entry_id is not None:
        return None
    history = load_counters(session.connection(), [meter.owner_id], date.max)[meter.owner_id][meter.kind]
    dial = dial_of(new.figure, meter)
    for reading in history.counter.readings:
        same = (reading.meter_id, reading.on, reading.value) == (meter.id, new.on, dial)
        if same and reading.accepted and reading.rolled_over == new.rolled_over:
            return reading.id
    return None


def dial_of(figure: Figure, meter: FoundMeter) -> Decimal:
    """Give a figure in the meter's own unit."""
    if figure.unit in {None, meter.unit}:
        return figure.value
    return from_base(to_base(figure.value, figure.unit), meter.unit)


def _shown(figure: Figure, meter: FoundMeter) -> str:
    return f"{plain(figure.value)} {figure.unit or meter.unit}"


def _reading(session: "Session", reading_id: int) -> Reading:
    row = session.get(Reading, reading_id)
    if row is None:
        raise Refused(f"there is no reading {reading_id}", "see fleetcare show TAG for the numbers of its readings")
    return row


def _mark_of(session: "Session", reading_id: int) -> str | None:
    marks = session.scalars(
        select(ReadingMark).where(col(ReadingMark.reading_id) == reading_id).order_by(col(ReadingMark.id))
    ).all()
    return marks[-1].mark if marks else None


def _owner(session: "Session", row: Reading) -> FoundItem:
    item = session.get_one(Item, session.get_one(Meter, row.meter_id).item_id)
    return FoundItem(item.id, item.tag, item.is_engine)
