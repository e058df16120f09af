"""How fast a measure goes, and when it comes to its next limit."""

from decimal import Decimal

import pytest

from fleetcare.domain.rule_book import End, Severity
from fleetcare.domain.trends import Obstacle
from fleetcare.rules.judging.levels import Level
from fleetcare.rules.measured_ahead import ahead_of, next_limits, rate_of
from fleetcare.rules.measured_past import MeasuredPast
from fleetcare.rules.oil import wear_rate
from tests.rules.measured import a_rule, value
from tests.rules.pasts import a_test, cylinder, iron, oil, sampled


def level(text: str, end: End = End.HIGH, severity: Severity = Severity.ALERT) -> Level:
    return Level(end, severity, Decimal(text), a_rule())


HIGH = (level("100"), level("200", severity=Severity.ALARM))
LOW = (level("15", End.LOW), level("12", End.LOW, Severity.ALARM))


@pytest.mark.parametrize(
    ("figure", "limits"),
    [
        ("50", {End.LOW: 15, End.HIGH: 100}),
        ("100", {End.LOW: 15, End.HIGH: 100}),
        ("101", {End.LOW: 15, End.HIGH: 200}),
        ("201", {End.LOW: 15, End.HIGH: 200}),
        ("14", {End.LOW: 12, End.HIGH: 100}),
        ("11", {End.LOW: 12, End.HIGH: 100}),
    ],
)
def test_the_next_limit_is_the_first_not_passed(figure: str, limits: dict[End, int]) -> None:
    assert next_limits(Decimal(figure), (*HIGH[::-1], *LOW)) == limits
    assert next_limits(Decimal(figure), ()) == {}


def rising(*figures: str) -> MeasuredPast:
    return iron(*(sampled(9 - n, str(50 * n + 50), text, life=str(1000 + 50 * n)) for n, text in enumerate(figures)))


def obstacles(
    past: MeasuredPast, *levels: Level, life: str | None = None, interval: str | None = None
) -> list[Obstacle]:
    told = ahead_of(
        past, levels, life=Decimal(life) if life else None, interval=Decimal(interval) if interval else None
    )
    assert told is not None
    return [one.obstacle for one in told.hindrances]


def test_an_alert_ahead_is_projected_to() -> None:
    told = ahead_of(rising("12", "19", "30", "37"), (level("40"),), life=None, interval=None)
    assert told is not None
    assert told.likely is not None
    assert round(told.likely, 1) == Decimal("215.1")  # (40 - 3) / 0.172, reference


def test_without_limit_or_with_a_newest_value_that_is_not_fitted_nothing_is_projected() -> None:
    assert ahead_of(rising("12", "19", "30", "37"), (), life=None, interval=None) is None
    bound = rising("12", "19", "30", "<5")
    assert ahead_of(bound, HIGH, life=None, interval=None) is None


def test_with_too_few_values_only_that_and_a_limit_passed_is_said() -> None:
    assert obstacles(rising("12", "19"), *HIGH) == [Obstacle.TOO_FEW]
    assert obstacles(rising("250"), *HIGH) == [Obstacle.PAST_LIMIT, Obstacle.TOO_FEW]


def test_the_interval_is_that_of_the_task_else_the_usual_gap() -> None:
    past = rising("12", "19", "30", "37")
    assert obstacles(past, level("40")) == []
    assert obstacles(past, level("40"), interval="200") == [Obstacle.SHORT_SPAN]


def test_a_value_two_intervals_old_by_now_is_not_projected() -> None:
    past = rising("12", "19", "30", "37")
    assert obstacles(past, level("40"), life="1250") == []
    assert obstacles(past, level("40"), life="1251") == [Obstacle.OLD_VALUE]


def test_the_rate_is_that_of_the_mass_balance() -> None:
    past = iron(sampled(0, "200", "33", added="1.2"), fresh=(value("Fe", "3", phase="new"),))
    rate = rate_of(past)
    assert rate is not None
    own = wear_rate(Decimal(33), Decimal(200), make_up=(Decimal("1.2"), Decimal(8)), fresh=Decimal(3))
    assert round(rate.per_100h, 20) == round(own.ppm_per_100h, 20)
    assert round(rate.per_100h, 2) == Decimal("16.15")  # 0.1615 ppm/h, reference
    assert rate.is_corrected


def test_a_rate_without_top_up_stated_is_as_read() -> None:
    rate = rate_of(iron(sampled(0, "200", "33", added="")))
    assert rate is not None
    assert (rate.per_100h, rate.is_corrected) == (Decimal("16.5"), False)


def test_no_rate_of_a_bound_without_hours_or_new_oil_or_of_compression() -> None:
    assert rate_of(iron(sampled(0, "200", "<5"))) is None
    assert rate_of(iron(sampled(0, "", "33"))) is None
    (base,) = oil(sampled(0, "200", "", value("tbn", "8")))
    assert rate_of(base) is None
    assert rate_of(cylinder(a_test(0, "10", "25"))) is None
