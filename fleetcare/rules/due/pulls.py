"""Pull-forwards: a counted trigger called for earlier than its own point, as a measure is projected to reach its limit.

A pull is worked out anew from the sheets each time and never stored, so it is gone with the next sheet. It never enters
the replay: the own point stays, and overruns are counted from it. What was measured holds only for the line it was
measured in: work done later without a sheet may have moved what wears. A deferral made on the day of the newest value
or later knew of it and stands; a value measured after it pulls again.
"""

from collections.abc import Sequence
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.lines import DueLine, NextPoint, Point, TriggerLine
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Deferral, TaskVersion
from fleetcare.rules.due.facts import ItemFacts

if TYPE_CHECKING:
    from fleetcare.domain.wear import Pull, Wear
    from fleetcare.rules.next_checks import Foreseen


def pull_of(
    facts: ItemFacts,
    version: TaskVersion,
    kind: Kind,
    point: NextPoint | None,
    now: Point | None,
    last_done_on: date | None,
    deferral: Deferral | None,
) -> "Pull | None":
    """Give the earliest pull on the trigger of a kind; `deferral` is the one in force on that trigger."""
    wears = _wears_of(facts, version, kind, last_done_on)
    if deferral is not None:
        wears = [wear for wear in wears if wear.measured_on > deferral.on]
    if not wears or point is None or now is None:
        return None
    from fleetcare.rules.next_checks import next_check

    return next_check(_foreseen(wears, point, now))


def foreseen_for(facts: ItemFacts, line: DueLine, trigger: TriggerLine) -> "list[Foreseen]":
    """Give what every subject a trigger of a line measures again is projected to, or why it is not."""
    wears = _wears_of(facts, line.version, trigger.kind, line.last_done_on)
    if not wears or trigger.next is None or trigger.now is None:
        return []
    return _foreseen(wears, trigger.next, trigger.now)


def _wears_of(facts: ItemFacts, version: TaskVersion, kind: Kind, last_done_on: date | None) -> "list[Wear]":
    """Give what a task measures in a kind, as far as it was measured with its last work or since."""
    return [
        wear
        for wear in facts.wears
        if wear.kind is kind
        and wear.work in {version.needs_sheet, version.work}
        and (last_done_on is None or wear.measured_on >= last_done_on)
    ]


def _foreseen(wears: "Sequence[Wear]", point: NextPoint, now: Point) -> "list[Foreseen]":
    """Project them as of now; the interval of the trigger is that of their inspections."""
    from fleetcare.rules.next_checks import foresee

    assert isinstance(now, Decimal)
    assert isinstance(point.interval, Decimal)
    return foresee(wears, now, point.interval)
