"""The next check a wearing measure asks for: at the early end of its projection.

Inputs are what an item's subjects showed (`Wear`), the life total now, and the interval of the task that measures them
again. Each is projected as `projection` does; the earliest early end pulls, rounded down to the tenth. It never lies
before the last value: a check cannot be asked for before it was known. Whether it comes before the point in force is
for the due rules to see.
"""

from collections.abc import Iterable
from dataclasses import replace
from decimal import ROUND_FLOOR, Decimal
from typing import NamedTuple

from fleetcare.domain.trends import Projection
from fleetcare.domain.wear import Pull, Wear
from fleetcare.rules.projection import project_on

_TENTH = Decimal("0.1")


class Foreseen(NamedTuple):
    """A subject with its projection, or with why there is none."""

    wear: Wear
    projection: Projection


def with_its_chance(wear: Wear) -> Wear:
    """Say of a subject whether it may pull a check at all: its trend comes to a limit that is not too far ahead.

    When it was watched and for how long is left to whoever asks about a day, and can only speak against it.
    """
    told = project_on(wear.segments, wear.limits, now=wear.last.x, interval=Decimal(0))
    return replace(wear, may_pull=told.early is not None)


def foresee(wears: Iterable[Wear], now: Decimal, interval: Decimal) -> list[Foreseen]:
    """Project every subject to the limit it moves to; `now` and `interval` (of its inspections) are base units."""
    return [Foreseen(wear, project_on(wear.segments, wear.limits, now=now, interval=interval)) for wear in wears]


def next_check(foreseen: Iterable[Foreseen]) -> Pull | None:
    """Give the earliest pull, None where nothing is projected; of two at one figure the first by name."""
    pulls = [pull for one in foreseen if (pull := _pull(one)) is not None]
    return min(pulls, key=lambda pull: (pull.at, pull.wear.subject), default=None)


def _pull(one: Foreseen) -> Pull | None:
    early = one.projection.early
    if early is None:
        return None
    return Pull(one.wear, one.projection, max(early.quantize(_TENTH, rounding=ROUND_FLOOR), one.wear.last.x))
