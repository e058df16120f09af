"""What the demo fleet is to show, each as a question to its facts and due lines."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from itertools import pairwise

from fleetcare.domain.engines import Status
from fleetcare.domain.lines import DueLine, State
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Anchor, CalendarTrigger, Combine, CountedTrigger, Period
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.facts import ItemFacts


@dataclass(frozen=True)
class Stand:
    """The fleet on a day: the facts of its items, and their lines."""

    facts: list[ItemFacts]
    lines: list[DueLine]


def stand_of(facts: list[ItemFacts], recorded_only: bool = False) -> Stand:
    """Work out the lines of some items; `recorded_only` without estimates and forecasts, which take most of the time."""
    return Stand(facts, [line for each in facts for line in item_lines(each, recorded_only=recorded_only)])


def missing(stand: Stand, features: Mapping[str, Callable[[Stand], bool]]) -> list[str]:
    """Give the names of the features a fleet does not show."""
    return [name for name, shows in features.items() if not shows(stand)]


def _line(question: Callable[[DueLine], bool]) -> Callable[[Stand], bool]:
    return lambda stand: any(question(line) for line in stand.lines)


def _in_service(state: State) -> Callable[[Stand], bool]:
    return _line(lambda line: line.state is state and line.status is Status.IN_SERVICE)


def _calendar(question: Callable[[CalendarTrigger], bool]) -> Callable[[Stand], bool]:
    return _line(lambda line: line.version.calendar is not None and question(line.version.calendar))


def _anchor(anchor: Anchor) -> Callable[[Stand], bool]:
    return _line(lambda line: line.version.effective_anchor is anchor and bool(line.version.triggers))


def _status(status: Status) -> Callable[[Stand], bool]:
    return _line(lambda line: line.status is status)


def _deferred(by_day: bool, by_figure: bool, counted: bool) -> Callable[[Stand], bool]:
    """Ask for a deferral in force with these ends, of a task with a counted trigger only or with a calendar one."""

    def is_such(line: DueLine) -> bool:
        return (
            line.deferral is not None
            and not line.deferral_ended
            and (line.deferral.until_on is not None) is by_day
            and bool(line.deferral.until_life) is by_figure
            and (line.version.calendar is None) is counted
        )

    return _line(is_such)


def _unit(unit: str) -> Callable[[Stand], bool]:
    return lambda stand: any(counter.unit == unit for each in stand.facts for counter in each.counters.values())


def _is_worse(line: DueLine) -> bool:
    return line.estimated is not None and line.estimated.rank < line.state.rank


STATES = {f"a line {state} in service": _in_service(state) for state in State}
ANCHORS = {f"a task {anchor}": _anchor(anchor) for anchor in Anchor}
DEFERRALS = {
    "a calendar task deferred to a day": _deferred(True, False, counted=False),
    "a counted task deferred to a day": _deferred(True, False, counted=True),
    "a task deferred to a figure": _deferred(False, True, counted=True),
    "a task deferred to a day or a figure": _deferred(True, True, counted=True),
    "a deferral that has ended": _line(lambda line: line.deferral_ended),
}
CALENDAR_FORMS = {
    "a plain interval": _calendar(lambda t: not (t.month_end or t.once_each or t.window_days)),
    "an interval through the month's end": _calendar(lambda t: t.month_end),
    "a window": _calendar(lambda t: t.window_days is not None),
    "a calendar grid": _line(
        lambda line: line.version.effective_anchor is Anchor.ON_GRID and line.version.calendar is not None
    ),
    **{f"once each {period}": _calendar(lambda t, p=period: t.once_each is p) for period in Period},  # type: ignore[misc]
}
STANDINGS = {
    "a laid-up engine": _status(Status.LAID_UP),
    "a clock that stands still while laid up": _line(
        lambda line: any(t.next and t.next.paused_days for t in line.triggers)
    ),
    "a follow-up": _line(lambda line: bool(line.called_because)),
}
ANY_DAY = {**STATES, **ANCHORS, **DEFERRALS, **CALENDAR_FORMS, **STANDINGS}
"""What is to be seen on whatever day the demo fleet is built for."""


def _counts(kind: Kind) -> Callable[[Stand], bool]:
    return _line(lambda line: any(isinstance(t, CountedTrigger) and t.kind is kind for t in line.version.triggers))


def _is_transitive(stand: Stand) -> bool:
    """Ask for a job that covers one that covers another."""
    covers = {line.task.id: line.version.covers for line in stand.lines}
    return any(covers.get(small) for smalls in covers.values() for small in smalls)


def _machines_with_two(stand: Stand) -> bool:
    machines = [each.item.machine for each in stand.facts if each.item.is_engine and each.item.machine]
    return any(one == other for one, other in pairwise(sorted(machines)))


ALL = {
    **ANY_DAY,
    **{f"a trigger of {kind}": _counts(kind) for kind in Kind if kind is not Kind.CALENDAR},
    **{f"a meter in {unit}": _unit(unit) for unit in ("h", "km", "mi", "L", "starts")},
    "an estimate worse than the record": _line(_is_worse),
    "a stood-down engine": _status(Status.STOOD_DOWN),
    "a line that waits for its last trigger": _line(
        lambda line: line.version.combine is Combine.LAST and line.not_later_than is not None
    ),
    "work once only": _line(lambda line: line.version.once),
    "work by law": _line(lambda line: line.version.law),
    "work for the insurer": _line(lambda line: line.version.insurer),
    "work that needs a sheet": _line(lambda line: bool(line.version.needs_sheet)),
    "a line another will do along": _line(lambda line: bool(line.covered_by)),
    "a job that covers one that covers another": _is_transitive,
    "a changed interval": _line(lambda line: len(line.task.versions) > 1),
    "two engines in one machine": _machines_with_two,
    "a duty factor": lambda stand: any(each.item.factors for each in stand.facts),
    "an engine back in service": lambda stand: any(len(each.item.spells) > 1 for each in stand.facts),
    "a replaced meter": lambda stand: any(
        fit.unmetered for each in stand.facts for c in each.counters.values() for fit in c.counter.fits
    ),
    "a meter that rolled over": lambda stand: any(c.turns for each in stand.facts for c in each.counters.values()),
    "an engine counted by two machines in turn": lambda stand: any(
        len({fit.meter.unit for fit in c.counter.fits}) > 1 for each in stand.facts for c in each.counters.values()
    ),
    "work done past its point": _line(lambda line: any(work.over for work in line.past)),
    "a period missed and then gone on from": _line(lambda line: any(work.missed for work in line.past)),
}
"""What the demo fleet shows, as far as its due lines tell."""
