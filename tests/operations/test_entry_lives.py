"""The life totals of a log entry: by its own reading, else by one of that day, else between neighbours."""

from decimal import Decimal

import pytest

from fleetcare.domain.meters import Counter, LifeFigure, Meter, MeterFit, Reading
from fleetcare.domain.quantities import Kind
from fleetcare.operations.load import entry_lives, own_readings
from fleetcare.rules.meters import CounterHistory, counter_history
from tests.builders import day

OLD, NEW, SWAP = Meter(1, Kind.HOURS, "h"), Meter(2, Kind.HOURS, "h"), day("2026-03-01")
FITS = (MeterFit(OLD, None, Decimal(0), SWAP, Decimal(4980), Decimal(150)), MeterFit(NEW, SWAP, Decimal(0)))


def counters(*readings: Reading) -> dict[Kind, CounterHistory]:
    return {Kind.HOURS: counter_history(Counter(Kind.HOURS, Decimal(0), FITS, readings), day("2026-12-31"))}


@pytest.mark.parametrize(("meter", "dial", "life"), [(1, 4980, 4980), (2, 0, 5130), (2, 4, 5134)])
def test_on_the_day_a_meter_is_replaced_an_entry_counts_by_the_meter_its_figure_was_read_off(
    meter: int, dial: int, life: int
) -> None:
    found = counters(Reading(1, meter, SWAP, Decimal(dial), entry_id=7))
    assert entry_lives(found, own_readings(found), 7, SWAP) == {Kind.HOURS: LifeFigure(Decimal(life))}


def test_an_entry_without_a_figure_takes_what_the_readings_say_of_its_day() -> None:
    found = counters(Reading(1, 1, day("2026-01-01"), Decimal(4800)), Reading(2, 1, day("2026-01-11"), Decimal(4850)))
    assert entry_lives(found, {}, 7, day("2026-01-11")) == {Kind.HOURS: LifeFigure(Decimal(4850))}
    assert entry_lives(found, {}, 7, day("2026-01-03")) == {Kind.HOURS: LifeFigure(Decimal(4810), approximate=True)}
    assert entry_lives(found, {}, 7, day("2025-12-31")) == {}


def test_a_figure_of_an_entry_that_is_suspect_does_not_count() -> None:
    found = counters(
        Reading(1, 1, day("2026-01-01"), Decimal(4800)),
        Reading(2, 1, day("2026-01-02"), Decimal(9000), entry_id=7, accepted=False),
    )
    known = LifeFigure(Decimal(4800), approximate=True)
    assert entry_lives(found, own_readings(found), 7, day("2026-01-02")) == {Kind.HOURS: known}
