"""The limits of rules as levels of a value: worked back from whatever they count from, the first to be passed at each end."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.measured import Pools
from fleetcare.domain.rule_book import (
    AgainstSheet,
    Basis,
    Best,
    Bounds,
    By,
    ByAltitude,
    Change,
    Limits,
    Method,
    Pattern,
    Pool,
    Rate,
    Rule,
    Shape,
    Since,
    Statistical,
)
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.levels import levels_of
from fleetcare.rules.judging.values import values_of
from tests.rules.measured import ENGINE, a_rule, a_sheet, beyond, facts, pressures, value

IRON = a_sheet(value("Fe", "40"))


def levels(about: MeasuredFacts, *rules: Rule, quantity: str = "Fe") -> dict[str, Decimal]:
    one = values_of(about.sheet, quantity)[0]
    return {f"{level.end} {level.severity}": level.value for level in levels_of(rules, one, about)}


def compared(shape: Shape, low: str, unit: str = "%", quantity: str = "pressure", **changes: object) -> Rule:
    limits = {"low": Limits(beyond(low)), "high": Limits()}
    return a_rule(shape=shape, unit=unit, quantity=quantity, kinds=("compression", "oil"), **{**limits, **changes})


def test_bounds_are_levels_in_the_unit_of_the_value() -> None:
    assert levels(facts(IRON), a_rule()) == {"high alert": 100, "high alarm": 200}
    percent = a_sheet(value("Fe", "0.004", "%"))
    assert levels(facts(percent), a_rule()) == {"high alert": Decimal("0.01"), "high alarm": Decimal("0.02")}


def test_bounds_less_new_oil_lie_that_much_higher_where_it_is_known() -> None:
    rule = a_rule(shape=Bounds(Basis.LESS_NEW))
    assert levels(facts(IRON), rule)["high alert"] == 100
    assert levels(facts(IRON, fresh=(value("Fe", "3", phase="new"),)), rule)["high alert"] == 103
    assert levels(facts(IRON, fresh=(value("Fe", "<3", phase="new"),)), rule) == {}


@pytest.mark.parametrize(
    ("reference", "by", "low", "unit", "level"),
    [
        (Best.HIGHEST, By.RATIO, "75", "%", "90"),
        (Best.HIGHEST, By.SHARE, "-25", "%", "90"),
        (Best.HIGHEST, By.DIFFERENCE, "-10", "psi", "110"),
        (Best.MEAN, By.RATIO, "80", "%", "88"),
        (Best.LOWEST, By.RATIO, "90", "%", "90"),
    ],
)
def test_against_its_sheet_the_level_is_worked_back_from_the_others(
    reference: Best, by: By, low: str, unit: str, level: str
) -> None:
    rule = compared(AgainstSheet(reference, by), low, unit)
    told = levels(facts(pressures("120", "110", "100")), rule, quantity="pressure")
    assert told == {"low alert": Decimal(level)}


def test_a_cylinder_alone_or_beside_a_bound_has_no_level() -> None:
    rule = compared(AgainstSheet(Best.HIGHEST, By.RATIO), "75")
    assert levels(facts(pressures("120")), rule, quantity="pressure") == {}
    assert levels(facts(pressures("120", "100..130")), rule, quantity="pressure") == {}


@pytest.mark.parametrize(
    ("by", "low", "unit", "level"), [(By.RATIO, "50", "%", 5), (By.DIFFERENCE, "-2", "mg KOH/g", 8)]
)
def test_against_new_oil_the_level_is_worked_back_from_that(by: By, low: str, unit: str, level: int) -> None:
    rule = compared(Change(Since.NEW, by), low, unit, quantity="tbn")
    about = facts(a_sheet(value("tbn", "9")))
    assert levels(about, rule, quantity="tbn") == {}
    assert levels(replace(about, fresh=(value("tbn", "10", phase="new"),)), rule, quantity="tbn") == {
        "low alert": level
    }


def test_what_samples_say_is_usual_is_a_level_once_there_are_enough() -> None:
    """mean + 2 s of the ten irons of reference, 24.6 and s 3.565: NIST/SEMATECH e-Handbook form of a control limit."""
    rule = a_rule(shape=Statistical(Pool.OWN, Method.MEAN, 10), high=Limits(beyond("2")))
    assert levels(facts(IRON), rule) == {}
    usual = tuple(map(Decimal, ["22", "25", "19", "31", "28", "24", "27", "21", "26", "23"]))
    told = levels(facts(IRON, pools=Pools(own={"Fe": usual})), rule)
    assert round(told["high alert"], 2) == Decimal("31.73")


def test_less_the_least_for_its_altitude_the_level_lies_at_that_least() -> None:
    table = ByAltitude("m", ((Decimal(0), Decimal(500)), (Decimal(1000), Decimal(400))))
    rule = a_rule(
        shape=table, unit="psi", quantity="pressure", kinds=("compression",), low=Limits(beyond("0")), high=Limits()
    )
    high_up = replace(ENGINE, altitude=Decimal(250))
    assert levels(facts(pressures("480"), engine=high_up), rule, quantity="pressure") == {"low alert": 475}
    assert levels(facts(pressures("480")), rule, quantity="pressure") == {}


@pytest.mark.parametrize("shape", [Change(Since.BEFORE, By.SHARE), Rate(Since.NEW, 100), Pattern(())])
def test_changes_rates_and_patterns_are_no_level(shape: Shape) -> None:
    assert levels(facts(IRON), a_rule(shape=shape)) == {}


@pytest.mark.parametrize(
    "changes",
    [
        {"kinds": ("spot",)},
        {"quantity": "Cu"},
        {"points": ("3",)},
        {"words": {"grade": ("30",)}},
        {"unit": "kPa"},
    ],
)
def test_rules_that_do_not_judge_the_value_have_no_level(changes: dict[str, object]) -> None:
    assert levels(facts(IRON), a_rule(**changes)) == {}


def test_of_several_rules_the_first_to_be_passed_counts_at_each_end() -> None:
    lax = a_rule(low=Limits(beyond("5")), high=Limits(beyond("150"), beyond("300")))
    strict = a_rule(low=Limits(beyond("8")), high=Limits(beyond("90"), beyond("200")))
    expected = {"low alert": 8, "high alert": 90, "high alarm": 200}
    assert levels(facts(IRON), lax, strict) == expected
    assert levels(facts(IRON), strict, lax) == expected


def test_an_alert_that_an_alarm_comes_before_is_none() -> None:
    alarm = a_rule(low=Limits(None, beyond("10")), high=Limits(None, beyond("80")))
    alert = a_rule(low=Limits(beyond("8")), high=Limits(beyond("100")))
    assert levels(facts(IRON), alert, alarm) == {"low alarm": 10, "high alarm": 80}
