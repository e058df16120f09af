"""When a measure comes to its limit, and each reason why that is not told."""

from decimal import Decimal

import pytest

from fleetcare.domain.rule_book import End
from fleetcare.domain.trends import Hindrance, Obstacle, Point, Projection, Segment
from fleetcare.errors import Refused
from fleetcare.rules.projection import project

# Falls about 0.05 per 1000 h.
WORN = ("0 0.400", "500 0.376", "1000 0.350", "1500 0.324", "2000 0.300")


def a_segment(*points: str, opened: str | None = None) -> Segment:
    pairs = [point.split() for point in points]
    return Segment(tuple(Point(Decimal(x), Decimal(y)) for x, y in pairs), Decimal(opened) if opened else None)


def asked(
    *segments: Segment,
    limit: str = "0.25",
    end: End = End.LOW,
    now: str = "2000",
    interval: str = "500",
    coverage: str = "0.80",
    is_normalised: bool = True,
) -> Projection:
    return project(
        segments,
        Decimal(limit),
        end,
        now=Decimal(now),
        interval=Decimal(interval),
        coverage=Decimal(coverage),
        is_normalised=is_normalised,
    )


def why_not(projection: Projection) -> list[Obstacle]:
    return [hindrance.obstacle for hindrance in projection.hindrances]


def test_a_steady_wear_comes_to_its_limit_where_its_line_does() -> None:
    projection = asked(a_segment(*WORN))
    assert projection.hindrances == ()
    assert projection.early
    assert projection.likely
    assert projection.late
    # By hand: slope -126 / 2,500,000; 1000 + (0.35 - 0.25) / 0.0000504.
    assert projection.early < round(projection.likely) == 2984 < projection.late
    assert projection.not_before is None


def test_a_rising_measure_comes_to_the_most_allowed() -> None:
    rising = a_segment("0 10", "50 20", "100 30", "150 40")
    projection = asked(rising, limit="60", end=End.HIGH, now="150", interval="50")
    assert {projection.early, projection.likely, projection.late} == {Decimal(250)}


def test_a_wider_coverage_widens_the_range_and_leaves_the_likely() -> None:
    narrow, wide = asked(a_segment(*WORN), coverage="0.80"), asked(a_segment(*WORN), coverage="0.95")
    assert wide.likely == narrow.likely
    assert wide.early
    assert wide.late
    assert narrow.early
    assert narrow.late
    assert wide.early < narrow.early
    assert wide.late > narrow.late


def test_a_line_that_passed_the_limit_while_the_last_value_has_not_is_told() -> None:
    projection = asked(a_segment("0 0.40", "500 0.36", "1000 0.31", "1500 0.24", "2000 0.25"))
    assert why_not(projection) == []
    assert projection.likely
    assert projection.likely < 2000


def test_no_value_at_all_is_too_few_and_too_short() -> None:
    for projection in (asked(), asked(a_segment())):
        assert projection.hindrances == (
            Hindrance(Obstacle.TOO_FEW, Decimal(-1), Decimal(2)),
            Hindrance(Obstacle.SHORT_SPAN, Decimal(0), Decimal(500)),
        )


def test_under_two_degrees_of_freedom_are_too_few() -> None:
    assert asked(a_segment(*WORN[2:])).hindrances == (Hindrance(Obstacle.TOO_FEW, Decimal(1), Decimal(2)),)
    assert why_not(asked(a_segment(*WORN[1:]))) == []


def test_a_span_of_just_one_inspection_interval_is_enough() -> None:
    assert why_not(asked(a_segment(*WORN), interval="2000", limit="0.29")) == []
    short = Hindrance(Obstacle.SHORT_SPAN, Decimal(2000), Decimal(2001))
    assert asked(a_segment(*WORN), interval="2001").hindrances == (short,)


def test_watched_too_shortly_alone_still_tells_the_likely_figure_but_nothing_to_plan_by() -> None:
    long_enough, too_short = (asked(a_segment(*WORN), interval=interval) for interval in ("2000", "2001"))
    assert too_short.likely_so_far == long_enough.likely
    assert (too_short.early, too_short.likely, too_short.late, long_enough.likely_so_far) == (None, None, None, None)
    assert asked(a_segment(*WORN), interval="2001", limit="0.01").likely_so_far is None  # further than was watched
    assert asked(a_segment(*WORN), interval="2001", limit="0.35").likely_so_far is None  # passed


def test_a_last_value_two_inspection_intervals_old_is_not_too_old_yet() -> None:
    assert why_not(asked(a_segment(*WORN), now="3000")) == []
    old = Hindrance(Obstacle.OLD_VALUE, Decimal(1001), Decimal(1000))
    assert asked(a_segment(*WORN), now="3001").hindrances == (old,)


@pytest.mark.parametrize(("end", "limit"), [(End.LOW, "0.3001"), (End.HIGH, "0.2999")])
def test_a_last_value_past_its_limit_is_no_matter_of_a_projection(end: End, limit: str) -> None:
    projection = asked(a_segment(*WORN), end=end, limit=limit)
    assert projection.hindrances[0] == Hindrance(Obstacle.PAST_LIMIT, Decimal("0.300"), Decimal(limit))
    assert projection.likely is None


def test_a_last_value_that_touches_its_limit_is_not_past_it() -> None:
    for end in End:
        assert Obstacle.PAST_LIMIT not in why_not(asked(a_segment(*WORN), limit="0.300", end=end))


def test_a_limit_passed_before_the_last_adjustment_is_passed_no_more() -> None:
    worn = a_segment("0 0.40", "1000 0.32", "2000 0.24")
    assert why_not(asked(worn, a_segment("2000 0.40", "2500 0.36", opened="2000"), now="2500")) == []


def test_a_slope_away_from_the_limit_never_comes_to_it() -> None:
    projection = asked(a_segment(*WORN), limit="0.45", end=End.HIGH)
    assert projection.trend
    assert projection.hindrances == (Hindrance(Obstacle.AWAY, projection.trend.slope, Decimal(0)),)
    rising = a_segment("0 10", "50 21", "100 30", "150 40")
    assert why_not(asked(rising, limit="5", end=End.LOW, now="150", interval="50")) == [Obstacle.AWAY]


def test_a_level_value_has_no_slope() -> None:
    level = a_segment("0 0.40", "500 0.40", "1000 0.40", "1500 0.40")
    assert asked(level).hindrances == (Hindrance(Obstacle.NO_SLOPE, None, Decimal(1)),)


def test_a_slope_lost_in_the_scatter_is_no_slope() -> None:
    """By hand: slope -25 / 2,500,000, s^2 0.00047 / 3, t 1.6377: gq = 1.681."""
    lost = a_segment("0 0.40", "500 0.38", "1000 0.40", "1500 0.37", "2000 0.38")
    (hindrance,) = asked(lost).hindrances
    assert hindrance.obstacle is Obstacle.NO_SLOPE
    assert hindrance.figure
    assert round(hindrance.figure, 3) == Decimal("1.681")


def test_a_slope_plain_at_one_coverage_is_lost_at_a_higher_one() -> None:
    falling = a_segment("0 0.40", "500 0.38", "1000 0.38", "1500 0.36", "2000 0.36")
    assert Obstacle.NO_SLOPE not in why_not(asked(falling))
    assert why_not(asked(falling, coverage="0.9999")) == [Obstacle.NO_SLOPE]


def test_values_all_taken_at_once_have_no_slope() -> None:
    at_once = a_segment("500 0.40", "500 0.39", "500 0.38", "500 0.37")
    assert why_not(asked(at_once, now="500")) == [Obstacle.SHORT_SPAN, Obstacle.NO_SLOPE]


def test_a_limit_just_one_watched_span_ahead_is_told_and_one_beyond_is_not() -> None:
    straight = a_segment("0 0.40", "500 0.375", "1000 0.350", "1500 0.325")
    assert asked(straight, now="1500").likely == 3000
    beyond = asked(straight, now="1500", limit="0.2499")
    assert beyond.hindrances == (Hindrance(Obstacle.TOO_FAR, Decimal(3002), Decimal(3000)),)
    assert {beyond.early, beyond.likely, beyond.late} == {None}
    assert beyond.not_before == 3000


def test_beyond_what_was_watched_the_earliest_is_said_where_that_is_sooner() -> None:
    scattered = a_segment("0 0.40", "500 0.37", "1000 0.39", "1500 0.35", "2000 0.36")
    projection = asked(scattered, limit="0.30")
    assert why_not(projection) == [Obstacle.TOO_FAR]
    assert projection.not_before
    assert projection.not_before < 4000


def test_an_adjustment_without_a_left_value_hides_where_the_wear_began() -> None:
    worn, since = a_segment(*WORN), a_segment("2500 0.38", "3000 0.35", opened="2100")
    assert asked(worn, since, now="3000").hindrances == (Hindrance(Obstacle.NO_LEFT_VALUE, Decimal(2100)),)
    assert why_not(asked(worn, Segment((), Decimal(2100)))) == [Obstacle.NO_LEFT_VALUE]


def test_an_earlier_adjustment_without_a_left_value_does_no_harm() -> None:
    since = a_segment("2500 0.38", "3000 0.355", opened="2100")
    last = a_segment("3000 0.40", "3500 0.376", opened="3000")
    assert why_not(asked(a_segment(*WORN), since, last, now="3500")) == []


def test_oil_not_brought_to_hours_and_top_up_is_not_projected() -> None:
    assert why_not(asked(a_segment(*WORN), is_normalised=False)) == [Obstacle.NOT_NORMALISED]


def test_every_reason_is_said_at_once() -> None:
    projection = asked(a_segment("100 0.20"), now="5000", is_normalised=False)
    assert why_not(projection) == [
        Obstacle.PAST_LIMIT,
        Obstacle.NOT_NORMALISED,
        Obstacle.TOO_FEW,
        Obstacle.SHORT_SPAN,
        Obstacle.OLD_VALUE,
    ]


@pytest.mark.parametrize("coverage", ["0", "1", "80", "-0.1"])
def test_a_coverage_that_is_no_share_is_refused(coverage: str) -> None:
    with pytest.raises(Refused, match=f"coverage {float(coverage)} cannot be right"):
        asked(a_segment(*WORN), coverage=coverage)
