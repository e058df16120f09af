"""A measurement rule in words and as a flat row: what it looks at, its limits, where it applies, and where it comes from."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, fields
from enum import StrEnum

from fleetcare.domain.quantities import plain
from fleetcare.domain.rule_book import (
    AppliesTo,
    Approach,
    Asks,
    Basis,
    Bounds,
    ByAltitude,
    Condition,
    Limit,
    Limits,
    Method,
    Pattern,
    Rule,
    Statistical,
)
from fleetcare.rules.explain_finding import say_measured, say_unit
from fleetcare.rules.judging.values import title


class RuleState(StrEnum):
    """Whether a rule judges anything: in force, a preset no engine is named for, or switched off by the shop."""

    IN_FORCE = "in force"
    UNCHOSEN = "preset, not chosen"
    OFF = "switched off"


class RuleOrigin(StrEnum):
    """Whose a rule is."""

    SHIPPED = "shipped"
    CHANGED = "shipped, changed by the shop"
    OWN = "the shop's own"


@dataclass(frozen=True, slots=True)
class RuleRow:
    """A rule, flat. `engines` are the tags of those it judges, `because` says why it is switched off."""

    id: str
    state: str
    origin: str
    kinds: str
    judges: str
    limits: str
    applies: str
    preset: str
    engines: str
    cause: str
    message: str
    next_step: str
    caution: str
    source: str
    because: str


RULE_COLUMNS = tuple(field.name for field in fields(RuleRow))
"""The columns of the list of rules, in order."""


def rule_row(rule: Rule, state: RuleState, origin: RuleOrigin, engines: Sequence[str], because: str = "") -> RuleRow:
    """Flatten a rule with how it stands in the shop."""
    return RuleRow(
        id=rule.id,
        state=state,
        origin=origin,
        kinds=", ".join(rule.kinds),
        judges=say_judged(rule),
        limits=say_limits(rule),
        applies=say_applies(rule),
        preset=rule.preset,
        engines=", ".join(engines),
        cause=rule.cause,
        message=rule.message,
        next_step=rule.next_step,
        caution=rule.caution,
        source=rule.source,
        because=because,
    )


def say_judged(rule: Rule) -> str:
    """Say what a rule works out and where: "iron above new oil", "at each cylinder: compression flagged low and ..."."""
    shape = rule.shape
    if isinstance(shape, Pattern):
        conditions = " and ".join(_condition(condition) for condition in shape.conditions)
        return f"a pattern on {'the engine' if shape.at == 'engine' else shape.at}: {conditions}"
    told = say_measured(rule)
    if isinstance(shape, Statistical):
        told = f"{told} against {shape.least_samples} or more samples of the {shape.pool} pool"
    if isinstance(shape, ByAltitude):
        rows = ", ".join(f"{plain(least)} {rule.unit} at {plain(at)} {shape.unit}" for at, least in shape.least)
        told = f"{told}: {rows}, linear in between, nothing beyond"
    if isinstance(shape, Approach) and shape.least_change:
        told = f"{told} where it moved by {plain(shape.least_change)} mm or more"
    where = [*(f"at {point}" for point in rule.points), *(str(phase) for phase in rule.phases)]
    together = ["all points in one finding"] if rule.of_engine else []
    return ", ".join([told, *where, *_words(rule), *together])


def say_limits(rule: Rule) -> str:
    """Say the limits of a rule: "alert above 100 ppm, alarm above 200 ppm"."""
    shape = rule.shape
    if isinstance(shape, Pattern):
        return f"{shape.severity} where it matches"
    if isinstance(shape, Bounds) and shape.basis is Basis.SPEC:
        found_and_left = "found out of the engine's own check range and left inside it"
        return found_and_left if shape.is_set else f"the {shape.end} end of the engine's own check range"
    if isinstance(shape, Statistical):
        return ", ".join(_statistical(shape, rule))
    unit = say_unit(rule)
    ends = [(rule.low, "below", "or less"), (rule.high, "above", "or more")]
    return ", ".join(said for limits, beyond, reached in ends for said in _limits(limits, beyond, reached, unit))


def say_applies(rule: Rule) -> str:
    """Say for which engines a rule is: "fuel diesel or gas; not in marine use"; every engine where nothing is asked."""
    asked = [*_applies(rule.applies)]
    if rule.preset:
        asked.append(f"engines the shop names for the preset {rule.preset}")
    return "; ".join(asked) or "every engine"


def _limits(limits: Limits, beyond: str, reached: str, unit: str) -> Iterable[str]:
    for severity, limit in (("alert", limits.alert), ("alarm", limits.alarm)):
        if limit is not None:
            figure = f"{plain(limit.value)} {unit}".rstrip()
            yield f"{severity} at {figure} {reached}" if limit.reach else f"{severity} {beyond} {figure}"


def _statistical(shape: Statistical, rule: Rule) -> Iterable[str]:
    for side, limits in (("below", rule.low), ("above", rule.high)):
        for severity, limit in (("alert", limits.alert), ("alarm", limits.alarm)):
            if limit is not None:
                yield f"{severity} {side} {_made(shape, limit)}"


def _made(shape: Statistical, limit: Limit) -> str:
    if shape.method is Method.PERCENTILE:
        return f"{plain(limit.value)} % of them"
    centre, spread = ("mean", "s") if shape.method is Method.MEAN else ("median", "1.4826 median distances")
    return f"the {centre} by more than {plain(limit.value)} × {spread}"


def _condition(condition: Condition) -> str:
    name = " or ".join(title(quantity) for quantity in condition.quantities)
    over = f" over {title(condition.over)}" if condition.over else ""
    new = " above new oil" if condition.less_new else " of the sample before" if condition.of_before else ""
    side = f" of the {condition.side} side" if condition.side else ""
    optional = " or not measured" if condition.is_optional else ""
    return f"{name}{over}{new}{side} {_asked(condition)}{optional}"


def _asked(condition: Condition) -> str:
    if condition.asks is Asks.SAID:
        return f"said to be {' or '.join(condition.words)}"
    if condition.asks is not Asks.WITHIN:
        return "not flagged high" if condition.asks is Asks.CLEAR else str(condition.asks)
    ends = [
        _end(condition.low, "above", "from", condition.unit),
        _end(condition.high, "below", "up to", condition.unit),
    ]
    return " and ".join(end for end in ends if end)


def _end(limit: Limit | None, beyond: str, reached: str, unit: str) -> str:
    if limit is None:
        return ""
    return f"{reached if limit.reach else beyond} {plain(limit.value)} {unit}".rstrip()


def _words(rule: Rule) -> Iterable[str]:
    for words, told in ((rule.words, "where the sheet says"), (rule.unless, "unless the sheet says")):
        for quantity, wanted in words.items():
            yield f"{told} {title(quantity)} {' or '.join(wanted)}"


def _applies(applies: AppliesTo) -> Iterable[str]:
    lists = {
        "fuel": applies.fuels,
        "fuel not": applies.not_fuels,
        "adjuster": applies.adjusters,
        "duty": applies.duties,
        "engine": applies.engines,
        "oil grade": applies.grades,
    }
    yield from (f"{name} {' or '.join(wanted)}" for name, wanted in lists.items() if wanted)
    least, most = applies.cylinders_least, applies.cylinders_most
    if least is not None:
        yield f"{least} cylinders or more"
    if most is not None:
        yield f"{most} cylinders or fewer"
    if applies.is_marine is not None:
        yield "marine engines" if applies.is_marine else "engines known not to be marine"
