"""A value held against what earlier samples say is usual: limits of rules/statistical_limits.py made of a pool.

The limit of the rule is k, or the percentage of a percentile; low limits count downwards from the centre. Fewer samples
than the rule asks for give no limit.
"""

from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal

from fleetcare.domain.findings import Step
from fleetcare.domain.measures import QUANTITIES, exactly
from fleetcare.domain.quantities import plain
from fleetcare.domain.rule_book import Limits, Method, Pool, Rule, Statistical
from fleetcare.domain.trends import Hindrance
from fleetcare.rules.judging.facts import CannotTell, Figure, MeasuredFacts
from fleetcare.rules.judging.spans import decimal
from fleetcare.rules.judging.values import Measured
from fleetcare.rules.statistical_limits import StatisticalLimit, percentile_limit, spread_limit

_NAMES = {
    Method.MEAN: ("mean of them", "standard deviation s"),
    Method.ROBUST: ("median of them", "1.4826 × median distance from it"),
}


def figure(rule: Rule, shape: Statistical, one: Measured, values: Sequence[Measured], facts: MeasuredFacts) -> Figure:
    """Give a value with the limits that the pool makes of the rule's."""
    pool = (facts.pools.own if shape.pool is Pool.OWN else facts.pools.family).get(rule.quantity, ())
    unit = QUANTITIES[rule.quantity].unit
    samples = pool if unit == rule.unit else tuple(decimal(exactly(value, unit, rule.unit)) for value in pool)
    low, low_steps = _limits(shape, samples, rule.low, -1)
    high, high_steps = _limits(shape, samples, rule.high, 1)
    steps = (*one.steps, Step("samples", Decimal(len(samples))), *(high_steps or low_steps))
    return Figure(one.point, one.within(rule.unit), one.evidence, low, high, one.used, steps)


def _limits(
    shape: Statistical, samples: tuple[Decimal, ...], multiples: Limits, sign: int
) -> tuple[Limits, tuple[Step, ...]]:
    made = {
        name: _limit(shape, samples, multiple.value, sign)
        for name in ("alert", "alarm")
        if (multiple := getattr(multiples, name)) is not None
    }
    figures = {name: replace(getattr(multiples, name), value=limit.value) for name, limit in made.items()}
    first = next(iter(made.values()), None)
    centre, spread = (first.centre, first.spread) if first else (None, None)
    named, spoken = _NAMES.get(shape.method, ("", ""))
    if centre is not None and spread is not None:
        return Limits(**figures), (Step(named, centre), Step(spoken, spread))
    return Limits(**figures), tuple(Step(f"{plain(one.multiple)} % of them up to", one.value) for one in made.values())


def _limit(shape: Statistical, samples: tuple[Decimal, ...], multiple: Decimal, sign: int) -> StatisticalLimit:
    if shape.method is Method.PERCENTILE:
        limit = percentile_limit(samples, multiple, fewest=shape.least_samples)
    else:
        limit = spread_limit(samples, shape.method, sign * multiple, fewest=shape.least_samples)
    if isinstance(limit, Hindrance):
        counted = f" ({len(samples)} of {shape.least_samples})" if len(samples) < shape.least_samples else ""
        raise CannotTell(f"{limit.obstacle}{counted}")
    return limit
