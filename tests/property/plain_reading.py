"""A plain reading of a rule: what a person with a pencil says of the figures of a sheet. It shares nothing with judging.

It reads values as typed, with factors of its own, and answers only what it can read: bounds, comparisons within a sheet,
changes from the sheet before and from new oil; of figures below detection only bounds, of gaps between blades nothing.
"""

from collections.abc import Mapping, Sequence
from fractions import Fraction
from typing import NamedTuple

from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import (
    AgainstSheet,
    Basis,
    Best,
    Bounds,
    By,
    Change,
    Limit,
    Rule,
    Since,
)
from fleetcare.domain.sheets import Phase, SheetValue
from fleetcare.rules.judging.facts import MeasuredFacts
from tests.property.other_units import convert


class Out(NamedTuple):
    """A point that is out: how gravely, and at which end."""

    point: str
    severity: str
    end: str


class _Read(NamedTuple):
    point: str
    phase: str
    figure: Fraction
    is_bound: bool


def is_readable(rule: Rule) -> bool:
    """Whether this reading can answer for a rule at all."""
    match rule.shape:
        case Bounds(basis):
            return basis is Basis.AS_MEASURED
        case AgainstSheet():
            return not rule.phases
        case Change(since, _):
            return since in {Since.BEFORE, Since.OWN_BEST, Since.NEW}
        case _:
            return False


def reads_out(rule: Rule, facts: MeasuredFacts) -> set[Out] | None:
    """Give the points that are out, None where it cannot tell."""
    if not _says(rule, facts.sheet):
        return set()
    if any(value.low is not None for sheet in (facts.sheet, *facts.earlier) for value in sheet.values):
        return None
    values = _read(facts.sheet, rule, _unit(rule, facts.sheet))
    bounds = [value.is_bound for value in values]
    if isinstance(rule.shape, Bounds):
        held: Mapping[_Read, Fraction] = {value: value.figure for value in values}
    elif any(bounds):
        return None
    elif isinstance(rule.shape, AgainstSheet):
        held = _against_sheet(rule.shape, values)
    else:
        assert isinstance(rule.shape, Change)
        changed = _changes(rule, rule.shape, values, facts)
        if changed is None:
            return None
        held = changed
    return {out for value, figure in held.items() for out in _out(rule, value, figure)}


def _out(rule: Rule, value: _Read, figure: Fraction) -> set[Out]:
    """Of limits passed on both sides the graver counts, of as grave ones the low."""
    for severity in ("alarm", "alert"):
        for end, limits in (("low", rule.low), ("high", rule.high)):
            limit: Limit | None = getattr(limits, severity)
            if limit is not None and _is_past(figure, limit, end, is_bound=value.is_bound):
                return {Out(value.point, severity, end)}
    return set()


def _is_past(figure: Fraction, limit: Limit, end: str, *, is_bound: bool) -> bool:
    """Less than 5 is less than 5, and may be more than nothing: no limit above 0 is passed upwards by it."""
    at = Fraction(limit.value)
    if is_bound:
        return figure <= at if end == "low" else at < 0 or (limit.reach and at == 0)
    beyond = figure < at if end == "low" else figure > at
    return beyond or (limit.reach and figure == at)


def _against_sheet(shape: AgainstSheet, values: Sequence[_Read]) -> Mapping[_Read, Fraction]:
    figures = [value.figure for value in values]
    if len(figures) < 2:
        return {}
    other = {Best.HIGHEST: max(figures), Best.LOWEST: min(figures), Best.MEAN: sum(figures, Fraction(0)) / len(figures)}
    return _compared(shape.by, {value: (value.figure, other[shape.reference]) for value in values})


def _changes(
    rule: Rule, shape: Change, values: Sequence[_Read], facts: MeasuredFacts
) -> Mapping[_Read, Fraction] | None:
    if not values:
        return {}
    if shape.since is Since.NEW:
        own = [value for value in facts.sheet.values if value.quantity == rule.quantity and value.phase is Phase.NEW]
        fresh = [*own, *(value for value in facts.fresh if value.quantity == rule.quantity)]
        if not fresh:
            return {}
        new = _figure(fresh[0], _unit(rule, facts.sheet))
        return _compared(shape.by, {value: (value.figure, new) for value in values})
    pairs = {}
    for value in values:
        told = [
            [one for one in _read(sheet, rule, _unit(rule, facts.sheet)) if one[:2] == value[:2]]
            for sheet in facts.earlier
            if sheet.gauge == facts.sheet.gauge
        ]
        past = [ones[0] for ones in told if ones]
        past = past[-1:] if shape.since is Since.BEFORE else past
        if any(one.is_bound for one in past):
            return None
        if past:
            figures = [one.figure for one in past]
            pairs[value] = (value.figure, max(figures) if rule.low else min(figures))
    return _compared(shape.by, pairs)


def _compared(by: By, pairs: Mapping[_Read, tuple[Fraction, Fraction]]) -> Mapping[_Read, Fraction]:
    if by is By.DIFFERENCE:
        return {value: now - then for value, (now, then) in pairs.items()}
    less = 1 if by is By.SHARE else 0
    return {value: 100 * (now / then - less) for value, (now, then) in pairs.items() if then > 0}


def _unit(rule: Rule, sheet: MeasuredSheet) -> str:
    """The unit to compare in: that of the limit, of percentages any, so that of the first value."""
    is_percent = isinstance(rule.shape, AgainstSheet | Change) and rule.shape.by is not By.DIFFERENCE
    names = {rule.quantity, "held"} if rule.quantity == "leak" else {rule.quantity}
    if is_percent and rule.quantity != "leak":
        return next((value.unit for value in sheet.values if value.quantity in names), rule.unit)
    return rule.unit


def _read(sheet: MeasuredSheet, rule: Rule, unit: str) -> list[_Read]:
    wanted = rule.phases or (Phase.NONE, Phase.DRY, Phase.FOUND, Phase.LEFT)
    read = [
        _Read(
            value.point, "" if value.phase is Phase.DRY else value.phase, _figure(value, unit), value.qualifier == "<"
        )
        for value in sheet.values
        if value.quantity == rule.quantity and value.phase in wanted and (not rule.points or value.point in rule.points)
    ]
    return read + (_leaks(sheet) if rule.quantity == "leak" else [])


def _leaks(sheet: MeasuredSheet) -> list[_Read]:
    """What a pair of pressures loses, in percent of what is supplied."""
    supplies = {value.point: _figure(value, "kPa") for value in sheet.values if value.quantity == "supply"}
    pairs = [
        (value.point, supplies.get(value.point, supplies.get("")), _figure(value, "kPa"))
        for value in sheet.values
        if value.quantity == "held"
    ]
    return [_Read(point, "", 100 * (given - kept) / given, False) for point, given, kept in pairs if given]


def _figure(value: SheetValue, unit: str) -> Fraction:
    figure = Fraction(value.value if value.value is not None else 0)
    there = convert(figure, value.unit, unit)
    assert there is not None, (value, unit)
    return there


def _says(rule: Rule, sheet: MeasuredSheet) -> bool:
    said = {(word.quantity, word.text) for word in sheet.words}
    asked = all(any((name, word) in said for word in words) for name, words in rule.words.items())
    return asked and not any((name, word) in said for name, words in rule.unless.items() for word in words)
