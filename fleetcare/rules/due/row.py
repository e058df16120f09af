"""A due line as one flat row: the single source of what table, CSV, JSON and screen show."""

from dataclasses import dataclass, fields
from datetime import date
from decimal import Decimal

from fleetcare.domain.engines import Status
from fleetcare.domain.lines import DueLine, Point, State, TriggerLine
from fleetcare.domain.quantities import BASE_UNIT, Kind, from_base, plain
from fleetcare.domain.schedules import DRAIN
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.states import deciding

PROBABLY = (State.OVERDUE, State.DUE)


@dataclass(frozen=True, slots=True)
class DueRow:
    """One line of the due list, columns in the order of the CSV.

    `remaining` is in `unit`, days for the calendar; the `_at` columns are life totals in `meter_unit`,
    `next_due_dial` what the meter shows there. Empty text or None where there is nothing to say.
    """

    engine: str
    site: str
    task: str
    state: str
    trigger: str
    last_done_on: date | None
    last_done_at: Decimal | None
    next_due_at: Decimal | None
    next_due_on: date | None
    remaining: Decimal | None
    unit: str
    estimated: str
    early_date: date | None
    likely_date: date | None
    late_date: date | None
    deferred_until: str
    covered_by: str
    reason: str
    machine: str
    engine_status: str
    meter_unit: str
    next_due_dial: Decimal | None
    own_due_at: Decimal | None
    own_due_on: date | None

    @property
    def is_before_return(self) -> bool:
        """Whether the line waits for a laid-up engine to come back."""
        return self.engine_status == Status.LAID_UP

    @property
    def is_probably_due(self) -> bool:
        """Whether the line is due by estimate though not by what was read."""
        return self.estimated in PROBABLY and self.state not in PROBABLY


COLUMNS = tuple(field.name for field in fields(DueRow))


def due_row(line: DueLine, facts: ItemFacts) -> DueRow:
    """Flatten a line; figures come out in the units of its meters."""
    counted = _deciding_counted(line)
    calendar = next((t for t in line.triggers if t.kind is Kind.CALENDAR), None)
    unit = unit_of(facts, counted.kind) if counted is not None else ""
    decider = line.deciding
    was_done = line.last_done_number is not None or (line.task.origin is not None and not line.task.origin.as_new)
    return DueRow(
        engine=line.item.tag,
        site=line.item.site,
        task=line.task.name,
        state=line.state.value,
        trigger=decider.kind.value,
        last_done_on=line.last_done_on,
        last_done_at=_in_unit(counted.counts_from, unit) if counted is not None and was_done else None,
        next_due_at=_in_unit(counted.point, unit) if counted is not None else None,
        next_due_on=_next_due_on(line, calendar),
        remaining=_remaining(decider, facts),
        unit=_unit(decider, facts),
        estimated=line.estimated.value if line.estimated is not None else "",
        early_date=line.early_on,
        likely_date=line.likely_on,
        late_date=line.late_on,
        deferred_until=_deferred_until(line, facts),
        covered_by=line.covered_by,
        reason=_reason(line, facts),
        machine=line.item.machine,
        engine_status=line.status.value if line.item.is_engine else "",
        meter_unit=unit,
        next_due_dial=_dial(counted, facts),
        own_due_at=_in_unit(counted.own, unit) if counted is not None else None,
        own_due_on=_day(calendar.own) if calendar is not None else None,
    )


def _reason(line: DueLine, facts: ItemFacts) -> str:
    """Say why a line is unset, else what pulls it forward or lets it wait, and why it was deferred."""
    pulls = [trigger.pull for trigger in line.triggers if trigger.pull is not None]
    said = []
    if pulls:
        from fleetcare.rules.explain_next_check import say_pull  # not worth loading where nothing is pulled

        said = [say_pull(pull, facts) for pull in pulls]
    elif facts.sound_oil and line.version.work == DRAIN:
        from fleetcare.rules.explain_longer_drain import say_longer  # not worth loading for other lines

        said = [say_longer(line, facts)]
    return "; ".join(filter(None, [*said, line.reason]))


def unit_of(facts: ItemFacts, kind: Kind) -> str:
    """The unit a kind is shown in: the meter's, or the base unit where no meter counts; none for the calendar."""
    counter = facts.counters.get(kind)
    return (counter.unit if counter is not None else None) or BASE_UNIT.get(kind, "")


def _deciding_counted(line: DueLine) -> TriggerLine | None:
    """The counted trigger the figures of a line are taken from: the deciding one among the counted."""
    if line.deciding.kind is not Kind.CALENDAR:
        return line.deciding
    counted = [t for t in line.triggers if t.kind is not Kind.CALENDAR]
    return deciding(line.version.combine, counted) if counted else None


def _next_due_on(line: DueLine, calendar: TriggerLine | None) -> date | None:
    """The day in force: the calendar trigger's, the bound of a `last` line, or the day a counted one is deferred to."""
    days = [_day(calendar.point) if calendar is not None else None, line.not_later_than]
    if calendar is None and line.deferral is not None and not line.deferral_ended:
        days.append(line.deferral.until_on)
    return min((day for day in days if day is not None), default=None)


def _remaining(decider: TriggerLine, facts: ItemFacts) -> Decimal | None:
    if decider.remaining is None or decider.kind is Kind.CALENDAR:
        return decider.remaining
    return from_base(decider.remaining, unit_of(facts, decider.kind))


def _unit(decider: TriggerLine, facts: ItemFacts) -> str:
    return "d" if decider.kind is Kind.CALENDAR else unit_of(facts, decider.kind)


def _deferred_until(line: DueLine, facts: ItemFacts) -> str:
    """Say the ends of a deferral: a day, and figures as the meter shows them, life totals where none does."""
    if line.deferral is None:
        return ""
    ends = [line.deferral.until_on.isoformat()] if line.deferral.until_on is not None else []
    for kind, life in line.deferral.until_life.items():
        unit, counter = unit_of(facts, kind), facts.counters.get(kind)
        dial = counter.dial_of(life) if counter is not None else None
        ends.append(f"{plain(from_base(life, unit) if dial is None else dial)} {unit}")
    return " / ".join(ends)


def _dial(counted: TriggerLine | None, facts: ItemFacts) -> Decimal | None:
    counter = facts.counters.get(counted.kind) if counted is not None else None
    if counted is None or counter is None or not isinstance(counted.point, Decimal):
        return None
    return counter.dial_of(counted.point)


def _in_unit(point: Point | None, unit: str) -> Decimal | None:
    return from_base(point, unit) if isinstance(point, Decimal) else None


def _day(point: Point | None) -> date | None:
    return point if isinstance(point, date) else None
