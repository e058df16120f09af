"""What the rules made of an engine sheet by sheet: the findings as they stood when each of its sheets had come in.

A sheet is judged once, beside those before it of its kind. What it says of a subject stands until a later sheet of that
kind lets the same rule tell about it again: a value that was not measured, or could not be judged, clears nothing. A
pattern stands while it matches the newest sheets, and as long as none of the values it flags was measured again. Whatever
stands then is merged into findings, so every flagged value is evidence of exactly one.
"""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field, replace
from datetime import date

from fleetcare.domain.findings import Evidence, Finding, Signal
from fleetcare.domain.measured import MeasuredEngine, MeasuredSheet
from fleetcare.domain.rule_book import End, Pattern, Rule
from fleetcare.domain.sheets import Phase
from fleetcare.rules.findings import merge
from fleetcare.rules.judge_engine import Background
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import tell
from fleetcare.rules.judging.patterns import match_patterns
from fleetcare.rules.judging.pools import own_pools
from fleetcare.rules.judging.words import says

_ASIDE = (Phase.WET, Phase.NEW)
_Said = tuple[str, str, End | None]  # rule, subject, end


@dataclass(frozen=True, slots=True)
class Standing:
    """The findings of an engine, gravest first, when a sheet had come in."""

    sheet: MeasuredSheet
    findings: tuple[Finding, ...]


@dataclass(slots=True)
class _Walk:
    """What stands on the way: the newest facts and the signals of each kind of sheet, patterns, and who measured what last."""

    facts: dict[str, MeasuredFacts] = field(default_factory=dict)
    signals: dict[str, dict[_Said, Signal]] = field(default_factory=dict)
    newest: dict[str, tuple[Signal, ...]] = field(default_factory=dict)
    patterns: dict[tuple[str, str], Signal] = field(default_factory=dict)
    measured: dict[tuple[str, str], int] = field(default_factory=dict)


def judge_history(
    sheets: Sequence[MeasuredSheet],
    engine: MeasuredEngine,
    rules: Sequence[Rule],
    background: Background,
) -> tuple[Standing, ...]:
    """Judge the sheets of an engine, oldest first, by the rules for it; its own pool is that of the samples before each."""
    by_kind: dict[str, list[Rule]] = {}
    for rule in rules:
        for kind in rule.kinds:
            by_kind.setdefault(kind, []).append(rule)
    walk, standings = _Walk(), []
    for sheet, pool in zip(sheets, own_pools(sheets), strict=True):
        facts = MeasuredFacts(
            engine=engine,
            sheet=sheet,
            earlier=_earlier(walk.facts.get(sheet.kind)),
            fresh=background.fresh,
            pools=replace(background.pools, own=pool),
            lash=background.lash,
            holidays=background.holidays,
        )
        walk.facts[sheet.kind] = facts
        _take_in(walk, facts, by_kind.get(sheet.kind, ()))
        _match(walk, by_kind)
        standing = [signal for told in walk.signals.values() for signal in told.values()]
        standings.append(Standing(sheet, merge(engine.tag, [*standing, *walk.patterns.values()])))
    return tuple(standings)


def _earlier(before: MeasuredFacts | None) -> tuple[MeasuredSheet, ...]:
    return (*before.earlier, before.sheet) if before else ()


def _take_in(walk: _Walk, facts: MeasuredFacts, rules: Iterable[Rule]) -> None:
    """Let what a sheet tells replace what stood of the same rules and subjects, dated since when it stands."""
    kind = facts.sheet.kind
    before, now = walk.signals.get(kind, {}), {}
    told = tell(rules, facts)
    for signal in told.signals:
        said = _said(signal)
        since = before[said].since if said in before else signal.on
        now[said] = replace(signal, since=since)
    walk.newest[kind] = tuple(now.values())
    flagged = {(rule, subject) for rule, subject, _ in now}
    within = {(rule.id, point) for rule, value in told.within for point in (value.point, "")}
    kept = {said: signal for said, signal in before.items() if said[:2] not in flagged | within}
    walk.signals[kind] = kept | now
    for value in facts.sheet.values:
        if value.phase not in _ASIDE:
            walk.measured[value.quantity, value.point] = facts.sheet.entry


def _match(walk: _Walk, rules: dict[str, list[Rule]]) -> None:
    """Match the patterns anew; one that no longer matches stands until a value of it is measured again."""
    matched: dict[tuple[str, str], Signal] = {}
    for kind, facts in walk.facts.items():
        patterns = [
            (rule, rule.shape)
            for rule in rules.get(kind, ())
            if isinstance(rule.shape, Pattern) and says(facts.sheet, rule)
        ]
        others = tuple(other.sheet for name, other in walk.facts.items() if name != kind)
        standing = tuple(signal for name, told in walk.newest.items() if name != kind for signal in told)
        scene = replace(facts, others=others, standing=standing)
        for signal in match_patterns(patterns, scene, walk.newest[kind]):
            said = (signal.rule.id, signal.subject)
            if said not in matched or matched[said].on < signal.on:
                matched[said] = signal
    for said, signal in walk.patterns.items():
        if said in matched:
            matched[said] = replace(matched[said], since=_since(signal))
        elif not any(_is_measured_again(walk, value) for value in signal.flagged):
            matched[said] = signal
    walk.patterns = matched


def _said(signal: Signal) -> _Said:
    return signal.rule.id, signal.subject, signal.end


def _since(signal: Signal) -> date:
    return signal.since or signal.on


def _is_measured_again(walk: _Walk, value: Evidence) -> bool:
    return walk.measured.get((value.quantity, value.point), value.sheet) != value.sheet
