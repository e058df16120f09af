"""Write down what a meter shows: held against its past, explained, doubted, voided, restored."""

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from itertools import pairwise
from typing import TYPE_CHECKING

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import Item, Meter, Reading, ReadingMark
from fleetcare.domain.quantities import Figure, Kind
from fleetcare.drafts.work import ReadingDraft
from fleetcare.errors import Doubted, Refused
from fleetcare.operations.against_past import NewReading as NewReading
from fleetcare.operations.against_past import dial_of as dial_of
from fleetcare.operations.against_past import hold_against_past as hold_against_past
from fleetcare.operations.against_past import refuse_unlike_dial as refuse_unlike_dial
from fleetcare.operations.against_past import same_reading, say_figure, what_falls_off
from fleetcare.operations.against_past import say_collision as say_collision
from fleetcare.operations.find import FoundItem, FoundMeter, find_item, find_meters, pick_meter
from fleetcare.operations.load import load_counters
from fleetcare.operations.names import person_id
from fleetcare.operations.swap_meters import swap_meter
from fleetcare.rules.meters import CounterHistory

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

_EXPLAIN = "check it; if it is right give --sure, or explain it with --rolled-over or --replaced OLD_LAST NEW_FIRST"


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
    trial, collisions = hold_against_past(session.connection(), item, meter, [new])
    refuse_unlike_dial(item, meter, new, trial)
    if collisions and not sure:
        raise Doubted(say_collision(item, meter, new, collisions[0]), remedy)
    shown = f"{item.tag} shows {say_figure(new.figure, meter)}"
    known = same_reading(trial, meter, new)
    if known is not None:
        return Recorded(known, shown, is_new=False)
    (reading_id,) = insert_readings(session, [(meter, new)])
    suspects = _doubt_what_falls_off(session, meter, trial, new.on) if collisions else ()
    return Recorded(reading_id, shown, suspects)


def insert_readings(session: "Session", found: Iterable[tuple[FoundMeter, NewReading]]) -> list[int]:
    """Store readings as entered, unchecked, and give their ids."""
    placed = list(found)
    people = {name: person_id(session, name) for name in dict.fromkeys(new.by for _, new in placed)}
    rows = [
        Reading(
            meter_id=meter.id,
            on=new.on,
            value=new.figure.value,
            unit=new.figure.unit or meter.unit,
            rolled_over=new.rolled_over,
            entry_id=new.entry_id,
            note=new.note,
            person_id=people[new.by],
            import_key=new.import_key,
        )
        for meter, new in placed
    ]
    session.add_all(rows)
    session.flush()
    return [row.id for row in rows]


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
    trial, collisions = hold_against_past(session.connection(), item, meter, [again])
    if collisions and not sure:
        raise Doubted(say_collision(item, meter, again, collisions[0]), "void that one first, or give --sure")
    session.add(ReadingMark(reading_id=row.id, mark="restored", why=why, on=on))
    session.flush()
    suspects = _doubt_what_falls_off(session, meter, trial, on) if collisions else ()
    return Recorded(row.id, f"{item.tag} shows {say_figure(again.figure, meter)}", suspects)


def _doubt_what_falls_off(session: "Session", meter: FoundMeter, trial: CounterHistory, on: date) -> tuple[int, ...]:
    """Mark as suspect what is not on the longest plausible chain that holds the new reading."""
    fallen = what_falls_off(session.connection(), meter, trial)
    for reading_id in fallen:
        session.add(ReadingMark(reading_id=reading_id, mark="suspect", why="a later reading was taken for sure", on=on))
    session.flush()
    return fallen


def _replace_meter(session: "Session", item: FoundItem, old: FoundMeter, draft: ReadingDraft) -> FoundMeter:
    """End the old meter at its last figure, which becomes a reading, and begin the new one."""
    assert draft.replaced is not None
    last, first = draft.replaced
    unmetered = draft.unmetered or Figure(Decimal(0))
    for figure in (last, first, unmetered):
        if figure.kind not in {None, old.kind}:
            raise Refused(f"{figure} is not a figure of the {old.kind} meter", "give it in the meter's unit")
    ending = NewReading(draft.on, last, note="last figure of a replaced meter", by=draft.by)
    trial, _ = hold_against_past(session.connection(), item, old, [])
    later = next((r.reading for r in trial.readings if r.reading.meter_id == old.id and r.on > draft.on), None)
    if later is not None:
        raise Refused(
            f"reading {later.id} was read off the old meter of {item.tag} on {later.on}, after {draft.on}",
            "give the day the meter was changed, or void that reading",
        )
    store_reading(session, item, old, ending, remedy="check OLD_LAST, or void the reading it collides with")
    last_dial, first_dial, unmetered_dial = (dial_of(figure, old) for figure in (last, first, unmetered))
    return swap_meter(session, old, draft.on, last=last_dial, first=first_dial, unmetered=unmetered_dial)


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
