"""What an engine's own earlier oil samples say is usual: plain figures only, each in the unit of its quantity."""

from collections.abc import Iterable, Iterator, Mapping
from decimal import Decimal

from fleetcare.domain.measured import OIL, MeasuredSheet
from fleetcare.domain.measures import QUANTITIES, can_convert, exactly
from fleetcare.domain.sheets import Phase
from fleetcare.rules.judging.spans import decimal

Pool = Mapping[str, tuple[Decimal, ...]]


def own_pools(sheets: Iterable[MeasuredSheet]) -> Iterator[Pool]:
    """Give for each sheet of an engine, oldest first, the figures of the oil samples before it, by quantity."""
    pool: dict[str, tuple[Decimal, ...]] = {}
    for sheet in sheets:
        yield pool
        if sheet.kind == OIL:
            pool = {**pool}
            for quantity, figure in _figures(sheet):
                pool[quantity] = (*pool.get(quantity, ()), figure)


def _figures(sheet: MeasuredSheet) -> Iterator[tuple[str, Decimal]]:
    for value in sheet.values:
        into = QUANTITIES[value.quantity].unit
        is_plain = not value.qualifier and value.phase is Phase.NONE
        if not is_plain or value.value is None:
            continue
        if value.unit == into:
            yield value.quantity, value.value
        elif can_convert(value.unit, into):
            yield value.quantity, decimal(exactly(value.value, value.unit, into))
