"""Pull-forwards: a counted trigger called for earlier than its own point, as a measure is projected to reach its limit.

A pull is worked out anew from the sheets each time and never stored, so it is gone with the next sheet. It never enters
the replay: the own point stays, and overruns are counted from it. What was measured holds only for the line it was
measured in: work done later without a sheet may have moved what wears. A deferral made on the day of the newest value
or later knew of it and stands; a value measured after it, or known only after it, pulls again.

What oil samples show pulls the task that takes the next sample; where no task by hours does, the one that drains the oil.
It holds until the oil is changed. A sample of the day of a change is taken for one of the oil that was drained.
"""

from collections.abc import Sequence
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.lines import DueLine, NextPoint, Point, TriggerLine
from fleetcare.domain.measured import OIL
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import DRAIN, Deferral, TaskVersion
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
    wears = [wear for wear in _wears_of(facts, version, kind, last_done_on) if wear.may_pull]
    if deferral is not None:
        wears = [wear for wear in wears if wear.known_on > deferral.on]
    if not wears or point is None or now is None:
        return None
    from fleetcare.rules.next_checks import next_check

    return next_check(project_wears(wears, version, point, now))


def foreseen_for(facts: ItemFacts, line: DueLine, trigger: TriggerLine) -> "list[Foreseen]":
    """Give what every subject a trigger of a line measures again is projected to, or why it is not."""
    wears = _wears_of(facts, line.version, trigger.kind, line.last_done_on)
    if not wears or trigger.next is None or trigger.now is None:
        return []
    return project_wears(wears, line.version, trigger.next, trigger.now)


def _wears_of(facts: ItemFacts, version: TaskVersion, kind: Kind, last_done_on: date | None) -> "list[Wear]":
    """Give what a task measures in a kind, as far as it was measured with its last work or since."""
    return [
        wear
        for wear in facts.wears
        if wear.kind is kind
        and (_is_about(version, wear.work) or (wear.work == OIL and _stands_in(facts, version)))
        and (last_done_on is None or wear.measured_on >= last_done_on)
        and (wear.work != OIL or is_in_the_engine(wear, facts))
    ]


def is_in_the_engine(wear: "Wear", facts: ItemFacts) -> bool:
    """Tell whether the oil of a sample was still there: not changed on its day or later."""
    changes = [
        day
        for task in facts.tasks
        if task.version_on(facts.on).work == DRAIN
        for day in [task.origin.on if task.origin else None, *(done.on for done in facts.done.get(task.id, ()))]
        if day is not None
    ]
    return all(day < wear.measured_on for day in changes)


def _is_about(version: TaskVersion, work: str) -> bool:
    return work in {version.needs_sheet, version.work}


def _stands_in(facts: ItemFacts, version: TaskVersion) -> bool:
    """Tell whether a task drains the oil of an engine of which no task by hours takes samples."""
    versions = [task.version_on(facts.on) for task in facts.tasks if not task.is_removed(facts.on)]
    sampling = (one for one in versions if _is_about(one, OIL) and any(t.kind is Kind.HOURS for t in one.counted))
    return version.work == DRAIN and not any(sampling)


def project_wears(wears: "Sequence[Wear]", version: TaskVersion, point: NextPoint, now: Point) -> "list[Foreseen]":
    """Project what was measured as of now; the interval of their inspections is that of the trigger.

    Where the task does not measure them itself it is the usual gap between them.
    """
    from fleetcare.rules.next_checks import foresee
    from fleetcare.rules.trends import usual_gap

    assert isinstance(now, Decimal)
    assert isinstance(point.interval, Decimal)
    own = point.interval
    return [
        one
        for wear in wears
        for one in foresee(
            [wear], now, own if _is_about(version, wear.work) else usual_gap(wear.segments) or Decimal(0)
        )
    ]
