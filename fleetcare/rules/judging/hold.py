"""A figure held against limits: what it calls for, or that a bound such as "<1" leaves it open.

A limit marked `beyond` lets a figure that stands on it pass, one marked `reach` does not. Of a span only what is certain
counts: "<5" is never above a limit of 3, and not within it either.
"""

from datetime import date

from fleetcare.domain.findings import NotJudged, Signal
from fleetcare.domain.rule_book import End, Limit, Limits, Rule, Severity
from fleetcare.rules.judging.deadlines import business_days_after
from fleetcare.rules.judging.facts import Figure, MeasuredFacts
from fleetcare.rules.judging.spans import Side, Span, decimal


def hold(rule: Rule, figure: Figure, facts: MeasuredFacts) -> Signal | NotJudged | None:
    """Give the signal of a figure past a limit, why that is left open, or None for one within its limits."""
    untold: list[str] = []
    for severity in (Severity.ALARM, Severity.ALERT):
        for end, limits in ((End.LOW, figure.low), (End.HIGH, figure.high)):
            limit = _limit(limits, severity)
            side = _side(figure.span, end, limit) if limit else Side.INSIDE
            if limit and side is Side.PAST:
                return _signal(rule, figure, facts, (severity, end, limit))
            if limit and side is Side.UNTOLD:
                inside = limits.alarm if severity is Severity.ALERT and not untold else None
                untold.append(_say_untold(rule, severity, limit, inside))
    return NotJudged(rule, figure.subject, f"{figure.flagged.value} {untold[0]}") if untold else None


def _say_untold(rule: Rule, severity: Severity, limit: Limit, inside: Limit | None) -> str:
    """Say which limit a bound leaves open, and the graver one on its side that it surely keeps `inside` of."""
    keeps = f"; it keeps inside the alarm limit of {_say(rule, inside)}" if inside else ""
    return f"does not tell on which side of the {severity} limit of {_say(rule, limit)} it is{keeps}"


def _say(rule: Rule, limit: Limit) -> str:
    return f"{limit.value:f} {rule.unit}".rstrip()


def due_on(rule: Rule, facts: MeasuredFacts) -> date | None:
    """Give the last day of the next step, counted from the day the results came, None where the rule sets none."""
    if rule.business_days is None:
        return None
    return business_days_after(facts.sheet.received_on or facts.sheet.on, rule.business_days, facts.holidays)


def _limit(limits: Limits, severity: Severity) -> Limit | None:
    return limits.alarm if severity is Severity.ALARM else limits.alert


def _side(span: Span, end: End, limit: Limit) -> Side:
    return span.past_low(limit) if end is End.LOW else span.past_high(limit)


def _signal(rule: Rule, figure: Figure, facts: MeasuredFacts, broken: tuple[Severity, End, Limit]) -> Signal:
    severity, end, limit = broken
    measured = decimal(figure.span.high if end is End.LOW else figure.span.low)
    return Signal(
        rule=rule,
        severity=severity,
        subject=figure.subject,
        on=facts.sheet.on,
        flagged=(figure.flagged,),
        used=figure.used,
        end=end,
        measured=measured,
        limit=limit.value,
        margin=measured - limit.value if end is End.LOW else limit.value - measured,
        unit=rule.unit,
        steps=figure.steps,
        due_by=due_on(rule, facts),
    )
