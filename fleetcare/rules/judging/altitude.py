"""A value less the least for the altitude of the engine, by a published table.

Between two rows of the table the least is linear; the table tells nothing beyond its first and last row. The altitude is
that of the nameplate, in m; 1 ft is 0.3048 m exactly (NIST SP 811, Appendix B).
"""

from collections.abc import Mapping
from fractions import Fraction
from itertools import pairwise

from fleetcare.domain.findings import Step
from fleetcare.domain.measured import MeasuredEngine
from fleetcare.domain.quantities import plain
from fleetcare.domain.rule_book import ByAltitude, Rule
from fleetcare.rules.judging.facts import CannotTell, Figure, MeasuredFacts
from fleetcare.rules.judging.spans import decimal, known
from fleetcare.rules.judging.values import Measured, step, title

_M_PER: Mapping[str, Fraction] = {"m": Fraction(1), "ft": Fraction("0.3048")}


def figure(rule: Rule, shape: ByAltitude, one: Measured, facts: MeasuredFacts) -> Figure:
    """Give how far a value lies above its least, in the unit of the rule."""
    least, value = least_for(shape, facts.engine), one.within(rule.unit)
    at = decimal(_altitude(shape, facts.engine))
    steps = (
        step(title(rule.quantity), value, rule.unit),
        Step("altitude", at, shape.unit),
        Step("least there", decimal(least), rule.unit),
    )
    used, told = one.used, (*one.steps, *steps)
    return Figure(one.point, value - known(least), one.evidence, rule.low, rule.high, used, told)


def least_for(shape: ByAltitude, engine: MeasuredEngine) -> Fraction:
    """Give the least at the altitude of an engine. Raises CannotTell where that is not known, or beyond the table."""
    at = _altitude(shape, engine)
    for (below, less), (above, more) in pairwise(shape.least):
        if below <= at <= above:
            return Fraction(less) + (at - Fraction(below)) / Fraction(above - below) * Fraction(more - less)
    (first, _), *_, (last, _) = shape.least
    raise CannotTell(
        f"the altitude of {plain(round(decimal(at), 1))} {shape.unit} lies beyond the table,"
        f" which is from {plain(first)} to {plain(last)} {shape.unit}"
    )


def _altitude(shape: ByAltitude, engine: MeasuredEngine) -> Fraction:
    """Give the altitude of an engine in the unit of a table. Raises CannotTell where the nameplate does not say it."""
    if engine.altitude is None:
        raise CannotTell("the nameplate has no altitude")
    return Fraction(engine.altitude) / _M_PER[shape.unit]
