"""Limits told from samples: how they are said to be made, and when there is none."""

from decimal import Decimal

import pytest

from fleetcare.domain.rule_book import Method
from fleetcare.domain.trends import Hindrance, Obstacle
from fleetcare.errors import Refused
from fleetcare.rules.statistical_limits import (
    Positions,
    StatisticalLimit,
    chart_limit,
    percentile_limit,
    spread_limit,
    usual_method,
)


def samples(text: str) -> list[Decimal]:
    return [Decimal(figure) for figure in text.split()]


def test_the_mean_and_deviation_say_how_they_made_the_limit() -> None:
    assert spread_limit(samples("2 4 4 4 6 10"), Method.MEAN, Decimal(2), fewest=6) == StatisticalLimit(
        value=5 + 2 * Decimal("7.6").sqrt(),  # by hand: squares 9 + 1 + 1 + 1 + 1 + 25 over 5
        method=Method.MEAN,
        formula="mean + k s",
        multiple=Decimal(2),
        count=6,
        centre=Decimal(5),
        spread=Decimal("7.6").sqrt(),
    )


def test_a_multiple_below_0_gives_a_lower_limit() -> None:
    limit = spread_limit(samples("2 4 4 4 6 10"), Method.ROBUST, Decimal(-1), fewest=1)
    assert isinstance(limit, StatisticalLimit)
    assert limit.value == 4 - Decimal("1.4826")  # distances 2 0 0 0 2 6: middle 1 of 0 and 2
    assert limit.formula == "median + k × 1.4826 × median distance from the median"


def test_on_logs_the_limit_is_a_factor_of_the_centre() -> None:
    limit = spread_limit(samples("1 10 100"), Method.MEAN, Decimal(1), fewest=3, of_logs=True)
    assert isinstance(limit, StatisticalLimit)
    assert limit.of_logs
    assert limit.value == pytest.approx(Decimal(100))
    assert limit.centre == pytest.approx(Decimal(10).ln())


def test_a_chart_of_individuals_looks_from_one_sample_to_the_next() -> None:
    limit = chart_limit(samples("10 12 11 15"), Decimal(3), fewest=4)
    assert isinstance(limit, StatisticalLimit)
    assert limit.value == pytest.approx(12 + 3 * (Decimal(7) / 3) / Decimal("1.128"))
    assert (limit.method, limit.formula) == (Method.MEAN, "mean + k × mean moving range / 1.128")


@pytest.mark.parametrize(
    ("percent", "positions", "value"),
    [
        ("0", Positions.N_PLUS_1, "10"),
        ("10", Positions.N_PLUS_1, "10"),  # rank 0.5 lies before the first
        ("25", Positions.N_PLUS_1, "12.5"),  # rank 1.25
        ("80", Positions.N_PLUS_1, "40"),  # rank 4 is the last
        ("98", Positions.N_PLUS_1, "40"),
        ("100", Positions.N_PLUS_1, "40"),
        ("0", Positions.LINEAR, "10"),
        ("25", Positions.LINEAR, "17.5"),  # rank 1.75
        ("100", Positions.LINEAR, "40"),
    ],
)
def test_a_percentage_lies_at_its_rank_between_two_samples(percent: str, positions: Positions, value: str) -> None:
    limit = percentile_limit(samples("40 10 30 20"), Decimal(percent), fewest=4, positions=positions)
    assert limit == StatisticalLimit(Decimal(value), Method.PERCENTILE, positions, Decimal(percent), 4)


def test_one_sample_is_every_percentage_of_itself() -> None:
    limit = percentile_limit(samples("7"), Decimal(90), fewest=1)
    assert isinstance(limit, StatisticalLimit)
    assert limit.value == 7


@pytest.mark.parametrize("fewest", [0, 3])
def test_fewer_samples_than_asked_for_give_no_limit(fewest: int) -> None:
    for limit in (
        spread_limit(samples("5") * max(1, fewest - 1), Method.MEAN, Decimal(2), fewest=fewest),
        chart_limit(samples("5") * max(1, fewest - 1), Decimal(2), fewest=fewest),
    ):
        assert limit == Hindrance(Obstacle.TOO_FEW, Decimal(max(1, fewest - 1)), Decimal(max(2, fewest)))


def test_no_sample_has_no_percentile() -> None:
    assert percentile_limit([], Decimal(90), fewest=0) == Hindrance(Obstacle.TOO_FEW, Decimal(0), Decimal(1))


def test_a_sample_of_0_has_no_log() -> None:
    limit = spread_limit(samples("0 1 2"), Method.MEAN, Decimal(2), fewest=2, of_logs=True)
    assert limit == Hindrance(Obstacle.NOT_POSITIVE, Decimal(0), Decimal(0))


@pytest.mark.parametrize("method", [Method.MEAN, Method.ROBUST])
@pytest.mark.parametrize("of_logs", [False, True])
@pytest.mark.parametrize("ppm", ["3.7", "200"])  # twice the log of 200 has a digit more than is usual
def test_samples_all_alike_would_flag_the_next_one_a_hair_above(method: Method, of_logs: bool, ppm: str) -> None:
    assert method is not Method.PERCENTILE
    for count in (2, 3, 4, 7):
        limit = spread_limit(samples(ppm) * count, method, Decimal(3), fewest=2, of_logs=of_logs)
        assert isinstance(limit, Hindrance)
        assert limit.obstacle is Obstacle.NO_SPREAD
        assert limit.figure == pytest.approx(Decimal(ppm))


def test_more_than_half_alike_have_no_median_distance() -> None:
    assert spread_limit(samples("0 0 0 1 9"), Method.ROBUST, Decimal(3), fewest=2) == Hindrance(
        Obstacle.NO_SPREAD, Decimal(0)
    )


@pytest.mark.parametrize("percent", ["-1", "100.1"])
def test_what_is_no_percentage_is_refused(percent: str) -> None:
    with pytest.raises(Refused, match=f"{percent} % of the samples cannot be right"):
        percentile_limit(samples("1 2"), Decimal(percent), fewest=1)


def test_the_usual_method_is_robust_for_few_and_asks_about_normality_for_many() -> None:
    assert usual_method(29, is_near_normal=True) is Method.ROBUST
    assert usual_method(30, is_near_normal=True) is Method.MEAN
    assert usual_method(30, is_near_normal=False) is Method.PERCENTILE
