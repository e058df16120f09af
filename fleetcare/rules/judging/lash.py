"""Verdicts of a valve lash sheet as signals: rules/judge_lash.py holds each gap against the check range of the engine.

A rule takes the gaps below their range, or those above it; the severity is that of the
verdict: found out an alert, left out, or closed to nothing, an alarm. A gap that was found out, an alert, and left inside
on the same sheet is taken by the rule for what was set, and by that alone.
"""

from collections.abc import Iterator

from fleetcare.domain.findings import Evidence, NotJudged, Signal, Step
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import Bounds, End, Rule, Severity
from fleetcare.domain.sheets import Judgement, Phase, Place, Unjudged, Verdict
from fleetcare.rules.judging.values import evidence_of

_PLACES = {Place.BELOW: End.LOW, Place.ABOVE: End.HIGH}


def lash_signals(
    rule: Rule, shape: Bounds, judged: tuple[Judgement, ...], sheet: MeasuredSheet
) -> Iterator[Signal | NotJudged | Evidence]:
    """Give a signal for each gap a rule takes, the gaps it was held against without one, and why a gap is not judged."""
    for one in judged:
        left = _left_inside(one, judged)
        end = _PLACES.get(one.place) if one.place else None
        if one.is_out and end is not None and (left is not None if shape.is_set else left is None and end is shape.end):
            yield _signal(rule, one, left, sheet, end)
        elif one.verdict is not Verdict.NOT_JUDGED:
            yield evidence_of(sheet, one.value)
        elif one.unjudged is not None and one.unjudged is not Unjudged.NO_LIMIT_OF_ITS_OWN:
            yield NotJudged(rule, one.value.point, f"lash: {one.unjudged}")


def _left_inside(one: Judgement, judged: tuple[Judgement, ...]) -> Judgement | None:
    """Give what a gap found out was left at inside its range; None where it was not, or nothing of the gap was left."""
    if one.value.phase is not Phase.FOUND or one.verdict is not Verdict.ALERT:
        return None
    left = [other for other in judged if other.value.point == one.value.point and other.value.phase is Phase.LEFT]
    gaps = [other for other in left if other.unjudged is not Unjudged.NO_LIMIT_OF_ITS_OWN]
    return gaps[-1] if gaps and all(other.verdict is Verdict.IN for other in gaps) else None


def _signal(rule: Rule, one: Judgement, left: Judgement | None, sheet: MeasuredSheet, end: End) -> Signal:
    limits = one.limits
    assert limits is not None
    limit = limits[0] if end is End.LOW else limits[1]
    steps = [Step("check range from", limits[0], one.unit), Step("to", limits[1], one.unit)]
    if left is not None:
        least, most = left.value.ends
        label = "left" if least == most else "left, at least"
        steps += [Step("out by", one.off_least, one.unit), Step(label, least, left.value.unit)]
    return Signal(
        rule=rule,
        severity=Severity.ALARM if one.verdict is Verdict.ALARM else Severity.ALERT,
        subject=one.value.point,
        on=sheet.on,
        flagged=(evidence_of(sheet, one.value),),
        used=(evidence_of(sheet, left.value),) if left is not None else (),
        end=end,
        measured=limit - one.off_least if end is End.LOW else limit + one.off_least,
        limit=limit,
        margin=-one.off_least,
        unit=one.unit,
        steps=tuple(steps),
    )
