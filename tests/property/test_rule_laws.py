"""Laws of judging sheets by the shipped rules.

Tightening a limit never un-flags a value. Every flagged value is evidence of exactly one finding, and no finding is milder
than what its evidence says. Units never change a verdict, nor does the order of entry. Nothing that was not reported is
judged, and a bound such as "<1" is never above a limit.
"""

from dataclasses import replace
from decimal import Decimal
from random import Random

from hypothesis import given
from hypothesis import strategies as st

from fleetcare.domain.findings import Evidence, Signal
from fleetcare.domain.measured import MeasuredSheet, SheetWord
from fleetcare.domain.measures import exactly
from fleetcare.domain.rule_book import End, Limit, Limits, Method, Pattern, Rule, Severity, Statistical
from fleetcare.domain.sheets import Phase, SheetValue
from fleetcare.rulebook.rules import rule_book, shop_rules
from fleetcare.rules.findings import merge
from fleetcare.rules.judging.applies import rules_for
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import judge, judge_sheet
from fleetcare.rules.judging.spans import decimal
from fleetcare.rules.judging.values import evidence_of
from tests.rules.measured import ENGINE, a_sheet, facts

CHOSEN = shop_rules(
    {"preset": [{"name": name, "engines": "P-01"} for name in ("zzzz-ci", "oil-joap-two-stroke")]}, "shop"
)
RULES = rules_for(rule_book(CHOSEN), replace(ENGINE, is_marine=True))

# Units that convert as finite decimals.
SAME = {"kPa": ("bar", "Pa", "MPa"), "ppm": ("%", "mg/kg"), "%": ("ppm",), "mm2/s": ("cSt",), "°C": ("°F",)}

OIL = {
    "Fe": ("ppm", 250), "Al": ("ppm", 80), "Cu": ("ppm", 60), "Pb": ("ppm", 40), "Sn": ("ppm", 20), "Cr": ("ppm", 20),
    "Si": ("ppm", 90), "Na": ("ppm", 150), "K": ("ppm", 200), "B": ("ppm", 40), "glycol": ("ppm", 150),
    "water": ("%", 1), "fuel": ("%", 8), "soot": ("%", 6), "kv100": ("mm2/s", 20), "kv40": ("mm2/s", 150),
    "tbn": ("mg KOH/g", 12), "hours_on_oil": ("h", 400), "top_up": ("L", 6), "flash_point": ("°C", 220),
}  # fmt: skip


@st.composite
def figures(draw: st.DrawFn, most: int) -> Decimal:
    """A figure with at most two decimals, often a round one, which limits are."""
    return (
        Decimal(draw(st.integers(0, most))) if draw(st.booleans()) else Decimal(draw(st.integers(0, most * 100))) / 100
    )


@st.composite
def oil_sheets(draw: st.DrawFn, days: int = 0) -> MeasuredSheet:
    """An oil sample with some of what a laboratory reports, plain or as a bound."""
    values = []
    for quantity in draw(st.lists(st.sampled_from(sorted(OIL)), unique=True, min_size=3)):
        unit, most = OIL[quantity]
        qualifier = draw(st.sampled_from(["", "", "", "<", "ND"]))
        figure = None if qualifier == "ND" else draw(figures(most))
        values.append(SheetValue(quantity, "", Phase.NONE, figure, None, None, unit, qualifier))
    return a_sheet(*values, days=days)


@st.composite
def cylinder_sheets(draw: st.DrawFn, days: int = 0) -> MeasuredSheet:
    """A compression sheet, some cylinders tested wet as well."""
    values = []
    for point in draw(st.lists(st.sampled_from("123456"), unique=True, min_size=2)):
        values.append(SheetValue("pressure", point, Phase.DRY, draw(figures(3000)), None, None, "kPa"))
        if draw(st.booleans()):
            values.append(SheetValue("pressure", point, Phase.WET, draw(figures(3000)), None, None, "kPa"))
    return a_sheet(*values, kind="compression", days=days)


@st.composite
def leak_sheets(draw: st.DrawFn, days: int = 0) -> MeasuredSheet:
    """A leak-down sheet of pairs, with where air is heard."""
    values, words = [], []
    for point in draw(st.lists(st.sampled_from("123456"), unique=True, min_size=1)):
        values.append(SheetValue("supply", point, Phase.NONE, Decimal(80), None, None, "psi"))
        values.append(SheetValue("held", point, Phase.NONE, draw(figures(80)), None, None, "psi"))
        words.append(SheetWord("heard", draw(st.sampled_from(["exhaust", "coolant", ""])), point))
    return replace(a_sheet(*values, kind="leakdown", days=days), words=tuple(words))


@st.composite
def measured(draw: st.DrawFn) -> MeasuredFacts:
    """A sheet of some kind with one before it, new oil, and what stands of a sheet of another kind."""
    sheets = draw(st.sampled_from([oil_sheets, cylinder_sheets, leak_sheets]))
    fresh = [
        SheetValue("tbn", "", Phase.NEW, Decimal(10), None, None, "mg KOH/g"),
        SheetValue("kv100", "", Phase.NEW, Decimal("14.5"), None, None, "mm2/s"),
        SheetValue("Si", "", Phase.NEW, Decimal(5), None, None, "ppm"),
    ]
    other = draw(cylinder_sheets(days=10)) if sheets is leak_sheets else None
    standing = judge(RULES, facts(other)) if other else ()
    return facts(
        draw(sheets()),
        earlier=(draw(sheets(days=30)),),
        fresh=tuple(draw(st.lists(st.sampled_from(fresh), unique=True))),
        others=(other,) if other else (),
        standing=standing,
    )


def flagged(signals: tuple[Signal, ...]) -> set[Evidence]:
    """All values some signal calls out."""
    return {value for signal in signals for value in signal.flagged}


def tighter(rule: Rule, by: Decimal) -> Rule:
    """The same rule with every limit moved inwards."""
    counts_up = isinstance(rule.shape, Statistical) and rule.shape.method is not Method.PERCENTILE

    def moved(limits: Limits, end: End) -> Limits:
        inwards = by if end is End.LOW and not counts_up else -by
        alert, alarm = (
            Limit(limit.value + inwards, limit.reach) if limit else None for limit in (limits.alert, limits.alarm)
        )
        return Limits(alert, alarm)

    return replace(rule, low=moved(rule.low, End.LOW), high=moved(rule.high, End.HIGH))


@given(measured(), st.sampled_from([rule for rule in RULES if not isinstance(rule.shape, Pattern)]), st.integers(0, 50))
def test_tightening_a_limit_never_un_flags_a_value(about: MeasuredFacts, rule: Rule, by: int) -> None:
    others = [one for one in RULES if one is not rule]
    before = judge(RULES, about)
    after = judge([*others, tighter(rule, Decimal(by))], about)
    assert flagged(before) <= flagged(after)


@given(measured())
def test_every_flagged_value_is_evidence_of_exactly_one_finding_and_none_is_milder_than_it(
    about: MeasuredFacts,
) -> None:
    signals = (*judge(RULES, about), *about.standing)
    findings = merge("P-01", signals)
    evidence = [value for finding in findings for value in finding.evidence]
    assert sorted(evidence) == sorted(flagged(signals))
    for signal in signals:
        for value in signal.flagged:
            (owner,) = (finding for finding in findings if value in finding.evidence)
            graver = signal.severity is Severity.ALARM and not isinstance(signal.rule.shape, Pattern)
            assert not graver or owner.severity is Severity.ALARM


@given(measured())
def test_every_signal_speaks_in_exactly_one_finding(about: MeasuredFacts) -> None:
    signals = (*judge(RULES, about), *about.standing)
    spoken = [(one.rule.id, one.subject) for finding in merge("P-01", signals) for one in finding.signals]
    assert sorted(spoken) == sorted({(one.rule.id, one.subject) for one in signals})


@given(measured(), st.randoms(use_true_random=False))
def test_the_order_of_entry_never_matters(about: MeasuredFacts, random: Random) -> None:
    def shuffled(sheet: MeasuredSheet) -> MeasuredSheet:
        return replace(
            sheet,
            values=tuple(random.sample(sheet.values, len(sheet.values))),
            words=tuple(random.sample(sheet.words, len(sheet.words))),
        )

    other = replace(
        about,
        sheet=shuffled(about.sheet),
        earlier=tuple(shuffled(sheet) for sheet in about.earlier),
        fresh=about.fresh[::-1],
    )
    rules = random.sample(RULES, len(RULES))
    assert set(judge(rules, other)) == set(judge(RULES, about))
    assert judge_sheet(rules, other).verdicts == judge_sheet(RULES, about).verdicts
    assert merge("P-01", judge(rules, other)) == merge("P-01", judge(RULES, about))


@given(measured(), st.randoms(use_true_random=False))
def test_units_never_change_a_verdict(about: MeasuredFacts, random: Random) -> None:
    def rewritten(value: SheetValue) -> SheetValue:
        unit = random.choice([value.unit, *SAME.get(value.unit, ())])
        if value.value is None or (value.qualifier and unit == "°F"):
            return value
        return replace(value, value=decimal(exactly(value.value, value.unit, unit)), unit=unit)

    def in_other_units(sheet: MeasuredSheet) -> MeasuredSheet:
        return replace(sheet, values=tuple(rewritten(value) for value in sheet.values))

    other = replace(
        about,
        sheet=in_other_units(about.sheet),
        earlier=tuple(in_other_units(sheet) for sheet in about.earlier),
        fresh=tuple(rewritten(value) for value in about.fresh),
    )
    here, there = judge_sheet(RULES, about), judge_sheet(RULES, other)
    assert [verdict for _, verdict in there.verdicts] == [verdict for _, verdict in here.verdicts]
    assert {(one.rule.id, one.subject, one.severity) for one in there.signals} == {
        (one.rule.id, one.subject, one.severity) for one in here.signals
    }


@given(measured())
def test_nothing_that_was_not_reported_is_judged(about: MeasuredFacts) -> None:
    sheets = (about.sheet, *about.earlier, *about.others)
    reported = {evidence_of(sheet, value) for sheet in sheets for value in sheet.values}
    fresh = {evidence_of(about.sheet, value) for value in about.fresh}
    judged = judge_sheet(RULES, about)
    assert flagged(judged.signals) <= reported
    assert {value for one in judged.signals for value in one.used} <= reported | fresh
    assert {value for value, _ in judged.verdicts} == {evidence_of(about.sheet, one) for one in about.sheet.values}


@given(oil_sheets())
def test_a_bound_is_never_above_a_limit(sheet: MeasuredSheet) -> None:
    bounds = {evidence_of(sheet, value) for value in sheet.values if value.qualifier}
    high = [one for one in judge(RULES, facts(sheet)) if one.end is End.HIGH]
    assert not any(bounds & set(one.flagged) for one in high)
