"""Rules that certainly flag nothing on a sheet, told at a glance, so that judging a fleet anew need not look closer.

A glance takes figures as floats and keeps well clear of every limit; whatever it is not certain of is judged exactly. So
it never decides anything: the signals of a sheet are the same with it and without.
"""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from functools import lru_cache
from itertools import islice
from typing import NamedTuple

from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.measures import QUANTITIES, can_convert, exactly
from fleetcare.domain.rule_book import (
    AgainstSheet,
    Approach,
    Basis,
    Best,
    Bounds,
    By,
    Change,
    Limits,
    Method,
    Pool,
    Rate,
    Rule,
    Since,
    Statistical,
)
from fleetcare.domain.sheets import Phase
from fleetcare.rules.judging.approach import is_far
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.pools import MOST_OF_FAMILY, newest_first
from fleetcare.rules.judging.pools import Pool as Samples
from fleetcare.rules.judging.values import HELD, HOURS_ON_OIL, LEAK, TOP_UP, WET_GAIN, alike, fresh_of
from fleetcare.rules.judging.words import says

_ASIDE = (Phase.WET, Phase.NEW)
_CLEARLY = 1e-6  # of the limit: far more than floats are off, far less than anybody measures


class _Seen(NamedTuple):
    """A value as a pair of floats, the same twice for a plain figure, in its own unit."""

    point: str
    phase: Phase
    low: float
    high: float
    unit: str


@dataclass(frozen=True, slots=True)
class Screened:
    """A rule with the figures between which nothing is flagged, exclusive."""

    rule: Rule
    above: float
    below: float

    def is_clear(self, facts: MeasuredFacts) -> bool:
        """Whether the rule certainly flags nothing; False where only a closer look can tell."""
        rule, shape = self.rule, self.rule.shape
        if (rule.words or rule.unless) and not says(facts.sheet, rule):
            return True
        if _is_worked_out(facts.sheet, rule.quantity) or not {*rule.phases}.isdisjoint(_ASIDE):
            return False
        seen = [one for one in _look(facts.sheet, rule.quantity) if not rule.points or one.point in rule.points]
        match shape:
            case Bounds(Basis.AS_MEASURED | Basis.NAMEPLATE):
                return self._all_within(_in_unit(seen, rule.unit))
            case Bounds(Basis.LESS_NEW):
                return not rule.low and self._all_within(_in_unit(seen, rule.unit))
            case Bounds(Basis.SPEC):
                return not any(one.is_out for one in facts.lash.get(facts.sheet.entry, ()))
            case AgainstSheet():
                return len(seen) < 2 or self._all_within(_compared(seen, shape, rule))
            case Change(Since.BEST_BEFORE):
                return not facts.earlier
            case Change(Since.BEFORE):
                return not facts.earlier or self._all_within(_changed(seen, shape, facts, rule))
            case Change(Since.NEW):
                return fresh_of(facts.sheet, facts.fresh, rule.quantity) is None
            case Rate(Since.NEW):
                return not _has_hours(facts.sheet, shape)
            case Approach():
                return is_far(shape, facts)
            case Statistical():
                pool = facts.pools.own if shape.pool is Pool.OWN else facts.pools.family
                if _is_usual(_in_unit(seen, rule.unit), pool, shape, rule):
                    return True
                return len(pool.get(rule.quantity, ())) < shape.least_samples
        return False

    def _all_within(self, figures: Sequence[tuple[float, float]] | None) -> bool:
        return figures is not None and all(high > self.above and low < self.below for low, high in figures)


def _is_usual(figures: Sequence[tuple[float, float]] | None, pool: Samples, shape: Statistical, rule: Rule) -> bool:
    """Whether more samples than can lie above any percentile of a rule reach every figure, so that none is beyond it."""
    percents = _limits(rule.high)
    if shape.method is not Method.PERCENTILE or rule.low or not percents or not figures:
        return False
    if rule.unit != QUANTITIES[rule.quantity].unit:
        return False
    # As many as of the largest pool there is: of a smaller one no more lie above.
    most = MOST_OF_FAMILY if shape.pool is Pool.FAMILY else len(pool.get(rule.quantity, ()))
    enough = most - int(min(percents) / 100 * (most + 1) - _CLEARLY) + 2
    return all(_reach(newest_first(pool, rule.quantity), high, enough) for _, high in figures)


def _reach(samples: Iterable[Decimal], figure: float, enough: int) -> bool:
    """Whether enough samples reach a figure."""
    return len(list(islice((True for sample in samples if sample >= figure), enough))) == enough


def screened(rule: Rule) -> Screened:
    """Give a rule ready to be glanced at."""
    low, high = _limits(rule.low), _limits(rule.high)
    most, least = max(low, default=float("-inf")), min(high, default=float("inf"))
    return Screened(rule, most + _clear_of(most), least - _clear_of(least))


def _is_worked_out(sheet: MeasuredSheet, quantity: str) -> bool:
    """Whether values of a quantity may come of others."""
    return quantity == WET_GAIN or (quantity == LEAK and bool(_look(sheet, HELD)))


def _limits(limits: Limits) -> list[float]:
    return [float(limit.value) for limit in (limits.alert, limits.alarm) if limit is not None]


def _clear_of(limit: float) -> float:
    return 0.0 if abs(limit) == float("inf") else abs(limit) * _CLEARLY + _CLEARLY


def _look(sheet: MeasuredSheet, quantity: str) -> list[_Seen]:
    """Give the values of a quantity that rules may judge; a point that was entered twice stands there twice."""
    key = ("seen", "")
    if key not in sheet.memo:
        seen: dict[str, list[_Seen]] = {}
        for value in sheet.values:
            if value.phase not in _ASIDE:
                low, high = value.ends
                one = _Seen(value.point, alike(value.phase), float(low), float(high), value.unit)
                seen.setdefault(value.quantity, []).append(one)
        sheet.memo[key] = seen
    found: list[_Seen] = sheet.memo[key].get(quantity, [])
    return found


def _in_unit(seen: Sequence[_Seen], unit: str) -> list[tuple[float, float]] | None:
    """Give values in a unit, None where one does not convert."""
    found = []
    for one in seen:
        if one.unit == unit:
            found.append((one.low, one.high))
        elif (line := _line(one.unit, unit)) is not None:
            found.append((one.low * line[0] + line[1], one.high * line[0] + line[1]))
        else:
            return None
    return found


@lru_cache(maxsize=1024)
def _line(unit: str, into: str) -> tuple[float, float] | None:
    """Give factor and offset from one unit to another, None where figures in one cannot be compared with the other."""
    if not can_convert(unit, into):
        return None
    zero = exactly(Fraction(0), unit, into)
    return float(exactly(Fraction(1), unit, into) - zero), float(zero)


def _compared(seen: Sequence[_Seen], shape: AgainstSheet, rule: Rule) -> list[tuple[float, float]] | None:
    """Compare plain figures of one unit and phase with the best or the mean of all; None where they are not that."""
    first = seen[0]
    if any(one.low != one.high or one.unit != first.unit or one.phase is not first.phase for one in seen):
        return None
    if shape.by is By.DIFFERENCE and first.unit != rule.unit:
        return None
    figures = [one.low for one in seen]
    best = max(figures)
    if shape.reference is not Best.HIGHEST:
        best = min(figures) if shape.reference is Best.LOWEST else sum(figures) / len(figures)
    return _against([(figure, best) for figure in figures], shape.by) if best > 0 else None


def _changed(
    seen: Sequence[_Seen], shape: Change, facts: MeasuredFacts, rule: Rule
) -> list[tuple[float, float]] | None:
    """Compare plain figures with the same points of the sheet before; None where that is not all there is to it."""
    before = facts.earlier[-1]
    if before.gauge != facts.sheet.gauge:
        return None
    then = {(one.point, one.phase): one for one in _look(before, rule.quantity)}
    pairs = []
    for one in seen:
        was = then.get((one.point, one.phase))
        if was is None or was.unit != one.unit or one.low != one.high or was.low != was.high or was.low <= 0:
            return None
        pairs.append((one.low, was.low))
    if shape.by is By.DIFFERENCE and any(one.unit != rule.unit for one in seen):
        return None
    return _against(pairs, shape.by)


def _against(pairs: Sequence[tuple[float, float]], by: By) -> list[tuple[float, float]]:
    if by is By.DIFFERENCE:
        figures = [figure - other for figure, other in pairs]
    elif by is By.SHARE:
        figures = [100 * (figure - other) / other for figure, other in pairs]
    else:
        figures = [100 * figure / other for figure, other in pairs]
    return [(figure, figure) for figure in figures]


def _has_hours(sheet: MeasuredSheet, shape: Rate) -> bool:
    """Whether a rate since the change may be worked out at all: hours on the oil are known, and make-up where it counts."""
    has_make_up = bool(_look(sheet, TOP_UP)) or sheet.logged_top_up is not None
    return bool(_look(sheet, HOURS_ON_OIL)) and (not shape.is_corrected or has_make_up)
