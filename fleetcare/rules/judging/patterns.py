"""What several values say together: every condition of a pattern must hold at one place.

Places are the whole engine, one cylinder, two neighbours (next to each other in a bank, not in the firing order) beside
which another was measured and is sound, or every cylinder. Conditions look at the signals of the sheet and at what stands of the newest sheets of other kinds, and at
the values of all of them. What was not measured holds for no condition, unless that is optional.
"""

from collections.abc import Iterable, Iterator, Sequence, Set
from dataclasses import dataclass
from itertools import pairwise
from typing import assert_never

from fleetcare.domain.findings import Evidence, Signal, Step
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import Asks, Condition, End, Pattern, Rule, Where, worst
from fleetcare.domain.sheets import Phase
from fleetcare.rules.judging.facts import CannotTell, MeasuredFacts
from fleetcare.rules.judging.hold import due_on
from fleetcare.rules.judging.values import Measured, cylinder_of, values_of
from fleetcare.rules.judging.within import lies_within, work_out
from fleetcare.rules.judging.words import words_of
from fleetcare.rules.lash_points import side_of

_LASH = "lash"
_FLAGGED = {Asks.FLAGGED_HIGH: End.HIGH, Asks.FLAGGED_LOW: End.LOW}


@dataclass(frozen=True, slots=True)
class _Match:
    """What a condition that holds calls out, what else it rests on, and the number that lies within."""

    flagged: tuple[Evidence, ...] = ()
    used: tuple[Evidence, ...] = ()
    steps: tuple[Step, ...] = ()


@dataclass(frozen=True, slots=True)
class _Scene:
    """All that conditions look at: every sheet, the fresh oil, and the signals flagged so far."""

    facts: MeasuredFacts
    signals: tuple[Signal, ...]

    @property
    def sheets(self) -> tuple[MeasuredSheet, ...]:
        return (self.facts.sheet, *self.facts.others)


def match_patterns(
    rules: Iterable[tuple[Rule, Pattern]], facts: MeasuredFacts, signals: Sequence[Signal]
) -> list[Signal]:
    """Give a signal for each pattern that matches, at each place; of a table only the first row that does."""
    scene = _Scene(facts, (*signals, *facts.standing))
    told: list[Signal] = []
    decided: set[tuple[str, str]] = set()
    for rule, pattern in sorted(rules, key=lambda pair: pair[1].row):
        for signal in _matches(rule, pattern, scene):
            row = (pattern.table, signal.subject)
            if pattern.table and row in decided:
                continue
            decided.add(row)
            told.append(signal)
    return told


def _matches(rule: Rule, pattern: Pattern, scene: _Scene) -> Iterator[Signal]:
    for subject, cylinders in _places(pattern.at, scene.facts):
        found = _hold_all(pattern.conditions, cylinders, scene)
        if found is None or (pattern.at is Where.NEIGHBOURS and not _stand_out(pattern, cylinders, scene)):
            continue
        absorbed = [signal for signal in scene.signals if _absorbs(pattern, signal, cylinders)]
        flagged = {value for match in found for value in match.flagged}
        flagged |= {value for signal in absorbed for value in signal.flagged}
        used = {value for match in found for value in match.used} - flagged
        grave = [signal.severity for signal in scene.signals if flagged & set(signal.flagged)]
        yield Signal(
            rule=rule,
            severity=worst([pattern.severity, *grave]),
            subject=subject,
            on=scene.facts.sheet.on,
            flagged=tuple(sorted(flagged)),
            used=tuple(sorted(used)),
            steps=tuple(dict.fromkeys(number for match in found for number in match.steps)),
            due_by=due_on(rule, scene.facts),
        )


def _stand_out(pattern: Pattern, cylinders: Sequence[int | None], scene: _Scene) -> bool:
    """Whether another cylinder was measured and is sound: where all that were measured are bad, no two of them stand out."""
    asked = {
        (name, _FLAGGED[one.asks]) for one in pattern.conditions if one.asks in _FLAGGED for name in one.quantities
    }
    measured = {cylinder_of(one.point) for sheet in scene.sheets for name, _ in asked for one in values_of(sheet, name)}
    bad = {cylinder_of(signal.subject) for signal in scene.signals if (signal.rule.quantity, signal.end) in asked}
    return bool(measured - bad - {*cylinders, None})


def may_match(pattern: Pattern, flagged: Set[tuple[str, End | None]], measured: Set[str]) -> bool:
    """Whether a pattern can match anywhere, by what is flagged and what is measured at all: it spares looking closer."""
    return all(_may_hold(condition, flagged, measured) for condition in pattern.conditions)


def _may_hold(condition: Condition, flagged: Set[tuple[str, End | None]], measured: Set[str]) -> bool:
    end = _FLAGGED.get(condition.asks)
    if end is not None:
        return any((quantity, end) in flagged for quantity in condition.quantities)
    return condition.is_optional or not measured.isdisjoint(condition.quantities)


def _hold_all(conditions: Sequence[Condition], cylinders: Sequence[int | None], scene: _Scene) -> list[_Match] | None:
    """Give what every condition rests on at every one of some cylinders, None where one of them does not hold."""
    found = []
    for cylinder in cylinders:
        for condition in conditions:
            match = _hold(condition, cylinder, scene)
            if match is None:
                return None
            found.append(match)
    return found


def _places(where: Where, facts: MeasuredFacts) -> Iterator[tuple[str, tuple[int | None, ...]]]:
    """Give each place a pattern may hold at: what it is called, and the cylinders its conditions must hold for."""
    match where:
        case Where.ENGINE:
            yield "", (None,)
        case Where.CYLINDER:
            yield from ((str(one), (one,)) for one in _cylinders(facts))
        case Where.NEIGHBOURS:
            for bank in facts.engine.banks:
                yield from ((f"{one}-{other}", (one, other)) for one, other in pairwise(bank))
        case Where.EVERY:
            if len(_cylinders(facts)) > 1:
                yield "", _cylinders(facts)
        case _:
            assert_never(where)


def _cylinders(facts: MeasuredFacts) -> tuple[int, ...]:
    """Give the cylinders of the engine, or those measured where the nameplate does not say."""
    if facts.engine.cylinders:
        return tuple(range(1, facts.engine.cylinders + 1))
    measured = {cylinder_of(value.point) for sheet in (facts.sheet, *facts.others) for value in sheet.values}
    return tuple(sorted(one for one in measured if one is not None))


def _hold(condition: Condition, cylinder: int | None, scene: _Scene) -> _Match | None:
    """Give what a condition rests on where it holds, None where it does not."""
    match condition.asks:
        case Asks.FLAGGED_HIGH:
            return _flagged(condition, End.HIGH, cylinder, scene)
        case Asks.FLAGGED_LOW:
            return _flagged(condition, End.LOW, cylinder, scene)
        case Asks.CLEAR:
            return _clear(condition, cylinder, scene)
        case Asks.WITHIN:
            return _within(condition, cylinder, scene)
        case Asks.SAID:
            return _said(condition, cylinder, scene)
        case _:
            assert_never(condition.asks)


def _flagged(condition: Condition, end: End, cylinder: int | None, scene: _Scene) -> _Match | None:
    called = [
        signal
        for signal in scene.signals
        if signal.end is end
        and signal.rule.quantity in condition.quantities
        and _is_at(signal.subject, signal.rule.quantity, condition.side, cylinder)
    ]
    flagged = tuple(value for signal in called for value in signal.flagged)
    return _Match(flagged, tuple(value for signal in called for value in signal.used)) if flagged else None


def _clear(condition: Condition, cylinder: int | None, scene: _Scene) -> _Match | None:
    if _flagged(condition, End.HIGH, cylinder, scene):
        return None
    values = _values(condition, cylinder, scene)
    return _Match(used=tuple(one.evidence for one in values)) if values or condition.is_optional else None


def _within(condition: Condition, cylinder: int | None, scene: _Scene) -> _Match | None:
    values = _values(condition, cylinder, scene)
    if not values:
        return _Match() if condition.is_optional else None
    others = _values(_only(condition.over), None, scene) if condition.over else []
    for one in values:
        try:
            worked = work_out(condition, one, others, scene.facts)
        except CannotTell:
            continue
        if lies_within(worked.span, condition):
            flagged = (one.evidence,) if condition.calls_out else ()
            return _Match(flagged, (one.evidence, *worked.used), worked.steps)
    return None


def _said(condition: Condition, cylinder: int | None, scene: _Scene) -> _Match | None:
    point = "" if cylinder is None else str(cylinder)
    said = {
        word for quantity in condition.quantities for sheet in scene.sheets for word in words_of(sheet, quantity, point)
    }
    if not said:
        return _Match() if condition.is_optional else None
    return _Match() if said & {word.casefold() for word in condition.words} else None


def _values(condition: Condition, cylinder: int | None, scene: _Scene) -> list[Measured]:
    """Give the values of the first sheet that has any of the quantities, at the place; one without a point is of all."""
    found = (
        [
            one
            for quantity in condition.quantities
            for one in values_of(sheet, quantity)
            if one.phase not in {Phase.WET, Phase.NEW}
            and (not one.point or _is_at(one.point, quantity, condition.side, cylinder))
        ]
        for sheet in scene.sheets
    )
    return next((values for values in found if values), [])


def _only(quantity: str) -> Condition:
    return Condition((quantity,), Asks.WITHIN)


def _is_at(point: str, quantity: str, side: str, cylinder: int | None) -> bool:
    if side and quantity == _LASH and side_of(point) != side:
        return False
    return cylinder is None or cylinder_of(point) == cylinder


def _absorbs(pattern: Pattern, signal: Signal, cylinders: tuple[int | None, ...]) -> bool:
    if signal.rule.quantity not in pattern.absorbs:
        return False
    return cylinders == (None,) or cylinder_of(signal.subject) in cylinders
