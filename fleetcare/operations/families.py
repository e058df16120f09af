"""Engines alike, whose oil samples tell what is usual for each of them.

Engines of the same fuel, number of cylinders, bore and stroke, all four known, with the same oil grade on the nameplate
are one family; their tags, makers and duties are not asked for. That such engines wear alike is common practice.
"""

import hashlib
from bisect import bisect_left
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING, NamedTuple

from fleetcare.domain.measured import OIL
from fleetcare.operations.entries import SHEET_COUNTS
from fleetcare.operations.kin import Kin
from fleetcare.operations.rows import fetch, figure, known_day
from fleetcare.rules.judging.pools import NO_FAMILY, Family, Sample, plain_figure

if TYPE_CHECKING:
    from sqlalchemy import Connection


class _Loaded(NamedTuple):
    """The samples of a family, oldest first, and for each what tells it and all before it from any others."""

    samples: tuple[Sample, ...]
    marks: tuple[str, ...]


class Families:
    """The families of engines up to a day, each loaded once, when an engine of it that has an oil sample asks."""

    def __init__(self, connection: "Connection", on: date) -> None:
        self._connection, self._on = connection, on
        self._kin = Kin(connection)
        self._loaded: dict[tuple[int, ...], _Loaded] = {}

    def of(self, item: int, newest: date | None) -> Family:
        """Give the family of an engine as oil samples of it up to the `newest` are held against it; None: it has none."""
        members = self._kin.of(item) if newest is not None else ()
        if newest is None or len(members) == 1:
            return NO_FAMILY
        if members not in self._loaded:
            self._loaded[members] = self._load(members)
        samples, marks = self._loaded[members]
        count = bisect_left(samples, newest, key=lambda sample: sample.on)
        return Family(samples[:count], item, marks[count - 1]) if count else NO_FAMILY

    def _load(self, members: tuple[int, ...]) -> _Loaded:
        rows = fetch(
            self._connection,
            "select sheet.item_id, sheet.entry_id, sheet.taken_on, quantity, value, unit from sheet_value"
            " join sheet on sheet.id = sheet_value.sheet_id join log_entry entry on entry.id = sheet.entry_id"
            f" where sheet.item_id in :members and sheet.kind = '{OIL}' and phase = '' and qualifier = ''"
            f" and value is not null and {SHEET_COUNTS} order by sheet.taken_on, sheet.entry_id, sheet_value.id",
            members=list(members),
            on=self._on.isoformat(),
        )
        figures: dict[tuple[int, int, str], dict[str, Decimal]] = {}
        for item, entry, taken_on, quantity, value, unit in rows:
            plain = plain_figure(quantity, figure(value), unit)
            if plain is not None:
                figures.setdefault((item, entry, taken_on), {})[quantity] = plain
        samples, marks, mark = [], [], ""
        for (item, entry, taken_on), found in figures.items():
            samples.append(Sample(item, known_day(taken_on), found))
            mark = hashlib.sha256(repr((mark, item, entry, taken_on, found)).encode()).hexdigest()
            marks.append(mark)
        return _Loaded(tuple(samples), tuple(marks))
