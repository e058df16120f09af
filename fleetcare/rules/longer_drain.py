"""How much longer an oil could stay in than its drain task says, as advice: nothing moves by it.

Told where the newest sample flags nothing and everything fitted of the oil keeps inside its nearest limits beyond the
task's own point. Each figure keeps inside up to the early end of its projection; one that goes nowhere, or away from its
limit, as far ahead as it was watched, if a single value there would lie inside four times in five. One that is not watched
well enough to be projected takes the advice away, and so does a law, an insurer, and a task that is not deferrable.
"""

from collections.abc import Iterable
from dataclasses import dataclass
from decimal import ROUND_FLOOR, Decimal
from enum import StrEnum

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


class Bar(StrEnum):
    """What keeps a longer drain from being advised."""

    OTHER_WORK = "it is no change of an engine's oil"
    LAW = "it is required by law"
    INSURER = "it is required by the insurer"
    FIXED = "it is not deferrable"
    OTHER_POINT = "it is not its hours that decide when it is due"
    PULLED = "what was sampled calls for it before its own point"
    DEFERRED = "it is put off already"
    NO_SAMPLE = "there is no oil sample that flags nothing"
    CHANGED = "the oil that was sampled is not in the engine any more"
    NOT_PROJECTED = "not everything in the oil can be projected"
    SCATTERS = "a single value may lie outside its limits by then"
    NOT_BEYOND = "it keeps inside its limits no further than its point and what the meter shows"


@dataclass(frozen=True, slots=True)
class NoAdvice:
    """Why nothing is advised: by what, of which subject of the oil, foreseen how; `until` is where it still keeps inside."""

    bar: Bar
    of: Foreseen | None = None
    until: Decimal | None = None


def longer_drain(line: DueLine, facts: ItemFacts) -> LongerDrain | NoAdvice:
    """Give the advice for a line, or why there is none: only for one that its own point by hours decides."""
    return NoAdvice(Bar.DEFERRED) if line.deciding.deferred else sound_beyond(line, facts)


def sound_beyond(line: DueLine, facts: ItemFacts) -> LongerDrain | NoAdvice:
    """Tell how far beyond its own point an oil is sound, whatever the line is deferred to."""
    version, trigger = line.version, line.deciding
    bars = (
        (version.work != DRAIN, Bar.OTHER_WORK),
        (version.law, Bar.LAW),
        (version.insurer, Bar.INSURER),
        (not version.deferrable, Bar.FIXED),
        (trigger.kind is not Kind.HOURS or trigger.next is None or trigger.now is None, Bar.OTHER_POINT),
        (trigger.pull is not None, Bar.PULLED),
        (not facts.sound_oil, Bar.NO_SAMPLE),
    )
    bar = next((bar for holds, bar in bars if holds), None)
    if bar is not None:
        return NoAdvice(bar)
    wears = [wear for wear in facts.sound_oil if is_in_the_engine(wear, facts)]
    if not wears:
        return NoAdvice(Bar.CHANGED)
    assert trigger.next is not None
    assert trigger.now is not None
    return _advice(project_wears(wears, version, trigger.next, trigger.now), trigger)


def _advice(foreseen: Iterable[Foreseen], trigger: TriggerLine) -> LongerDrain | NoAdvice:
    assert isinstance(trigger.own, Decimal)
    assert isinstance(trigger.now, Decimal)
    known = []
    for one in foreseen:
        until = _inside_until(one)
        if isinstance(until, Bar):
            return NoAdvice(until, one)
        known.append((until, one))
    until, nearest = min(known, key=lambda told: (told[0], told[1].wear.subject))
    until = until.quantize(Decimal(1), rounding=ROUND_FLOOR)
    if until <= max(trigger.own, trigger.now):
        return NoAdvice(Bar.NOT_BEYOND, nearest, until)
    return LongerDrain(until, nearest.wear.subject, tuple(one.wear.subject for _, one in known))


def _inside_until(one: Foreseen) -> Decimal | Bar:
    """Give the x up to which a subject keeps inside its limits, or why that is not known."""
    told, trend, last = one.projection, one.projection.trend, one.wear.last
    if trend is None or {hindrance.obstacle for hindrance in told.hindrances} - _STAYS:
        return Bar.NOT_PROJECTED
    end = told.early if told.early is not None else told.not_before
    if end is not None:
        return end
    furthest = last.x + trend.span
    t = Decimal(t_quantile(float(told.coverage), trend.df))
    return furthest if all(_is_inside(one, trend, x, t) for x in (last.x, furthest)) else Bar.SCATTERS


def _is_inside(one: Foreseen, trend: Trend, x: Decimal, t: Decimal) -> bool:
    """Whether the range of a single value at x lies inside the limits; in between two such x it does too."""
    middle, half = trend.value_at(x), t * trend.error_at(x)
    inside = {End.LOW: lambda limit: middle - half >= limit, End.HIGH: lambda limit: middle + half <= limit}
    return all(inside[end](limit) for end, limit in one.wear.limits.items())
