"""Laws of valve lash sheets.

A verdict is the same in millimetres and in inches. Tightening a check range never turns a value that was out into one
that is not. The order of rows never matters. The walk comes to every point exactly once. A value left out is never judged
milder than the same value found out. A doubt about a gap is the same in either unit.
"""

from datetime import date
from decimal import Decimal
from random import Random

from hypothesis import given
from hypothesis import strategies as st

from fleetcare.domain.engines import Bridged, Side, ValveTrain
from fleetcare.domain.sheets import LashSpec, Phase, SheetValue, Verdict
from fleetcare.rules.judge_lash import judge_sheet, judge_value, stand_of
from fleetcare.rules.lash import MM_PER
from fleetcare.rules.lash_doubts import doubt
from fleetcare.rules.lash_points import lash_points, lash_walk

INCH = MM_PER["in"]
POINTS = lash_points(ValveTrain(2, 4))
SEVERITY = [Verdict.NOT_JUDGED, Verdict.IN, Verdict.ALERT, Verdict.ALARM]

thousandths = st.integers(0, 3000).map(lambda n: Decimal(n) / 1000)
phases = st.sampled_from([Phase.FOUND, Phase.LEFT])


@st.composite
def inch_values(draw: st.DrawFn, point: str = "1I1") -> SheetValue:
    """A gap in inches, as a figure, as two blades, or as less than a blade."""
    figure, phase = draw(thousandths) / 25, draw(phases)
    form = draw(st.sampled_from(["plain", "blades", "bound"]))
    if form == "blades":
        return SheetValue(
            "lash", point, phase, None, figure, figure + draw(thousandths) / 100 + Decimal("0.0005"), "in"
        )
    return SheetValue("lash", point, phase, figure, None, None, "in", "<" if form == "bound" else "")


@st.composite
def ranges(draw: st.DrawFn) -> tuple[Decimal, Decimal]:
    """A check range in inches."""
    least = draw(st.integers(4, 20)) * Decimal("0.001")
    return least, least + draw(st.integers(0, 10)) * Decimal("0.001")


def in_mm(value: SheetValue) -> SheetValue:
    """The same gap, written in millimetres."""
    value_mm, low, high = (None if end is None else end * INCH for end in (value.value, value.low, value.high))
    return SheetValue("lash", value.point, value.phase, value_mm, low, high, "mm", value.qualifier)


def a_spec(limits: tuple[Decimal, Decimal], unit: str, condition: str = "any") -> LashSpec:
    """The same range for both sides."""
    scale = 1 if unit == "in" else INCH
    both = limits[0] * scale, limits[1] * scale
    return LashSpec(date.min, unit, condition, dict.fromkeys(Side, both))


@given(inch_values(), ranges())
def test_a_verdict_is_the_same_in_any_unit(value: SheetValue, limits: tuple[Decimal, Decimal]) -> None:
    answers = {
        (one.verdict, one.place, one.unjudged)
        for unit in ("mm", "in")
        for written in (value, in_mm(value))
        for one in [judge_value(written, Side.INTAKE, a_spec(limits, unit), "")]
    }
    assert len(answers) == 1


@given(inch_values(), ranges())
def test_a_doubt_is_the_same_in_any_unit(value: SheetValue, limits: tuple[Decimal, Decimal]) -> None:
    mm = limits[0] * INCH, limits[1] * INCH
    assert len({doubt(value, limits, "in") is None, doubt(value, mm, "mm") is None}) == 1
    assert (doubt(value, limits, "in") is None) == (doubt(in_mm(value), limits, "in") is None)


@given(inch_values(), ranges(), st.integers(0, 5), st.integers(0, 5))
def test_tightening_a_range_never_unflags_a_value(
    value: SheetValue, limits: tuple[Decimal, Decimal], up: int, down: int
) -> None:
    least = min(limits[0] + up * Decimal("0.001"), limits[1])
    most = max(limits[1] - down * Decimal("0.001"), least)
    wide, tight = (judge_value(value, Side.INTAKE, a_spec(ends, "in"), "") for ends in (limits, (least, most)))
    if wide.is_out:
        assert tight.verdict is wide.verdict


@given(inch_values(), ranges())
def test_a_value_left_is_never_judged_milder_than_the_same_found(
    value: SheetValue, limits: tuple[Decimal, Decimal]
) -> None:
    found, left = (
        judge_value(
            SheetValue("lash", "1I1", phase, value.value, value.low, value.high, "in", value.qualifier),
            Side.INTAKE,
            a_spec(limits, "in"),
            "",
        ).verdict
        for phase in (Phase.FOUND, Phase.LEFT)
    )
    assert SEVERITY.index(left) >= SEVERITY.index(found)


@given(
    st.lists(st.sampled_from(POINTS).flatmap(lambda point: inch_values(point.name)), max_size=12).map(
        lambda values: list({(value.point, value.phase): value for value in values}.values())
    ),
    ranges(),
    st.randoms(use_true_random=False),
)
def test_the_order_of_rows_never_matters(
    values: list[SheetValue], limits: tuple[Decimal, Decimal], random: Random
) -> None:
    shuffled = [*values]
    random.shuffle(shuffled)
    spec = a_spec(limits, "in")
    judged = judge_sheet(values, POINTS, spec, "")
    assert judge_sheet(shuffled, POINTS, spec, "") == judged
    stand = stand_of(judged, POINTS)
    names = [point.name for point in POINTS]
    for told in (stand.missing, stand.found_out, stand.unset, stand.left_out, stand.untold):
        assert sorted(told, key=names.index) == list(told)
    assert {*stand.left_out}.isdisjoint(stand.untold)
    assert {*stand.missing}.isdisjoint([value.point for value in values])


@st.composite
def trains(draw: st.DrawFn) -> ValveTrain:
    """An engine of any kind that has lash points."""
    valves = draw(st.sampled_from([2, 3, 4, 5]))
    fitting = {2: ["none"], 3: ["none", "intake"], 4: ["none", "intake", "exhaust", "both"], 5: ["none", "exhaust"]}
    order = draw(st.integers(1, 16).flatmap(lambda cylinders: st.permutations(range(1, cylinders + 1))))
    known = draw(st.booleans())
    bridged = Bridged(draw(st.sampled_from(fitting[valves])))
    return ValveTrain(len(order), valves, bridged, firing_order=tuple(order) if known else ())


@given(trains())
def test_the_walk_comes_to_every_point_exactly_once(train: ValveTrain) -> None:
    points = lash_points(train)
    walked = [point for stop in lash_walk(train) for point in stop.points]
    assert sorted(walked, key=points.index) == list(points)
    assert len({point.name for point in points}) == len(points)
    valves = sum(point.valves for point in points)
    assert valves == train.cylinders * train.valves_per_cylinder
