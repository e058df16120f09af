"""Where a measure goes: how much of it came per 100 h of the oil, and when it comes to its next limit, or why not.

The next limit at an end is the alert, once that is passed the alarm; past that it says so. The interval of its inspections
is that of the task that measures it again by hours, else the usual gap between its sheets.
"""

from collections.abc import Iterable
from dataclasses import dataclass, replace
from decimal import Decimal

from fleetcare.domain.trends import End, Obstacle, Projection
from fleetcare.rules.judging.levels import Level
from fleetcare.rules.measured_past import MeasuredPast, is_oil, start_of
from fleetcare.rules.oil_fills import hours_on_oil, run_since
from fleetcare.rules.projection import project_on

_STILL_SAID = frozenset({Obstacle.TOO_FEW, Obstacle.PAST_LIMIT})
"""What is worth saying where there are too few values: the other obstacles follow from that."""


@dataclass(frozen=True, slots=True)
class PastRate:
    """How much came per 100 h since the oil change; `is_corrected` says that what was topped up since is counted in."""

    per_100h: Decimal
    is_corrected: bool


def rate_of(past: MeasuredPast) -> PastRate | None:
    """Give the rate of an oil since its change, None for a bound, or where its hours or new oil are not known.

    Corrected it is that of `oil.wear_rate`: the value is brought to what it would be without top-up.
    """
    hours, start, last = hours_on_oil(past.last.sheet), start_of(past.last), past.last
    if not is_oil(past) or last.is_bound or hours is None or start is None:
        return None
    shown = last.figure if last.y is None else last.y
    return PastRate(100 * (shown - start) / hours, is_corrected=last.y is not None)


def next_limits(figure: Decimal, levels: Iterable[Level]) -> dict[End, Decimal]:
    """Give at each end the first level a figure has not passed, the last where it has passed all; touched is not passed."""
    limits = {}
    own = list(levels)
    for end in End:
        is_low = end is End.LOW
        values = sorted((level.value for level in own if level.end is end), reverse=is_low)
        ahead = [value for value in values if (figure >= value if is_low else figure <= value)]
        if values:
            limits[end] = (ahead or values[-1:])[0]
    return limits


def ahead_of(
    past: MeasuredPast, levels: Iterable[Level], *, life: Decimal | None, interval: Decimal | None
) -> Projection | None:
    """Project a past to its next limit; None where its newest value is not fitted, or there is no limit.

    `life` is the life total of the engine now, h, None where not known.
    """
    last, limits = past.last, next_limits(past.last.figure, levels)
    if last.x is None or not limits:
        return None
    gap = interval if interval is not None else past.usual_gap or Decimal(0)
    told = project_on(past.segments, limits, now=last.x + run_since(last.sheet, life), interval=gap)
    if any(one.obstacle is Obstacle.TOO_FEW for one in told.hindrances):
        told = replace(told, hindrances=tuple(one for one in told.hindrances if one.obstacle in _STILL_SAID))
    return told
