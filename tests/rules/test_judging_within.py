"""The figure a condition of a pattern asks to lie within says every number it was worked out from."""

from dataclasses import replace
from decimal import Decimal

from fleetcare.domain.findings import Step
from fleetcare.domain.rule_book import Where
from tests.rules.measured import a_sheet, facts, pressures, reach, value
from tests.rules.test_judging_patterns import IS_LOW, LOW, NOT_RAISED, RATIO, flagged, matched, over, pattern, within

RULES = [over("Si"), pattern(flagged("Si"), RATIO)]
SILICON, ALUMINIUM = value("Si", "15", phase="new"), value("Al", "5", phase="new")


def test_a_ratio_says_both_values_and_what_new_oil_took_off_of_each() -> None:
    (signal,) = matched(RULES, facts(a_sheet(value("Si", "75"), value("Al", "25")), fresh=(SILICON, ALUMINIUM)))
    assert signal.steps == (
        Step("silicon", Decimal(75), "ppm"),
        Step("silicon in new oil", Decimal(15), "ppm"),
        Step("aluminium", Decimal(25), "ppm"),
        Step("aluminium in new oil", Decimal(5), "ppm"),
        Step("silicon to aluminium, both above new oil", Decimal(3)),
    )


def test_a_ratio_says_where_new_oil_is_not_known() -> None:
    about = facts(a_sheet(value("Si", "90"), value("Al", "25")))
    (none,), (one,) = matched(RULES, about), matched(RULES, replace(about, fresh=(SILICON,)))
    silicon, aluminium = Step("silicon", Decimal(90), "ppm"), Step("aluminium", Decimal(25), "ppm")
    assert none.steps == (silicon, aluminium, Step("silicon to aluminium, new oil not known", Decimal("3.6")))
    in_new = Step("silicon in new oil", Decimal(15), "ppm")
    ratio = Step("silicon to aluminium, above new oil where that is known", Decimal(3))
    assert one.steps == (silicon, in_new, aluminium, ratio)


def test_a_gain_above_new_oil_says_what_was_read_and_what_was_taken_off() -> None:
    rules = [over("Si"), pattern(within("Si", low=reach("5"), less_new=True, calls_out=True))]
    (signal,) = matched(rules, facts(a_sheet(value("Si", "25")), fresh=(SILICON,)))
    assert signal.steps == (
        Step("silicon", Decimal(25), "ppm"),
        Step("silicon in new oil", Decimal(15), "ppm"),
        Step("silicon, above new oil", Decimal(10), "ppm"),
    )


def test_a_wet_gain_says_the_dry_and_the_wet_value_of_its_cylinder() -> None:
    rule = pattern(IS_LOW, NOT_RAISED, kinds=("compression",), at=Where.CYLINDER)
    (signal,) = matched([LOW, rule], facts(pressures("400", "400", "200", "400", "400", "400", wet={3: "219"})))
    assert signal.steps == (
        Step("dry at 3", Decimal(200), "psi"),
        Step("wet at 3", Decimal(219), "psi"),
        Step("wet gain at 3", Decimal("9.5"), "%"),
    )
