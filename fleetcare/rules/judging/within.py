"""The figure that a condition of a pattern asks to lie between two limits, with every number it was worked out from.

It is the value in the unit of the condition, less new oil where the condition says so and that is known, over another
quantity where it names one, or in percent of what the sample before of the same fill had.
"""

from collections.abc import Sequence
from dataclasses import dataclass, replace

from fleetcare.domain.findings import Evidence, Step
from fleetcare.domain.rule_book import Condition
from fleetcare.rules.judging.comparing import before
from fleetcare.rules.judging.facts import CannotTell, MeasuredFacts
from fleetcare.rules.judging.rates import check_same_fill
from fleetcare.rules.judging.spans import Side, Span
from fleetcare.rules.judging.values import Measured, fresh_of, step, title


@dataclass(frozen=True, slots=True)
class Worked:
    """A figure that may lie within, what else it rests on, and its working with the figure itself last."""

    span: Span
    used: tuple[Evidence, ...]
    steps: tuple[Step, ...]


@dataclass(frozen=True, slots=True)
class _Above:
    """A value less new oil, where that is asked for and known: its steps stay empty where nothing was taken off."""

    span: Span
    used: tuple[Evidence, ...] = ()
    steps: tuple[Step, ...] = ()


def work_out(condition: Condition, one: Measured, others: Sequence[Measured], facts: MeasuredFacts) -> Worked:
    """Work the figure of a value out; `others` are the values of the quantity it is held over.

    Raises CannotTell where something it needs was not measured.
    """
    if condition.of_before:
        return _of_before(condition, one, facts)
    if not condition.over:
        above = _above_new(condition, one, facts, condition.unit)
        told = step(_label(condition, one, [above]), above.span, condition.unit)
        return Worked(above.span, (*one.used, *above.used), (*_own_steps(one), *above.steps, told))
    if not others:
        raise CannotTell("the other quantity was not measured")
    pair = [(each, _above_new(condition, each, facts, one.unit)) for each in (one, others[0])]
    aboves = [above for _, above in pair]
    if aboves[1].span.low <= 0:
        raise CannotTell("there is none of the other quantity")
    span = aboves[0].span.over(aboves[1].span)
    steps = [told for each, above in pair for told in above.steps or (_read(each, one.unit),)]
    told = step(_label(condition, one, aboves), span, condition.unit)
    used = (*one.used, *aboves[0].used, others[0].evidence, *aboves[1].used)
    return Worked(span, used, (*steps, told))


def lies_within(span: Span, condition: Condition) -> bool:
    """Whether a span lies within for certain; a limit to be gone beyond is outside itself, one to be reached inside."""
    low, high = condition.low, condition.high
    above = low is None or span.past_high(low) is Side.PAST
    below = high is None or span.past_low(high) is Side.PAST
    return above and below


def _of_before(condition: Condition, one: Measured, facts: MeasuredFacts) -> Worked:
    """Give a value in percent of what the sample before had, where it would lie within of one of the same fill."""
    then = before(one.quantity, one, facts)
    if then.span.low <= 0:
        raise CannotTell("there was none of it before")
    now = one.within(then.unit)
    span = now.over(then.span).times(100)
    if lies_within(span, condition):
        check_same_fill(one, facts)
    steps = (_read(one, then.unit), step(f"{title(one.quantity)} before", then.span, then.unit))
    told = step(f"{title(one.quantity)}, of the sample before", span, condition.unit)
    return Worked(span, (*one.used, then.evidence), (*steps, told))


def _own_steps(one: Measured) -> tuple[Step, ...]:
    """Give what a value was itself worked out from, with its place: a pattern may hold at several."""
    return tuple(replace(told, label=f"{told.label}{_at(one)}") for told in one.steps)


def _above_new(condition: Condition, one: Measured, facts: MeasuredFacts, unit: str) -> _Above:
    fresh = fresh_of(facts.sheet, facts.fresh, one.quantity) if condition.less_new else None
    read = one.within(unit)
    if fresh is None:
        return _Above(read)
    new = fresh.within(unit)
    steps = (_read(one, unit), step(f"{title(one.quantity)} in new oil", new, unit))
    return _Above(read - new, (fresh.evidence,), steps)


def _read(one: Measured, unit: str) -> Step:
    return step(f"{title(one.quantity)}{_at(one)}", one.within(unit), unit)


def _label(condition: Condition, one: Measured, aboves: Sequence[_Above]) -> str:
    """Name the figure: "silicon to aluminium, both above new oil", "wet gain at 3"."""
    over = f" to {title(condition.over)}" if condition.over else ""
    return f"{title(one.quantity)}{over}{_say_above(aboves) if condition.less_new else ''}{_at(one)}"


def _say_above(aboves: Sequence[_Above]) -> str:
    """Say whether new oil was taken off: of a ratio of both, of one of the two, or of none as it is not known."""
    taken = sum(bool(above.steps) for above in aboves)
    if not taken:
        return ", new oil not known"
    if taken < len(aboves):
        return ", above new oil where that is known"
    return f",{' both' if len(aboves) > 1 else ''} above new oil"


def _at(one: Measured) -> str:
    return f" at {one.point}" if one.point else ""
