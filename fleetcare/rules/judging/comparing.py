"""Values compared with others: with the best of their own sheet, with the sheet before, with new oil.

Lowest to highest is the ratio of each to the highest: where the lowest is within the limit, all are. A change is that of
the same point, from the newest earlier sheet with the same gauge; another gauge is not a trend. Percent are of the
figure compared with, which must lie above 0.
"""

from collections.abc import Iterator, Sequence
from fractions import Fraction

from fleetcare.domain.findings import Evidence
from fleetcare.domain.rule_book import AgainstSheet, Best, By, Change, Rule, Since
from fleetcare.rules.judging.facts import CannotTell, Figure, MeasuredFacts
from fleetcare.rules.judging.spans import Span
from fleetcare.rules.judging.values import (
    Measured,
    alike,
    fresh_of,
    same_place,
    step,
    title,
    values_of,
)

_LEAST_POINTS = 2


def against_sheet(
    rule: Rule, shape: AgainstSheet, one: Measured, values: Sequence[Measured], facts: MeasuredFacts
) -> Figure:
    """Compare a point with the best or the mean of all; one point alone cannot be compared."""
    peers = [other for other in values if alike(other.phase) is alike(one.phase)]
    if len(peers) < _LEAST_POINTS:
        raise CannotTell("one point alone cannot be compared with others", one.point)
    unit = rule.unit if shape.by is By.DIFFERENCE else peers[0].unit
    best = best_of([other.within(unit) for other in peers], shape.reference)
    others = tuple(other.evidence for other in peers if other is not one)
    return _compared(rule, shape.by, one, (one.within(unit), best), unit, (shape.reference.value, others))


def change(rule: Rule, shape: Change, one: Measured, values: Sequence[Measured], facts: MeasuredFacts) -> Figure:
    """Compare a value with the same point before, with the best it ever had, the highest of all points then, or new oil."""
    match shape.since:
        case Since.NEW:
            then = _new(rule, facts)
        case Since.OWN_BEST:
            then = _own_best(rule, one, facts)
        case Since.BEST_BEFORE:
            then = _highest_with(before(rule.quantity, one, facts), rule.quantity, facts)
        case _:
            then = before(rule.quantity, one, facts)
    unit = rule.unit if shape.by is By.DIFFERENCE else then.unit
    label = "new oil" if shape.since is Since.NEW else f"on {then.evidence.on.isoformat()}"
    return _compared(rule, shape.by, one, (one.within(unit), then.within(unit)), unit, (label, (then.evidence,)))


def before(quantity: str, one: Measured, facts: MeasuredFacts) -> Measured:
    """Give the same point's value of the newest earlier sheet with the same gauge. Raises CannotTell where there is none."""
    then = next(_all_before(quantity, one, facts), None)
    if then is None:
        none = "no earlier sheet with the same gauge has this value" if facts.earlier else "there is no earlier sheet"
        raise CannotTell(none, one.point)
    return then


def _own_best(rule: Rule, one: Measured, facts: MeasuredFacts) -> Measured:
    """Give the best value of the same point by the same gauge, of equal ones the newest."""
    newest = before(rule.quantity, one, facts)
    best = max if rule.low else min
    return best(_all_before(rule.quantity, one, facts), key=lambda then: then.within(newest.unit).high)


def _all_before(quantity: str, one: Measured, facts: MeasuredFacts) -> Iterator[Measured]:
    """Give the same point's values of the earlier sheets with the same gauge, newest first."""
    for sheet in reversed(facts.earlier):
        if sheet.gauge == facts.sheet.gauge and (then := same_place(values_of(sheet, quantity), one)):
            yield then


def _highest_with(one: Measured, quantity: str, facts: MeasuredFacts) -> Measured:
    """Give the highest value of the same phase on the sheet a value stands on: what a sound point showed then."""
    sheet = next(sheet for sheet in facts.earlier if sheet.entry == one.evidence.sheet)
    peers = [other for other in values_of(sheet, quantity) if alike(other.phase) is alike(one.phase)]
    return max(peers, key=lambda other: other.within(one.unit).high)


def _new(rule: Rule, facts: MeasuredFacts) -> Measured:
    fresh = fresh_of(facts.sheet, facts.fresh, rule.quantity)
    if fresh is None:
        raise CannotTell("the value of new oil is not known")
    return fresh


def best_of(spans: Sequence[Span], reference: Best) -> Span:
    """Give the highest, the lowest or the mean of some spans, at least one."""
    if reference is Best.HIGHEST:
        return Span(max(span.low for span in spans), max(span.high for span in spans))
    if reference is Best.LOWEST:
        return Span(min(span.low for span in spans), min(span.high for span in spans))
    return Span(_mean([span.low for span in spans]), _mean([span.high for span in spans]))


def _compared(
    rule: Rule, by: By, one: Measured, pair: tuple[Span, Span], unit: str, told: tuple[str, tuple[Evidence, ...]]
) -> Figure:
    (figure, other), (label, used) = pair, told
    if by is not By.DIFFERENCE and other.low <= 0:
        raise CannotTell(f"{label} is not above 0, so there is no percentage of it", one.point)
    span = figure - other
    if by is By.SHARE:
        span = span.over(other).times(100)
    elif by is By.RATIO:
        span = figure.over(other).times(100)
    steps = (step(title(rule.quantity), figure, unit), step(label, other, unit))
    return Figure(one.point, span, one.evidence, rule.low, rule.high, (*one.used, *used), (*one.steps, *steps))


def _mean(figures: list[Fraction]) -> Fraction:
    return sum(figures, Fraction(0)) / len(figures)
