"""Move one due point, with reason and name."""

from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.db.tables import Deferral, DeferralFigure
from fleetcare.domain.lines import DueLine, Point, State
from fleetcare.domain.quantities import BASE_UNIT, Amount, Figure, Kind, from_base, plain, to_base
from fleetcare.domain.schedules import DRAIN
from fleetcare.drafts.work import DeferralDraft
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem, FoundMeter, find_item, find_meters, find_task, pick_meter
from fleetcare.operations.load import item_facts
from fleetcare.operations.longer_drains import say_beyond, take_advice
from fleetcare.operations.names import person_id
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.outlook import outlooks
from fleetcare.rules.due.replay import replay

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session


@dataclass(frozen=True, slots=True)
class Deferred:
    """What was deferred: the item, the task's name, each end, figures with their unit, why, and what to beware of."""

    item: FoundItem
    task: str
    until: tuple[str, ...]
    why: str
    beware: str = ""


def defer(session: "Session", draft: DeferralDraft) -> Deferred:
    """Store a deferral of the due point a task has now; one as advised to the figure that is advised, as its reason says.

    Refuses work by law or insurer, work that is not deferrable, a line without a point, an end that
    does not lie after the point or after today, and a figure the task does not count; an advice there is not, or is of
    another figure than somebody was told, and whoever may not take it.
    """
    connection = session.connection()
    item = find_item(connection, draft.tag)
    task_id = find_task(connection, item, draft.task)
    facts = item_facts(connection, draft.on, [item.id])[0]
    line = next((line for line in item_lines(facts) if line.task.id == task_id), None)
    if line is None:
        raise Refused(f"{draft.task} of {item.tag} is not due to be done", "nothing needs to be deferred")
    _check_allowed(line)
    until = _advised(connection, item, line, facts, draft) if draft.as_advised else draft.until
    row = Deferral(
        task_id=task_id,
        on=draft.on,
        counts_from_id=replay(facts, line.task).marks.from_entry,
        until_on=next((end for end in until if isinstance(end, date)), None),
        why=f"as advised: {draft.why}" if draft.as_advised else draft.why,
        person_id=person_id(session, draft.by) or 0,
    )
    if row.until_on is not None:
        _check_day(line, row.until_on, draft.on)
    session.add(row)
    session.flush()
    ends = []
    for end in until:
        ends.append(_add_figure(session, row, item, facts, line, end) if isinstance(end, Figure) else end.isoformat())
    if row.until_on is not None and line.version.calendar is None and not line.version.on_condition:
        _add_cap(session, row, facts, line)
    session.flush()
    beware = "" if draft.as_advised else _beware(connection, line, facts)
    return Deferred(item, line.task.name, tuple(ends), row.why, beware)


def _advised(
    connection: "Connection", item: FoundItem, line: DueLine, facts: ItemFacts, draft: DeferralDraft
) -> tuple[Figure]:
    """Give the figure that is advised, where it is the one that was told."""
    figure = take_advice(connection, item, line, facts, draft.by)
    told = next((end.value for end in draft.until if isinstance(end, Figure)), figure.value)
    if told != figure.value:
        raise Refused(f"it is advised until {figure} by now, not until {plain(told)}", "leave --until empty")
    return (figure,)


def _beware(connection: "Connection", line: DueLine, facts: ItemFacts) -> str:
    """Say until when an oil is known to be sound, where it is put off for longer."""
    if line.version.work != DRAIN or not facts.sound_oil:
        return ""
    return say_beyond(line, facts, item_facts(connection, facts.on, [line.item.id])[0])


def _check_allowed(line: DueLine) -> None:
    name = f"{line.task.name} of {line.item.tag}"
    if line.version.law or line.version.insurer:
        raise Refused(f"{name} is required by {'law' if line.version.law else 'the insurer'}", "it cannot be deferred")
    if not line.version.deferrable:
        raise Refused(
            f"{name} is not deferrable", f"do it, or allow it: fleetcare task edit {line.item.tag} ... --deferrable yes"
        )
    if line.state is State.UNSET:
        raise Refused(f"{name} has no due point yet: {line.reason}", "enter that first")


def _check_day(line: DueLine, until: date, today: date) -> None:
    if until < today:
        raise Refused(f"{until} is past", f"give a day from {today} on")
    point = _called_for(line, Kind.CALENDAR)
    if isinstance(point, date) and until <= point:
        raise Refused(f"{line.task.name} is not due before {point}", "give a later day")


def _add_figure(
    session: "Session", row: Deferral, item: FoundItem, facts: ItemFacts, line: DueLine, end: Figure
) -> str:
    """Store a dial figure a deferral ends at, and give it with its unit.

    Refuses one the task does not count or that lies before its point.
    """
    meter = pick_meter(find_meters(session.connection(), item.id, facts.on), end, item.tag)
    own = _called_for(line, meter.kind)
    if not isinstance(own, Decimal):
        raise Refused(f"{line.task.name} does not count {meter.kind}", "give a day, or a figure of a kind it counts")
    counter = facts.counters[meter.kind]
    dial = from_base(to_base(end.value, end.unit), meter.unit) if end.unit else end.value
    life = counter.life_at(dial, facts.on)
    if life is None or life <= own:
        point = counter.dial_of(own)
        shown = f"{plain(from_base(own, meter.unit))} {meter.unit} of life" if point is None else _shown(point, meter)
        raise Refused(f"{end} does not lie after the due point of {shown}", "give a larger figure")
    session.add(
        DeferralFigure(
            deferral_id=row.id,
            kind=meter.kind,
            role="until",
            meter_id=meter.id,
            value=end.value,
            unit=end.unit or meter.unit,
        )
    )
    return str(Amount(end.value, end.unit or meter.unit))


def _shown(dial: Decimal, meter: FoundMeter) -> str:
    return f"{plain(dial)} {meter.unit}"


def _add_cap(session: "Session", row: Deferral, facts: ItemFacts, line: DueLine) -> None:
    """Fix the likely figure on the day a counted trigger is deferred to, so that hard running ends it early."""
    if len(line.version.counted) > 1:
        raise Refused(f"{line.task.name} counts more than one meter", "say until which figure")
    kind = line.version.counted[0].kind
    look = outlooks(facts, is_future=False).get(kind)
    assert row.until_on is not None
    likely = look.history.likely_value(row.until_on) if look is not None and look.history is not None else None
    own = _called_for(line, kind)
    if likely is not None and isinstance(own, Decimal) and likely > own:
        value = Decimal(str(round(likely, 1)))
        session.add(DeferralFigure(deferral_id=row.id, kind=kind, role="cap", value=value, unit=BASE_UNIT[kind]))


def _called_for(line: DueLine, kind: Kind) -> Point | None:
    """Give the point a trigger calls for its work at before any deferral: its own, or the one it is pulled forward to."""
    found = next((trigger for trigger in line.triggers if trigger.kind is kind), None)
    if found is None:
        return None
    return found.pull.at if found.pull is not None else found.own
