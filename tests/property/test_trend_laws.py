"""Laws of trends and of limits from samples.

In other units of the measure the slope is so many times as much and the limit is reached at the same x. Shifting the
level of a segment, as an adjustment does, leaves slope and scatter. The order of values never matters. A steeper wear is
never reached later. The range holds the likely x, and a wider coverage holds the narrower range. Whatever was measured,
projecting gives either a range or the reasons against it. A higher multiple or percentage never gives a lower limit.
"""

from decimal import Decimal
from random import Random

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from fleetcare.domain.rule_book import End, Method
from fleetcare.domain.trends import Point, Projection, Segment
from fleetcare.rules.projection import project
from fleetcare.rules.statistical_limits import Positions, StatisticalLimit, percentile_limit, spread_limit
from fleetcare.rules.trends import fit_trend

LIMIT = Decimal("0.25")
INTERVAL = Decimal(300)

randoms = st.randoms(use_true_random=False)
samples = st.lists(st.integers(0, 400).map(lambda n: Decimal(n) / 10), min_size=2, max_size=40)


@st.composite
def worn(draw: st.DrawFn) -> list[Segment]:
    """Gaps of a valve that closes by 0.02 to 0.06 mm per 1000 h, set to about 0.40 mm now and then, gauged to 0.01 mm."""
    rate = draw(st.integers(20, 60))
    segments = []
    x = Decimal(draw(st.integers(0, 5000)))
    for number in range(draw(st.integers(1, 3))):
        opened, level = x, Decimal(draw(st.integers(400, 440))) / 1000
        points = []
        for _ in range(draw(st.integers(3, 6))):
            off = Decimal(draw(st.integers(-5, 5))) / 1000
            points.append(Point(x, level - rate * (x - opened) / 1_000_000 + off))
            x += draw(st.integers(200, 700))
        segments.append(Segment(tuple(points), opened if number else None))
    return segments


@st.composite
def anything(draw: st.DrawFn) -> list[Segment]:
    """Segments of any values: none, all at one x, all the same, going anywhere."""
    figures = st.integers(-3, 3).map(Decimal)
    points = st.lists(st.builds(Point, figures, figures), max_size=6).map(tuple)
    return draw(st.lists(st.builds(Segment, points, st.none() | figures), max_size=4))


def projected(segments: list[Segment], limit: Decimal = LIMIT, coverage: str = "0.80") -> Projection:
    now = max(point.x for segment in segments for point in segment.points)
    return project(segments, limit, End.LOW, now=now, interval=INTERVAL, coverage=Decimal(coverage))


def ends(projection: Projection) -> tuple[Decimal, Decimal, Decimal]:
    """The early, likely and late x of a projection that has them; drops the case otherwise."""
    assume(projection.early is not None)
    assert projection.early is not None
    assert projection.likely is not None
    assert projection.late is not None
    return projection.early, projection.likely, projection.late


def remeasured(segments: list[Segment], scale: Decimal, tilt: Decimal = Decimal(0)) -> list[Segment]:
    """The same values in another unit, or falling by `tilt` more per x from the beginning of their segment."""
    return [
        Segment(
            tuple(Point(point.x, scale * point.y - tilt * (point.x - segment.points[0].x)) for point in segment.points),
            segment.opened,
        )
        for segment in segments
    ]


@given(worn(), st.sampled_from(["25.4", "1000", "0.03937"]).map(Decimal))
def test_another_unit_scales_the_slope_and_leaves_the_x_of_the_limit(segments: list[Segment], scale: Decimal) -> None:
    ours, scaled = projected(segments), projected(remeasured(segments, scale), LIMIT * scale)
    assert ours.trend
    assert scaled.trend
    assert scaled.trend.slope == pytest.approx(ours.trend.slope * scale)
    assert [one.obstacle for one in scaled.hindrances] == [one.obstacle for one in ours.hindrances]
    assert ends(scaled) == pytest.approx(ends(ours))


@given(worn(), st.lists(st.integers(-500, 500), min_size=3, max_size=3))
def test_shifting_the_level_of_a_segment_leaves_slope_and_scatter(segments: list[Segment], shifts: list[int]) -> None:
    shifted = [
        Segment(tuple(Point(point.x, point.y + Decimal(shift) / 1000) for point in segment.points), segment.opened)
        for segment, shift in zip(segments, shifts, strict=False)
    ]
    before, after = fit_trend(segments), fit_trend(shifted)
    assert before
    assert after
    assert after.slope == pytest.approx(before.slope, abs=Decimal("1e-20"))
    assert after.scatter == pytest.approx(before.scatter, abs=Decimal("1e-20"))


@given(st.one_of(worn(), anything()), randoms)
def test_the_order_of_values_never_matters(segments: list[Segment], random: Random) -> None:
    shuffled = [
        Segment(tuple(random.sample(segment.points, len(segment.points))), segment.opened) for segment in segments
    ]
    assert fit_trend(shuffled) == fit_trend(segments)


@given(worn(), st.integers(1, 100))
def test_a_steeper_wear_comes_to_its_limit_sooner(segments: list[Segment], more: int) -> None:
    # Only the trend is compared: a steeper one may well be past the limit, or too far no more.
    flat, steep = fit_trend(segments), fit_trend(remeasured(segments, Decimal(1), Decimal(more) / 1_000_000))
    assert flat
    assert steep
    assume(flat.slope < 0)
    assert steep.slope < flat.slope
    reached = [trend.mean_x + (LIMIT - trend.mean_y) / trend.slope for trend in (steep, flat)]
    assume(flat.mean_y > LIMIT)
    assert reached[0] < reached[1]


@given(worn())
def test_the_range_holds_the_likely_x_and_a_wider_coverage_the_narrower_range(segments: list[Segment]) -> None:
    narrow, wide = ends(projected(segments)), projected(segments, coverage="0.95")
    assert narrow[0] <= narrow[1] <= narrow[2]
    if wide.early is not None:
        assert ends(wide)[0] <= narrow[0]
        assert ends(wide)[2] >= narrow[2]


@given(worn())
def test_the_limit_lies_at_the_ends_of_the_range_a_quantile_of_errors_from_the_line(segments: list[Segment]) -> None:
    projection = projected(segments)
    trend = projection.trend
    assert trend
    early, _, late = ends(projection)
    assume(trend.scatter > 0)
    off = [abs(trend.value_at(x) - LIMIT) / trend.error_at(x) for x in (early, late)]
    assert off[0] == pytest.approx(off[1])


@given(
    anything(),
    st.integers(-4, 4).map(Decimal),
    st.sampled_from(End),
    st.integers(-9, 9).map(Decimal),
    st.integers(0, 4).map(Decimal),
    st.sampled_from(["0.01", "0.80", "0.999999"]).map(Decimal),
    st.booleans(),
)
def test_whatever_was_measured_there_is_a_range_or_a_reason_against_it(
    segments: list[Segment],
    limit: Decimal,
    end: End,
    now: Decimal,
    interval: Decimal,
    coverage: Decimal,
    is_normalised: bool,
) -> None:
    told = project(segments, limit, end, now=now, interval=interval, coverage=coverage, is_normalised=is_normalised)
    assert (told.likely is None) == bool(told.hindrances)
    assert (told.early is None) == (told.late is None) == (told.likely is None)


@given(samples, st.integers(-30, 30), st.integers(1, 30), st.sampled_from([Method.MEAN, Method.ROBUST]))
def test_a_higher_multiple_gives_a_higher_limit(samples: list[Decimal], k: int, more: int, method: Method) -> None:
    assert method is not Method.PERCENTILE
    limits = [spread_limit(samples, method, Decimal(n) / 10, fewest=2) for n in (k, k + more)]
    values = [limit.value for limit in limits if isinstance(limit, StatisticalLimit)]
    assert values == sorted(set(values))


@given(samples, randoms, st.sampled_from(Positions), st.integers(0, 100), st.integers(0, 100))
def test_a_higher_percentage_gives_no_lower_limit_and_no_order_of_samples_another(
    samples: list[Decimal], random: Random, positions: Positions, one: int, other: int
) -> None:
    shuffled = random.sample(samples, len(samples))
    limits = [
        percentile_limit(those, Decimal(percent), fewest=2, positions=positions)
        for those, percent in ((samples, min(one, other)), (shuffled, max(one, other)), (samples, max(one, other)))
    ]
    low, high, same = (limit.value for limit in limits if isinstance(limit, StatisticalLimit))
    assert min(samples) <= low <= high == same <= max(samples)
