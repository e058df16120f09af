"""A judged sheet as flat rows: why each value has its verdict, by how much, and whose rule and source that is."""

from decimal import Decimal

import pytest

from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import Basis, Bounds, Limits, Rule
from fleetcare.domain.sheets import SheetValue
from fleetcare.rulebook.rules import rule_book
from fleetcare.rules.explain_measured import MeasuredRow, measured_rows, say_limits
from fleetcare.rules.judging.applies import rules_for
from fleetcare.rules.judging.judge import judge_sheet
from tests.rules.measured import ENGINE, a_rule, a_sheet, beyond, facts, pressures, rules_named, value


def rows(sheet: MeasuredSheet, *rules: Rule) -> list[MeasuredRow]:
    """The rows of a sheet, by some rules or by the shipped ones."""
    known = rules or rules_for(rule_book(), ENGINE)
    return list(measured_rows(judge_sheet(known, facts(sheet)), ("hours_on_oil", "Cu", "Fe", "pressure")))


def row(one: SheetValue, *rules: Rule, kind: str = "oil") -> MeasuredRow:
    """The row of one value."""
    (found,) = rows(a_sheet(one, kind=kind), *rules)
    return found


def test_a_value_past_a_limit_says_by_how_much_and_whose_limit_it_is() -> None:
    found = row(value("Fe", "120"), a_rule())
    assert found == MeasuredRow(
        quantity="Fe",
        title="iron",
        point="",
        phase="",
        value="120",
        unit="ppm",
        verdict="alert",
        why="120 ppm, 20 ppm above the alert limit of 100 ppm",
        rule="iron",
        measured=Decimal(120),
        limit=Decimal(100),
        margin=Decimal(-20),
        limit_unit="ppm",
        source="common practice",
    )


def test_a_value_in_another_unit_is_told_in_that_of_the_limit() -> None:
    found = row(value("Fe", "0.012", "%"), a_rule())
    assert (found.value, found.unit, found.limit_unit) == ("0.012", "%", "ppm")
    assert found.why == "120 ppm, 20 ppm above the alert limit of 100 ppm"


def test_a_value_within_says_the_first_limits_that_held_it() -> None:
    found = row(value("Fe", "100"), a_rule())
    assert (found.verdict, found.why, found.rule, found.limit) == ("in", "iron up to 100 ppm", "iron", None)


def test_a_value_within_is_held_by_no_rule_that_asks_for_what_the_sheet_does_not_say() -> None:
    rules = {rule.id: rule for rule in rules_named()}
    sheet = a_sheet(value("tbn", "5.25"), value("tbn", "10.5", phase="new"), words={"tbn_method": "perchloric"})
    found = rows(sheet, rules["oil-tbn-hydrochloric"], rules["oil-tbn"])
    assert [(one.verdict, one.rule) for one in found] == [("in", "oil-tbn"), ("not judged", "")]


def test_a_value_no_rule_is_about_says_so() -> None:
    found = row(value("Cu", "5"), a_rule())
    assert (found.verdict, found.why, found.rule, found.source) == ("not judged", "no rule is about it", "", "")


def test_a_bound_that_does_not_tell_says_why() -> None:
    found = row(value("Fe", "<150"), a_rule())
    assert (found.verdict, found.why) == (
        "not judged",
        "<150 does not tell on which side of the alert limit of 100 ppm it is; it keeps inside the alarm limit of 200 ppm",
    )


def test_fresh_oil_and_wet_tests_are_there_to_compare_with() -> None:
    assert row(value("Fe", "1", phase="new"), a_rule()).why == "fresh oil, to compare with"
    wet = rows(pressures("400", "390", wet={1: "410"}))
    assert wet[1].why == "of the wet test, to compare with"


def test_what_others_are_worked_out_with_says_so() -> None:
    assert row(value("hours_on_oil", "240"), a_rule()).why == "to work rates out with"
    assert row(value("supply", "80", point="1"), a_rule(), kind="leakdown").why == "to work the leak out with"


def test_what_is_compared_with_another_value_is_named() -> None:
    low = rows(pressures("400", "280"))[1]
    assert low.verdict == "alarm"
    assert low.why.startswith("compression as a share of the highest 70 %, 5 % below the alarm limit of 75 %")
    assert [one.why for one in rows(pressures("400", "390"))] == [
        "compression as a share of the highest 100 %, from 75 %",
        "compression as a share of the highest 97.5 %, from 75 %",
    ]


def test_what_a_bound_is_worked_out_to_has_no_figure_of_its_own() -> None:
    above_new = a_rule(shape=Bounds(Basis.LESS_NEW))
    assert row(value("Fe", "50"), above_new).why == "iron above new oil 50 ppm, up to 100 ppm"
    assert row(value("Fe", "<50"), above_new).why == "iron above new oil up to 100 ppm"


def test_the_leak_of_a_pair_stands_with_the_pressure_held() -> None:
    pair = (value("supply", "100", "psi", "1"), value("held", "70", "psi", "1"))
    held = next(one for one in rows(a_sheet(*pair, kind="leakdown")) if one.quantity == "held")
    assert (held.verdict, held.rule, held.measured, held.limit_unit) == ("alarm", "leakdown-bands", Decimal(30), "%")
    tight = (value("supply", "100", "psi", "1"), value("held", "95", "psi", "1"))
    held = next(one for one in rows(a_sheet(*tight, kind="leakdown")) if one.quantity == "held")
    assert (held.verdict, held.why) == ("in", "leak-down 5 %, up to 10 %")


def test_a_value_only_a_pattern_flags_says_what_that_means() -> None:
    """Of 80 psi a cylinder holds 59: the published differential test alone calls it out where bands are left aside."""
    pair = (value("supply", "80", "psi", "1"), value("held", "59", "psi", "1"))
    (pattern,) = [rule for rule in rule_book().rules if rule.id == "leakdown-differential"]
    held = next(one for one in rows(a_sheet(*pair, kind="leakdown"), pattern) if one.quantity == "held")
    assert (held.verdict, held.rule, held.measured) == ("alarm", "leakdown-differential", None)
    assert held.why == pattern.message


def test_rows_stand_in_the_order_of_the_sheet_whatever_was_typed_first() -> None:
    sheet = a_sheet(value("Al", "1"), value("Fe", "1"), value("hours_on_oil", "100"), value("Cu", "1"))
    assert [one.quantity for one in rows(sheet, a_rule())] == ["hours_on_oil", "Cu", "Fe", "Al"]


@pytest.mark.parametrize(
    ("low", "high", "said"),
    [
        (Limits(beyond("50")), Limits(beyond("100")), "iron from 50 up to 100 ppm"),
        (Limits(None, beyond("50")), Limits(), "iron from 50 ppm"),
        (Limits(), Limits(None, beyond("200")), "iron up to 200 ppm"),
    ],
)
def test_limits_are_said_by_their_nearest_ends(low: Limits, high: Limits, said: str) -> None:
    assert say_limits(a_rule(low=low, high=high)) == said
