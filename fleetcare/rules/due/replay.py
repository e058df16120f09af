"""Replay: walk the work done in date order and find what the open line counts from.

Due points are never stored. Each entry is held against the point the task had on its day, with
the version, the duty factor and the pauses in force on that day; deferrals never enter it, save
that they keep a once-each period open.
"""

from dataclasses import dataclass
from datetime import date, timedelta
from decimal import Decimal

from fleetcare.domain.lines import NextPoint, PastWork, Point
from fleetcare.domain.log import Done
from fleetcare.domain.quantities import COUNTED, Kind
from fleetcare.domain.schedules import CalendarTrigger, Combine, Deferral, Origin, Task, TaskVersion
from fleetcare.rules.due.calendar import Chain, period_after, period_of, say_period
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.once_each import serve
from fleetcare.rules.due.points import Marks, Points, next_points, owed_period
from fleetcare.rules.due.triggers import CalendarMark, CountedMark


@dataclass(frozen=True, slots=True)
class Replay:
    """The outcome: what the open line counts from, the last counted work, and what each entry did."""

    marks: Marks
    last_done_on: date | None
    last: Done | None
    past: tuple[PastWork, ...]


def replay(facts: ItemFacts, task: Task) -> Replay:
    """Replay one task's entries up to the day of the facts."""
    marks, last_done_on = Marks(), None
    origin = task.origin
    if origin is not None and (origin.as_new or origin.on is None or origin.on <= facts.on):
        marks = _marks_at(origin)
        last_done_on = None if origin.as_new else origin.on
    last: Done | None = None
    past: list[PastWork] = []
    for done in facts.done.get(task.id, ()):
        work = _take(marks, facts, task, task.version_on(done.on), done)
        past.append(work)
        if work.counted:
            last, last_done_on = done, done.on
    return Replay(marks, last_done_on, last, tuple(past))


def deferral_of(task: Task, from_entry: int | None, day: date) -> Deferral | None:
    """Give the newest deferral, made by `day`, of the point that counts from an entry (None: the origin)."""
    bound = [d for d in task.deferrals if d.counts_from == from_entry and d.on <= day]
    return max(bound, key=lambda d: (d.on, d.id), default=None)


def _marks_at(origin: Origin) -> Marks:
    return Marks(
        counted={kind: CountedMark(life, is_start=origin.as_new) for kind, life in origin.life.items()},
        calendar=CalendarMark(origin.on, is_start=origin.as_new) if origin.on is not None else None,
    )


def _take(marks: Marks, facts: ItemFacts, task: Task, version: TaskVersion, done: Done) -> PastWork:
    """Let one entry move the marks, and say what it did."""
    points = next_points(facts, task, version, marks, done.on)
    opens = _opens_later(version, points, done)
    if opens is not None:
        note = f"before its window opened on {opens.isoformat()}"
        return PastWork(done.entry_id, done.number, done.on, counted=False, note=note)
    over = {
        kind: (excess, point.grace)
        for kind, (point, _) in points.items()
        if (excess := _excess(kind, point, done)) is not None
    }
    calendar = version.calendar
    if calendar is not None and calendar.once_each is not None:
        served, missed = _serve(marks, facts, task, version, calendar, done)
        if missed or not served:
            over.pop(Kind.CALENDAR, None)
        # A period still owed counts from the entry that served the one before it, and so does its deferral.
        _move(marks, points, done, from_entry=done.entry_id if served else marks.from_entry)
        note = "" if served else "its period was already served"
        return PastWork(done.entry_id, done.number, done.on, over, missed, served, note=note)
    marks.owed = None
    _move(marks, points, done, from_entry=done.entry_id)
    after = next_points(facts, task, version, marks, done.on)
    missed = tuple(passed for point, _ in after.values() for passed in point.passed)
    return PastWork(done.entry_id, done.number, done.on, over, missed)


def _opens_later(version: TaskVersion, points: Points, done: Done) -> date | None:
    """Give the first day that counts where work comes before its window, None where the work counts.

    It counts outside the window too where another trigger of a `first` task was near: that one called for it.
    """
    opens = points[Kind.CALENDAR][0].opens if Kind.CALENDAR in points else None
    if opens is None or done.on >= opens:
        return None
    if version.combine is Combine.FIRST and any(_is_near(kind, point, done) for kind, (point, _) in points.items()):
        return None
    return opens


def _is_near(kind: Kind, point: NextPoint, done: Done) -> bool:
    life = done.life.get(kind)
    return life is not None and isinstance(point.point, Decimal) and point.point - life.value <= point.ahead


def _move(marks: Marks, points: Points, done: Done, from_entry: int | None) -> None:
    counted: dict[Kind, CountedMark] = {}
    for kind in COUNTED:
        life = done.life.get(kind)
        if life is not None:
            own = points[kind][0].point if kind in points else None
            counted[kind] = CountedMark(life.value, own if isinstance(own, Decimal) else None)
    marks.counted = counted
    own_day: date | None = None
    chain: Chain | None = None
    if Kind.CALENDAR in points:
        point, chain = points[Kind.CALENDAR]
        own_day = point.nominal or _day(point.point)
        chain = Chain(own_day) if point.paused_days else chain
    marks.calendar = CalendarMark(done.on, own_day, chain)
    marks.from_entry = from_entry
    marks.approximate = frozenset(kind for kind, life in done.life.items() if life.approximate)


def _serve(
    marks: Marks, facts: ItemFacts, task: Task, version: TaskVersion, trigger: CalendarTrigger, done: Done
) -> tuple[str, tuple[Point, ...]]:
    """Let an entry serve a period of a once-each task; give its name ("" for none) and the last days of those missed."""
    each = trigger.once_each
    assert each is not None
    owed = owed_period(facts, version, each, marks, done.on)
    if owed is None:
        # Nothing is known of earlier periods: the first entry ever serves its own.
        marks.owed = period_after(each, done.on)
        return say_period(each, period_of(each, done.on)), ()
    open_until = owed.last + timedelta(days=trigger.grace)
    deferral = deferral_of(task, marks.from_entry, done.on)
    if deferral is not None and deferral.until_on is not None:
        open_until = max(open_until, deferral.until_on)
    outcome = serve(trigger, owed, open_until, done.on)
    marks.owed = outcome.next
    served = say_period(each, outcome.period) if outcome.period else ""
    return served, tuple(period.last for period in outcome.missed)


def _excess(kind: Kind, point: NextPoint, done: Done) -> Decimal | None:
    """By how much work was done past a point, None if it was not or cannot be known."""
    if isinstance(point.point, date):
        excess = Decimal((done.on - point.point).days)
    else:
        life = done.life.get(kind)
        if life is None:
            return None
        excess = life.value - point.point
    return excess if excess > 0 else None


def _day(point: Point) -> date:
    assert isinstance(point, date)
    return point
