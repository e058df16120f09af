"""Values held against what earlier samples say is usual."""

from decimal import Decimal

import pytest

from fleetcare.domain.measured import Pools
from fleetcare.domain.rule_book import Limits, Method, Pool, Statistical
from fleetcare.rules.judging.judge import inputs_missing, judge
from tests.rules.measured import a_rule, a_sheet, beyond, facts, one_signal, value

IRON = tuple(Decimal(ppm) for ppm in (22, 25, 19, 31, 28, 24, 27, 21, 26, 23))
OWN = a_rule(id="own", shape=Statistical(Pool.OWN, Method.MEAN, 10), high=Limits(beyond("2"), beyond("3")))


@pytest.mark.parametrize(("iron", "severity"), [("31.7", None), ("31.8", "alert"), ("35.3", "alarm")])
def test_mean_and_k_s_of_the_engines_own_samples_are_its_limits(iron: str, severity: str | None) -> None:
    # mean 24.6, s 3.565: + 2 s 31.73, + 3 s 35.30
    signals = judge([OWN], facts(a_sheet(value("Fe", iron)), pools=Pools({"Fe": IRON})))
    assert [str(one.severity) for one in signals] == ([severity] if severity else [])


def test_a_statistical_signal_has_its_limit_in_the_unit_of_the_value_and_says_what_it_was_made_of() -> None:
    signal = one_signal(OWN, facts(a_sheet(value("Fe", "40")), pools=Pools({"Fe": IRON})))
    assert (round(signal.limit or 0, 2), signal.unit) == (Decimal("35.30"), "ppm")
    assert [(step.label, round(step.value, 3)) for step in signal.steps] == [
        ("samples", 10),
        ("mean of them", Decimal("24.6")),
        ("standard deviation s", Decimal("3.565")),
    ]


def test_a_low_limit_counts_down_from_the_centre() -> None:
    rule = a_rule(shape=Statistical(Pool.OWN, Method.ROBUST, 10), low=Limits(beyond("3")), high=Limits())
    pools = Pools({"Fe": IRON})
    assert judge([rule], facts(a_sheet(value("Fe", "13.4")), pools=pools)) == ()
    signal = one_signal(rule, facts(a_sheet(value("Fe", "13.3")), pools=pools))
    assert signal.limit == Decimal("24.5") - 3 * Decimal("1.4826") * Decimal("2.5")
    assert [step.label for step in signal.steps][1] == "median of them"


def test_a_percentile_of_the_family_is_a_point_of_its_samples() -> None:
    rule = a_rule(shape=Statistical(Pool.FAMILY, Method.PERCENTILE, 50), high=Limits(beyond("95"), beyond("98")))
    pools = Pools(family={"Fe": tuple(Decimal(number) for number in range(1, 100))})
    signal = one_signal(rule, facts(a_sheet(value("Fe", "96")), pools=pools))
    assert signal.limit == Decimal(95)
    assert [(step.label, step.value) for step in signal.steps] == [
        ("samples", 99),
        ("95 % of them up to", Decimal(95)),
        ("98 % of them up to", Decimal(98)),
    ]


def test_too_few_samples_give_no_limit_and_samples_all_alike_neither() -> None:
    about = facts(a_sheet(value("Fe", "400")), pools=Pools({"Fe": IRON[:9]}))
    assert [one.why for one in inputs_missing([OWN], about)] == ["too few values (9 of 10)"]
    alike = facts(a_sheet(value("Fe", "400")), pools=Pools({"Fe": (Decimal(20),) * 10}))
    assert [one.why for one in inputs_missing([OWN], alike)] == ["values too alike to tell their spread"]


def test_samples_are_compared_in_the_unit_of_the_rule() -> None:
    rule = a_rule(quantity="water", unit="ppm", shape=Statistical(Pool.OWN, Method.MEAN, 3), high=Limits(beyond("2")))
    pools = Pools({"water": (Decimal("0.1"), Decimal("0.2"), Decimal("0.3"))})
    signal = one_signal(rule, facts(a_sheet(value("water", "0.5")), pools=pools))
    assert (signal.measured, signal.limit) == (Decimal(5000), Decimal(4000))
