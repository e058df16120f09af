"""A rule applies to the engines its nameplate words name, and a preset to those the shop names."""

from dataclasses import replace

import pytest

from fleetcare.domain.rule_book import AppliesTo, RuleBook
from fleetcare.rules.judging.applies import is_for, rules_for
from tests.rules.measured import ENGINE, a_rule


@pytest.mark.parametrize(
    ("applies", "is_it"),
    [
        (AppliesTo(), True),
        (AppliesTo(fuels=("Diesel",)), True),
        (AppliesTo(fuels=("gas",)), False),
        (AppliesTo(not_fuels=("diesel",)), False),
        (AppliesTo(not_fuels=("gas",)), True),
        (AppliesTo(cylinders_least=6, cylinders_most=6), True),
        (AppliesTo(cylinders_least=7), False),
        (AppliesTo(cylinders_most=5), False),
        (AppliesTo(adjusters=("screw",)), False),
        (AppliesTo(duties=("standby",)), False),
        (AppliesTo(engines=("p-01",)), True),
        (AppliesTo(engines=("P-02",)), False),
        (AppliesTo(grades=("40",)), True),
        (AppliesTo(grades=("15w-40",)), True),
        (AppliesTo(grades=("30",)), False),
        (AppliesTo(is_marine=True), False),
    ],
)
def test_an_engine_is_meant_where_its_nameplate_matches_all_that_is_asked(applies: AppliesTo, is_it: bool) -> None:
    assert is_for(applies, ENGINE) is is_it


def test_what_a_nameplate_does_not_say_does_not_match() -> None:
    bare = replace(ENGINE, fuel="", oil_grade="", cylinders=0)
    asked = (AppliesTo(fuels=("diesel",)), AppliesTo(grades=("40",)), AppliesTo(cylinders_most=6))
    assert [is_for(one, bare) for one in asked] == [False, False, False]
    assert is_for(AppliesTo(not_fuels=("gas",)), bare)


def test_a_straight_grade_is_known_with_and_without_sae() -> None:
    assert is_for(AppliesTo(grades=("30",)), replace(ENGINE, oil_grade="SAE 30"))


def test_a_preset_is_off_until_the_shop_names_the_engine() -> None:
    law = a_rule(id="law", preset="zzzz-ci")
    assert rules_for(RuleBook((law,)), ENGINE) == ()
    assert rules_for(RuleBook((law,), {"zzzz-ci": ("P-02",)}), ENGINE) == ()
    assert rules_for(RuleBook((law,), {"zzzz-ci": ("P-02", "p-01")}), ENGINE) == (law,)


def test_a_named_preset_takes_the_place_of_the_rule_of_its_choice_that_all_engines_have() -> None:
    usual, other = a_rule(id="usual", choice="iron"), a_rule(id="other", choice="copper")
    named = a_rule(id="named", choice="iron", preset="maker")
    book = RuleBook((usual, other, named))
    assert rules_for(book, ENGINE) == (usual, other)
    assert rules_for(replace(book, chosen={"maker": ("P-01",)}), ENGINE) == (other, named)
