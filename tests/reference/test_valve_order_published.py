"""Valve order against published adjustment tables, each with its source, and against a cam turned by simulation."""

import csv
from decimal import Decimal
from fractions import Fraction
from pathlib import Path

import pytest

from fleetcare.rules.nameplate import check_firing_order
from fleetcare.rules.valve_order import (
    MARGIN,
    USUAL_TIMING,
    Angles,
    Method,
    Position,
    firing_angles,
    mates,
    setting_order,
)

CASES = list(csv.DictReader(Path(__file__).with_name("valve_order.csv").read_text(encoding="utf-8").splitlines()))

# Further orders in service manuals and trade articles, as listed for V6, V8, flat four and flat six.
OTHER_ORDERS = (
    "1-6-5-4-3-2 1-4-2-5-3-6 1-8-4-3-6-5-7-2 1-3-7-2-6-5-4-8 1-8-7-3-6-5-4-2 1-2-7-3-4-5-6-8 1-3-2-4 1-6-2-4-3-5"
)
ORDERS = sorted({case["firing_order"] for case in CASES} | set(OTHER_ORDERS.split()))


def _angles(order: str) -> Angles:
    return firing_angles(check_firing_order(order, order.count("-") + 1))


def _stops(order: str) -> tuple[Position, ...]:
    return setting_order(_angles(order), Method.TWO_POSITION)


def _cylinders(cell: str) -> tuple[int, ...]:
    return tuple(int(cylinder) for cylinder in cell.split())


@pytest.mark.parametrize("case", CASES, ids=[f"{case['firing_order']} {case['source']}" for case in CASES])
def test_two_positions_agree_with_the_published_table(case: dict[str, str]) -> None:
    stops = _stops(case["firing_order"])
    published = [(_cylinders(case[f"intake_{n}"]), _cylinders(case[f"exhaust_{n}"])) for n in (1, 2)]
    for stop, (intake, exhaust) in zip(stops, published, strict=False):
        if intake or exhaust:
            assert (stop.intake, stop.exhaust) == (intake, exhaust)


def test_the_three_cylinder_table_that_begins_at_overlap_is_the_second_position() -> None:
    """TM 10-4320-226-14 p. 4-61: No. 1 at overlap, set intake 2 and exhaust 3; the rest a turn later (order deduced)."""
    first, second = _stops("1-2-3")
    assert (second.rocking, second.intake, second.exhaust) == (1, (2,), (3,))
    assert (first.intake, first.exhaust) == ((1, 3), (1, 2))


@pytest.mark.parametrize(
    ("order", "rocking", "free"),
    [
        ("1-3-4-2", 4, 1),  # TM 10-3930-671-24, valve rocking procedure
        ("1-5-3-6-2-4", 6, 1),  # TM 5-6115-400-12 fig. 3-11
    ],
)
def test_a_cylinder_is_free_while_its_mate_rocks(order: str, rocking: int, free: int) -> None:
    stop = setting_order(_angles(order), Method.ONE_BY_ONE)[0]
    assert (stop.rocking, stop.tdc_compression, stop.intake, stop.exhaust) == (rocking, free, (free,), (free,))


def test_the_six_is_set_through_two_turns_in_its_firing_order() -> None:
    """TM 5-6115-400-12 fig. 3-11: begin at No. 1 and follow 1-5-3-6-2-4 through two turns of the crank."""
    stops = setting_order(_angles("1-5-3-6-2-4"), Method.ONE_BY_ONE)
    assert [(stop.tdc_compression, int(stop.crank)) for stop in stops] == [
        (1, 0),
        (5, 120),
        (3, 240),
        (6, 360),
        (2, 480),
        (4, 600),
    ]


def test_the_three_is_turned_240_degrees_between_cylinders() -> None:
    """Three-cylinder marine and refrigeration engine manuals, order 1-3-2: 240 degrees from one to the next."""
    stops = setting_order(_angles("1-3-2"), Method.ONE_BY_ONE)
    assert [(stop.tdc_compression, int(stop.crank)) for stop in stops] == [(1, 0), (3, 240), (2, 480)]


@pytest.mark.parametrize(
    ("order", "pairs"),
    [
        ("1-3-4-2", ((1, 4), (2, 3))),
        ("1-2-4-3", ((1, 4), (2, 3))),
        ("1-5-3-6-2-4", ((1, 6), (2, 5), (3, 4))),
    ],
)
def test_mates_of_an_inline_engine_add_up_to_one_more_than_its_cylinders(
    order: str, pairs: tuple[tuple[int, int], ...]
) -> None:
    """The numbers of running mates add to 5 in an inline four and to 7 in an inline six: trade rule."""
    assert mates(_angles(order)) == pairs


@pytest.mark.parametrize(
    ("order", "phases"),
    [
        ("1-3-4-2", {1: 0, 3: 540, 4: 360, 2: 180}),
        ("1-5-3-6-2-4", {1: 0, 5: 600, 3: 480, 6: 360, 2: 240, 4: 120}),
        ("1-2-4-5-3", {1: 0, 2: 576, 4: 432, 5: 288, 3: 144}),
    ],
)
def test_phases_at_the_first_position_are_those_worked_by_hand(order: str, phases: dict[int, int]) -> None:
    assert {cylinder: -angle % 720 for cylinder, angle in _angles(order).items()} == phases


def _lifts(opens: Decimal, closes: Decimal, phase: Fraction) -> bool:
    """A cam turned degree by degree: whether its flank or nose, ramps included, is under the follower."""
    ramp_begins, ramp_ends = int(opens) - MARGIN, int(closes) + MARGIN
    return any((degree - phase) % 720 == 0 for degree in range(ramp_begins + 1, ramp_ends))


@pytest.mark.parametrize("order", ORDERS)
def test_no_valve_is_set_while_a_simulated_cam_lifts_it(order: str) -> None:
    angles = _angles(order)
    intake_opens, intake_closes = 360 - USUAL_TIMING.ivo, 540 + USUAL_TIMING.ivc
    exhaust_opens, exhaust_closes = 180 - USUAL_TIMING.evo, 360 + USUAL_TIMING.evc
    for method in Method:
        for stop in setting_order(angles, method, USUAL_TIMING):
            for cylinder, angle in angles.items():
                phase = (stop.crank - angle) % 720
                free_intake = cylinder in stop.intake + stop.also_intake
                free_exhaust = cylinder in stop.exhaust + stop.also_exhaust
                assert free_intake is not _lifts(intake_opens, intake_closes, phase)
                assert free_exhaust is not _lifts(exhaust_opens, exhaust_closes, phase)


def test_usual_timing_frees_a_valve_more_where_the_reference_says_so() -> None:
    """Worked by hand: in a V8 the intake 630 past and the exhaust 90 past TDC on compression; in the 1-2-4-5-3 five,
    one turn on, intake 5 and exhaust 4; in ones, threes, fours and sixes none."""

    def more(order: str) -> list[tuple[tuple[int, ...], tuple[int, ...]]]:
        stops = setting_order(_angles(order), Method.TWO_POSITION, USUAL_TIMING)
        return [(stop.also_intake, stop.also_exhaust) for stop in stops]

    assert more("1-8-7-2-6-5-4-3") == [((8,), (3,)), ((5,), (2,))]
    assert more("1-2-4-5-3")[1] == ((5,), (4,))
    for order in ("1", "1-2-3", "1-3-4-2", "1-5-3-6-2-4"):
        assert set(more(order)) == {((), ())}


@pytest.mark.parametrize(("first", "last", "valve"), [(395, 835, "exhaust"), (605, 1045, "intake")])
def test_the_usual_windows_are_those_worked_by_hand_with_both_ends_in_them(first: int, last: int, valve: str) -> None:
    """Usual timing 20/50/50/20 and 15 degrees to spare (common practice): exhaust 360 + 20 + 15 to 900 - 50 - 15,
    intake 540 + 50 + 15 to 1080 - 20 - 15."""
    is_free = USUAL_TIMING.frees_exhaust if valve == "exhaust" else USUAL_TIMING.frees_intake
    free = [degree for degree in range(720) if is_free(Fraction(degree))]
    assert free == sorted(degree % 720 for degree in range(first, last + 1))


def test_setting_one_valve_as_the_other_of_its_cylinder_moves_is_inside_the_windows() -> None:
    """Trade press: set the intake as the exhaust starts to open, the exhaust as the intake is nearly shut."""
    assert USUAL_TIMING.frees_intake(Fraction(180) - Fraction(USUAL_TIMING.evo))
    assert USUAL_TIMING.frees_exhaust(Fraction(540) + Fraction(USUAL_TIMING.ivc))
