"""The limits of rules as levels of a value itself, in its own unit: what a value would have to pass to be flagged.

A limit on the value is its level; less its least for the altitude, less new oil, against new oil, against the best or the mean of its sheet, and from what
earlier samples say is usual, it is worked back: percent r of a reference R is R r / 100, percent s above it R (1 + s / 100),
d units above it R + d. Limits on a change from sheet to sheet, on a rate or on a pattern are no level. Where several rules
have one at the same end, the first to be passed counts; an alert that an alarm comes before is none.
"""

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction

from fleetcare.domain.measures import can_convert, exactly
from fleetcare.domain.rule_book import (
    AgainstSheet,
    Basis,
    Bounds,
    By,
    ByAltitude,
    Change,
    End,
    Limits,
    Rule,
    Severity,
    Since,
    Statistical,
)
from fleetcare.rules.judging import altitude, statistics
from fleetcare.rules.judging.comparing import best_of
from fleetcare.rules.judging.facts import CannotTell, MeasuredFacts
from fleetcare.rules.judging.spans import Span, decimal
from fleetcare.rules.judging.values import Measured, fresh_of, judged_phases, values_of
from fleetcare.rules.judging.words import says


@dataclass(frozen=True, slots=True)
class Level:
    """A figure at one end that a value may not pass, in the unit of the value, and the rule that says so."""

    end: End
    severity: Severity
    value: Decimal
    rule: Rule


def levels_of(rules: Iterable[Rule], one: Measured, facts: MeasuredFacts) -> tuple[Level, ...]:
    """Give the levels of a value of the sheet of some facts: at each end an alert, an alarm, both or none."""
    found: dict[tuple[End, Severity], Level] = {}
    for rule in rules:
        if _judges(rule, one, facts):
            for level in _levels(rule, one, facts):
                key = level.end, level.severity
                if key not in found or _comes_before(level, found[key]):
                    found[key] = level
    alarms = {end: level for (end, severity), level in found.items() if severity is Severity.ALARM}
    return tuple(
        level
        for level in found.values()
        if level.severity is Severity.ALARM or level.end not in alarms or _comes_before(level, alarms[level.end])
    )


def _judges(rule: Rule, one: Measured, facts: MeasuredFacts) -> bool:
    return (
        facts.sheet.kind in rule.kinds
        and rule.quantity == one.quantity
        and bool(judged_phases([one], rule.phases, rule.points))
        and says(facts.sheet, rule)
    )


def _comes_before(level: Level, other: Level) -> bool:
    return level.value > other.value if level.end is End.LOW else level.value < other.value


def _levels(rule: Rule, one: Measured, facts: MeasuredFacts) -> Iterator[Level]:
    try:
        figures = list(_figures(rule, one, facts))
    except CannotTell:
        return
    for end, severity, figure in figures:
        yield Level(end, severity, decimal(figure), rule)


def _figures(rule: Rule, one: Measured, facts: MeasuredFacts) -> Iterator[tuple[End, Severity, Fraction]]:
    """Work the limits of a rule back. Raises CannotTell where what they count from is not known."""
    low, high = rule.low, rule.high
    match rule.shape:
        case Bounds(Basis.AS_MEASURED, None):
            yield from _shifted(low, high, rule.unit, one.unit, Fraction(0))
        case Bounds(Basis.LESS_NEW):
            fresh = fresh_of(facts.sheet, facts.fresh, rule.quantity)
            new = _plain(fresh.within(rule.unit)) if fresh else Fraction(0)
            yield from _shifted(low, high, rule.unit, one.unit, new)
        case ByAltitude() as table:
            yield from _shifted(low, high, rule.unit, one.unit, altitude.least_for(table, facts.engine))
        case AgainstSheet(reference, by):
            peers = judged_phases(values_of(facts.sheet, rule.quantity), rule.phases, rule.points)
            if len(peers) > 1:  # one alone cannot be compared
                unit = rule.unit if by is By.DIFFERENCE else one.unit
                best = best_of([peer.within(unit) for peer in peers], reference)
                yield from _against(rule, by, _plain(best), one.unit)
        case Change(Since.NEW, by):
            fresh = fresh_of(facts.sheet, facts.fresh, rule.quantity)
            if fresh is not None:
                unit = rule.unit if by is By.DIFFERENCE else one.unit
                yield from _against(rule, by, _plain(fresh.within(unit)), one.unit)
        case Statistical() as shape:
            usual = statistics.figure(rule, shape, one, (one,), facts)
            yield from _shifted(usual.low, usual.high, rule.unit, one.unit, Fraction(0))
        case _:
            return


def _against(rule: Rule, by: By, reference: Fraction, unit: str) -> Iterator[tuple[End, Severity, Fraction]]:
    """Give limits on a figure compared with a reference; it is in the unit of the rule for a difference, else in `unit`."""
    if by is By.DIFFERENCE:
        yield from _shifted(rule.low, rule.high, rule.unit, unit, reference)
        return
    base = 100 if by is By.SHARE else 0
    for end, severity, limit in _limits(rule.low, rule.high):
        yield end, severity, reference * (base + limit) / 100


def _shifted(low: Limits, high: Limits, have: str, want: str, by: Fraction) -> Iterator[tuple[End, Severity, Fraction]]:
    """Give limits in a unit, so much further up, in another unit; none where the two do not measure the same."""
    if can_convert(have, want):
        for end, severity, limit in _limits(low, high):
            yield end, severity, exactly(limit + by, have, want)


def _limits(low: Limits, high: Limits) -> Iterator[tuple[End, Severity, Fraction]]:
    ends: Mapping[End, Limits] = {End.LOW: low, End.HIGH: high}
    for end, limits in ends.items():
        for severity, limit in ((Severity.ALERT, limits.alert), (Severity.ALARM, limits.alarm)):
            if limit is not None:
                yield end, severity, Fraction(limit.value)


def _plain(span: Span) -> Fraction:
    if not span.is_known:
        raise CannotTell("a bound is no figure to count from")
    return span.low
