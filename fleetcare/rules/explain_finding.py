"""A finding in words and as a flat row: what was measured, the limit and by how much it was passed, how it was worked out,
since when, the source, what to do next, and the caution. The only prose of measurement rules; every list, file and
screen shows this row, so that they cannot disagree.
"""

import re
from collections.abc import Iterable
from decimal import Decimal

from fleetcare.domain.cautions import GENERAL
from fleetcare.domain.findings import Evidence, Finding, Signal, Step
from fleetcare.domain.quantities import plain
from fleetcare.domain.rule_book import (
    AgainstSheet,
    Approach,
    Basis,
    Bounds,
    By,
    ByAltitude,
    Change,
    End,
    Pattern,
    Rate,
    Rule,
    Since,
)
from fleetcare.rules.finding_row import FindingRow
from fleetcare.rules.judging.values import title

_PLACES = ((10, 2), (1, 3), (0, 4))
"""Decimals shown of a worked figure of at least so much: two of 67.42 %, four of a gap of 0.0508 mm."""

_AS_TYPED = 3
"""A figure with no more decimals is shown whole: gauges and laboratories give no more."""


def finding_row(finding: Finding) -> FindingRow:
    """Flatten a finding."""
    figure = finding.figure
    return FindingRow(
        engine=finding.engine,
        rule=finding.rule,
        severity=finding.severity,
        cause=finding.cause,
        subject=say_subject(finding.subject),
        measured=figure.measured,
        unit=say_unit(figure.rule, figure.unit),
        limit=figure.limit,
        margin=figure.margin,
        since=finding.since,
        source=say_sources(signal.rule.source for signal in finding.signals),
        explanation=say_finding(finding),
        working=tuple(
            say_working(signal, finding.subject)
            for signal in finding.signals
            if signal.steps or signal.measured is not None
        ),
        evidence=tuple(say_evidence(value) for value in finding.evidence),
        next_step=say_next_step(finding),
        caution=" ".join((*_each(signal.rule.caution for signal in finding.signals), GENERAL)),
        due_by=finding.due_by,
    )


def say_finding(finding: Finding) -> str:
    """Say what a finding is: the cause and where, what leads there, each figure with its limit, and since when."""
    lead = f"{say_cause(finding.cause, finding.subject)}: {finding.lead.rule.message}"
    figures = _each(say_signal(signal) for signal in finding.signals if signal.measured is not None)
    also = _each(
        signal.rule.cause
        for signal in finding.signals
        if isinstance(signal.rule.shape, Pattern) and signal.rule.cause != finding.cause
    )
    parts = [lead, *figures, *(f"it would also fit {cause}" for cause in also), f"since {finding.since.isoformat()}"]
    return "; ".join(parts)


def say_sources(sources: Iterable[str]) -> str:
    """Give sources one after the other; what several say before their colon, or after it, is said once."""
    told: dict[str, dict[str, None]] = {}
    for source in sources:
        origin, _, details = source.partition(": ")
        told.setdefault(origin, {}).update(dict.fromkeys(filter(None, details.split("; "))))
    return " / ".join(": ".join(filter(None, (origin, "; ".join(details)))) for origin, details in told.items())


def say_signal(signal: Signal) -> str:
    """Say one figure with its limit: "iron 120 ppm, 20 ppm above the alert limit of 100 ppm"."""
    where = f" at {say_subject(signal.subject)}" if signal.subject else ""
    return f"{_named(signal)}{where} {say_against(signal)}"


def say_against(signal: Signal) -> str:
    """Say a figure against its limit: "120 ppm, 20 ppm above the alert limit of 100 ppm"."""
    assert signal.measured is not None
    assert signal.limit is not None
    assert signal.margin is not None
    unit = say_unit(signal.rule, signal.unit)
    told = say_figure(signal.measured, unit)
    if signal.margin == 0:
        return f"{told} reaches the {signal.severity} limit"
    side = "above" if signal.end is End.HIGH else "below"
    off, limit = say_figure(-signal.margin, unit), say_figure(signal.limit, unit)
    return f"{told}, {off} {side} the {signal.severity} limit of {limit}"


def say_measured(rule: Rule) -> str:
    """Say what a rule works out of its quantity: "iron", "compression as a share of the highest"."""
    name, shape = title(rule.quantity), rule.shape
    if isinstance(shape, Bounds):
        return f"{name}{_BASES.get(shape.basis, '')}"
    if isinstance(shape, AgainstSheet):
        return f"{name} {_COMPARED[shape.by]} the {shape.reference}{_OF_ALL.get(shape.reference, '')}"
    if isinstance(shape, ByAltitude):
        return f"{name} less its least for the altitude"
    if isinstance(shape, Approach):
        return f"likely hours of {name} to the {shape.end} end of its check range"
    if isinstance(shape, Change):
        return f"{name} {_COMPARED[shape.by]} {_BEFORE[shape.since]}"
    return f"rise of {name}" if isinstance(shape, Rate) else name


def say_working(signal: Signal, subject: str) -> str:
    """Say how a figure was worked out, number by number: "rise of iron 16 ppm per 100 h (its rule) from …".

    Where it was measured is said if that is not the subject of its finding.
    """
    steps = ", ".join(say_step(step) for step in signal.steps)
    if signal.measured is None:
        return f"{signal.rule.cause} ({signal.rule.id}) from {steps}"
    where = f" at {say_subject(signal.subject)}" if signal.subject != subject else ""
    told = f"{_named(signal)}{where} {say_figure(signal.measured, say_unit(signal.rule, signal.unit))}"
    return f"{told} ({signal.rule.id}){f' from {steps}' if steps else ''}"


def say_step(step: Step) -> str:
    """Say one number of the working with its label."""
    return f"{step.label} {say_figure(step.value, step.unit)}"


def say_evidence(value: Evidence) -> str:
    """Say a flagged value as it was entered, and when: "iron 120 ppm on 2026-04-20"."""
    point = f" at {say_subject(value.point)}" if value.point else ""
    phase = f", {value.phase}" if value.phase else ""
    unit = f" {value.unit}" if value.unit else ""
    return f"{title(value.quantity)}{point} {value.value}{unit}{phase} on {value.on.isoformat()}"


def say_next_step(finding: Finding) -> str:
    """Say what to do next: first what is to be done by a day, then what the lead says."""
    dated = [f"{one.rule.next_step}, by {one.due_by.isoformat()}" for one in finding.signals if one.due_by]
    return "; ".join(_each([*dated, *([] if finding.lead.due_by else [finding.lead.rule.next_step])]))


def say_subject(subject: str) -> str:
    """Say where: a cylinder, two neighbours, a lash point, or the engine."""
    if not subject:
        return "the engine"
    if not subject.replace("-", "").isdigit():
        return subject
    return f"cylinders {subject.replace('-', ' and ')}" if "-" in subject else f"cylinder {subject}"


def say_cause(cause: str, subject: str) -> str:
    """Say a cause and where; one that speaks of its cylinder, or of two, takes the numbers: "leaking cylinder 1"."""
    if not subject:
        return cause
    place = say_subject(subject)
    of_itself = _TWO_CYLINDERS if "-" in subject else _CYLINDER
    if place.startswith("cylinder") and of_itself.search(cause):
        return of_itself.sub(place, cause, count=1)
    return f"{cause} at {place}"


def say_unit(rule: Rule, unit: str = "") -> str:
    """Say the unit of a figure of a rule: that of its limits, of a rate with its hours."""
    own = unit or rule.unit
    return f"{own} per {rule.shape.per} h" if isinstance(rule.shape, Rate) else own


def _named(signal: Signal) -> str:
    """Name the figure of a signal; of a rule that takes off new oil, whether that was known."""
    shape = signal.rule.shape
    if isinstance(shape, Bounds) and shape.basis is Basis.LESS_NEW and not signal.used:
        return f"{title(signal.rule.quantity)} (new oil not known, nothing taken off)"
    return say_measured(signal.rule)


def say_figure(value: Decimal, unit: str) -> str:
    """Write a figure with its unit: as typed, or one that was worked out to the decimals its size asks for.

    One that would be rounded to nothing has its first digit.
    """
    places = next(places for least, places in _PLACES if abs(value) >= least)
    shown = value if round(value, _AS_TYPED) == value else round(value, places) or Decimal(f"{value:.1g}")
    return f"{plain(shown)}{f' {unit}' if unit else ''}"


_CYLINDER, _TWO_CYLINDERS = re.compile(r"\bcylinder\b"), re.compile(r"\b(two cylinders|cylinder)\b")
_BASES = {Basis.LESS_NEW: " above new oil", Basis.NAMEPLATE: " of the nameplate", Basis.YEAR: " of the year"}
_COMPARED = {By.RATIO: "as a share of", By.SHARE: "against", By.DIFFERENCE: "less"}
_OF_ALL = {"mean": " of all"}
_BEFORE = {
    Since.BEFORE: "the last test",
    Since.BEST_BEFORE: "the highest of the last test",
    Since.OWN_BEST: "its best test",
    Since.NEW: "new oil",
}


def _each(texts: Iterable[str]) -> list[str]:
    """Give each text once, in order, those that say nothing left out."""
    return [text for text in dict.fromkeys(texts) if text]
