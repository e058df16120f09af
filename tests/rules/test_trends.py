"""Values between adjustments, and the slope and line through them."""

from decimal import Decimal

import pytest

from fleetcare.domain.trends import Check, Point, Segment, Trend
from fleetcare.rules.trends import cut_at_adjustments, degrees_of_freedom, fit_trend, watched


def a_check(x: str, found: str | None = None, left: str | None = None, *, is_adjusted: bool = False) -> Check:
    as_found, as_left = (Decimal(gap) if gap else None for gap in (found, left))
    return Check(Decimal(x), as_found, as_left, is_adjusted)


def a_segment(*points: tuple[str, str], opened: str | None = None) -> Segment:
    return Segment(tuple(Point(Decimal(x), Decimal(y)) for x, y in points), Decimal(opened) if opened else None)


def test_the_value_found_closes_a_segment_and_the_value_left_opens_the_next() -> None:
    checks = [
        a_check("0", left="0.40"),
        a_check("500", "0.37"),
        a_check("900", "0.34", "0.40"),
        a_check("1200", "0.39"),
    ]
    assert cut_at_adjustments(checks) == (
        a_segment(("0", "0.40"), ("500", "0.37"), ("900", "0.34"), opened="0"),
        a_segment(("900", "0.40"), ("1200", "0.39"), opened="900"),
    )


def test_values_only_found_are_one_segment_in_order_of_x() -> None:
    checks = [a_check("500", "29.6"), a_check("0", "31.0")]
    assert cut_at_adjustments(checks) == (a_segment(("0", "31.0"), ("500", "29.6")),)


def test_an_adjustment_nobody_wrote_a_left_value_of_cuts_all_the_same() -> None:
    checks = [a_check("0", "0.40"), a_check("500", "0.36", is_adjusted=True), a_check("900", "0.38")]
    before, after = cut_at_adjustments(checks)
    assert (before, after) == (a_segment(("0", "0.40"), ("500", "0.36")), a_segment(("900", "0.38"), opened="500"))
    assert before.has_left_value
    assert not after.has_left_value


def test_after_such_an_adjustment_without_a_value_since_there_is_an_empty_segment() -> None:
    assert cut_at_adjustments([a_check("0", "0.40", is_adjusted=True)])[-1] == Segment((), Decimal(0))
    assert cut_at_adjustments([]) == (Segment(()),)


def test_a_straight_wear_has_its_slope_no_scatter_and_a_line_through_every_value() -> None:
    trend = fit_trend([a_segment(("0", "0.40"), ("1000", "0.35"), ("2000", "0.30"))])
    assert trend == Trend(
        slope=Decimal("-0.00005"),
        scatter=Decimal(0),
        df=1,
        count=3,
        mean_x=Decimal(1000),
        mean_y=Decimal("0.35"),
        sxx=Decimal(2_000_000),
        span=Decimal(2000),
    )
    assert [trend.value_at(Decimal(x)) for x in (0, 1000, 3000)] == [Decimal(y) for y in ("0.40", "0.35", "0.25")]
    assert trend.slope_error == trend.error_at(Decimal(9000)) == 0


def test_a_straight_wear_of_a_slope_that_never_ends_has_next_to_no_scatter() -> None:
    trend = fit_trend([a_segment(("0", "0"), ("3", "2"), ("6", "4"))])
    assert trend
    assert trend.slope == pytest.approx(Decimal(2) / 3)
    assert trend.scatter < Decimal("1e-40")


def test_a_segment_of_one_value_sets_the_level_and_leaves_the_slope() -> None:
    worn = a_segment(("0", "0.40"), ("500", "0.38"), ("1000", "0.35"))
    alone, with_reset = fit_trend([worn]), fit_trend([worn, a_segment(("1000", "0.42"), opened="1000")])
    assert alone
    assert with_reset
    assert (with_reset.slope, with_reset.df, with_reset.scatter) == (alone.slope, alone.df, alone.scatter)
    assert with_reset.value_at(Decimal(1000)) == Decimal("0.42")


def test_an_empty_segment_takes_nothing_from_the_trend() -> None:
    worn = a_segment(("0", "0.40"), ("500", "0.38"), ("1000", "0.35"))
    assert fit_trend([worn, Segment((), Decimal(1000))]) == fit_trend([worn])


@pytest.mark.parametrize(
    "segments",
    [
        [],
        [a_segment()],
        [a_segment(("0", "1"), ("1", "2"))],
        [a_segment(("5", "1"), ("5", "2"), ("5", "3"))],
        [a_segment(("0", "1"), ("9", "2")), a_segment(("9", "5"), opened="9")],
    ],
    ids=["no segment", "no value", "two values", "all at one x", "two values and a reset"],
)
def test_there_is_no_trend_without_a_span_and_a_degree_of_freedom(segments: list[Segment]) -> None:
    assert fit_trend(segments) is None


def test_each_segment_with_values_costs_a_degree_of_freedom_and_the_slope_one_more() -> None:
    worn = a_segment(("0", "4"), ("5", "3"), ("9", "1"))
    assert [degrees_of_freedom(those) for those in ([], [worn], [worn, worn], [worn, Segment(())])] == [-1, 1, 3, 1]


def test_what_nobody_watched_between_two_segments_counts_for_nothing() -> None:
    assert watched([a_segment(("0", "4"), ("500", "3")), a_segment(("2000", "4"), ("2600", "3"), opened="600")]) == 1100
