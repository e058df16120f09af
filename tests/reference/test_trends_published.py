"""Trends and projections against certified values, against sums worked with another library, and against that library.

The examples of valve lash, compression and iron are invented; their figures were worked with statsmodels 0.15.0 (least
squares with one level for each segment), the ranges as the roots of the prediction interval, before this code was written.
"""

import csv
from decimal import Decimal
from itertools import pairwise
from pathlib import Path

import numpy as np
import pytest
from scipy import optimize, stats

# statsmodels ships no types, and nobody else does.
from statsmodels.regression.linear_model import OLS  # type: ignore[import-untyped]

from fleetcare.domain.rule_book import End
from fleetcare.domain.trends import Obstacle, Point, Projection, Segment, Trend
from fleetcare.rules.projection import project
from fleetcare.rules.student import t_quantile
from fleetcare.rules.trends import fit_trend


def a_segment(hours: str, values: str, opened: str | None = None) -> Segment:
    pairs = zip(hours.split(), values.split(), strict=True)
    return Segment(tuple(Point(Decimal(x), Decimal(y)) for x, y in pairs), Decimal(opened) if opened else None)


LASH = [
    a_segment("0 500 1000 1500", ".400 .372 .353 .322"),
    a_segment("1500 2000 2600 3000", ".400 .378 .347 .331", "1500"),
    a_segment("3000 3500 4000", ".400 .377 .352", "3000"),
]
COMPRESSION = [a_segment("0 2000 4000 6000 8000", "31.0 30.1 29.6 28.4 27.9")]
IRON = [a_segment("50 100 150 200", "12 19 30 37")]


def lash_projected(coverage: str = "0.80", limit: str = "0.25") -> Projection:
    return project(LASH, Decimal(limit), End.LOW, now=Decimal(4000), interval=Decimal(500), coverage=Decimal(coverage))


def fitted(segments: list[Segment]) -> Trend:
    trend = fit_trend(segments)
    assert trend
    return trend


def test_certified_least_squares_are_met_to_every_digit_given() -> None:
    """NIST Statistical Reference Datasets, linear least squares, Norris: 36 observations, certified values."""
    with (Path(__file__).parent / "norris.csv").open(encoding="utf-8") as lines:
        points = tuple(Point(Decimal(row["x"]), Decimal(row["y"])) for row in csv.DictReader(lines))
    trend = fitted([Segment(points)])
    assert (trend.count, trend.df) == (36, 34)
    assert f"{trend.slope:.14f}" == "1.00211681802045"
    assert f"{trend.value_at(Decimal(0)):.15f}" == "-0.262323073774029"
    assert f"{trend.slope_error:.18f}" == "0.000429796848199937"
    assert f"{trend.scatter:.15f}" == "0.884796396144373"


def test_two_resets_of_a_valve_do_not_hide_its_wear() -> None:
    trend = fitted(LASH)
    assert f"{trend.slope:.6e}" == "-4.855274e-5"
    assert f"{trend.slope_error:.6e}" == "1.363028e-6"
    assert f"{trend.scatter:.9f}" == "0.002383351"
    assert trend.df == 7


@pytest.mark.parametrize(("coverage", "early", "late"), [("0.80", "5975.1", "6237.1"), ("0.95", "5894.1", "6332.9")])
def test_a_valve_comes_to_its_limit_in_the_range_of_the_other_library(coverage: str, early: str, late: str) -> None:
    projection = lash_projected(coverage)
    assert projection.early
    assert projection.likely
    assert projection.late
    assert [f"{x:.1f}" for x in (projection.early, projection.likely, projection.late)] == [early, "6102.0", late]


def test_one_line_through_everything_would_hide_the_wear() -> None:
    everything = Segment(tuple(point for segment in LASH for point in segment.points))
    assert f"{fitted([everything]).slope:.3e}" == "-5.097e-6"
    projection = project([everything], Decimal("0.25"), End.LOW, now=Decimal(4000), interval=Decimal(500))
    assert [hindrance.obstacle for hindrance in projection.hindrances] == [Obstacle.NO_SLOPE]


def test_a_compression_22734_h_away_is_only_said_not_to_be_low_before_16000_h() -> None:
    trend = fitted(COMPRESSION)
    assert (trend.slope, f"{trend.scatter:.6f}", trend.df) == (Decimal("-0.000395"), "0.181659", 3)
    projection = project(COMPRESSION, Decimal(22), End.LOW, now=Decimal(8000), interval=Decimal(2000))
    (hindrance,) = projection.hindrances
    assert hindrance.obstacle is Obstacle.TOO_FAR
    assert hindrance.figure
    assert round(hindrance.figure) == 22734
    assert hindrance.bound == projection.not_before == 16000


def test_a_lash_that_goes_up_and_down_has_no_slope() -> None:
    """gq = 309."""
    lash = [a_segment("0 500 1000 1500", ".40 .39 .41 .395")]
    (hindrance,) = project(lash, Decimal("0.25"), End.LOW, now=Decimal(1500), interval=Decimal(500)).hindrances
    assert hindrance.obstacle is Obstacle.NO_SLOPE
    assert hindrance.figure
    assert round(hindrance.figure) == 309


def test_iron_of_one_fill_is_plain_least_squares() -> None:
    """Worked by hand: slope 0.172 ppm/h, 3.00 ppm at 0 h, s 1.265, error of the slope 0.01131; 100 ppm at 563.95 h."""
    trend = fitted(IRON)
    assert (trend.slope, trend.value_at(Decimal(0))) == (Decimal("0.172"), Decimal("3.000"))
    assert (f"{trend.scatter:.3f}", f"{trend.slope_error:.5f}") == ("1.265", "0.01131")
    projection = project(IRON, Decimal(100), End.HIGH, now=Decimal(200), interval=Decimal(50))
    (hindrance,) = projection.hindrances
    assert hindrance.obstacle is Obstacle.TOO_FAR
    assert hindrance.figure
    assert round(hindrance.figure, 2) == Decimal("563.95")


def dummies(segments: list[Segment], at: float | None = None) -> "np.ndarray[tuple[int, int], np.dtype[np.float64]]":
    """One column a segment, and x; with `at` a single row, of the last segment there."""
    last = len(segments) - 1
    rows = (
        [(last, at)]
        if at is not None
        else [(n, float(point.x)) for n, those in enumerate(segments) for point in those.points]
    )
    return np.array([[*(float(n == column) for column in range(last + 1)), x] for n, x in rows])


@pytest.mark.parametrize("segments", [LASH, COMPRESSION, IRON], ids=["lash", "compression", "iron"])
def test_slope_error_scatter_and_the_error_of_a_value_are_those_of_another_library(segments: list[Segment]) -> None:
    trend = fitted(segments)
    other = OLS([float(point.y) for those in segments for point in those.points], dummies(segments)).fit()
    assert float(trend.slope) == pytest.approx(other.params[-1], rel=1e-9)
    assert float(trend.slope_error) == pytest.approx(other.bse[-1], rel=1e-9)
    assert float(trend.scatter) == pytest.approx(other.mse_resid**0.5, rel=1e-9)
    assert trend.df == other.df_resid
    for x in (0, 1700, 4000, 9000):
        said = other.get_prediction(dummies(segments, x))
        assert float(trend.value_at(Decimal(x))) == pytest.approx(said.predicted_mean[0], rel=1e-9)
        assert float(trend.error_at(Decimal(x))) == pytest.approx(said.se_obs[0], rel=1e-9)


@pytest.mark.parametrize("coverage", ["0.5", "0.80", "0.95", "0.99"])
def test_the_limit_touches_the_prediction_interval_of_another_library_at_both_ends(coverage: str) -> None:
    other = OLS([float(point.y) for those in LASH for point in those.points], dummies(LASH)).fit()

    def off(x: float, end: int) -> float:
        interval = other.get_prediction(dummies(LASH, x)).conf_int(obs=True, alpha=1 - float(coverage))
        return float(interval[0][end]) - 0.25

    projection = lash_projected(coverage)
    assert projection.early
    assert projection.late
    early, late = (optimize.brentq(off, 4000, 9000, args=(end,), xtol=1e-9) for end in (0, 1))
    assert float(projection.early) == pytest.approx(early, abs=1e-6)
    assert float(projection.late) == pytest.approx(late, abs=1e-6)


def test_quantiles_are_those_of_the_printed_table() -> None:
    """NIST/SEMATECH e-Handbook 1.3.6.7.2, columns 0.90, 0.975 and 0.995 (from memory), checked with scipy below."""
    table = {
        1: ("3.078", "12.706", "63.657"),
        2: ("1.886", "4.303", "9.925"),
        5: ("1.476", "2.571", "4.032"),
        10: ("1.372", "2.228", "3.169"),
        30: ("1.310", "2.042", "2.750"),
    }
    assert {df: tuple(f"{t_quantile(coverage, df):.3f}" for coverage in (0.8, 0.95, 0.99)) for df in table} == table


def test_quantiles_are_those_of_another_library() -> None:
    for coverage in (0.001, 0.01, 0.5, 0.8, 0.95, 0.999, 0.999999):
        for df in (*range(1, 41), 99, 100, 1000):
            other = float(stats.t.ppf((1 + coverage) / 2, df))
            assert t_quantile(coverage, df) == pytest.approx(other, rel=1e-9), (coverage, df)


def test_quantiles_rise_with_coverage_and_fall_with_degrees_of_freedom() -> None:
    quantiles = [[t_quantile(coverage, df) for df in range(1, 60)] for coverage in (0.5, 0.8, 0.95)]
    assert all(few > many for row in quantiles for few, many in pairwise(row))
    assert all(low < high for column in zip(*quantiles, strict=True) for low, high in pairwise(column))
