"""Laws of gaps that come to an end of their check range.

More hours that call for a look, or a narrower range, never un-flag a gap. Units and the order of values never matter. What
is told at a glance is never what a close look would flag. A gap that is flagged is inside its range, and evidence of one
finding after every sheet. The past that is judged is the one the engine's page draws.
"""

from dataclasses import replace
from datetime import timedelta
from decimal import Decimal
from random import Random

from hypothesis import event, given
from hypothesis import strategies as st

from fleetcare.domain.engines import Side
from fleetcare.domain.findings import Evidence
from fleetcare.domain.measured import LASH, MeasuredSheet
from fleetcare.domain.rule_book import Approach, Limit, Limits, Rule
from fleetcare.domain.sheets import LashSpec, Phase, Sheet, SheetValue, Verdict
from fleetcare.rules.judge_engine import Background
from fleetcare.rules.judge_history import judge_history
from fleetcare.rules.judge_lash import judge_value
from fleetcare.rules.judging.approach import past_of
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import judge, judge_sheet, tell
from fleetcare.rules.judging.screen import screened
from fleetcare.rules.lash_past import lash_past
from fleetcare.rules.lash_points import side_of
from tests.builders import START
from tests.rules.measured import ENGINE, ON, rules_named

RULES = [rule for rule in rules_named() if LASH in rule.kinds and rule.quantity]
AHEAD = [rule for rule in RULES if isinstance(rule.shape, Approach)]
INCH = Decimal("25.4")
POINTS = ("1I", "1E")

Lash = tuple[MeasuredSheet, ...]


@st.composite
def wearing(draw: st.DrawFn) -> Lash:
    """Four to seven sheets of two gaps that close or open by some thousandths of an inch from sheet to sheet, some set."""
    sheets, hours = [], 0
    gap = {point: Decimal(draw(st.integers(10, 24))) for point in POINTS}
    wear = {point: Decimal(draw(st.integers(-4, 4))) / 2 for point in POINTS}
    count = draw(st.integers(4, 7))
    for number in range(count):
        hours += draw(st.sampled_from([0, 100, 250, 250, 400]))
        values = []
        for point in POINTS:
            gap[point] = max(Decimal(0), gap[point] - wear[point] + Decimal(draw(st.sampled_from([-1, 0, 0, 1]))) / 2)
            values += draw(gaps(point, gap[point]))
            gap[point] = next((one.value * 1000 for one in values if one.point == point and one.value), gap[point])
        life = None if draw(st.integers(0, 9)) == 0 else Decimal(hours)
        on = ON - timedelta(days=count - number)
        sheets.append(MeasuredSheet(number, LASH, on, tuple(values), engine_hours=life))
    return tuple(sheets)


@st.composite
def gaps(draw: st.DrawFn, point: str, gap: Decimal) -> list[SheetValue]:
    """A gap found, as a figure or between blades, and now and then left at something else or the same; or not at all."""
    if draw(st.integers(0, 9)) == 0:
        return []
    inch = gap / 1000
    blades = draw(st.sampled_from([None, None, None, (inch - Decimal("0.001"), inch + Decimal("0.001"))]))
    low, high = blades if blades and inch > Decimal("0.001") else (None, None)
    found = SheetValue(LASH, point, Phase.FOUND, None if low else inch, low, high, "in")
    if draw(st.integers(0, 4)):
        return [found]
    left = draw(st.sampled_from([inch, Decimal("0.016"), Decimal("0.0135")]))
    return [SheetValue(LASH, point, Phase.LEFT, left, None, None, "in"), found][:: draw(st.sampled_from([1, -1]))]


def a_spec(narrower: Decimal = Decimal(0), unit: str = "in") -> LashSpec:
    """From 0.012 to 0.020 in, or so much narrower on both sides, or the same in mm."""
    scale = 1 if unit == "in" else INCH
    ends = (Decimal("0.012") + narrower) * scale, (Decimal("0.020") - narrower) * scale
    return LashSpec(START, unit, "any", dict.fromkeys(Side, ends))


def about(sheets: Lash, spec: LashSpec | None = None) -> MeasuredFacts:
    """The last of some sheets with those before it, held against a spec."""
    spec = spec or a_spec()
    lash = {one.entry: tuple(judge_value(v, side_of(v.point), spec, "") for v in one.values) for one in sheets}
    return MeasuredFacts(ENGINE, sheets[-1], sheets[:-1], lash=lash)


def flagged(rules: list[Rule], facts: MeasuredFacts) -> set[Evidence]:
    """All values some rule calls out."""
    return {value for signal in judge(rules, facts) for value in signal.flagged}


def more_hours(rule: Rule, hours: int) -> Rule:
    """The same rule, calling for a look so much earlier."""
    assert rule.low.alert is not None
    return replace(rule, low=Limits(Limit(rule.low.alert.value + hours)))


@given(wearing(), st.integers(0, 2000))
def test_more_hours_never_un_flag_a_gap(sheets: Lash, hours: int) -> None:
    before, after = flagged(AHEAD, about(sheets)), flagged([more_hours(one, hours) for one in AHEAD], about(sheets))
    assert before <= after
    event(f"flagged: {bool(after)}")


@given(wearing(), st.integers(0, 3))
def test_a_narrower_range_never_un_flags_a_gap(sheets: Lash, thousandths: int) -> None:
    narrow = a_spec(Decimal(thousandths) / 1000)
    assert flagged(RULES, about(sheets)) <= flagged(RULES, about(sheets, narrow))


@given(wearing(), st.randoms(use_true_random=False))
def test_neither_units_nor_the_order_of_values_matter(sheets: Lash, random: Random) -> None:
    def otherwise(value: SheetValue) -> SheetValue:
        ends = (None if one is None else one * INCH for one in (value.value, value.low, value.high))
        plain, low, high = ends
        return random.choice([value, replace(value, value=plain, low=low, high=high, unit="mm")])

    def told(facts: MeasuredFacts) -> list[tuple[object, ...]]:
        return sorted((one.rule.id, one.subject, one.severity, one.flagged[0].phase) for one in judge(RULES, facts))

    other = tuple(
        replace(one, values=tuple(map(otherwise, random.sample(one.values, len(one.values))))) for one in sheets
    )
    assert told(about(other, a_spec(unit=random.choice(["in", "mm"])))) == told(about(sheets))


@given(wearing(), st.integers(0, 4000))
def test_a_glance_never_hides_a_gap_that_a_close_look_flags(sheets: Lash, hours: int) -> None:
    rules = [more_hours(one, hours) for one in AHEAD]
    clear = [rule for rule in rules if screened(rule).is_clear(about(sheets))]
    assert tell(clear, about(sheets)).signals == ()
    event(f"clear: {len(clear)} of {len(rules)}")


@given(wearing())
def test_what_is_flagged_ahead_is_not_out_and_what_is_not_judged_is_called_in_by_no_rule(sheets: Lash) -> None:
    facts = about(sheets)
    by_value = {str(one.value): one for one in facts.lash[facts.sheet.entry]}
    for signal in judge(AHEAD, facts):
        assert not by_value[signal.flagged[0].value].is_out
        assert {value.sheet for value in signal.used} <= {one.entry for one in sheets}
    for value, verdict in judge_sheet(AHEAD, facts).verdicts:
        assert verdict is not Verdict.IN or by_value[value.value].verdict is not Verdict.NOT_JUDGED


@given(wearing())
def test_after_every_sheet_each_flagged_gap_is_evidence_of_exactly_one_finding(sheets: Lash) -> None:
    standings = judge_history(sheets, ENGINE, RULES, Background(lash=about(sheets).lash))
    for number, standing in enumerate(standings):
        evidence = [value for finding in standing.findings for value in finding.evidence]
        assert len(evidence) == len(set(evidence))
        assert flagged(RULES, about(sheets[: number + 1])) <= set(evidence)


@given(wearing())
def test_the_past_that_is_judged_is_the_one_that_is_drawn(sheets: Lash) -> None:
    spec = a_spec()
    kept = [Sheet(one.entry, LASH, one.on, one.values) for one in sheets]
    at = {one.entry: one.engine_hours for one in sheets if one.engine_hours is not None}
    for past in lash_past((), kept, (spec,), at, ON):
        facts = about(sheets)
        assert [one.check for one in past_of(past.name, spec.condition, facts)] == list(past.checks)
