"""What was measured that can pull a check forward, of many engines at once."""

from collections.abc import Mapping, Sequence
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Task
from fleetcare.operations.rows import fetch
from fleetcare.rules.meters import CounterHistory

if TYPE_CHECKING:
    from sqlalchemy import Connection

    from fleetcare.domain.wear import Wear

_LASH = "lash"


def load_wears(
    connection: "Connection",
    on: date,
    tasks: Mapping[int, Sequence[Task]],
    counters: Mapping[int, Mapping[Kind, CounterHistory]],
) -> "dict[int, tuple[Wear, ...]]":
    """Load the lash points of the items that have a task to measure them again by hours, by item.

    What does the sums is imported only where there is such an item with a sheet.
    """
    asked = [item_id for item_id, own in tasks.items() if _counts_hours(counters.get(item_id, {})) and _asks(own, on)]
    measured = fetch(
        connection, "select distinct item_id from sheet where kind = 'lash' and item_id in :ids", ids=asked
    )
    if not measured:
        return {}
    from fleetcare.operations.lash_wears import load_lash_wears

    return load_lash_wears(connection, {row[0]: counters[row[0]] for row in measured}, on)


def _counts_hours(counters: Mapping[Kind, CounterHistory]) -> bool:
    return Kind.HOURS in counters and bool(counters[Kind.HOURS].readings)


def _asks(tasks: Sequence[Task], on: date) -> bool:
    """Tell whether any task is about lash and counts hours."""
    versions = [task.version_on(on) for task in tasks]
    return any(
        _LASH in {version.needs_sheet, version.work} and any(one.kind is Kind.HOURS for one in version.counted)
        for version in versions
    )
