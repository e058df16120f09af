"""Covering: the big job that does a small one along with it."""

from collections.abc import Mapping, Sequence
from dataclasses import replace
from datetime import date

from fleetcare.domain.lines import DueLine, Point, State, apart
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Combine


def closure(covers: Mapping[int, Sequence[int]], task_id: int) -> tuple[int, ...]:
    """Give every task a task covers, directly or through another, in the order met."""
    found: list[int] = []
    waiting = list(covers.get(task_id, ()))
    while waiting:
        covered = waiting.pop(0)
        if covered != task_id and covered not in found:
            found.append(covered)
            waiting.extend(covers.get(covered, ()))
    return tuple(found)


def find_cycle(covers: Mapping[int, Sequence[int]], task_id: int) -> tuple[int, ...]:
    """Give the way from a task back to itself through covering, empty where there is none."""
    waiting: list[tuple[int, ...]] = [(task_id,)]
    seen: set[int] = set()
    while waiting:
        path = waiting.pop()
        for covered in covers.get(path[-1], ()):
            if covered == task_id:
                return (*path, task_id)
            if covered not in seen:
                seen.add(covered)
                waiting.append((*path, covered))
    return ()


def with_covering(lines: Sequence[DueLine], covers: Mapping[int, Sequence[int]]) -> list[DueLine]:
    """Mark each line of one item that another line will do along with it, no later than it is due.

    `covers` are those of all its tasks, so that covering passes through a task that has no line.
    """
    by_task = {line.task.id: line for line in lines}
    coverers: dict[int, list[DueLine]] = {}
    for big in lines:
        for covered in closure(covers, big.task.id):
            if covered in by_task:
                coverers.setdefault(covered, []).append(big)
    return [replace(line, covered_by=_covered_by(line, coverers.get(line.task.id, []))) for line in lines]


def _covered_by(line: DueLine, coverers: Sequence[DueLine]) -> str:
    if line.state in {State.OVERDUE, State.UNSET} or line.version.needs_sheet:
        return ""
    able = [big for big in coverers if _comes_in_time(big, line)]
    best = min(able, key=lambda big: (big.likely_on or date.max, big.task.name), default=None)
    return best.task.name if best is not None else ""


def _comes_in_time(big: DueLine, line: DueLine) -> bool:
    """Tell whether the big job is due no later than the small one.

    Compared in the kind that decides the small one, else by likely dates, else not at all.
    """
    decider = line.deciding
    opens = next((t.next.opens for t in line.triggers if t.next is not None and t.next.opens is not None), None)
    if opens is not None and (big.likely_on is None or big.likely_on < opens):
        return False
    same_kind = _will_call(big, decider.kind)
    if same_kind is not None:
        assert decider.point is not None
        return apart(same_kind, decider.point) <= decider.grace
    return (
        decider.forecast is not None
        and decider.forecast.likely is not None
        and big.likely_on is not None
        and big.likely_on <= decider.forecast.likely
    )


def _will_call(big: DueLine, kind: Kind) -> Point | None:
    """Give the point in a kind at which the big job is called for at the latest, None where there is none.

    A `last` job may still wait there for another trigger, and one deferred to a day alone for that day.
    """
    if big.version.combine is Combine.LAST:
        return None
    found = (t.point for t in big.triggers if t.kind is kind and not (t.deferred and t.point == t.own))
    return next(found, None)
