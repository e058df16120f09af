"""What earlier oil samples say is usual, an engine's own and those of engines like it: plain figures, in their own units."""

from bisect import bisect_left
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from itertools import islice
from typing import NamedTuple

from fleetcare.domain.measured import OIL, MeasuredSheet, Pools
from fleetcare.domain.measures import QUANTITIES, can_convert, exactly
from fleetcare.domain.sheets import Phase
from fleetcare.rules.judging.spans import decimal

Pool = Mapping[str, tuple[Decimal, ...]]

MOST_OF_FAMILY = 200
"""Samples of relatives, the newest: enough for the limits, few enough that they tell of the oil and the work of today."""


class Sample(NamedTuple):
    """The plain figures of an oil sample, by quantity, in the unit of the quantity: of which engine, taken when."""

    engine: int
    on: date
    figures: Mapping[str, Decimal]


@dataclass(frozen=True, slots=True)
class Family:
    """The oil samples of a family of engines, oldest first, as its member `own` sees those of the others.

    `mark` is another one wherever the samples are others.
    """

    samples: Sequence[Sample] = ()
    own: int = 0
    mark: str = ""

    def before(self, on: date) -> Pool:
        """Give the figures of the newest samples of the others before a day, by quantity."""
        earlier = bisect_left(self.samples, on, key=lambda sample: sample.on)
        others = (
            sample.figures
            for sample in map(self.samples.__getitem__, range(earlier - 1, -1, -1))
            if sample.engine != self.own
        )
        return _Figures([*islice(others, MOST_OF_FAMILY)][::-1])


class _Figures(Pool):
    """The figures of some samples by quantity, put together when a quantity is asked for: few rules ask for few of them."""

    def __init__(self, samples: Sequence[Mapping[str, Decimal]]) -> None:
        self._samples = samples
        self._asked: dict[str, tuple[Decimal, ...]] = {}

    def __getitem__(self, quantity: str) -> tuple[Decimal, ...]:
        if quantity not in self._asked:
            self._asked[quantity] = tuple(figures[quantity] for figures in self._samples if quantity in figures)
        if not self._asked[quantity]:
            raise KeyError(quantity)
        return self._asked[quantity]

    def newest_first(self, quantity: str) -> Iterator[Decimal]:
        """Give the figures of a quantity one by one, the newest first."""
        return (figures[quantity] for figures in reversed(self._samples) if quantity in figures)

    def __iter__(self) -> Iterator[str]:
        return iter(dict.fromkeys(quantity for figures in self._samples for quantity in figures))

    def __len__(self) -> int:
        return sum(1 for _ in self)


NO_FAMILY = Family()


def newest_first(pool: Pool, quantity: str) -> Iterator[Decimal]:
    """Give the figures of a quantity one by one, the newest first: whoever needs only some of them need not wait for all."""
    return pool.newest_first(quantity) if isinstance(pool, _Figures) else reversed(pool.get(quantity, ()))


def pools_for(sheet: MeasuredSheet, own: Pool, family: Family) -> Pools:
    """Give what a sheet is held against: its engine's own samples before it, and those of its family, for oil alone."""
    return Pools(own, family.before(sheet.on) if sheet.kind == OIL else {})


def own_pools(sheets: Iterable[MeasuredSheet]) -> Iterator[Pool]:
    """Give for each sheet of an engine, oldest first, the figures of the oil samples before it, by quantity."""
    pool: dict[str, tuple[Decimal, ...]] = {}
    for sheet in sheets:
        yield pool
        if sheet.kind == OIL:
            pool = {**pool}
            for quantity, figure in _figures(sheet):
                pool[quantity] = (*pool.get(quantity, ()), figure)


def plain_figure(quantity: str, value: Decimal | None, unit: str) -> Decimal | None:
    """Give a figure in the unit of its quantity, None where it does not convert, or there is none."""
    into = QUANTITIES[quantity].unit
    if value is None or unit == into:
        return value
    return decimal(exactly(value, unit, into)) if can_convert(unit, into) else None


def _figures(sheet: MeasuredSheet) -> Iterator[tuple[str, Decimal]]:
    for value in sheet.values:
        is_plain = not value.qualifier and value.phase is Phase.NONE
        figure = plain_figure(value.quantity, value.value, value.unit) if is_plain else None
        if figure is not None:
            yield value.quantity, figure
