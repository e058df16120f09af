"""What the rules made of an engine sheet by sheet: the findings as they stood when each of its sheets had come in.

A sheet is judged once, beside those before it of its kind. What it says of a subject stands until a later sheet of that
kind lets the same rule tell about it again: a value that was not measured, or could not be judged, clears nothing. A
pattern stands while it matches the newest sheets, and as long as none of the values it flags was measured again. Whatever
stands then is merged into findings, so every flagged value is evidence of exactly one.
"""

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from datetime import date

from fleetcare.domain.findings import Evidence, Finding, Signal
from fleetcare.domain.measured import SHEET_KINDS, MeasuredEngine, MeasuredSheet
from fleetcare.domain.rule_book import End, Pattern, Rule, RuleBook
from fleetcare.domain.sheets import Phase
from fleetcare.rules.findings import merge
from fleetcare.rules.judge_engine import Background
from fleetcare.rules.judging.applies import rules_for
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import tell
from fleetcare.rules.judging.patterns import match_patterns, may_match
from fleetcare.rules.judging.pools import own_pools, pools_for
from fleetcare.rules.judging.screen import Screened, is_outside, screened
from fleetcare.rules.judging.values import HELD, LEAK, PRESSURE, SUPPLY, WET_GAIN
from fleetcare.rules.judging.words import says

_SOURCES = {LEAK: (SUPPLY, HELD), WET_GAIN: (PRESSURE,)}
"""What is worked out of other values, and of which."""

_ASIDE = (Phase.WET, Phase.NEW)
_Said = tuple[str, str, End | None, Phase]  # rule, subject, end, and whether it was found or left


@dataclass(frozen=True, slots=True)
class Standing:
    """The findings of an engine, gravest first, when a sheet had come in."""

    sheet: MeasuredSheet
    findings: tuple[Finding, ...]


@dataclass(frozen=True, slots=True)
class _OfKind:
    """The rules for a kind of sheet: single ones, patterns, and everything on any sheet that those patterns look at."""

    singles: tuple[Screened, ...]
    patterns: tuple[tuple[Rule, Pattern], ...]
    looks_at: frozenset[str]


@dataclass(slots=True)
class _Walk:
    """What stands on the way, by kind of sheet: the newest facts, what is measured on them, and what is told.

    `standing` is what single rules told last, `newest` what they tell of the newest sheet; `matched` are the patterns
    seen from it. `patterns` stand on the engine, `measured` says on which entry a value was measured last.
    """

    facts: dict[str, MeasuredFacts] = field(default_factory=dict)
    quantities: dict[str, frozenset[str]] = field(default_factory=dict)
    standing: dict[str, dict[_Said, Signal]] = field(default_factory=dict)
    newest: dict[str, tuple[Signal, ...]] = field(default_factory=dict)
    matched: dict[str, list[Signal]] = field(default_factory=dict)
    patterns: dict[tuple[str, str], Signal] = field(default_factory=dict)
    measured: dict[tuple[str, str], int] = field(default_factory=dict)


_NO_RULES = _OfKind((), (), frozenset())


def in_order(sheets: Iterable[MeasuredSheet], first_entries: Mapping[int, int]) -> list[MeasuredSheet]:
    """Order sheets by day, within a day by kind, and those of one kind by the entry they first came with.

    Which of the sheets of a day was typed first says nothing of an engine, unless they are of one kind.
    """

    def place(sheet: MeasuredSheet) -> tuple[date, int, int]:
        return sheet.on, SHEET_KINDS.index(sheet.kind), first_entries.get(sheet.entry, sheet.entry)

    return sorted(sheets, key=place)


class Judging:
    """A book of rules made ready once for all engines that it is the same for."""

    def __init__(self, book: RuleBook) -> None:
        self._book = book
        self._tells_engines_apart = any(rule.applies.engines for rule in book.rules) or any(book.chosen.values())
        self._ready: dict[MeasuredEngine, Mapping[str, _OfKind]] = {}

    def judge_history(
        self, sheets: Sequence[MeasuredSheet], engine: MeasuredEngine, background: Background
    ) -> tuple[Standing, ...]:
        """Judge the sheets of an engine, as `in_order` has them, by the rules of the book that are for it."""
        alike = engine if self._tells_engines_apart else replace(engine, tag="")
        if alike not in self._ready:
            self._ready[alike] = _by_kind(rules_for(self._book, engine))
        return _judge_in_turn(sheets, engine, self._ready[alike], background)


def judge_history(
    sheets: Sequence[MeasuredSheet],
    engine: MeasuredEngine,
    rules: Sequence[Rule],
    background: Background,
) -> tuple[Standing, ...]:
    """Judge the sheets of an engine, as `in_order` has them, by the rules for it; its own pool is that of the samples before each."""
    return _judge_in_turn(sheets, engine, _by_kind(rules), background)


def _judge_in_turn(
    sheets: Sequence[MeasuredSheet], engine: MeasuredEngine, by_kind: Mapping[str, _OfKind], background: Background
) -> tuple[Standing, ...]:
    """Judge sheets as `judge_history` does, by rules that were sorted already, as they are for many engines alike."""
    walk, standings = _Walk(), []
    stood: list[Signal] = []
    findings: tuple[Finding, ...] = ()
    for sheet, pool in zip(sheets, own_pools(sheets), strict=True):
        facts = MeasuredFacts(
            engine=engine,
            sheet=sheet,
            earlier=_earlier(walk.facts.get(sheet.kind)),
            fresh=background.fresh,
            pools=pools_for(sheet, pool, background.family),
            lash=background.lash,
            holidays=background.holidays,
        )
        before, walk.quantities[sheet.kind] = walk.quantities.get(sheet.kind, frozenset()), _quantities(sheet)
        walk.facts[sheet.kind] = facts
        _take_in(walk, facts, by_kind.get(sheet.kind, _NO_RULES))
        _match(walk, by_kind, sheet.kind, before | walk.quantities[sheet.kind])
        signals = [*(one for told in walk.standing.values() for one in told.values()), *walk.patterns.values()]
        if signals != stood:
            stood, findings = signals, merge(engine.tag, signals)
        standings.append(Standing(sheet, findings))
    return tuple(standings)


def _earlier(before: MeasuredFacts | None) -> tuple[MeasuredSheet, ...]:
    return (*before.earlier, before.sheet) if before else ()


def _by_kind(rules: Sequence[Rule]) -> dict[str, _OfKind]:
    """Sort rules by the kinds of sheet they are for."""
    found = {}
    for kind in {kind for rule in rules for kind in rule.kinds}:
        known = [rule for rule in rules if kind in rule.kinds]
        patterns = tuple((rule, rule.shape) for rule in known if isinstance(rule.shape, Pattern))
        singles = tuple(screened(rule) for rule in known if not isinstance(rule.shape, Pattern))
        looks_at = {quantity for _, pattern in patterns for quantity in _looked_at(pattern)}
        found[kind] = _OfKind(singles, patterns, frozenset(looks_at))
    return found


def _looked_at(pattern: Pattern) -> set[str]:
    """Give all quantities and words a pattern looks at."""
    named = {name for one in pattern.conditions for name in (*one.quantities, one.over)} | {*pattern.absorbs}
    return named | {source for name in named for source in _SOURCES.get(name, ())}


def _quantities(sheet: MeasuredSheet) -> frozenset[str]:
    """Give all that stands on a sheet, and what is worked out of it."""
    named = {value.quantity for value in sheet.values} | {word.quantity for word in sheet.words}
    return frozenset(named | {name for name, sources in _SOURCES.items() if named & {*sources}})


def _take_in(walk: _Walk, facts: MeasuredFacts, rules: _OfKind) -> None:
    """Let what a sheet tells replace what stood of the same rules and subjects, dated since when it stands."""
    kind = facts.sheet.kind
    before, now = walk.standing.get(kind, {}), {}
    asked = {said[0] for said in before}
    measured = walk.quantities[kind]
    close = [
        one.rule
        for one in rules.singles
        if one.rule.quantity in measured and (one.rule.id in asked or not one.is_clear(facts))
    ]
    told = tell(close, facts)
    began = {said[:3]: _began(signal) for said, signal in before.items()}
    for signal in told.signals:
        said = _said(signal)
        now[said] = replace(signal, since=began.get(said[:3], signal.on))
    walk.newest[kind] = tuple(now.values())
    if before or now:
        flagged = {said[:2] for said in now}
        within = {(rule.id, point) for rule, value in told.within for point in (value.point, "")}
        kept = {said: signal for said, signal in before.items() if said[:2] not in flagged | within}
        walk.standing[kind] = kept | now
    for value in facts.sheet.values:
        if value.phase not in _ASIDE:
            walk.measured[value.quantity, value.point] = facts.sheet.entry


def _match(walk: _Walk, rules: Mapping[str, _OfKind], kind: str, changed: frozenset[str]) -> None:
    """Match the patterns anew; one that no longer matches stands until a value of it is measured again."""
    flagged = {(signal.rule.quantity, signal.end) for told in walk.newest.values() for signal in told}
    measured = frozenset().union(*walk.quantities.values())
    for name, facts in walk.facts.items():
        known = rules.get(name, _NO_RULES)
        # Where the nameplate does not say which cylinders there are, any sheet may.
        if name == kind or known.looks_at & changed or not facts.engine.cylinders:
            possible = [one for one in known.patterns if may_match(one[1], flagged, measured)]
            walk.matched[name] = _matches(walk, facts, possible) if possible else []
    matched: dict[tuple[str, str], Signal] = {}
    for signal in (one for told in walk.matched.values() for one in told):
        said = (signal.rule.id, signal.subject)
        if said not in matched or matched[said].on < signal.on:
            matched[said] = signal
    now = {said: _begun(signal, walk.patterns.get(said, signal)) for said, signal in matched.items()}
    for said, signal in walk.patterns.items():
        if said not in now and not any(_is_measured_again(walk, value) for value in signal.flagged):
            now[said] = signal
    walk.patterns = now


def _matches(walk: _Walk, facts: MeasuredFacts, patterns: Iterable[tuple[Rule, Pattern]]) -> list[Signal]:
    """Match patterns as seen from the newest sheet of a kind."""
    kind = facts.sheet.kind
    others = tuple(other.sheet for name, other in walk.facts.items() if name != kind)
    sheets = (facts.sheet, *others)
    possible = [
        (rule, pattern)
        for rule, pattern in patterns
        if says(facts.sheet, rule) and not any(is_outside(condition, sheets) for condition in pattern.conditions)
    ]
    if not possible:
        return []
    standing = tuple(signal for name, told in walk.newest.items() if name != kind for signal in told)
    return match_patterns(possible, replace(facts, others=others, standing=standing), walk.newest[kind])


def _said(signal: Signal) -> _Said:
    return signal.rule.id, signal.subject, signal.end, signal.flagged[0].phase


def _began(signal: Signal) -> date:
    return signal.since or signal.on


def _begun(signal: Signal, before: Signal) -> Signal:
    """Date a signal since when it stands; the one before it where nothing else is new."""
    dated = replace(signal, since=_began(before))
    return before if dated == before else dated


def _is_measured_again(walk: _Walk, value: Evidence) -> bool:
    return walk.measured.get((value.quantity, value.point), value.sheet) != value.sheet
