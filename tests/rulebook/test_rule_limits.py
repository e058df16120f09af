"""Every limit of every shipped rule, held just inside, at and just past it; and every rule with its inputs missing."""

from collections.abc import Iterator
from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.rule_book import Approach, Basis, Bounds, Limit, Pattern, Rule
from fleetcare.rulebook.rules import shipped_rules
from fleetcare.rules.judging.judge import judge, judge_sheet
from tests.rules.measured import a_sheet, facts, facts_with, limit_of

TINY = Decimal("0.000001")

FIGURES = [
    rule
    for rule in shipped_rules()
    if not isinstance(rule.shape, Pattern | Approach)  # tests/rules/test_judging_approach.py has the latter
    and not (isinstance(rule.shape, Bounds) and rule.shape.basis is Basis.SPEC)
]


def _limits() -> Iterator[tuple[Rule, Limit, bool, str]]:
    for rule in FIGURES:
        for limits, is_low in ((rule.low, True), (rule.high, False)):
            for severity, limit in (("alert", limits.alert), ("alarm", limits.alarm)):
                if limit is not None:
                    yield rule, limit, is_low, severity


LIMITS = list(_limits())


def _verdict(rule: Rule, figure: Decimal) -> str:
    signals = [one for one in judge([rule], facts_with(rule, figure)) if one.measured == figure]
    return str(signals[0].severity) if signals else "in"


@pytest.mark.parametrize(("rule", "limit", "is_low", "severity"), LIMITS, ids=lambda one: getattr(one, "id", ""))
def test_a_limit_passes_inside_flags_outside_and_does_at_itself_as_it_says(
    rule: Rule, limit: Limit, is_low: bool, severity: str
) -> None:
    at = limit_of(rule, limit, is_low=is_low)
    if at <= 0 and isinstance(rule.shape, Bounds):
        assert _verdict(rule, at) == "in"  # nothing lies below nothing
        assert _verdict(rule, TINY) == severity
        return
    outwards = -TINY if is_low else TINY
    assert _verdict(rule, at + outwards) == severity
    assert _verdict(rule, at - outwards) != severity
    assert (_verdict(rule, at) == severity) is limit.reach


def test_a_rule_without_its_inputs_says_nothing_and_why() -> None:
    for rule in FIGURES:
        judged = judge_sheet([rule], facts(a_sheet(kind=rule.kinds[0])))
        assert judged.signals == ()
        assert {one.rule.id for one in judged.not_judged} == {rule.id}


def test_a_value_entered_twice_with_different_figures_is_not_judged() -> None:
    for rule in FIGURES:
        about = facts_with(rule, Decimal(1))
        one, *others = about.sheet.values
        other = replace(one, value=Decimal(999_999))
        rest = [value for value in others if value.quantity != rule.quantity]
        judged = judge_sheet([rule], replace(about, sheet=replace(about.sheet, values=(one, other, *rest))))
        assert judged.signals == ()
        assert "it was entered twice, with different values" in {told.why for told in judged.not_judged}
