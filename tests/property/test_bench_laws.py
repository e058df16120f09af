"""Laws of the bench sums.

Valve order: every valve is set exactly once, by either method, and none while its cam moves it. Shims: the lash left is
never further off than half a step, and what no step can mend is refused. Gaps: a verdict is the same in mm and inch, and
finer blades never overturn it. Screws: turning there and back is no turn. Oil: the index rises with the viscosity at
100 °C, oil thins as it warms, a grade named with HTHS known is the thickest candidate. Pressure falls as the site rises.
"""

from collections import Counter
from collections.abc import Sequence
from decimal import Decimal
from fractions import Fraction
from itertools import pairwise

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from fleetcare.domain.sheets import Place
from fleetcare.errors import Refused
from fleetcare.rules.compression import cranking_pressure
from fleetcare.rules.j300 import GRADES, grade_oil
from fleetcare.rules.lash import Gap, judge
from fleetcare.rules.lash_setting import LashAt, ScrewAt, choose_shim, screw_turn
from fleetcare.rules.oil import wear_rate
from fleetcare.rules.valve_order import (
    CYCLE,
    TURN,
    USUAL_TIMING,
    Method,
    Position,
    easiest_order,
    firing_angles,
    mates,
    setting_order,
)
from fleetcare.rules.viscosity import viscosity_index, walther

MM_PER_INCH = Decimal("25.4")

orders = st.integers(1, 16).flatmap(lambda cylinders: st.permutations(range(1, cylinders + 1)))


def thousandths(least: int, most: int) -> st.SearchStrategy[Decimal]:
    """Figures from `least` to `most` thousandths, exact."""
    return st.integers(least, most).map(lambda n: Decimal(n) / 1000)


@st.composite
def uneven_engines(draw: st.DrawFn) -> tuple[list[int], list[Decimal]]:
    """A firing order and intervals of whole degrees that sum to 720."""
    order = draw(orders)
    cuts = draw(st.sets(st.integers(1, CYCLE - 1), min_size=len(order) - 1, max_size=len(order) - 1))
    ends = [0, *sorted(cuts), CYCLE]
    return order, [Decimal(end - begin) for begin, end in pairwise(ends)]


def _valves(stops: Sequence[Position]) -> list[tuple[str, int]]:
    return [
        *(("intake", cylinder) for stop in stops for cylinder in stop.intake),
        *(("exhaust", cylinder) for stop in stops for cylinder in stop.exhaust),
    ]


@given(orders)
def test_every_valve_is_set_exactly_once(order: Sequence[int]) -> None:
    angles = firing_angles(order)
    every_valve = Counter((kind, cylinder) for kind in ("intake", "exhaust") for cylinder in order)
    method, stops = easiest_order(angles)
    assert Counter(_valves(stops)) == every_valve
    assert Counter(_valves(setting_order(angles, Method.ONE_BY_ONE))) == every_valve
    # 360/n degrees from overlap is too near for a usual cam from 11 on: 20 degrees and 15 to spare.
    assert method is (Method.ONE_BY_ONE if len(order) in {11, 13, 15} else Method.TWO_POSITION)
    assert len(stops) == (len(order) if method is Method.ONE_BY_ONE else min(2, len(order)))


@given(uneven_engines())
def test_an_uneven_engine_sets_every_valve_once_and_none_within_its_ramps_of_overlap(
    engine: tuple[list[int], list[Decimal]],
) -> None:
    order, intervals = engine
    angles = firing_angles(order, intervals)
    _, stops = easiest_order(angles, USUAL_TIMING)
    assert Counter(_valves(stops)) == Counter((kind, cylinder) for kind in ("intake", "exhaust") for cylinder in order)
    for stop in stops:
        assert not set(stop.intake) & set(stop.also_intake)
        assert not set(stop.exhaust) & set(stop.also_exhaust)
        for cylinder in {*stop.intake, *stop.exhaust, *stop.also_intake, *stop.also_exhaust}:
            assert abs((stop.crank - angles[cylinder]) % CYCLE - TURN) >= 35


@given(orders)
def test_mates_pair_all_cylinders_of_an_even_number_and_none_of_an_odd(order: Sequence[int]) -> None:
    pairs = mates(firing_angles(order))
    paired = sorted(cylinder for pair in pairs for cylinder in pair)
    assert paired == ([] if len(order) % 2 else sorted(order))


@given(orders)
def test_one_by_one_stops_at_every_cylinders_compression_within_two_turns(order: Sequence[int]) -> None:
    stops = setting_order(firing_angles(order), Method.ONE_BY_ONE)
    assert [stop.tdc_compression for stop in stops] == list(order)
    assert [stop.crank for stop in stops] == [Fraction(CYCLE * k, len(order)) for k in range(len(order))]


@given(
    measured=thousandths(0, 1500),
    target=thousandths(50, 800),
    fitted=thousandths(2000, 5000),
    step=st.sampled_from(["0.02", "0.025", "0.03", "0.05", "0.1"]).map(Decimal),
)
def test_a_chosen_shim_is_a_whole_step_and_leaves_the_lash_within_half_a_step(
    measured: Decimal, target: Decimal, fitted: Decimal, step: Decimal
) -> None:
    choice = choose_shim(measured, target, fitted, step)
    assert choice.shim % step == 0
    assert abs(choice.lash - target) <= step / 2
    assert choice.lash - target != -step / 2  # of a tie the thinner, which leaves the lash wide
    assert choice.shim + choice.lash == fitted + measured


@given(
    measured=thousandths(0, 1500),
    thinnest=thousandths(1500, 3000),
    thickest=thousandths(1500, 3500),
    fitted=thousandths(2000, 3000),
)
def test_a_shim_from_stock_is_in_stock_and_near_enough_or_refused(
    measured: Decimal, thinnest: Decimal, thickest: Decimal, fitted: Decimal
) -> None:
    target, step = Decimal("0.2"), Decimal("0.05")
    stocked = [step * n for n in range(1, 100) if thinnest <= step * n <= thickest]
    ideal = fitted + measured - target
    near = [size for size in stocked if abs(size - ideal) <= step / 2]
    if near:
        assert choose_shim(measured, target, fitted, step, stock=(thinnest, thickest)).shim == near[0]
    else:
        with pytest.raises(Refused, match="no "):
            choose_shim(measured, target, fitted, step, stock=(thinnest, thickest))


@given(thousandths(0, 60), thousandths(0, 20), thousandths(1, 40), thousandths(0, 20))
def test_a_verdict_is_the_same_in_inch_and_mm(goes: Decimal, wider: Decimal, least: Decimal, width: Decimal) -> None:
    gap, most = Gap(goes, goes + wider), least + width
    inches = judge(gap, least, most)
    metric = judge(Gap(gap.goes * MM_PER_INCH, gap.stops * MM_PER_INCH), least * MM_PER_INCH, most * MM_PER_INCH)
    assert metric.place is inches.place
    assert metric.off_least == inches.off_least * MM_PER_INCH
    assert metric.off_most == inches.off_most * MM_PER_INCH


@given(thousandths(0, 600), thousandths(1, 50), thousandths(1, 50), thousandths(1, 400), thousandths(0, 200))
def test_finer_blades_never_overturn_a_verdict(
    goes: Decimal, first: Decimal, second: Decimal, least: Decimal, width: Decimal
) -> None:
    most = least + width
    coarse = judge(Gap(goes, goes + first + second), least, most)
    assume(coarse.place is not Place.UNDECIDED)
    for finer in (Gap(goes, goes + first), Gap(goes + first, goes + first + second), Gap(goes, goes)):
        verdict = judge(finer, least, most)
        assert verdict.place is coarse.place
        assert coarse.off_least <= verdict.off_least <= verdict.off_most <= coarse.off_most


@given(
    thousandths(0, 1500),
    thousandths(0, 1500),
    st.sampled_from(["0.5", "0.75", "1", "1.25"]).map(Decimal),
    thousandths(800, 2000),
    st.sampled_from(ScrewAt),
    st.sampled_from(LashAt),
)
def test_turning_a_screw_there_and_back_is_no_turn(
    measured: Decimal, target: Decimal, pitch: Decimal, ratio: Decimal, screw_at: ScrewAt, lash_at: LashAt
) -> None:
    there, back = (
        screw_turn(begin, end, pitch, rocker_ratio=ratio, screw_at=screw_at, lash_at=lash_at)
        for begin, end in ((measured, target), (target, measured))
    )
    assert there.turns == -back.turns
    assert (there.turns > 0) == (target > measured)
    assert {there.direction, back.direction} in ({"none"}, {"looser", "tighter"})


@given(thousandths(2000, 69_000), thousandths(1, 1000), st.integers(101, 400))
def test_an_oil_as_thick_at_40_has_a_higher_index_the_thicker_it_is_at_100(
    kv100: Decimal, more: Decimal, hundredths: int
) -> None:
    """Inside the table and up to an index of 400: beyond what any oil has the formula of procedure B turns."""
    kv40 = (kv100 + more) * hundredths / 40
    assume(kv40 > kv100 + more)
    thinner, thicker = viscosity_index(kv40, kv100), viscosity_index(kv40, kv100 + more)
    assume(thicker.unrounded <= 400)
    assert thinner.unrounded < thicker.unrounded
    assert thinner.rounded <= thicker.rounded


@given(thousandths(2000, 60_000), thousandths(300, 60_000), st.integers(20, 120), st.integers(1, 30))
def test_oil_thins_as_it_warms(kv100: Decimal, more: Decimal, temperature: int, warmer: int) -> None:
    line = walther(kv100 + more, kv100)
    assert line.at(Decimal(temperature)) > line.at(Decimal(temperature + warmer))


@given(thousandths(3000, 30_000), thousandths(1500, 5000))
def test_a_grade_named_with_high_shear_viscosity_known_is_the_thickest_candidate(kv100: Decimal, hths: Decimal) -> None:
    grading = grade_oil(kv100, hths)
    fitting = [grade for grade in GRADES if grade.least <= kv100 < grade.below and hths >= grade.hths]
    assert list(grading.candidates) == fitting
    assert grading.grade == (fitting[-1] if fitting else None)
    assert set(grading.candidates) <= set(grade_oil(kv100).candidates)


@given(thousandths(0, 500_000), thousandths(1000, 500_000), thousandths(1, 8000), thousandths(1, 8000))
def test_top_up_only_ever_raises_the_wear_that_is_read(
    ppm: Decimal, hours: Decimal, added: Decimal, more: Decimal
) -> None:
    raw, little, much = (
        wear_rate(ppm, hours, make_up=(litres, Decimal(8))) for litres in (Decimal(0), added, added + more)
    )
    assert raw.ppm_per_100h <= little.ppm_per_100h <= much.ppm_per_100h
    assert little.corrected_ppm <= ppm * (1 + little.make_up)


@given(st.integers(-400, 4000), st.integers(1, 4000), thousandths(2000, 25_000))
def test_less_is_expected_on_the_gauge_the_higher_the_site(altitude: int, higher: int, ratio: Decimal) -> None:
    low, high = (cranking_pressure(ratio, altitude=Decimal(site)) for site in (altitude, altitude + higher))
    assert low.gauge > high.gauge > 0
    assert float(low.gauge / high.gauge) == pytest.approx(float(low.ambient / high.ambient), rel=1e-12)
