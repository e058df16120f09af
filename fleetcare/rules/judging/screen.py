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
    Asks,
    Basis,
    Best,
    Bounds,
    By,
    Change,
    Condition,
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
from fleetcare.rules.judging.values import HELD, HOURS_ON_OIL, LEAK, TOP_UP, WET_GAIN, alike
from fleetcare.rules.judging.words import says

_ASIDE = (Phase.WET, Phase.NEW)
_WORKED_OUT = frozenset({LEAK, WET_GAIN})
_SEEN = ("seen", "")  # under which a sheet remembers what was looked at
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
    """A rule with the figures between which nothing is flagged, exclusive.

    `percent` is the lowest percentile beyond which it flags a figure in its own unit, None for any other rule;
    `is_aside` says that it judges wet values or new oil, which are not glanced at.
    """

    rule: Rule
    above: float
    below: float
    percent: float | None
    is_aside: bool

    def is_clear(self, facts: MeasuredFacts) -> bool:
        """Whether the rule certainly flags nothing; False where only a closer look can tell."""
        rule, shape = self.rule, self.rule.shape
        if (rule.words or rule.unless) and not says(facts.sheet, rule):
            return True
        if self.is_aside or _is_worked_out(facts.sheet, rule.quantity):
            return False
        seen = [one for one in _look(facts.sheet, rule.quantity) if not rule.points or one.point in rule.points]
        match shape:
            case Statistical(Pool.OWN):
                own = facts.pools.own.get(rule.quantity, ())
                return len(own) < shape.least_samples or self._is_usual(seen, facts.pools.own, len(own))
            case Statistical():
                family = facts.pools.family
                is_usual = self._is_usual(seen, family, MOST_OF_FAMILY)
                return is_usual or len(family.get(rule.quantity, ())) < shape.least_samples
            case Bounds(Basis.AS_MEASURED | Basis.NAMEPLATE):
                return self._all_within(_in_unit(seen, rule.unit))
            case Bounds(Basis.LESS_NEW):
                return not rule.low and self._all_within(_in_unit(seen, rule.unit))
            case Bounds(Basis.SPEC):
                return not any(one.is_out for one in facts.lash.get(facts.sheet.entry, ()))
            case AgainstSheet():
                return len(seen) < 2 or self._all_within(_compared(seen, shape, rule))
            case Change(Since.BEFORE | Since.BEST_BEFORE):
                return not facts.earlier or self._all_within(_changed(seen, shape, facts, rule))
            case Change(Since.OWN_BEST):
                return not facts.earlier or self._all_within(_fallen(seen, shape, facts, rule))
            case Change(Since.NEW):
                return not _may_have_new(facts, rule.quantity)
            case Rate(Since.NEW):
                return not _has_hours(facts.sheet, shape)
            case Approach():
                return is_far(shape, facts)
        return False

    def _all_within(self, figures: Sequence[tuple[float, float]] | None) -> bool:
        return figures is not None and all(high > self.above and low < self.below for low, high in figures)

    def _is_usual(self, seen: Sequence[_Seen], pool: Samples, most: int) -> bool:
        """Whether more samples than can lie above the percentile reach every figure, so that none is beyond it.

        `most` is how many samples there may be: of fewer no more lie above.
        """
        figures = _in_unit(seen, self.rule.unit) if self.percent is not None else None
        if self.percent is None or not figures:
            return False
        enough = most - int(self.percent / 100 * (most + 1) - _CLEARLY) + 2
        return all(_reach(newest_first(pool, self.rule.quantity), Decimal(high), enough) for _, high in figures)


def is_outside(condition: Condition, sheets: Sequence[MeasuredSheet]) -> bool:
    """Whether no value on some sheets can lie within what a condition of a pattern asks for, and one has to."""
    if condition.asks is not Asks.WITHIN or condition.over or condition.less_new:
        return False
    if not _WORKED_OUT.isdisjoint(condition.quantities):
        return False
    seen = [one for sheet in sheets for quantity in condition.quantities for one in _look(sheet, quantity)]
    figures = _in_unit(seen, condition.unit)
    low = float(condition.low.value) if condition.low else float("-inf")
    high = float(condition.high.value) if condition.high else float("inf")
    least, most = low - _clear_of(low), high + _clear_of(high)
    return bool(figures) and all(one < least or other > most for one, other in figures or ())


def _reach(samples: Iterable[Decimal], figure: Decimal, enough: int) -> bool:
    """Whether enough samples reach a figure."""
    return next(islice(filter(figure.__le__, samples), enough - 1, None), None) is not None


def screened(rule: Rule) -> Screened:
    """Give a rule ready to be glanced at."""
    low, high = _limits(rule.low), _limits(rule.high)
    most, least = max(low, default=float("-inf")), min(high, default=float("inf"))
    is_aside = not {*rule.phases}.isdisjoint(_ASIDE)
    return Screened(rule, most + _clear_of(most), least - _clear_of(least), _percent_of(rule), is_aside)


def _percent_of(rule: Rule) -> float | None:
    shape, percents = rule.shape, _limits(rule.high)
    is_percentile = isinstance(shape, Statistical) and shape.method is Method.PERCENTILE and not rule.low
    return min(percents) if is_percentile and percents and rule.unit == QUANTITIES[rule.quantity].unit else None


def _is_worked_out(sheet: MeasuredSheet, quantity: str) -> bool:
    """Whether values of a quantity may come of others."""
    return quantity == WET_GAIN or (quantity == LEAK and bool(_look(sheet, HELD)))


def _limits(limits: Limits) -> list[float]:
    return [float(limit.value) for limit in (limits.alert, limits.alarm) if limit is not None]


def _clear_of(limit: float) -> float:
    return 0.0 if abs(limit) == float("inf") else abs(limit) * _CLEARLY + _CLEARLY


def _look(sheet: MeasuredSheet, quantity: str) -> list[_Seen]:
    """Give the values of a quantity that rules may judge; a point that was entered twice stands there twice."""
    if _SEEN not in sheet.memo:
        seen: dict[str, list[_Seen]] = {}
        for value in sheet.values:
            if value.phase not in _ASIDE:
                low, high = value.ends
                one = _Seen(value.point, alike(value.phase), float(low), float(high), value.unit)
                seen.setdefault(value.quantity, []).append(one)
        sheet.memo[_SEEN] = seen
    found: list[_Seen] = sheet.memo[_SEEN].get(quantity, [])
    return found


def _may_have_new(facts: MeasuredFacts, quantity: str) -> bool:
    """Whether anything says what new oil has of a quantity."""
    own = (value for value in facts.sheet.values if value.phase is Phase.NEW)
    return any(value.quantity == quantity for value in (*own, *facts.fresh))


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
    """Compare plain figures with the same points of the sheet before, or with the highest of all points there.

    None where that is not all there is to it.
    """
    before, known = facts.earlier[-1], _look(facts.earlier[-1], rule.quantity)
    then = {(one.point, one.phase): one for one in known}
    if before.gauge != facts.sheet.gauge or not known or len(then) < len(known):
        return None
    if any(one.low != one.high or one.unit != known[0].unit for one in (*seen, *known)):
        return None
    pairs = []
    for one in seen:
        was = then.get((one.point, one.phase))
        if was is None or was.low <= 0:
            return None
        is_best = shape.since is Since.BEST_BEFORE
        best = max(other.low for other in known if other.phase is one.phase) if is_best else was.low
        pairs.append((one.low, best))
    if shape.by is By.DIFFERENCE and any(one.unit != rule.unit for one in seen):
        return None
    return _against(pairs, shape.by)


def _fallen(seen: Sequence[_Seen], shape: Change, facts: MeasuredFacts, rule: Rule) -> list[tuple[float, float]] | None:
    """Compare plain figures with the best of the same points; None where that is not all there is to it."""
    sheets = [sheet for sheet in facts.earlier if sheet.gauge == facts.sheet.gauge]
    if any(_is_worked_out(sheet, rule.quantity) for sheet in sheets):
        return None
    past = [one for sheet in sheets for one in _look(sheet, rule.quantity)]
    unit = rule.unit if shape.by is By.DIFFERENCE else next((one.unit for one in seen), "")
    if any(one.low != one.high or one.low <= 0 or one.unit != unit for one in (*seen, *past)):
        return None
    best: dict[tuple[str, Phase], float] = {}
    extreme = max if rule.low else min
    for one in past:
        best[one.point, one.phase] = extreme(one.low, best.get((one.point, one.phase), one.low))
    pairs = [(one.low, best[one.point, one.phase]) for one in seen if (one.point, one.phase) in best]
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
