"""The due list, and what a change did to it."""

from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from dataclasses import dataclass, field
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.lines import DueLine, State
from fleetcare.errors import Refused
from fleetcare.operations.find import find_item
from fleetcare.operations.load import item_facts
from fleetcare.operations.rows import fetch
from fleetcare.rules.due.due_list import in_order, item_lines, within
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.row import COLUMNS, DueRow, due_row

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session

_MOST_DAYS = 36_500  # a century

__all__ = ["COLUMNS", "DueRow", "Filters", "Moved", "Moves", "due_rows", "watch_moves"]


@dataclass(frozen=True, slots=True)
class Filters:
    """What of the due list is wanted; everything by default."""

    days: int | None = None
    site: str | None = None
    engine: str | None = None
    states: tuple[State, ...] = ()
    recorded_only: bool = False


@dataclass(frozen=True, slots=True)
class Moved:
    """One line whose due point a change moved: before and after, None where there was or is no line."""

    before: DueRow | None
    after: DueRow | None


@dataclass(slots=True)
class Moves:
    """The lines a change moved, filled when the change is done."""

    moved: list[Moved] = field(default_factory=list)
    rows: list[DueRow] = field(default_factory=list)


def due_rows(
    connection: "Connection", on: date, filters: Filters | None = None, *, is_future: bool = False
) -> list[DueRow]:
    """Give the due list of a day in order, flattened. An unknown engine or site is refused."""
    return [due_row(line, facts) for line, facts in due_lines(connection, on, filters, is_future=is_future)]


def due_lines(
    connection: "Connection", on: date, filters: Filters | None = None, *, is_future: bool = False
) -> list[tuple[DueLine, ItemFacts]]:
    """Give the lines of `due_rows`, each with the facts of its item."""
    wanted = filters or Filters()
    if wanted.days is not None and not 0 <= wanted.days <= _MOST_DAYS:
        raise Refused(f"within {wanted.days} days cannot be", f"give a number from 0 to {_MOST_DAYS}")
    ids = [find_item(connection, wanted.engine, on=on).id] if wanted.engine is not None else None
    in_service = (facts for facts in item_facts(connection, on, ids) if (facts.item.in_service_on or on) <= on)
    found = {facts.item.id: facts for facts in in_service}
    lines = [
        line for facts in found.values() for line in item_lines(facts, is_future, recorded_only=wanted.recorded_only)
    ]
    if wanted.site is not None:
        site = _known_site(connection, wanted.site)
        lines = [line for line in lines if line.item.site.casefold() == site]
    if wanted.days is not None:
        lines = within(lines, on, wanted.days)
    if wanted.states:
        lines = [line for line in lines if line.state in wanted.states]
    return [(line, found[line.item.id]) for line in in_order(lines)]


def tags_within(connection: "Connection", on: date, wanted: Filters) -> frozenset[str] | None:
    """Give the tags of the one engine or the site the due list is narrowed to; None where it is that of the whole shop."""
    if wanted.engine is not None:
        return frozenset({find_item(connection, wanted.engine, on=on).tag})
    if wanted.site is None:
        return None
    site = _known_site(connection, wanted.site)
    return frozenset(facts.item.tag for facts in item_facts(connection, on) if facts.item.site.casefold() == site)


@contextmanager
def watch_moves(session: "Session", tag: str, on: date) -> Iterator[Moves]:
    """Compare the lines of an item, and of all that share its meters, before and after what is done inside."""
    item = find_item(session.connection(), tag, even_withdrawn=True)
    with watch_items(session, [item.id], on) as moves:
        yield moves


@contextmanager
def watch_items(session: "Session", item_ids: Sequence[int], on: date) -> Iterator[Moves]:
    """Compare the lines of several items as `watch_moves` does those of one."""
    connection = session.connection()
    ids = _sharing(connection, item_ids)
    before = _rows_by_key(connection, ids, on)
    moves = Moves()
    yield moves
    session.flush()
    after = _rows_by_key(connection, ids, on)
    moves.rows = list(after.values())
    for key in (*before, *(key for key in after if key not in before)):
        old, new = before.get(key), after.get(key)
        if _point(old) != _point(new):
            moves.moved.append(Moved(old, new))


def _rows_by_key(connection: "Connection", ids: Sequence[int], on: date) -> dict[tuple[int, int], DueRow]:
    rows: dict[tuple[int, int], DueRow] = {}
    for facts in item_facts(connection, on, ids):
        for line in item_lines(facts):
            rows[(facts.item.id, line.task.id)] = due_row(line, facts)
    return rows


def _sharing(connection: "Connection", item_ids: Sequence[int]) -> list[int]:
    """Give the ids of some items and of all items that a meter of theirs counts or counted for."""
    rows = fetch(
        connection,
        "select distinct item_id from meter_fit where meter_id in"
        " (select meter_id from meter_fit where item_id in :items)",
        items=list(item_ids),
    )
    return sorted({*item_ids, *(row[0] for row in rows)})


def _point(row: DueRow | None) -> tuple[object, ...] | None:
    if row is None:
        return None
    return row.next_due_at, row.next_due_on, row.next_due_dial, row.own_due_at, row.own_due_on


def _known_site(connection: "Connection", name: str) -> str:
    key = name.strip().casefold()
    names = {row[0].casefold(): row[0] for row in fetch(connection, "select name from site order by name")}
    if key not in names:
        raise Refused(f"there is no site {name!r}", f"choose one of {', '.join(names.values()) or 'none yet'}")
    return key
