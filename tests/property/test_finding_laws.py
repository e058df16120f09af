"""Laws of findings over the life of an engine, by the shipped rules.

After every sheet each flagged value that stands is evidence of exactly one open finding. The order of entry never matters.
A finding goes only when all its values were measured again, or belong to another. A glance never hides a signal. What is
dated later is never looked at.
"""

from dataclasses import replace
from datetime import timedelta
from decimal import Decimal
from itertools import pairwise
from random import Random

from hypothesis import given
from hypothesis import strategies as st

from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import Pattern
from fleetcare.domain.sheets import Phase, SheetValue
from fleetcare.rules.finding_life import FindingState, finding_lives, live
from fleetcare.rules.judge_engine import Background
from fleetcare.rules.judge_history import Standing, judge_history
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import tell
from fleetcare.rules.judging.screen import screened
from tests.property.test_rule_laws import RULES, cylinder_sheets, leak_sheets, measured, oil_sheets
from tests.rules.measured import ENGINE


@st.composite
def histories(draw: st.DrawFn) -> tuple[MeasuredSheet, ...]:
    """Up to six sheets of an engine, oldest first, each of a day and an entry of its own."""
    kinds = draw(st.lists(st.sampled_from([oil_sheets, cylinder_sheets, leak_sheets]), min_size=1, max_size=6))
    days = draw(st.lists(st.integers(0, 700), min_size=len(kinds), max_size=len(kinds), unique=True))
    sheets = [draw(kind(days=day)) for kind, day in zip(kinds, days, strict=True)]
    return tuple(sorted(sheets, key=lambda sheet: sheet.on))


FRESH = Background(
    fresh=(
        SheetValue("tbn", "", Phase.NEW, Decimal(10), None, None, "mg KOH/g"),
        SheetValue("Si", "", Phase.NEW, Decimal(5), None, None, "ppm"),
    )
)


def standings_of(sheets: tuple[MeasuredSheet, ...]) -> tuple[Standing, ...]:
    """Judge the sheets of P-01."""
    return judge_history(sheets, ENGINE, RULES, FRESH)


@given(histories())
def test_after_every_sheet_each_value_is_evidence_of_at_most_one_finding(sheets: tuple[MeasuredSheet, ...]) -> None:
    for standing in standings_of(sheets):
        evidence = [value for finding in standing.findings for value in finding.evidence]
        assert len(evidence) == len(set(evidence))


@given(histories())
def test_what_the_newest_sheet_flags_is_evidence_of_exactly_one_open_finding(
    sheets: tuple[MeasuredSheet, ...],
) -> None:
    standings = standings_of(sheets)
    last = standings[-1].sheet
    earlier = tuple(sheet for sheet in sheets if sheet.kind == last.kind and sheet is not last)
    known = [rule for rule in RULES if last.kind in rule.kinds and not isinstance(rule.shape, Pattern)]
    told = tell(known, MeasuredFacts(ENGINE, last, earlier, fresh=FRESH.fresh))
    evidence = [value for finding in standings[-1].findings for value in finding.evidence]
    assert all(evidence.count(value) == 1 for signal in told.signals for value in signal.flagged)
    lived = live(finding_lives(standings, {}), (), last.on)
    still = [one for one in lived if one.state is FindingState.OPEN]
    assert len(still) == len(standings[-1].findings)


@given(histories(), st.randoms(use_true_random=False))
def test_the_order_of_entry_never_matters(sheets: tuple[MeasuredSheet, ...], random: Random) -> None:
    shuffled = tuple(
        replace(
            sheet,
            values=tuple(random.sample(sheet.values, len(sheet.values))),
            words=tuple(random.sample(sheet.words, len(sheet.words))),
        )
        for sheet in sheets
    )
    lives = [finding_lives(standings_of(some), {}) for some in (sheets, shuffled)]
    assert lives[0] == lives[1]


@given(histories())
def test_a_finding_goes_only_when_its_values_were_measured_again_or_are_of_another(
    sheets: tuple[MeasuredSheet, ...],
) -> None:
    standings = standings_of(sheets)
    for before, after in pairwise(standings):
        now = {(one.cause, one.subject) for one in after.findings}
        owned = {value for one in after.findings for value in one.evidence}
        again = {(value.quantity, value.point) for value in after.sheet.values}
        again |= {("supply", point) for quantity, point in again if quantity == "held"}
        for finding in before.findings:
            if (finding.cause, finding.subject) not in now:
                assert all(one in owned or (one.quantity, one.point) in again for one in finding.evidence)


@given(histories())
def test_what_is_dated_later_is_never_looked_at(sheets: tuple[MeasuredSheet, ...]) -> None:
    on = sheets[-1].on - timedelta(days=1)
    known = tuple(sheet for sheet in sheets if sheet.on <= on)
    whole, seen = (finding_lives(standings_of(some), {}) for some in (sheets, known))
    assert [(one.life.id, one.row, one.state) for one in live(whole, (), on)] == [
        (one.life.id, one.row, one.state) for one in live(seen, (), on)
    ]


@given(measured())
def test_a_glance_never_hides_a_signal(about: MeasuredFacts) -> None:
    singles = [rule for rule in RULES if about.sheet.kind in rule.kinds and not isinstance(rule.shape, Pattern)]
    clear = [rule for rule in singles if screened(rule).is_clear(about)]
    assert tell(clear, about).signals == ()
