"""How much longer an oil could stay in than its drain task says, as advice: nothing moves by it.

Told where the newest sample flags nothing and everything fitted of the oil keeps inside its nearest limits beyond the
task's own point. Each figure keeps inside up to the early end of its projection; one that goes nowhere, or away from its
limit, as far ahead as it was watched, if a single value there would lie inside four times in five. One that is not watched
well enough to be projected takes the advice away, and so does a law, an insurer, and a task that is not deferrable.
"""

from collections.abc import Iterable
from dataclasses import dataclass
from decimal import ROUND_FLOOR, Decimal

from fleetcare.domain.lines import DueLine, TriggerLine
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import DRAIN
from fleetcare.domain.trends import End, Obstacle, Trend
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.pulls import is_in_the_engine, project_wears
from fleetcare.rules.next_checks import Foreseen
from fleetcare.rules.student import t_quantile

_STAYS = frozenset({Obstacle.NO_SLOPE, Obstacle.AWAY, Obstacle.TOO_FAR})


@dataclass(frozen=True, slots=True)
class LongerDrain:
    """The life total, whole hours, up to which every figure keeps inside, by which subject, and all that was looked at."""

    until: Decimal
    subject: str
    subjects: tuple[str, ...]


def longer_drain(line: DueLine, facts: ItemFacts) -> LongerDrain | None:
    """Give the advice for a line, None where there is none to give: only for one that its own point by hours decides."""
    version, trigger = line.version, line.deciding
    may = version.work == DRAIN and version.deferrable and not (version.law or version.insurer)
    if not may or trigger.kind is not Kind.HOURS or trigger.pull is not None or trigger.deferred:
        return None
    wears = [wear for wear in facts.sound_oil if is_in_the_engine(wear, facts)]
    if not wears or trigger.next is None or trigger.now is None:
        return None
    return _advice(project_wears(wears, version, trigger.next, trigger.now), trigger)


def _advice(foreseen: Iterable[Foreseen], trigger: TriggerLine) -> LongerDrain | None:
    told = [(_inside_until(one), one.wear.subject) for one in foreseen]
    known = [(until, subject) for until, subject in told if until is not None]
    assert isinstance(trigger.own, Decimal)
    assert isinstance(trigger.now, Decimal)
    if len(known) < len(told):
        return None
    until, subject = min(known)
    until = until.quantize(Decimal(1), rounding=ROUND_FLOOR)
    if until <= max(trigger.own, trigger.now):
        return None
    return LongerDrain(until, subject, tuple(subject for _, subject in told))


def _inside_until(one: Foreseen) -> Decimal | None:
    """Give the x up to which a subject keeps inside its limits, None where that is not known."""
    told, trend, last = one.projection, one.projection.trend, one.wear.last
    if trend is None or {hindrance.obstacle for hindrance in told.hindrances} - _STAYS:
        return None
    if told.early is not None or told.not_before is not None:
        return told.early if told.early is not None else told.not_before
    furthest = last.x + trend.span
    t = Decimal(t_quantile(float(told.coverage), trend.df))
    return furthest if all(_is_inside(one, trend, x, t) for x in (last.x, furthest)) else None


def _is_inside(one: Foreseen, trend: Trend, x: Decimal, t: Decimal) -> bool:
    """Whether the range of a single value at x lies inside the limits; in between two such x it does too."""
    middle, half = trend.value_at(x), t * trend.error_at(x)
    inside = {End.LOW: lambda limit: middle - half >= limit, End.HIGH: lambda limit: middle + half <= limit}
    return all(inside[end](limit) for end, limit in one.wear.limits.items())
