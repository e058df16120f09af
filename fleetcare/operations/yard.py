"""All engines and machines at a glance: where they are, whether they may run, what they showed, what they need."""

from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.engines import Status, status_on
from fleetcare.domain.quantities import plain
from fleetcare.operations.due_words import Group, group_of
from fleetcare.operations.load import item_facts, load_items
from fleetcare.operations.rows import fetch
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.row import due_row

if TYPE_CHECKING:
    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class YardRow:
    """One engine or machine. `shown` says what its meters showed last, `read_on` when the latest of them was read.

    `groups` counts its lines by their group in the due list; a withdrawn one has none.
    """

    tag: str
    name: str
    site: str
    machine: str
    status: Status
    shown: str
    read_on: date | None
    groups: dict[Group, int]

    @property
    def worst(self) -> Group | None:
        """The first group of the due list it has a line in."""
        return next((group for group in Group if self.groups.get(group)), None)


def yard(connection: "Connection", on: date, *, is_future: bool = False) -> list[YardRow]:
    """List what is in use on a day, by site and tag, then what was withdrawn by then."""
    rows = [_row(facts, on, is_future) for facts in item_facts(connection, on)]
    gone = fetch(
        connection,
        "select id from item where withdrawn_on <= :on order by tag, withdrawn_on",
        on=on.isoformat(),
    )
    withdrawn = [
        YardRow(item.tag, item.name, item.site, "", Status.WITHDRAWN, "", None, {})
        for item in load_items(connection, on, [row[0] for row in gone])
    ]
    return sorted(rows, key=lambda row: (row.site.casefold(), row.tag)) + withdrawn


def find_in(rows: Iterable[YardRow], text: str) -> list[YardRow]:
    """Give the rows that hold every word of a text."""
    words = text.casefold().split()
    return [
        row
        for row in rows
        if all(w in f"{row.tag} {row.name} {row.site} {row.machine} {row.status}".casefold() for w in words)
    ]


def _row(facts: ItemFacts, on: date, is_future: bool) -> YardRow:
    item = facts.item
    groups = Counter(group_of(due_row(line, facts)) for line in item_lines(facts, is_future))
    shown, days = [], []
    for counter in facts.counters.values():
        latest = counter.latest
        dial = counter.dial_of(latest.life) if latest is not None else None
        if latest is not None and dial is not None:
            shown.append(f"{plain(dial)} {counter.unit}")
            days.append(latest.on)
    return YardRow(
        tag=item.tag,
        name=item.name,
        site=item.site,
        machine=item.machine if item.is_engine else "",
        status=status_on(item.spells, on) if item.is_engine else Status.IN_SERVICE,
        shown=", ".join(shown),
        read_on=max(days, default=None),
        groups=dict(groups),
    )
