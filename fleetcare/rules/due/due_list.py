"""The due list: every line of every item, in the order a morning needs it."""

from collections.abc import Iterable
from datetime import date, timedelta
from decimal import Decimal

from fleetcare.domain.engines import Status, status_on
from fleetcare.domain.lines import DueLine, State
from fleetcare.rules.due.covering import with_covering
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.line import due_line
from fleetcare.rules.due.outlook import outlooks

_ALWAYS_LISTED = {State.OVERDUE, State.DUE, State.NEAR, State.UNSET}


def item_lines(facts: ItemFacts, is_future: bool = False, recorded_only: bool = False) -> list[DueLine]:
    """Give the lines of one item on the day of its facts, covering marked; none for a withdrawn one.

    `is_future` says that day has not come yet, so that counted lines carry an estimate; `recorded_only`
    leaves estimates and forecasts of counted triggers out.
    """
    if status_on(facts.item.spells, facts.on) is Status.WITHDRAWN:
        return []
    looks = outlooks(facts, is_future, recorded_only)
    lines = [line for task in facts.tasks if (line := due_line(facts, task, looks)) is not None]
    return with_covering(lines, {task.id: task.version_on(facts.on).covers for task in facts.tasks})


def in_order(lines: Iterable[DueLine]) -> list[DueLine]:
    """Sort lines by state, then what remains as a share of the interval, then tag, then task."""
    return sorted(lines, key=_place)


def within(lines: Iterable[DueLine], on: date, days: int) -> list[DueLine]:
    """Keep lines overdue, due, near or unset, and those whose early day is at most `days` after `on`."""
    horizon = on + timedelta(days=days)
    return [
        line
        for line in lines
        if line.state in _ALWAYS_LISTED or (line.early_on is not None and line.early_on <= horizon)
    ]


def _place(line: DueLine) -> tuple[int, Decimal, str, str]:
    share = line.deciding.share if line.deciding.share is not None else Decimal(0)
    return line.state.rank, share, line.item.tag, line.task.name
