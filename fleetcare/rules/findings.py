"""Signals of an engine put together: one finding for each cause, with everything that speaks for it.

Every flagged value is evidence of exactly one finding. Patterns choose first, the graver before the milder and the one
that puts more together before the others: a pattern takes the values it flags, with all that is said of them, and
names the cause. A pattern whose values all belong to another already speaks for that finding. What no pattern took goes
by cause and subject, or by cause alone where the rule is `of_engine`, the cause being that of the gravest rule that flags
the value, a law before a preset. So no finding is milder than the worst of its evidence, and nothing flagged is left out.
"""

from collections import defaultdict
from collections.abc import Iterable
from dataclasses import replace

from fleetcare.domain.findings import Evidence, Finding, Signal
from fleetcare.domain.rule_book import Asks, Pattern, Severity, Where

_Key = tuple[str, str]
_PUT_TOGETHER = {Asks.FLAGGED_HIGH, Asks.FLAGGED_LOW, Asks.SAID}


def merge(engine: str, signals: Iterable[Signal]) -> tuple[Finding, ...]:
    """Give the findings of an engine, gravest first, from the signals of its newest sheets in any order."""
    ranked = sorted(signals, key=_rank)
    owners: dict[Evidence, _Key] = {}
    grouped: dict[_Key, list[Signal]] = defaultdict(list)
    for signal in _once(one for one in ranked if isinstance(one.rule.shape, Pattern) and one.flagged):
        _claim(signal, owners, grouped)
    singles = [one for one in ranked if not isinstance(one.rule.shape, Pattern)]
    for signal in singles:
        key = (signal.rule.cause, "" if signal.rule.of_engine else signal.subject)
        grouped[owners.setdefault(signal.flagged[0], key)].append(signal)
    findings = [Finding(engine, key[1], tuple(group)) for key, group in grouped.items()]
    return tuple(sorted(findings, key=lambda one: (one.severity is not Severity.ALARM, one.cause, one.subject)))


def _once(patterns: Iterable[Signal]) -> list[Signal]:
    """Give each pattern once at its place: one across kinds of sheet is seen from the sheet of every kind."""
    told: dict[tuple[str, str], Signal] = {}
    for signal in patterns:
        first = told.setdefault((signal.rule.id, signal.subject), signal)
        flagged = tuple(sorted({*first.flagged, *signal.flagged}))
        told[signal.rule.id, signal.subject] = replace(first, flagged=flagged)
    return list(told.values())


def _claim(signal: Signal, owners: dict[Evidence, _Key], grouped: dict[_Key, list[Signal]]) -> None:
    free = [value for value in signal.flagged if value not in owners]
    key = (signal.rule.cause, signal.subject) if free else owners[signal.flagged[0]]
    for value in free:
        owners[value] = key
    taken = [value for value in signal.flagged if owners[value] != key]
    own = tuple(value for value in signal.flagged if owners[value] == key)
    used = tuple(sorted({*signal.used, *taken}))
    grouped[key].append(replace(signal, flagged=own, used=used) if taken else signal)


def _rank(signal: Signal) -> tuple[object, ...]:
    """Order signals so that whatever leads comes first, however they were entered.

    Of patterns what is so at every cylinder comes first: all low are no row of gaskets. Then those that put together what
    others say come before those that only hold values against limits.
    """
    shape = signal.rule.shape
    conditions = shape.conditions if isinstance(shape, Pattern) else ()
    return (
        signal.severity is not Severity.ALARM,
        not (isinstance(shape, Pattern) and shape.at is Where.EVERY),
        -sum(condition.asks in _PUT_TOGETHER for condition in conditions),
        -len(conditions),
        -len(signal.flagged),
        not signal.rule.is_law,
        signal.rule.id,
        signal.subject,
        signal.flagged,
    )
