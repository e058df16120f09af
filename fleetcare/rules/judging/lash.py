"""Verdicts of a valve lash sheet as signals: rules/judge_lash.py holds each gap against the check range of the engine.

A rule takes the gaps below their range, or those above it; the severity is that of the
verdict: found out an alert, left out, or closed to nothing, an alarm.
"""

from collections.abc import Iterator

from fleetcare.domain.findings import Evidence, NotJudged, Signal, Step
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import End, Rule, Severity
from fleetcare.domain.sheets import Judgement, Place, Unjudged, Verdict
from fleetcare.rules.judging.values import evidence_of

_PLACES = {Place.BELOW: End.LOW, Place.ABOVE: End.HIGH}


def lash_signals(
    rule: Rule, end: End, judged: tuple[Judgement, ...], sheet: MeasuredSheet
) -> Iterator[Signal | NotJudged | Evidence]:
    """Give a signal for each gap past one end of its range, the gaps within, and why a gap is not judged."""
    for one in judged:
        if one.is_out and one.place is not None and _PLACES.get(one.place) is end:
            yield _signal(rule, one, sheet, end)
        elif one.verdict is Verdict.IN:
            yield evidence_of(sheet, one.value)
        elif one.unjudged is not None and one.unjudged is not Unjudged.NO_LIMIT_OF_ITS_OWN:
            yield NotJudged(rule, one.value.point, f"lash: {one.unjudged}")


def _signal(rule: Rule, one: Judgement, sheet: MeasuredSheet, end: End) -> Signal:
    limits = one.limits
    assert limits is not None
    limit = limits[0] if end is End.LOW else limits[1]
    return Signal(
        rule=rule,
        severity=Severity.ALARM if one.verdict is Verdict.ALARM else Severity.ALERT,
        subject=one.value.point,
        on=sheet.on,
        flagged=(evidence_of(sheet, one.value),),
        end=end,
        measured=limit - one.off_least if end is End.LOW else limit + one.off_least,
        limit=limit,
        margin=-one.off_least,
        unit=one.unit,
        steps=(Step("check range from", limits[0], one.unit), Step("to", limits[1], one.unit)),
    )
