"""By how much work was done past the points it had on its day."""

from datetime import date
from decimal import Decimal

from fleetcare.domain.lines import NextPoint, apart
from fleetcare.domain.log import Done
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Combine, TaskVersion
from fleetcare.rules.due.calendar import add

Overrun = tuple[Decimal, Decimal]
"""By how much, and the grace that was allowed: base units, or days."""


def overruns(
    version: TaskVersion, points: dict[Kind, NextPoint], done: Done, counts_from: date | None
) -> dict[Kind, Overrun]:
    """Give, for each kind in which work was done past its own point, by how much and the grace allowed.

    A `last` task waits for all its triggers, so its work is past none of them before it is past all, save
    the bound it has from the day it counts from, which has no grace.
    """
    found = {kind: over for kind, point in points.items() if (over := _overrun(kind, point, done)) is not None}
    if version.combine is Combine.FIRST:
        return found
    if len(found) < len(version.triggers):
        found = {}
    if version.not_later_than is not None and counts_from is not None:
        bound = add(counts_from, version.not_later_than.months, version.not_later_than.days)
        if done.on > bound:
            found[Kind.CALENDAR] = (apart(done.on, bound), Decimal(0))
    return found


def _overrun(kind: Kind, point: NextPoint, done: Done) -> Overrun | None:
    """By how much work was done past a point, None if it was not or cannot be known."""
    if kind is Kind.CALENDAR:
        over = apart(done.on, point.point)
    elif kind in done.life:
        over = apart(done.life[kind].value, point.point)
    else:
        return None
    return (over, point.grace) if over > 0 else None
