"""Laws of findings over the life of an engine, by shipped rules and those of a shop, on sheets of every kind.

After every sheet each flagged value that stands is evidence of exactly one open finding, and none is milder than it. Units
and the order of entry never matter. A finding goes only when all its values were measured again, or belong to another. A
glance never hides a signal. What is dated later is never looked at.
"""

from collections import Counter
from collections.abc import Iterable
from dataclasses import replace
from datetime import date, timedelta
from itertools import pairwise
from random import Random

from hypothesis import given
from hypothesis import strategies as st

from fleetcare.domain.findings import Evidence, Finding
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import Pattern, RuleBook
from fleetcare.rules.finding_life import FindingState, finding_lives, live
from fleetcare.rules.judge_history import Standing, in_order, judge_history
from fleetcare.rules.judging.judge import tell
from fleetcare.rules.judging.screen import screened
from tests.property.case import Case
from tests.property.cases import cases
from tests.property.other_units import in_other_units
from tests.property.scenes import facts_of, newest, one_by_one, single
from tests.property.shop import STRICTER


def standings_of(case: Case, sheets: Iterable[MeasuredSheet] | None = None) -> tuple[Standing, ...]:
    """What stood after each sheet."""
    told = in_order(case.sheets if sheets is None else sheets, {})
    return judge_history(told, case.engine, case.rules, case.background)


def last_of_each_day(standings: Iterable[Standing]) -> dict[date, tuple[Finding, ...]]:
    """The findings as they stood at the end of each day."""
    return {standing.sheet.on: standing.findings for standing in standings}


def said(findings: Iterable[Finding]) -> list[tuple[object, ...]]:
    """Findings with their evidence by where it stands, whatever its unit and the number of its entry."""
    return sorted(
        (
            (one.cause, one.subject, one.severity, one.since, one.due_by or date.min),
            sorted((value.on, value.quantity, value.point, value.phase) for value in one.evidence),
        )
        for one in findings
    )


def owner(findings: Iterable[Finding], value: Evidence) -> Finding:
    """The one finding a value is evidence of."""
    (found,) = (finding for finding in findings if value in finding.evidence)
    return found


@given(cases())
def test_after_every_sheet_each_value_is_evidence_of_at_most_one_finding(case: Case) -> None:
    for standing in standings_of(case):
        evidence = Counter(value for finding in standing.findings for value in finding.evidence)
        assert not evidence or max(evidence.values()) == 1


@given(cases())
def test_after_every_sheet_what_it_flags_is_evidence_of_exactly_one_open_finding_not_milder(case: Case) -> None:
    """What it flags is told by each rule asked by itself, beside the sheets of its kind before it."""
    standings, known = standings_of(case), dict[str, list[MeasuredSheet]]()
    for standing in standings:
        known.setdefault(standing.sheet.kind, []).append(standing.sheet)
        for signal in one_by_one(case.rules, facts_of(case, known[standing.sheet.kind])):
            (value,) = signal.flagged
            assert owner(standing.findings, value).severity in {signal.severity, "alarm"}
    last = standings[-1]
    lived = live(finding_lives(standings, {}), (), last.sheet.on)
    still = [one for one in lived if one.state is FindingState.OPEN]
    assert len(still) == len(last.findings)


@given(cases())
def test_what_the_newest_sheet_of_every_kind_flags_still_stands(case: Case) -> None:
    findings = standings_of(case)[-1].findings
    for facts in newest(case):
        for signal in one_by_one(case.rules, facts):
            (value,) = signal.flagged
            assert owner(findings, value).severity in {signal.severity, "alarm"}


@given(cases(), st.randoms(use_true_random=False))
def test_the_order_of_values_words_and_rules_never_matters(case: Case, random: Random) -> None:
    sheets = tuple(
        replace(
            sheet,
            values=tuple(random.sample(sheet.values, len(sheet.values))),
            words=tuple(random.sample(sheet.words, len(sheet.words))),
        )
        for sheet in case.sheets
    )
    book = replace(case.book, rules=tuple(random.sample(case.book.rules, len(case.book.rules))))
    lives = [finding_lives(standings_of(one), {}) for one in (case, replace(case, sheets=sheets, book=book))]
    assert lives[0] == lives[1]


@given(cases(), st.randoms(use_true_random=False))
def test_the_order_in_which_sheets_are_typed_never_matters(case: Case, random: Random) -> None:
    """Whatever their numbers, sheets of one day say the same together at its end."""
    entries = random.sample(range(1, len(case.sheets) + 1), len(case.sheets))
    new = {sheet.entry: entry for sheet, entry in zip(case.sheets, entries, strict=True)}
    sheets = [replace(sheet, entry=new[sheet.entry]) for sheet in case.sheets]
    other = replace(
        case,
        sheets=tuple(sorted(sheets, key=lambda sheet: (sheet.on, sheet.entry))),
        conditions={new[entry]: condition for entry, condition in case.conditions.items()},
    )
    here, there = last_of_each_day(standings_of(case)), last_of_each_day(standings_of(other))
    assert {day: said(findings) for day, findings in there.items()} == {
        day: said(findings) for day, findings in here.items()
    }


@given(cases(), st.randoms(use_true_random=False))
def test_units_never_change_what_stands(case: Case, random: Random) -> None:
    here, there = standings_of(case), standings_of(in_other_units(case, random))
    assert [said(one.findings) for one in there] == [said(one.findings) for one in here]


@given(cases(), st.sampled_from(STRICTER))
def test_a_shop_that_makes_limits_tighter_loses_no_flagged_value(case: Case, books: tuple[RuleBook, RuleBook]) -> None:
    lax, tight = (standings_of(replace(case, book=book)) for book in books)
    for before, after in zip(lax, tight, strict=True):
        entry = before.sheet.entry
        was, now = (
            {value for finding in one.findings for value in finding.evidence if value.sheet == entry}
            for one in (before, after)
        )
        assert was <= now


@given(cases())
def test_a_finding_goes_only_when_its_values_were_measured_again_or_are_of_another(case: Case) -> None:
    for before, after in pairwise(standings_of(case)):
        now = {(one.cause, one.subject) for one in after.findings}
        owned = {value for one in after.findings for value in one.evidence}
        again = {(value.quantity, value.point) for value in after.sheet.values}
        again |= {("supply", point) for quantity, point in again if quantity == "held"}
        again |= {("held", point) for quantity, point in again if quantity == "leak"}
        again |= {("leak", point) for quantity, point in again if quantity == "held"}
        again |= {(quantity, "") for quantity, _ in again}  # of the whole run, or engine, by its stages or cylinders
        for finding in before.findings:
            if (finding.cause, finding.subject) not in now:
                assert all(one in owned or (one.quantity, one.point) in again for one in finding.evidence)


@given(cases())
def test_what_is_dated_later_is_never_looked_at(case: Case) -> None:
    on = case.sheets[-1].on - timedelta(days=1)
    known = [sheet for sheet in case.sheets if sheet.on <= on]
    whole, seen = (finding_lives(standings_of(case, some), {}) for some in (case.sheets, known))
    assert [(one.life.id, one.row, one.state) for one in live(whole, (), on)] == [
        (one.life.id, one.row, one.state) for one in live(seen, (), on)
    ]


@given(cases())
def test_a_glance_never_hides_a_signal(case: Case) -> None:
    for facts in newest(case):
        rules = [rule for rule in single(case.rules) if facts.sheet.kind in rule.kinds]
        clear = [rule for rule in rules if screened(rule).is_clear(facts)]
        assert tell(clear, facts).signals == ()


@given(cases())
def test_what_stands_is_said_by_rules_for_the_engine_on_sheets_that_were_typed(case: Case) -> None:
    typed = {
        (sheet.entry, value.quantity, value.point, value.phase, str(value), value.unit)
        for sheet in case.sheets
        for value in sheet.values
    }
    rules = {rule.id for rule in case.rules}
    for standing in standings_of(case):
        for finding in standing.findings:
            assert {signal.rule.id for signal in finding.signals} <= rules
            assert {
                (one.sheet, one.quantity, one.point, one.phase, one.value, one.unit) for one in finding.evidence
            } <= typed
            assert finding.evidence or isinstance(finding.lead.rule.shape, Pattern)
