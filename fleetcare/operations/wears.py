"""What was measured that can pull a check forward, of many engines at once."""

from collections.abc import Collection, Mapping, Sequence
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.measured import COMPRESSION, LASH, OIL
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import DRAIN, Task
from fleetcare.domain.wear import MeasuredWears
from fleetcare.operations.rows import fetch
from fleetcare.rules.meters import CounterHistory

if TYPE_CHECKING:
    from sqlalchemy import Connection

_ABOUT: Mapping[str, Collection[str]] = {LASH: {LASH}, COMPRESSION: {COMPRESSION}, OIL: {OIL, DRAIN}}
"""The sheets and kinds of work of the tasks each kind of sheet can say something about."""


def load_wears(
    connection: "Connection",
    on: date,
    tasks: Mapping[int, Sequence[Task]],
    counters: Mapping[int, Mapping[Kind, CounterHistory]],
) -> dict[int, MeasuredWears]:
    """Load what the items show that have a sheet, and a task by hours that it says something about, by item.

    What does the sums is imported only where there is such an item.
    """
    asked = [
        (item, kind)
        for item, own in tasks.items()
        if _counts_hours(counters.get(item, {}))
        for kind, about in _ABOUT.items()
        if _asks(own, on, about)
    ]
    ids = sorted({item for item, _ in asked})
    measured = set(fetch(connection, "select distinct item_id, kind from sheet where item_id in :ids", ids=ids))
    owners = sorted({one[0] for one in asked if one in measured})
    if not owners:
        return {}
    from fleetcare.operations.kept_wears import kept_wears

    return kept_wears(connection, on, owners)


def _counts_hours(counters: Mapping[Kind, CounterHistory]) -> bool:
    return Kind.HOURS in counters and bool(counters[Kind.HOURS].readings)


def _asks(tasks: Sequence[Task], on: date, about: Collection[str]) -> bool:
    """Tell whether any task is about some sheet or work and counts hours."""
    versions = [task.version_on(on) for task in tasks]
    return any(
        (version.needs_sheet in about or version.work in about)
        and any(one.kind is Kind.HOURS for one in version.counted)
        for version in versions
    )
