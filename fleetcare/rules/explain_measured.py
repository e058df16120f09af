"""A judged sheet other than the lash sheet in words and flat rows: what table, JSON and screen show."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from decimal import Decimal

from fleetcare.domain.findings import Evidence, Signal
from fleetcare.domain.quantities import plain
from fleetcare.domain.rule_book import Bounds, Pattern, Rule, Severity, Statistical
from fleetcare.domain.sheets import NOT_DETECTED, Phase, Verdict
from fleetcare.rules.explain_finding import say_against, say_figure, say_measured, say_unit
from fleetcare.rules.judging.judge import JudgedSheet
from fleetcare.rules.judging.spans import decimal
from fleetcare.rules.judging.values import title

_NO_RULE = "no rule is about it"
_ASIDE = {Phase.WET: "of the wet test, to compare with", Phase.NEW: "fresh oil, to compare with"}
_WORKED_WITH = {
    "supply": "to work the leak out with",
    "hours_on_oil": "to work rates out with",
    "top_up": "to work rates out with",
}
_JUDGED_AS = {"held": "leak"}
"""What is judged in the place of a value: the leak of a pair of pressures stands with the pressure held."""


@dataclass(frozen=True, slots=True)
class MeasuredRow:
    """One value with its verdict, flat. `value` is as a sheet file has it.

    Of what a rule worked out of it `measured`, `limit` and `margin` are in `limit_unit`, and None where only a pattern
    speaks or nothing flags it. `why` says what the verdict rests on, `rule` and `source` whose it is.
    """

    quantity: str
    title: str
    point: str
    phase: str
    value: str
    unit: str
    verdict: str
    why: str
    rule: str = ""
    measured: Decimal | None = None
    limit: Decimal | None = None
    margin: Decimal | None = None
    limit_unit: str = ""
    source: str = ""

    @property
    def figure(self) -> str:
        """The value with its unit; what was not detected has none."""
        return self.value if self.value == NOT_DETECTED else f"{self.value} {self.unit}".strip()


def measured_rows(judged: JudgedSheet, order: Sequence[str]) -> tuple[MeasuredRow, ...]:
    """Flatten the values of a judged sheet, quantities in an order, points as the engine stands."""
    places = {quantity: place for place, quantity in enumerate(order)}
    verdicts = sorted(judged.verdicts, key=lambda pair: places.get(pair[0].quantity, len(places)))
    return tuple(_row(value, verdict, judged) for value, verdict in verdicts)


def _row(value: Evidence, verdict: Verdict, judged: JudgedSheet) -> MeasuredRow:
    signal = _gravest(signal for signal in judged.signals if value in signal.flagged)
    rule = signal.rule if signal else _held_by(value, judged) if verdict is Verdict.IN else None
    return MeasuredRow(
        quantity=value.quantity,
        title=title(value.quantity),
        point=value.point,
        phase=value.phase,
        value=value.value,
        unit=value.unit,
        verdict=verdict,
        why=_why(value, signal, rule, judged),
        rule=rule.id if rule else "",
        measured=signal.measured if signal else None,
        limit=signal.limit if signal else None,
        margin=signal.margin if signal else None,
        limit_unit=say_unit(signal.rule, signal.unit) if signal and signal.measured is not None else "",
        source=rule.source if rule else "",
    )


def _why(value: Evidence, signal: Signal | None, rule: Rule | None, judged: JudgedSheet) -> str:
    if signal is not None:
        return say_past(signal)
    if rule is not None:
        return say_within(rule, value, judged)
    if value.phase in _ASIDE:
        return _ASIDE[value.phase]
    if value.quantity in _WORKED_WITH:
        return _WORKED_WITH[value.quantity]
    judged_as = _JUDGED_AS.get(value.quantity, value.quantity)
    whys = (one.why for one in judged.not_judged if one.rule.quantity == judged_as and one.subject in {value.point, ""})
    return "; ".join(dict.fromkeys(whys)) or _NO_RULE


def say_past(signal: Signal) -> str:
    """Say past which limit a value is and by how much; what is compared with another is named."""
    if signal.measured is None:
        return signal.rule.message
    is_plain = signal.rule.shape == Bounds()
    return say_against(signal) if is_plain else f"{say_measured(signal.rule)} {say_against(signal)}"


def say_within(rule: Rule, value: Evidence, judged: JudgedSheet) -> str:
    """Say the limits a value lies within, and what was worked out of it: "compression as a share of the highest 96.3 %, from 75 %".

    Limits of samples are their own, so no figure stands beside those of their rule.
    """
    span = judged.worked.get((rule.id, value))
    is_plain = rule.shape == Bounds() and rule.quantity == value.quantity
    if span is None or not span.is_known or is_plain or isinstance(rule.shape, Statistical):
        return say_limits(rule)
    return f"{say_measured(rule)} {say_figure(decimal(span.low), say_unit(rule))}, {_say_ends(rule)}"


def say_limits(rule: Rule) -> str:
    """Say the first limits of a rule a value lies within: "iron up to 100 ppm", "oil pressure from 100 kPa"."""
    return f"{say_measured(rule)} {_say_ends(rule)}"


def _say_ends(rule: Rule) -> str:
    low, high = (end.alert or end.alarm for end in (rule.low, rule.high))
    ends = (low and f"from {plain(low.value)}", high and f"up to {plain(high.value)}", say_unit(rule))
    return " ".join(part for part in ends if part)


def _held_by(value: Evidence, judged: JudgedSheet) -> Rule | None:
    """Give the first rule that held a value to be within its limits, the plainest before those that compare."""
    held = [rule for rule, one in judged.within if one == value]
    return min(held, key=lambda rule: not isinstance(rule.shape, Bounds), default=None)


def _gravest(signals: Iterable[Signal]) -> Signal | None:
    """Give the gravest signal of a value, one with a figure before a pattern."""
    return min(
        signals,
        key=lambda one: (isinstance(one.rule.shape, Pattern), one.severity is not Severity.ALARM, one.rule.id),
        default=None,
    )
