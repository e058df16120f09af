"""A sheet held against rules: every figure each rule works out, the signals of those past a limit, and what is left open.

The rules are those for the engine (`applies.rules_for`). A rule whose inputs are absent says nothing, and why. The order
of the values on the sheet, and their units, change nothing.
"""

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from datetime import date
from typing import assert_never

from fleetcare.domain.findings import Evidence, NotJudged, Signal
from fleetcare.domain.rule_book import (
    AgainstSheet,
    Approach,
    Basis,
    Bounds,
    ByAltitude,
    Change,
    Pattern,
    Rate,
    Rule,
    SingleShape,
    Statistical,
    ValueShape,
    worst,
)
from fleetcare.domain.sheets import Verdict
from fleetcare.rules.judging import altitude, bounds, comparing, rates, statistics
from fleetcare.rules.judging.approach import approach_signals
from fleetcare.rules.judging.facts import CannotTell, Figure, MeasuredFacts
from fleetcare.rules.judging.hold import hold
from fleetcare.rules.judging.lash import lash_signals
from fleetcare.rules.judging.patterns import match_patterns
from fleetcare.rules.judging.spans import Span
from fleetcare.rules.judging.values import Measured, by_number, contradictions, evidence_of, judged_phases, values_of
from fleetcare.rules.judging.words import says, unsaid


@dataclass(frozen=True, slots=True)
class JudgedSheet:
    """What rules make of a sheet: signals, why rules are silent, and a verdict for each value, as the engine stands.

    `within` has each rule that held a value to be within its limits, with the value; `worked` what that rule, by its id,
    worked out of it.
    """

    signals: tuple[Signal, ...]
    not_judged: tuple[NotJudged, ...]
    verdicts: tuple[tuple[Evidence, Verdict], ...]
    within: tuple[tuple[Rule, Evidence], ...]
    worked: Mapping[tuple[str, Evidence], Span]


@dataclass(frozen=True, slots=True)
class Told:
    """What single rules say of a sheet: signals, the values each holds to be within its limits, and why some are silent.

    `worked` has the figure of a value within, by the id of its rule, where it was worked out.
    """

    signals: tuple[Signal, ...]
    within: tuple[tuple[Rule, Evidence], ...]
    silent: tuple[NotJudged, ...]
    worked: Mapping[tuple[str, Evidence], Span]


def judge(rules: Iterable[Rule], facts: MeasuredFacts) -> tuple[Signal, ...]:
    """Give the signals of a sheet, each dated since when it is seen without a break."""
    return judge_sheet(rules, facts).signals


def inputs_missing(rules: Iterable[Rule], facts: MeasuredFacts) -> tuple[NotJudged, ...]:
    """Give why rules for this kind of sheet say nothing of it, or of a value."""
    return judge_sheet(rules, facts).not_judged


def judge_sheet(rules: Iterable[Rule], facts: MeasuredFacts) -> JudgedSheet:
    """Judge a sheet by the rules for its engine; those for other kinds of sheet are left aside."""
    known = [rule for rule in rules if facts.sheet.kind in rule.kinds]
    told = tell(known, facts)
    signals = [replace(one, since=_since(one, facts)) for one in told.signals]
    patterns = [(rule, rule.shape) for rule in known if isinstance(rule.shape, Pattern) and says(facts.sheet, rule)]
    signals += match_patterns(patterns, facts, signals)
    within = {value for _, value in told.within}
    return JudgedSheet(
        signals=tuple(signals),
        not_judged=tuple(dict.fromkeys(told.silent)),
        verdicts=_verdicts(facts, signals, within),
        within=told.within,
        worked=told.worked,
    )


def tell(rules: Iterable[Rule], facts: MeasuredFacts) -> Told:
    """Hold a sheet against rules for its kind, patterns left aside; signals are not dated yet."""
    signals: list[Signal] = []
    within: list[tuple[Rule, Evidence]] = []
    silent: list[NotJudged] = []
    worked: dict[tuple[str, Evidence], Span] = {}
    for rule, shape in [(rule, rule.shape) for rule in rules if not isinstance(rule.shape, Pattern)]:
        for told in _tell(rule, shape, facts):
            if isinstance(told, Signal):
                signals.append(told)
            elif isinstance(told, NotJudged):
                silent.append(told)
            elif isinstance(told, Figure):
                within.append((rule, told.flagged))
                worked[rule.id, told.flagged] = told.span
            else:
                within.append((rule, told))
    return Told(tuple(signals), tuple(within), tuple(silent), worked)


def _tell(rule: Rule, shape: SingleShape, facts: MeasuredFacts) -> Iterator[Signal | NotJudged | Evidence | Figure]:
    """Give for each value of a rule its signal, why there is none to tell, or what is within: its figure, of a gap the value."""
    for quantity in unsaid(facts.sheet, rule):
        yield NotJudged(rule, "", f"the sheet does not say {quantity.replace('_', ' ')}")
    if not says(facts.sheet, rule):
        return
    if isinstance(shape, Bounds) and shape.basis is Basis.SPEC:
        yield from lash_signals(rule, shape, facts.lash.get(facts.sheet.entry, ()), facts.sheet)
        return
    if isinstance(shape, Approach):
        yield from approach_signals(rule, shape, facts)
        return
    for point in contradictions(facts.sheet, rule.quantity, rule.phases):
        yield NotJudged(rule, point, "it was entered twice, with different values")
    values = judged_phases(values_of(facts.sheet, rule.quantity), rule.phases, rule.points)
    if not values:
        yield NotJudged(rule, "", "it was not measured")
    # A year's total is one figure, whatever the number of values it is told by.
    is_total = isinstance(shape, Bounds) and shape.basis is Basis.YEAR
    for one in values[-1:] if is_total else values:
        try:
            figure = _figure(rule, shape, one, values, facts)
        except CannotTell as why:
            yield NotJudged(rule, why.subject, why.why)
        else:
            yield hold(rule, figure, facts) or figure


def _figure(rule: Rule, shape: ValueShape, one: Measured, values: Sequence[Measured], facts: MeasuredFacts) -> Figure:
    match shape:
        case Bounds():
            return bounds.figure(rule, shape, one, values, facts)
        case ByAltitude():
            return altitude.figure(rule, shape, one, facts)
        case AgainstSheet():
            return comparing.against_sheet(rule, shape, one, values, facts)
        case Change():
            return comparing.change(rule, shape, one, values, facts)
        case Rate():
            return rates.figure(rule, shape, one, values, facts)
        case Statistical():
            return statistics.figure(rule, shape, one, values, facts)
        case _:
            assert_never(shape)


def _since(signal: Signal, facts: MeasuredFacts) -> date:
    """Give the day of the first sheet from which on a rule flagged this subject, sheets that could not tell passed over."""
    since = signal.on
    for place in range(len(facts.earlier) - 1, -1, -1):
        then = replace(facts, sheet=facts.earlier[place], earlier=facts.earlier[:place])
        told = tell([signal.rule], then)
        if any((one.subject, one.end) == (signal.subject, signal.end) for one in told.signals):
            since = then.sheet.on
        elif any(signal.subject in {one.point, ""} for _, one in told.within):
            break
    return since


def _verdicts(
    facts: MeasuredFacts, signals: Sequence[Signal], within: set[Evidence]
) -> tuple[tuple[Evidence, Verdict], ...]:
    """Give the verdict of each value: the gravest of its signals, `in` where some rule held it and none flagged it."""
    values = {evidence_of(facts.sheet, value) for value in facts.sheet.values}
    verdicts = []
    for value in sorted(values, key=lambda one: (by_number(one.point), one.quantity, one.phase, one.value, one.unit)):
        flagging = [signal for signal in signals if value in signal.flagged]
        # A pattern is grave by what it puts together; a value is so by its own rules, if it has any.
        own = [signal for signal in flagging if not isinstance(signal.rule.shape, Pattern)]
        severities = [signal.severity for signal in own or flagging]
        held = Verdict.IN if value in within else Verdict.NOT_JUDGED
        verdicts.append((value, Verdict(worst(severities)) if severities else held))
    return tuple(verdicts)
