"""Laws of judging sheets of every kind by shipped rules and those of a shop.

Tightening a limit never un-flags a value. Every flagged value is evidence of exactly one finding, and no finding is milder
than what its evidence says. Units never change a verdict, nor does the order of entry. Nothing that was not reported is
judged. What is flagged is told by each rule asked by itself, and by a plain reading that shares nothing with judging.
"""

from collections import Counter
from dataclasses import replace
from datetime import date
from decimal import Decimal
from random import Random

from hypothesis import assume, event, given, seed, settings
from hypothesis import strategies as st

from fleetcare.domain.findings import Evidence, Finding
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import Bounds, Condition, End, Limit, Limits, Method, Pattern, Rule, Statistical
from fleetcare.domain.sheets import Phase, SheetValue, Verdict
from fleetcare.rulebook.overrides import Override, override
from fleetcare.rulebook.rules import shipped_rules
from fleetcare.rules.findings import merge
from fleetcare.rules.judge_engine import judge_engine
from fleetcare.rules.judging.judge import judge, judge_sheet
from tests.property.case import Case
from tests.property.cases import cases
from tests.property.other_units import in_other_units
from tests.property.plain_reading import is_readable, reads_out
from tests.property.scenes import flagged, newest, one_by_one, single

SHIPPED = {rule.id for rule in shipped_rules()}
GRAVITY = [Verdict.NOT_JUDGED, Verdict.IN, Verdict.ALERT, Verdict.ALARM]
BY = [Decimal(by) for by in ("0", "0.001", "0.01", "1", "5", "50")]

one = st.integers(0, 10_000)  # which of some


def found(case: Case) -> tuple[Finding, ...]:
    """The findings that rest on the newest sheets."""
    return judge_engine(case.sheets, case.engine, case.book, case.background).findings


def as_said(value: Evidence) -> tuple[date, str, str, Phase]:
    """A value by where it stands, whatever its unit and the number of its entry."""
    return value.on, value.quantity, value.point, value.phase


def told(findings: tuple[Finding, ...]) -> list[tuple[object, ...]]:
    """What findings say but for units and numbers of entries."""
    return sorted(
        (
            (one.cause, one.subject, one.severity, one.since, one.due_by or date.min),
            sorted(as_said(value) for value in one.evidence),
        )
        for one in findings
    )


def tighter(rule: Rule, by: Decimal) -> Rule:
    """The same rule with every limit moved inwards: of a shipped one as a shop may change it, of a law and others at once."""
    counts_up = isinstance(rule.shape, Statistical) and rule.shape.method is not Method.PERCENTILE

    def moved(limits: Limits, end: End) -> Limits:
        inwards = by if end is End.LOW and not counts_up else -by
        alert, alarm = (
            Limit(limit.value + inwards, limit.reach) if limit else None for limit in (limits.alert, limits.alarm)
        )
        return Limits(alert, alarm)

    low, high = moved(rule.low, End.LOW), moved(rule.high, End.HIGH)
    if isinstance(rule.shape, Pattern):
        return replace(rule, shape=replace(rule.shape, conditions=tuple(wider(c, by) for c in rule.shape.conditions)))
    if rule.id not in SHIPPED or rule.is_law or not by:
        return replace(rule, low=low, high=high)
    sides = {end: typed(limits) for end, limits in (("low", low), ("high", high)) if limits}
    return override(rule, Override.model_validate({"id": rule.id, **sides}))


def typed(limits: Limits) -> dict[str, dict[str, Decimal]]:
    """Limits as a shop writes them."""
    named = {"alert": limits.alert, "alarm": limits.alarm}
    return {name: {"reach" if one.reach else "beyond": one.value} for name, one in named.items() if one}


def wider(condition: Condition, by: Decimal) -> Condition:
    """A condition of a pattern that calls out what lies within, calling out more."""
    if not condition.calls_out:
        return condition
    low, high = condition.low, condition.high
    return replace(
        condition,
        low=Limit(low.value - by, low.reach) if low else None,
        high=Limit(high.value + by, high.reach) if high else None,
    )


def can_be_tightened(rule: Rule, measured: set[str]) -> bool:
    """Whether a rule for what was measured has limits of its own, and is no row of a table: of those only one counts."""
    if isinstance(rule.shape, Pattern):
        called_out = {name for one in rule.shape.conditions if one.calls_out for name in one.quantities}
        return not rule.shape.table and bool(called_out & measured)
    return bool(rule.low or rule.high) and rule.quantity in measured


@given(cases(), one, st.sampled_from(BY))
def test_tightening_a_limit_never_un_flags_a_value_nor_makes_it_milder(case: Case, which: int, by: Decimal) -> None:
    measured = {value.quantity for sheet in case.sheets for value in sheet.values} | {"leak"}
    chosen = [rule for rule in case.rules if can_be_tightened(rule, measured)]
    assume(chosen)
    rule = chosen[which % len(chosen)]
    try:
        strict = tighter(rule, by)
    except ValueError:  # no percentage, or no multiple, can be so tight
        assume(False)
    after = [strict if one is rule else one for one in case.rules]
    for facts in newest(case):
        before, now = judge_sheet(case.rules, facts), judge_sheet(after, facts)
        assert flagged(before.signals) <= flagged(now.signals)
        for (value, was), (same, is_now) in zip(before.verdicts, now.verdicts, strict=True):
            assert value == same
            assert was in {Verdict.IN, Verdict.NOT_JUDGED} or GRAVITY.index(is_now) >= GRAVITY.index(was)
        if flagged(now.signals) > flagged(before.signals):
            event(f"more is flagged by a tighter {type(rule.shape).__name__}")


@given(cases(), st.integers(1, 4))
def test_a_narrower_check_range_never_un_flags_a_gap(case: Case, by: int) -> None:
    assume(case.spec is not None)
    assert case.spec is not None
    step = Decimal("0.001") * by if case.spec.unit == "in" else Decimal("0.0254") * by
    ranges = {side: (least + step / 2, most - step / 2) for side, (least, most) in case.spec.ranges.items()}
    narrow = replace(case, spec=replace(case.spec, ranges=ranges))
    for before, after in zip(newest(case), newest(narrow), strict=True):
        assert flagged(judge(case.rules, before)) <= flagged(judge(case.rules, after))


@given(cases())
def test_every_flagged_value_is_evidence_of_exactly_one_finding_and_none_is_milder_than_it(case: Case) -> None:
    findings = found(case)
    evidence = Counter(value for finding in findings for value in finding.evidence)
    assert not evidence or max(evidence.values()) == 1
    owners = {value: finding for finding in findings for value in finding.evidence}
    called_out = set()
    for facts in newest(case):
        for signal in one_by_one(case.rules, facts):
            (value,) = signal.flagged
            assert owners[value].severity in {signal.severity, "alarm"}
            called_out.add(value)
        for signal in judge(case.rules, facts):
            if isinstance(signal.rule.shape, Pattern):
                named = {name for c in signal.rule.shape.conditions if c.calls_out for name in c.quantities}
                called_out |= {value for value in signal.flagged if value.quantity in named}
                assert all(owners[value].severity in {signal.severity, "alarm"} for value in signal.flagged)
    assert set(evidence) == called_out
    event(f"{'a pattern leads' if any(isinstance(f.lead.rule.shape, Pattern) for f in findings) else 'no pattern'}")


@given(cases())
def test_every_signal_speaks_in_exactly_one_finding(case: Case) -> None:
    signals = [signal for facts in newest(case) for signal in judge(case.rules, facts)]
    spoken = [(one.rule.id, one.subject, one.end, one.on) for f in merge("P-01", signals) for one in f.signals]
    single_ones = [one for one in spoken if one[2] is not None]
    assert sorted(single_ones) == sorted(
        (one.rule.id, one.subject, one.end, one.on) for one in signals if one.end is not None
    )
    patterns = [one[:2] for one in spoken if one[2] is None]
    assert sorted(patterns) == sorted({(one.rule.id, one.subject) for one in signals if one.end is None})


@given(cases())
def test_a_rule_flags_what_a_plain_reading_of_its_limits_flags_and_nothing_else(case: Case) -> None:
    for facts in newest(case):
        for rule in single(case.rules):
            if facts.sheet.kind not in rule.kinds or not is_readable(rule):
                continue
            expected = reads_out(rule, facts)
            if expected is not None:
                told = {
                    (one.subject, one.severity.value, one.end.value if one.end else "") for one in judge([rule], facts)
                }
                assert told == expected, rule.id


@given(cases(), st.randoms(use_true_random=False))
def test_the_order_of_values_words_rules_and_sheets_never_matters(case: Case, random: Random) -> None:
    def shuffled(sheet: MeasuredSheet) -> MeasuredSheet:
        values = tuple(random.sample(sheet.values, len(sheet.values)))
        return replace(sheet, values=values, words=tuple(random.sample(sheet.words, len(sheet.words))))

    other = replace(
        case,
        sheets=tuple(shuffled(sheet) for sheet in random.sample(case.sheets, len(case.sheets))),
        fresh=tuple(random.sample(case.fresh, len(case.fresh))),
        book=replace(case.book, rules=tuple(random.sample(case.book.rules, len(case.book.rules)))),
    )
    assert found(other) == found(case)
    here, there = (judge_engine(one.sheets, one.engine, one.book, one.background).sheets for one in (case, other))
    assert {entry: judged.verdicts for entry, judged in here.items()} == {
        entry: judged.verdicts for entry, judged in there.items()
    }


@given(cases(), st.randoms(use_true_random=False))
def test_the_order_in_which_sheets_are_typed_never_matters(case: Case, random: Random) -> None:
    entries = random.sample(range(1, len(case.sheets) + 1), len(case.sheets))
    new = {sheet.entry: entry for sheet, entry in zip(case.sheets, entries, strict=True)}
    other = replace(
        case,
        sheets=tuple(replace(sheet, entry=new[sheet.entry]) for sheet in case.sheets),
        conditions={new[entry]: condition for entry, condition in case.conditions.items()},
    )

    assert told(found(other)) == told(found(case))


@given(cases(), st.randoms(use_true_random=False))
def test_units_never_change_a_verdict(case: Case, random: Random) -> None:
    other = in_other_units(case, random)
    assert told(found(other)) == told(found(case))
    for facts, same in zip(newest(case), newest(other), strict=True):
        one, two = judge_sheet(case.rules, facts), judge_sheet(case.rules, same)
        assert {as_said(value): told for value, told in two.verdicts} == {
            as_said(value): told for value, told in one.verdicts
        }
        assert {(s.rule.id, s.subject, s.severity, s.end) for s in two.signals} == {
            (s.rule.id, s.subject, s.severity, s.end) for s in one.signals
        }


@given(cases())
def test_nothing_that_was_not_reported_is_judged(case: Case) -> None:
    def as_typed(sheet: MeasuredSheet, value: SheetValue) -> tuple[object, ...]:
        return sheet.entry, sheet.on, value.quantity, value.point, value.phase, str(value), value.unit

    def as_judged(value: Evidence) -> tuple[object, ...]:
        return value.sheet, value.on, value.quantity, value.point, value.phase, value.value, value.unit

    typed_values = {as_typed(sheet, value) for sheet in case.sheets for value in sheet.values}
    for facts in newest(case):
        fresh = {as_typed(facts.sheet, value) for value in case.fresh}
        judged = judge_sheet(case.rules, facts)
        assert {as_judged(value) for one in judged.signals for value in one.flagged} <= typed_values
        assert {as_judged(value) for one in judged.signals for value in one.used} <= typed_values | fresh
        assert sorted(as_judged(value) for value, _ in judged.verdicts) == sorted(
            as_typed(facts.sheet, value) for value in facts.sheet.values
        )


@given(cases(), one)
def test_a_value_taken_off_a_sheet_is_missing_and_not_nothing(case: Case, which: int) -> None:
    """What rests on it alone is not told any more; no bound flags another value, or one that is not there."""
    for facts in newest(case):
        if not facts.sheet.values:
            continue
        gone = facts.sheet.values[which % len(facts.sheet.values)]
        less = replace(facts, sheet=replace(facts.sheet, values=tuple(v for v in facts.sheet.values if v is not gone)))
        bounds = [rule for rule in single(case.rules) if rule.shape == Bounds() and rule.quantity != "leak"]
        before, after = flagged(judge(bounds, facts)), flagged(judge(bounds, less))
        assert after <= before
        assert all((value.quantity, value.point) == (gone.quantity, gone.point) for value in before - after)


@given(cases())
def test_a_bound_is_never_above_a_limit(case: Case) -> None:
    for facts in newest(case):
        high = [one for one in judge(case.rules, facts) if one.end is End.HIGH and one.limit and one.limit >= 0]
        assert not any(value.value.startswith(("<", "ND")) for one in high for value in one.flagged)


def test_what_is_drawn_has_something_to_say_in_every_shape_and_on_every_kind_of_sheet() -> None:
    """A law about nothing would always hold."""
    seen: Counter[str] = Counter()

    @seed(3)  # the same cases each time
    @settings(max_examples=200, derandomize=False, database=None)
    @given(cases())
    def look(case: Case) -> None:
        findings = found(case)
        signals = [signal for finding in findings for signal in finding.signals]
        flags = {type(one.rule.shape).__name__ for one in signals} | {one.rule.kinds[0] for one in signals}
        several = [one for one in findings if len({signal.rule.id for signal in one.signals}) > 1]
        across = [one for one in findings if len({value.sheet for value in one.evidence}) > 1]
        seen.update(flags | {"any"} if flags else {"nothing"})
        seen.update({"merged"} if several else ())
        seen.update({"across sheets"} if across else ())

    look()
    least = {"any": 75, "merged": 30, "Bounds": 30, "AgainstSheet": 20, "Change": 10, "Pattern": 20, "across sheets": 1}
    least |= {"Statistical": 2, "Rate": 1, "Approach": 1}
    least |= dict.fromkeys(("lash", "compression", "leakdown", "run", "spot", "oil"), 3)
    assert {name: (seen[name], count) for name, count in least.items() if seen[name] < count} == {}
