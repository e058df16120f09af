"""A measurement rule in words: what it judges, its limits, and for which engines it is."""

from decimal import Decimal

import pytest

from fleetcare.domain.rule_book import (
    AgainstSheet,
    AppliesTo,
    Asks,
    Basis,
    Best,
    Bounds,
    By,
    ByAltitude,
    Condition,
    End,
    Limits,
    Method,
    Pattern,
    Pool,
    Rate,
    Rule,
    Severity,
    Since,
    Statistical,
    Where,
)
from fleetcare.domain.sheets import Phase
from fleetcare.rulebook.rules import shipped_rules
from fleetcare.rules.explain_rule import (
    RuleOrigin,
    RuleState,
    rule_row,
    say_applies,
    say_judged,
    say_limits,
)
from tests.rules.measured import a_rule, beyond, reach

NONE = Limits()


@pytest.mark.parametrize(
    ("rule", "said"),
    [
        (a_rule(), "alert above 100 ppm, alarm above 200 ppm"),
        (a_rule(high=Limits(reach("3")), unit="%"), "alert at 3 % or more"),
        (a_rule(low=Limits(reach("1"), beyond("0.5")), high=NONE, unit=""), "alert at 1 or less, alarm below 0.5"),
        (a_rule(shape=Rate(Since.NEW, 100)), "alert above 100 ppm per 100 h, alarm above 200 ppm per 100 h"),
        (a_rule(shape=Bounds(Basis.SPEC, End.LOW)), "the low end of the engine's own check range"),
        (
            a_rule(shape=Bounds(Basis.SPEC, is_set=True)),
            "found out of the engine's own check range and left inside it",
        ),
        (
            a_rule(shape=Statistical(Pool.OWN, Method.MEAN, 10), high=Limits(beyond("2"), beyond("3"))),
            "alert above the mean by more than 2 × s, alarm above the mean by more than 3 × s",
        ),
        (
            a_rule(shape=Statistical(Pool.OWN, Method.ROBUST, 10), low=Limits(beyond("2")), high=NONE),
            "alert below the median by more than 2 × 1.4826 median distances",
        ),
        (
            a_rule(shape=Statistical(Pool.FAMILY, Method.PERCENTILE, 30), high=Limits(beyond("95"))),
            "alert above 95 % of them",
        ),
        (a_rule(shape=Pattern((), severity=Severity.ALARM)), "alarm where it matches"),
    ],
)
def test_limits_are_said_with_their_severity_side_and_unit(rule: Rule, said: str) -> None:
    assert say_limits(rule) == said


@pytest.mark.parametrize(
    ("rule", "said"),
    [
        (a_rule(), "iron"),
        (
            a_rule(quantity="pressure", shape=AgainstSheet(Best.HIGHEST, By.RATIO)),
            "compression as a share of the highest",
        ),
        (a_rule(phases=(Phase.FOUND,), points=("1",)), "iron, at 1, found"),
        (
            a_rule(words={"purpose": ("test", "other")}, unless={"exhaust_temperature_held": ("yes",)}),
            "iron, where the sheet says purpose test or other, unless the sheet says exhaust temperature held yes",
        ),
        (
            a_rule(shape=Statistical(Pool.OWN, Method.MEAN, 10)),
            "iron against 10 or more samples of the own pool",
        ),
    ],
)
def test_what_a_rule_judges_is_said(rule: Rule, said: str) -> None:
    assert say_judged(rule) == said


def test_a_table_of_altitudes_is_said_row_by_row() -> None:
    table = ByAltitude("ft", ((Decimal(500), Decimal(515)), (Decimal(2500), Decimal(480))))
    rule = a_rule(shape=table, quantity="pressure", unit="psi", low=Limits(alarm=beyond("0")), high=NONE)
    assert say_judged(rule) == (
        "compression less its least for the altitude: 515 psi at 500 ft, 480 psi at 2500 ft, linear in between, nothing beyond"
    )
    assert say_limits(rule) == "alarm below 0 psi"


def test_a_pattern_is_said_condition_by_condition() -> None:
    conditions = (
        Condition(("Na", "K"), Asks.FLAGGED_HIGH),
        Condition(("Al",), Asks.CLEAR, is_optional=True),
        Condition(("lash",), Asks.FLAGGED_LOW, side="exhaust"),
        Condition(("Si",), Asks.WITHIN, low=beyond("2"), high=reach("5"), over="Al", less_new=True),
        Condition(("K",), Asks.WITHIN, low=reach("50"), unit="ppm"),
        Condition(("K",), Asks.WITHIN, high=beyond("90"), unit="ppm"),
        Condition(("heard",), Asks.SAID, words=("intake", "next")),
        Condition(("Fe",), Asks.WITHIN, high=reach("50"), unit="%", of_before=True),
    )
    assert say_judged(a_rule(shape=Pattern(conditions, at=Where.NEIGHBOURS))) == (
        "a pattern on neighbours: sodium or potassium flagged high and aluminium not flagged high or not measured and valve"
        " lash of the exhaust side flagged low and silicon over aluminium above new oil above 2 and up to 5 and potassium"
        " from 50 ppm and potassium below 90 ppm and heard said to be intake or next and"
        " iron of the sample before up to 50 %"
    )
    assert (
        say_judged(a_rule(shape=Pattern(conditions[:1]))) == "a pattern on the engine: sodium or potassium flagged high"
    )


@pytest.mark.parametrize(
    ("applies", "said"),
    [
        (AppliesTo(), "every engine"),
        (AppliesTo(fuels=("diesel", "gas"), cylinders_least=2), "fuel diesel or gas; 2 cylinders or more"),
        (AppliesTo(not_fuels=("biogas",), cylinders_most=6), "fuel not biogas; 6 cylinders or fewer"),
        (AppliesTo(adjusters=("screw",), duties=("standby",)), "adjuster screw; duty standby"),
        (AppliesTo(engines=("P-01",), grades=("40",)), "engine P-01; oil grade 40"),
        (AppliesTo(is_marine=True), "marine engines"),
        (AppliesTo(is_marine=False), "engines known not to be marine"),
    ],
)
def test_for_which_engines_a_rule_is_is_said(applies: AppliesTo, said: str) -> None:
    assert say_applies(a_rule(applies=applies)) == said


def test_a_preset_is_for_the_engines_the_shop_names() -> None:
    assert say_applies(a_rule(preset="strict")) == "engines the shop names for the preset strict"


def test_every_shipped_rule_says_what_it_judges_its_limits_and_its_source() -> None:
    for rule in shipped_rules():
        row = rule_row(rule, RuleState.IN_FORCE, RuleOrigin.SHIPPED, ["P-01", "P-02"])
        assert all((row.judges, row.limits, row.applies, row.source, row.kinds, row.cause, row.next_step)), rule.id
        assert row.engines == "P-01, P-02"
