"""Limits from samples against published examples, sums worked by hand, and other libraries."""

from decimal import Decimal
from itertools import pairwise

import numpy as np
import pytest
from scipy import stats

from fleetcare.domain.rule_book import Method
from fleetcare.domain.trends import Hindrance
from fleetcare.rules.statistical_limits import (
    BySpread,
    Positions,
    StatisticalLimit,
    chart_limit,
    percentile_limit,
    spread_limit,
)


def figures(text: str) -> list[Decimal]:
    return [Decimal(figure) for figure in text.split()]


# Invented; one sample is an outlier.
IRON = figures("18 22 25 19 31 27 24 21 35 28 26 23 30 20 29 33 24 27 22 96")
WITHOUT_OUTLIER = IRON[:-1]
TEN = figures("22 25 19 31 28 24 27 21 26 23")


def value(limit: StatisticalLimit | Hindrance) -> Decimal:
    assert isinstance(limit, StatisticalLimit)
    return limit.value


@pytest.mark.parametrize(
    ("samples", "method", "of_logs", "limits"),
    [
        (IRON, Method.MEAN, False, ("45.43", "61.86", "78.30")),
        (WITHOUT_OUTLIER, Method.MEAN, False, ("30.22", "34.96", "39.70")),
        (IRON, Method.ROBUST, False, ("30.69", "35.88", "41.07")),
        (IRON, Method.MEAN, True, ("38.06", "54.05", "76.77")),
    ],
    ids=["mean", "mean without the outlier", "robust", "mean of logs"],
)
def test_one_outlier_doubles_the_mean_limit_and_hardly_moves_the_robust_one(
    samples: list[Decimal], method: BySpread, of_logs: bool, limits: tuple[str, ...]
) -> None:
    """Worked by hand and with numpy: 29.0 and 16.431677; 25.473684 and 4.741875; 25.5 and 1.4826 x 3.5."""
    found = [value(spread_limit(samples, method, Decimal(k), fewest=19, of_logs=of_logs)) for k in (1, 2, 3)]
    assert tuple(f"{limit:.2f}" for limit in found) == limits


def test_ten_samples_in_control_have_an_alert_and_an_alarm_limit() -> None:
    """Worked by hand: mean 24.6, s 3.565; + 2 s 31.73, + 3 s 35.30."""
    alert, alarm = (spread_limit(TEN, Method.MEAN, Decimal(k), fewest=10) for k in (2, 3))
    assert isinstance(alert, StatisticalLimit)
    assert (alert.centre, f"{alert.spread:.3f}") == (Decimal("24.6"), "3.565")
    assert (f"{alert.value:.2f}", f"{value(alarm):.2f}") == ("31.73", "35.30")


@pytest.mark.parametrize(
    ("positions", "percent", "expected"),
    [
        (Positions.LINEAR, "75", "29.25"),
        (Positions.LINEAR, "90", "33.2"),
        (Positions.LINEAR, "95", "38.05"),
        (Positions.LINEAR, "98", "72.82"),
        (Positions.N_PLUS_1, "90", "34.8"),
        (Positions.N_PLUS_1, "95", "92.95"),
    ],
)
def test_with_20_samples_the_95_percent_point_depends_on_the_rule(
    positions: Positions, percent: str, expected: str
) -> None:
    """Worked by hand from the ranks, and with numpy."""
    assert value(percentile_limit(IRON, Decimal(percent), fewest=20, positions=positions)) == Decimal(expected)


def test_a_fence_one_and_a_half_quartile_distances_out_is_two_percentiles_away() -> None:
    """Tukey's upper fence of the same samples: Q3 + 1.5 (Q3 - Q1) = 40.125."""
    low, high = (
        value(percentile_limit(IRON, Decimal(percent), fewest=20, positions=Positions.LINEAR)) for percent in (25, 75)
    )
    assert high + Decimal("1.5") * (high - low) == Decimal("40.125")


def test_the_90_percent_point_of_twelve_gauge_readings_is_the_published_one() -> None:
    """NIST/SEMATECH e-Handbook 7.2.6.2: rank 11.7 of 12, 95.1959 + 0.7 x 0.0031 = 95.1981."""
    readings = "95.1772 95.1567 95.1937 95.1959 95.1442 95.0610 95.1591 95.1195 95.1772 95.0925 95.1990 95.1682"
    point = value(percentile_limit(figures(readings), Decimal(90), fewest=12))
    assert round(point, 4) == Decimal("95.1981")


@pytest.mark.parametrize(("k", "limit"), [(3, "55.8041"), (-3, "45.8159")])
def test_the_limits_of_ten_flow_rates_are_the_published_ones(k: int, limit: str) -> None:
    """NIST/SEMATECH e-Handbook 6.3.2.2: mean 50.81, mean moving range 1.8778."""
    rates = figures("49.6 47.6 49.9 51.3 47.8 51.2 52.6 52.4 53.6 52.1")
    assert f"{value(chart_limit(rates, Decimal(k), fewest=10)):.4f}" == limit


@pytest.mark.parametrize("samples", [IRON, WITHOUT_OUTLIER, TEN, TEN[:2]], ids=len)
def test_limits_are_those_of_other_libraries(samples: list[Decimal]) -> None:
    floats = [float(ppm) for ppm in samples]
    logs = np.log(floats)
    mad = 1.4826 * float(stats.median_abs_deviation(floats))
    expected = {
        (Method.MEAN, False): np.mean(floats) + 2 * np.std(floats, ddof=1),
        (Method.MEAN, True): np.exp(np.mean(logs) + 2 * np.std(logs, ddof=1)),
        (Method.ROBUST, False): np.median(floats) + 2 * mad,
        (Method.ROBUST, True): np.exp(np.median(logs) + 2 * 1.4826 * stats.median_abs_deviation(logs)),
    }
    methods: tuple[BySpread, ...] = (Method.MEAN, Method.ROBUST)
    for method in methods:
        for of_logs in (False, True):
            found = value(spread_limit(samples, method, Decimal(2), fewest=2, of_logs=of_logs))
            assert float(found) == pytest.approx(expected[method, of_logs], rel=1e-12)
    ranges = [abs(later - earlier) for earlier, later in pairwise(floats)]
    assert float(value(chart_limit(samples, Decimal(2), fewest=2))) == pytest.approx(
        np.mean(floats) + 2 * np.mean(ranges) / 1.128, rel=1e-12
    )


@pytest.mark.parametrize("samples", [IRON, TEN, TEN[:3], TEN[:1]], ids=len)
def test_percentiles_are_those_of_another_library(samples: list[Decimal]) -> None:
    for percent in (0, 1, 10, 25, 50, 75, 90, 95, 98, 100):
        ours = {
            positions: float(value(percentile_limit(samples, Decimal(percent), fewest=1, positions=positions)))
            for positions in Positions
        }
        floats = [float(ppm) for ppm in samples]
        assert ours[Positions.N_PLUS_1] == pytest.approx(np.percentile(floats, percent, method="weibull"), rel=1e-12)
        assert ours[Positions.LINEAR] == pytest.approx(np.percentile(floats, percent), rel=1e-12)


def test_the_factor_of_the_robust_limit_is_the_rounded_one_of_another_library() -> None:
    """1 / (75 % point of the normal distribution) = 1.482602."""
    assert round(1 / float(stats.norm.ppf(0.75)), 4) == 1.4826
