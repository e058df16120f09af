"""All that the rules make of an engine: its newest sheet of each kind judged, each beside the newest of the others.

Rules that look at one kind of sheet are asked first, so that patterns across kinds see what stands on the others. The
findings rest on the newest sheets alone; earlier ones say since when, and what a figure is compared with.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from datetime import date

from fleetcare.domain.findings import Finding
from fleetcare.domain.measured import MeasuredEngine, MeasuredSheet
from fleetcare.domain.rule_book import Pattern, RuleBook
from fleetcare.domain.sheets import Judgement, SheetValue
from fleetcare.rules.findings import merge
from fleetcare.rules.judging.applies import rules_for
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import JudgedSheet, judge, judge_sheet
from fleetcare.rules.judging.pools import NO_FAMILY, Family, own_pools, pools_for


@dataclass(frozen=True, slots=True)
class Background:
    """What is known beside the sheets of an engine; see `MeasuredFacts`. Its own pool is told by the sheets themselves."""

    fresh: tuple[SheetValue, ...] = ()
    family: Family = NO_FAMILY
    lash: Mapping[int, tuple[Judgement, ...]] = field(default_factory=dict)
    holidays: frozenset[date] = frozenset()


@dataclass(frozen=True, slots=True)
class JudgedEngine:
    """The findings of an engine, gravest first, and its newest sheets as judged, by entry."""

    findings: tuple[Finding, ...]
    sheets: Mapping[int, JudgedSheet]


def judge_engine(
    sheets: Sequence[MeasuredSheet], engine: MeasuredEngine, book: RuleBook, background: Background
) -> JudgedEngine:
    """Judge the sheets of an engine, in any order, by the rules of a book that are for it."""
    by_kind: dict[str, list[MeasuredSheet]] = {}
    for sheet in sorted(sheets, key=lambda one: (one.on, one.entry)):
        by_kind.setdefault(sheet.kind, []).append(sheet)
    facts = [facts_of(kept, engine, background) for kept in by_kind.values()]
    rules = rules_for(book, engine)
    single = [rule for rule in rules if not isinstance(rule.shape, Pattern)]
    alone = {one.sheet.kind: judge(single, one) for one in facts} if len(facts) > 1 else {}
    judged = {}
    for one in facts:
        others = tuple(other.sheet for other in facts if other is not one)
        standing = tuple(signal for other in others for signal in alone[other.kind])
        judged[one.sheet.entry] = judge_sheet(rules, replace(one, others=others, standing=standing))
    signals = [signal for one in judged.values() for signal in one.signals]
    return JudgedEngine(merge(engine.tag, signals), judged)


def facts_of(sheets: Sequence[MeasuredSheet], engine: MeasuredEngine, background: Background) -> MeasuredFacts:
    """Give what the newest of some sheets of a kind, oldest first, is judged by; its own pool is that of those before."""
    *_, own = own_pools(sheets)
    return MeasuredFacts(
        engine=engine,
        sheet=sheets[-1],
        earlier=tuple(sheets[:-1]),
        fresh=background.fresh,
        pools=pools_for(sheets[-1], own, background.family),
        lash=background.lash,
        holidays=background.holidays,
    )
