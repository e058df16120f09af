"""Dial figures and life totals: one count through meters replaced, swapped, lent and rolled over."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.domain.meters import Counter, LifeFigure, Meter, MeterFit, Reading
from fleetcare.domain.quantities import Kind
from fleetcare.rules.meters import CounterHistory, counter_history, dial_on
from tests.builders import a_counter, day

OLD, NEW = Meter(1, Kind.HOURS, "h", Decimal(100_000)), Meter(2, Kind.HOURS, "h", Decimal(100_000))
SWAP = "2026-03-01"


def reading(number: int, on: str, value: float | str, meter: int = 1, **changes: bool) -> Reading:
    return Reading(number, meter, day(on), Decimal(str(value)), **changes)


def fit(
    meter: Meter,
    begins: str | None,
    first: float,
    ends: str | None = None,
    last: float | None = None,
    unmetered: float = 0,
) -> MeterFit:
    figure = None if last is None else Decimal(str(last))
    return MeterFit(
        meter,
        day(begins) if begins else None,
        Decimal(str(first)),
        day(ends) if ends else None,
        figure,
        Decimal(unmetered),
    )


def history(
    *readings: Reading, fits: tuple[MeterFit, ...] = (), came_with: float = 0, until: str = "2026-12-31"
) -> CounterHistory:
    fits = fits or (fit(OLD, None, came_with),)
    return counter_history(Counter(Kind.HOURS, Decimal(str(came_with)), fits, readings), day(until))


def lives(found: CounterHistory) -> list[tuple[str, object]]:
    return [(one.on.isoformat(), one.life) for one in found.readings]


# Life totals


def test_the_life_total_begins_at_the_figure_the_item_came_with() -> None:
    found = history(reading(1, "2026-01-01", 1250), came_with=1200)
    assert lives(found) == [("2026-01-01", 1250)]
    other_dial = history(reading(1, "2026-01-01", 50), fits=(fit(OLD, None, 0),), came_with=1200)
    assert lives(other_dial) == [("2026-01-01", 1250)]


REPLACED = (fit(OLD, None, 0, SWAP, 4980, unmetered=150), fit(NEW, SWAP, 0))


def test_a_replaced_meter_hands_its_count_on_with_what_ran_unmetered() -> None:
    found = history(reading(1, "2026-02-01", 4900), reading(2, SWAP, 0, meter=2), fits=REPLACED)
    assert lives(found) == [("2026-02-01", 4900), (SWAP, 5130)]
    assert [one.metered for one in found.readings] == [4900, 4980]


def test_a_figure_of_a_day_is_read_off_the_meter_that_counted_then() -> None:
    found = history(fits=REPLACED)
    assert found.life_at(Decimal(4900), day("2026-02-28")) == 4900
    assert found.life_at(Decimal(20), day(SWAP)) == 5150
    assert found.metered_at(Decimal(20), day(SWAP)) == 5000


def test_a_figure_of_a_meter_is_read_off_that_meter_whatever_counted_then() -> None:
    found = history(fits=REPLACED)
    assert found.life_of(1, Decimal(4980), day(SWAP)) == 4980
    assert found.life_of(2, Decimal(0), day(SWAP)) == 5130
    assert found.life_of(2, Decimal(0), day("2026-02-28")) is None
    assert found.life_of(3, Decimal(0), day(SWAP)) is None


@pytest.mark.parametrize(
    ("fits", "on"),
    [
        ((), "2026-01-01"),
        ((fit(OLD, "2026-01-02", 0),), "2026-01-01"),
        ((fit(OLD, None, 0, "2025-12-31", 10),), "2026-01-01"),
    ],
)
def test_on_a_day_without_a_meter_a_figure_means_nothing(fits: tuple[MeterFit, ...], on: str) -> None:
    found = counter_history(Counter(Kind.HOURS, Decimal(0), fits, ()), day("2026-12-31"))
    assert found.life_at(Decimal(5), day(on)) is None
    assert found.metered_at(Decimal(5), day(on)) is None


def test_a_fit_counts_on_its_first_and_its_last_day() -> None:
    found = history(fits=(fit(OLD, "2026-01-02", 100, "2026-01-05", 120),))
    assert [found.life_at(Decimal(110), day(f"2026-01-0{n}")) for n in (1, 2, 5, 6)] == [None, 10, 10, None]


def test_one_odometer_counts_for_two_engines_from_the_day_each_was_fitted() -> None:
    odometer = Meter(7, Kind.DISTANCE, "km")
    rows = (Reading(1, 7, day("2026-01-01"), Decimal(9000)), Reading(2, 7, day("2026-06-01"), Decimal(12000)))
    early = Counter(Kind.DISTANCE, Decimal(0), (MeterFit(odometer, None, Decimal(0)),), rows)
    late = Counter(Kind.DISTANCE, Decimal(500), (MeterFit(odometer, day("2026-03-01"), Decimal(10000)),), rows)
    assert [lives(counter_history(one, date.max)) for one in (early, late)] == [
        [("2026-01-01", 9000), ("2026-06-01", 12000)],
        [("2026-06-01", 2500)],
    ]


def test_readings_after_an_engine_left_the_machine_are_not_its_own() -> None:
    found = history(reading(1, "2026-02-01", 100), reading(2, "2026-04-01", 300), fits=(fit(OLD, None, 0, SWAP, 180),))
    assert lives(found) == [("2026-02-01", 100)]


def test_on_the_day_of_a_swap_each_reading_counts_by_the_meter_it_was_read_off() -> None:
    found = history(reading(1, SWAP, 4980), reading(2, SWAP, 0, meter=2), fits=REPLACED)
    assert lives(found) == [(SWAP, 4980), (SWAP, 5130)]


def test_a_meter_fitted_again_counts_on_from_where_it_was_left() -> None:
    again = (fit(OLD, "2026-01-01", 100, "2026-02-01", 150), fit(OLD, "2026-04-01", 400))
    found = history(
        reading(1, "2026-01-20", 120), reading(2, "2026-03-01", 300), reading(3, "2026-05-01", 410), fits=again
    )
    assert lives(found) == [("2026-01-20", 20), ("2026-05-01", 60)]


def test_figures_in_another_unit_come_out_in_the_base_unit() -> None:
    miles = Meter(1, Kind.DISTANCE, "mi")
    counter = Counter(
        Kind.DISTANCE, Decimal(0), (MeterFit(miles, None, Decimal(0)),), (reading(1, "2026-01-01", 1000),)
    )
    found = counter_history(counter, date.max)
    assert (lives(found), found.unit) == ([("2026-01-01", Decimal("1609.344"))], "mi")
    assert found.dial_of(Decimal("3218.688")) == 2000


# Which readings count


def test_readings_come_out_by_day_and_within_a_day_by_life_total() -> None:
    typed = (reading(1, "2026-02-01", 120), reading(2, "2026-01-01", 100), reading(3, "2026-02-01", 110))
    assert [one.reading.id for one in history(*typed).readings] == [2, 3, 1]


def test_the_same_figure_twice_on_a_day_is_one() -> None:
    twice = (reading(1, "2026-01-01", 100), reading(2, "2026-01-01", "100.0"), reading(3, "2026-01-02", 100))
    assert [one.reading.id for one in history(*twice).readings] == [1, 3]


def test_readings_not_accepted_or_later_than_the_day_asked_about_count_for_nothing() -> None:
    rows = (reading(1, "2026-01-01", 100), reading(2, "2026-02-01", 900, accepted=False), reading(3, "2026-03-01", 120))
    assert lives(history(*rows, until="2026-02-28")) == [("2026-01-01", 100)]
    assert history(*rows).latest is not None
    assert history().latest is None


def test_a_meter_fitted_later_than_the_day_asked_about_does_not_count_yet() -> None:
    found = history(fits=(fit(OLD, None, 0), fit(Meter(2, Kind.HOURS, "L"), "2026-06-01", 0)), until="2026-05-31")
    assert found.unit == "h"
    assert counter_history(Counter(Kind.HOURS, Decimal(0), (), ()), date.max).unit is None


# Rolling over


def test_each_turn_of_the_dial_adds_its_whole_range() -> None:
    found = history(
        reading(1, "2026-01-01", 99_900),
        reading(2, "2026-02-01", 40, rolled_over=True),
        reading(3, "2026-03-01", 99_000),
        reading(4, "2026-04-01", 10, rolled_over=True),
    )
    assert [life for _, life in lives(found)] == [99_900, 100_040, 199_000, 200_010]


@pytest.mark.parametrize(("dial", "life"), [(99_990, 99_990), (50_000, 50_000), ("49999.9", "149999.9"), (12, 100_012)])
def test_on_the_day_of_a_turn_figures_below_half_the_dial_lie_after_it(dial: float, life: float) -> None:
    found = history(reading(1, "2026-01-01", 99_000), reading(2, "2026-02-01", 5, rolled_over=True))
    assert found.life_at(Decimal(str(dial)), day("2026-02-01")) == Decimal(str(life))


def test_a_turn_first_seen_past_half_the_dial_counts_all_the_same() -> None:
    found = history(reading(1, "2026-01-01", 60_000), reading(2, "2026-12-01", 55_000, rolled_over=True))
    assert [life for _, life in lives(found)] == [60_000, 155_000]


def test_turns_of_another_meter_do_not_count() -> None:
    found = history(reading(1, "2026-01-15", 5, rolled_over=True), reading(2, SWAP, 3, meter=2), fits=REPLACED)
    assert found.life_at(Decimal(7), day("2026-03-02")) == 100_000 + 4980 + 150 + 7


def test_a_meter_fitted_after_its_dial_turned_has_not_moved_by_that() -> None:
    lent = (fit(OLD, "2026-03-01", 50),)
    found = history(reading(1, "2026-02-01", 10, rolled_over=True), reading(2, "2026-04-01", 80), fits=lent)
    assert lives(found) == [("2026-04-01", 30)]


def test_without_known_digits_a_dial_does_not_turn() -> None:
    plain_meter = Meter(1, Kind.HOURS, "h")
    found = history(reading(1, "2026-01-01", 10, rolled_over=True), fits=(fit(plain_meter, None, 0),))
    assert lives(found) == [("2026-01-01", 10)]
    assert found.dial_of(Decimal(123_456)) == 123_456


# Back to the dial


def test_a_life_total_is_shown_on_the_dial_now_counting() -> None:
    found = history(reading(1, "2026-02-01", 4900), fits=REPLACED)
    assert [found.dial_of(Decimal(life)) for life in (5129, 5130, 5150)] == [None, 0, 20]


def test_a_life_total_past_the_turn_is_shown_as_the_dial_will_stand() -> None:
    found = history(reading(1, "2026-01-01", 99_900))
    assert [found.dial_of(Decimal(life)) for life in (99_999, 100_000, 100_150)] == [99_999, 0, 150]
    turned = history(reading(1, "2026-01-01", 99_900), reading(2, "2026-02-01", 40, rolled_over=True))
    assert turned.dial_of(Decimal(100_290)) == 290


def test_where_nothing_counts_any_more_there_is_no_dial() -> None:
    ended = (fit(OLD, None, 0, SWAP, 4980),)
    assert history(fits=ended, until=SWAP).dial_of(Decimal(5000)) == 5000
    assert history(fits=ended, until="2026-03-02").dial_of(Decimal(5000)) is None
    assert counter_history(Counter(Kind.HOURS, Decimal(0), (), ()), date.max).dial_of(Decimal(5000)) is None


# The figure of a day

TWO = a_counter(("2026-01-01", 100), ("2026-01-05", 110), ("2026-01-05", 112), ("2026-01-15", 120))


@pytest.mark.parametrize(
    ("on", "figure"),
    [
        ("2025-12-31", None),
        ("2026-01-01", LifeFigure(Decimal(100))),
        ("2026-01-02", LifeFigure(Decimal("102.5"), approximate=True)),
        ("2026-01-05", LifeFigure(Decimal(112))),
        ("2026-01-10", LifeFigure(Decimal(116), approximate=True)),
        ("2026-01-15", LifeFigure(Decimal(120))),
        ("2026-01-16", LifeFigure(Decimal(120), approximate=True)),
    ],
)
def test_a_day_has_its_reading_else_what_lies_between_its_neighbours_else_the_last_one(
    on: str, figure: LifeFigure | None
) -> None:
    assert TWO.figure_on(day(on)) == figure


@pytest.mark.parametrize(
    ("on", "shown"), [("2025-12-31", "100"), ("2026-01-01", "100"), ("2026-01-04", "103.3"), ("2026-01-10", "110")]
)
def test_a_meter_showed_on_a_day_what_its_readings_say_to_the_tenth(on: str, shown: str) -> None:
    rows = [reading(1, "2026-01-01", 100), reading(2, "2026-01-10", 110), reading(3, "2026-01-05", 900, meter=2)]
    assert dial_on(OLD, rows, day(on), day("2026-12-31")) == Decimal(shown)


def test_a_meter_never_read_by_a_day_showed_nothing() -> None:
    assert dial_on(OLD, [reading(1, "2026-02-01", 100)], day("2026-01-15"), day("2026-01-31")) == 0
    assert dial_on(OLD, [reading(1, "2026-02-01", 100)], day("2026-01-15"), day("2026-02-01")) == 100
