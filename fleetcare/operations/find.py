"""Find what somebody named: an item by tag, a task by name, a meter by kind; refuse with the nearest names."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from difflib import get_close_matches
from typing import TYPE_CHECKING

from fleetcare.domain.quantities import Figure, Kind
from fleetcare.errors import Refused
from fleetcare.operations.rows import day, fetch

if TYPE_CHECKING:
    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class FoundItem:
    """An engine or machine by its tag."""

    id: int
    tag: str
    is_engine: bool


@dataclass(frozen=True, slots=True)
class FoundMeter:
    """The meter counting one kind for an item: its own, or its machine's."""

    id: int
    kind: Kind
    unit: str
    owner_id: int


@dataclass(frozen=True, slots=True)
class FoundFit:
    """A meter counting for an item, and from when until when; None is since ever, or until further notice."""

    meter: FoundMeter
    from_on: date | None
    to_on: date | None

    def counts_on(self, on: date) -> bool:
        """Tell whether the meter counts for the item on a day."""
        return (self.from_on is None or self.from_on <= on) and (self.to_on is None or on < self.to_on)


def find_item(connection: "Connection", tag: str, *, on: date | None = None, even_withdrawn: bool = False) -> FoundItem:
    """Find the engine or machine in use under a tag, whatever its case; refuses an unknown one.

    With `on` it is the one that was in use on that day. `even_withdrawn` finds the one last withdrawn where none
    is in use: its history stays readable.
    """
    rows = fetch(
        connection,
        "select id, tag, is_engine, withdrawn_on from item where tag_key = :key"
        " order by withdrawn_on is null, withdrawn_on, id",
        key=tag.strip().casefold(),
    )
    in_use = [row for row in rows if row[3] is None or (on is not None and row[3] > on.isoformat())]
    if in_use or (rows and even_withdrawn):
        found = in_use[0] if in_use else rows[-1]
        return FoundItem(found[0], found[1], bool(found[2]))
    if rows:
        raise Refused(f"{rows[-1][1]} is withdrawn since {rows[-1][3]}", "add it anew with fleetcare engine add")
    tags = [row[0] for row in fetch(connection, "select tag from item where withdrawn_on is null order by tag")]
    raise Refused(f"no engine or machine has the tag {tag!r}", _did_you_mean(tag, tags, "see fleetcare engine list"))


def find_engine(connection: "Connection", tag: str) -> FoundItem:
    """Find an engine by tag; refuses a machine."""
    item = find_item(connection, tag)
    if not item.is_engine:
        raise Refused(f"{item.tag} is a machine, not an engine", "name one of its engines")
    return item


def engines_in_use(connection: "Connection", on: date) -> dict[int, str]:
    """Give the tags of the engines in use on a day, by number."""
    rows = fetch(
        connection,
        "select id, tag from item where is_engine and (withdrawn_on is null or withdrawn_on > :on) order by tag, id",
        on=on.isoformat(),
    )
    return {row[0]: row[1] for row in rows}


def find_machine(connection: "Connection", tag: str) -> FoundItem:
    """Find a machine by tag; refuses an engine."""
    item = find_item(connection, tag)
    if item.is_engine:
        raise Refused(
            f"{item.tag} is an engine, not a machine", "name a machine, or add one with fleetcare machine add"
        )
    return item


def find_task(
    connection: "Connection", item: FoundItem, name: str, *, on: date | None = None, even_ended: bool = False
) -> int:
    """Find a task of an item by name, whatever its case; refuses an unknown one with the nearest names.

    With `on` it is the one there was on that day. `even_ended` finds the one ended last where there is none.
    """
    rows = fetch(
        connection,
        "select id, name, name_key, removed_on from task where item_id = :item"
        " order by removed_on is null, removed_on, id",
        item=item.id,
    )
    key = " ".join(name.split()).casefold()
    named = [row for row in rows if row[2] == key]
    current = [row for row in named if row[3] is None or (on is not None and row[3] > on.isoformat())]
    if current or (named and even_ended):
        return int(current[0][0] if current else named[-1][0])
    names = [row[1] for row in rows if row[3] is None]
    remedy = _did_you_mean(name, names, f"add one with fleetcare task add {item.tag} NAME --every INTERVAL")
    raise Refused(f"{item.tag} has no task {name!r}", remedy)


def find_meters(connection: "Connection", item_id: int, on: date) -> list[FoundMeter]:
    """Give the meters counting for an item on a day, its own and its machine's."""
    return [fit.meter for fit in find_fits(connection, item_id) if fit.counts_on(on)]


def find_fits(connection: "Connection", item_id: int) -> list[FoundFit]:
    """Give the meters that count for an item on some day or other, its own and its machine's."""
    rows = fetch(
        connection,
        "select meter.id, meter.kind, meter.unit, meter.item_id, fit.from_on, fit.to_on"
        " from meter_fit fit join meter on meter.id = fit.meter_id where fit.item_id = :item order by meter.id, fit.id",
        item=item_id,
    )
    return [FoundFit(FoundMeter(row[0], Kind(row[1]), row[2], row[3]), day(row[4]), day(row[5])) for row in rows]


def pick_meter(meters: Sequence[FoundMeter], figure: Figure, tag: str, kind: Kind | None = None) -> FoundMeter:
    """Give the meter a dial figure belongs to: by its unit, by a stated kind, or as the only one.

    Refuses a figure that could be read off two meters, or off none.
    """
    wanted = kind or figure.kind
    if kind is not None and figure.kind not in {None, kind}:
        raise Refused(f"{figure} is not a figure of the {kind} meter", f"give it in the unit of {kind}")
    fitting = [meter for meter in meters if wanted in {None, meter.kind}]
    if not fitting:
        what = f"{wanted} of {tag}" if wanted else f"anything of {tag}"
        raise Refused(
            f"no meter counts {what} on that day",
            f"check the day, or add one by editing {tag} with --meter {wanted or 'hours'}",
        )
    if len(fitting) > 1:
        kinds = " and ".join(meter.kind for meter in fitting)
        raise Refused(
            f"{figure} could be {kinds} of {tag}", f"write its unit behind it, such as {figure.value}{fitting[0].unit}"
        )
    return fitting[0]


def _did_you_mean(word: str, known: Sequence[str], otherwise: str) -> str:
    by_key = {name.casefold(): name for name in known}
    typed = " ".join(word.split()).casefold()
    near = get_close_matches(typed, by_key, n=3) or [key for key in by_key if typed and typed in key][:3]
    if near:
        return f"did you mean {' or '.join(by_key[key] for key in near)}?"
    return otherwise
