"""Every shipped rule says where it comes from, what to do next and what to beware of; law and presets bind only who is named."""

import re
from dataclasses import replace

from fleetcare.domain.rule_book import Condition, Pattern, RuleBook
from fleetcare.rulebook.rules import rule_book, shipped_rules
from fleetcare.rules.j300 import GRADES
from fleetcare.rules.judging.applies import rules_for
from tests.rules.measured import ENGINE

RULES = {rule.id: rule for rule in shipped_rules()}
CITED = re.compile(
    r"TM [0-9]|AC 43|CFR|NFPA|ASTM|SAE J300|ISO|service text|A001061|K482|IO-G-M-25|S12R-T2MPTK"
    r"|07 TS-37|lubricants handbook of 2004|warning limits|medium-speed engine maker's table|Joint Commission"
)


def test_every_source_is_a_document_or_is_marked_as_practice_or_memory() -> None:
    bare = [rule.id for rule in RULES.values() if not CITED.search(rule.source)]
    unmarked = [one for one in bare if not re.search("common practice|from memory", RULES[one].source)]
    assert unmarked == []


def test_every_rule_says_what_it_points_to_what_to_do_next_and_what_to_beware_of() -> None:
    assert [
        rule.id for rule in RULES.values() if not (rule.cause and rule.message and rule.next_step and rule.caution)
    ] == []


def test_a_law_binds_only_the_engines_it_is_named_for_and_says_that_it_is_no_legal_advice() -> None:
    law = [rule for rule in RULES.values() if rule.is_law]
    assert {rule.preset for rule in law} == {"zzzz-ci", "zzzz-si", "zzzz-emergency-hours"}
    assert all("not legal advice" in rule.source for rule in law)
    assert not any(rule.is_law for rule in rules_for(rule_book(), replace(ENGINE, duty="emergency")))


def test_an_engine_starts_without_any_preset_and_a_named_one_takes_the_place_of_what_it_started_with() -> None:
    book = rule_book()
    assert {rule.preset for rule in rules_for(book, ENGINE)} == {""}
    named = rules_for(replace(book, chosen={"oil-automotive": (ENGINE.tag,)}), ENGINE)
    ids = {rule.id for rule in named}
    assert "oil-automotive-fe" in ids
    assert "oil-fe" not in ids
    assert "oil-na" in ids  # the preset has none of its own


def test_a_compression_rule_named_for_an_engine_takes_the_place_of_r75() -> None:
    book = rule_book()
    published = [rule.preset for rule in book.rules if rule.choice == "compression spread" and rule.preset]
    assert len(published) == 7
    for preset in published:
        on = rules_for(replace(book, chosen={preset: (ENGINE.tag,)}), ENGINE)
        assert [rule.preset for rule in on if rule.choice == "compression spread"] == [preset]


def test_every_grade_of_the_standard_has_its_band() -> None:
    for grade in GRADES:
        rule = RULES[f"oil-viscosity-sae-{grade.name}"]
        assert rule.low.alert is not None
        assert rule.high.alert is not None
        assert (rule.low.alert.value, rule.high.alert.value, rule.high.alert.reach) == (grade.least, grade.below, True)


def test_a_nominal_grade_is_judged_by_its_own_band_alone() -> None:
    grades = {"15W-40": "40", "SAE 30": "30", "0w-8": "8", "5W-50": "50"}
    for nominal, hot in grades.items():
        on = rules_for(RuleBook(tuple(RULES.values())), replace(ENGINE, oil_grade=nominal))
        assert [rule.id for rule in on if rule.choice == "kv100 band"] == [f"oil-viscosity-sae-{hot}"]


def test_rows_of_a_table_are_numbered_gravest_first() -> None:
    rows = [
        (rule.shape.row, str(rule.shape.severity))
        for rule in RULES.values()
        if isinstance(rule.shape, Pattern) and rule.shape.table
    ]
    assert rows == [(1, "alarm"), (2, "alarm"), (3, "alert")]


def test_patterns_ask_only_what_some_rule_can_flag() -> None:
    judged = {rule.quantity for rule in RULES.values()} | {"Zn"}  # an additive: only a shop knows its limit

    def flags(condition: Condition) -> bool:
        return condition.asks.startswith("flagged")

    asked = {
        quantity
        for rule in RULES.values()
        if isinstance(rule.shape, Pattern)
        for condition in rule.shape.conditions
        if flags(condition)
        for quantity in condition.quantities
    }
    assert asked <= judged
