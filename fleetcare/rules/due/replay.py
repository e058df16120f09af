"""Replay: walk the work done in date order and find what the open line counts from.

Due points are never stored. Each entry is held against the point the task had on its day, with
the version, the duty factor and the pauses in force on that day; deferrals never enter it, save
that they keep a once-each period open.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date, timedelta
from decimal import Decimal

from fleetcare.domain.lines import NextPoint, PastWork, Point
from fleetcare.domain.log import Done
from fleetcare.domain.quantities import COUNTED, Kind
from fleetcare.domain.schedules import CalendarTrigger, Combine, Deferral, Origin, Task, TaskVersion
from fleetcare.rules.due.calendar import Chain, period_after, period_of, say_period
from fleetcare.rules.due.deferrals import has_ended
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.once_each import serve
from fleetcare.rules.due.overruns import overruns
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
    """Replay one task's entries up to the day of the facts; its origin takes its place in time among them."""
    origin = task.origin
    if origin is not None and origin.on is not None and origin.on > facts.on and not origin.as_new:
        origin = None
    entries = sorted(facts.done.get(task.id, ()), key=place)
    earlier = [done for done in entries if origin is not None and _is_before(done, origin)]
    later = [done for done in entries if done not in earlier]
    past = _walk(Marks(), facts, task, earlier)
    marks = _marks_at(origin)
    walked = _walk(marks, facts, task, later)
    last = next((done for done, work in zip(later[::-1], walked[::-1], strict=True) if work.counted), None)
    stated = origin.on if origin is not None and not origin.as_new else None
    return Replay(marks, last.on if last is not None else stated, last, (*past, *walked))


def place(done: Done) -> tuple[date, list[Decimal], int]:
    """Where an entry stands among those of its item: by day, within a day by life total, then by number."""
    return done.on, [done.life[kind].value if kind in done.life else Decimal(0) for kind in COUNTED], done.number


def deferral_of(task: Task, from_entry: int | None, day: date) -> Deferral | None:
    """Give the newest deferral, made by `day`, of the point that counts from an entry (None: the origin).

    Work stated as done after a deferral was made is an origin that deferral does not know.
    """
    began = task.origin.on if from_entry is None and task.origin is not None else None
    bound = [d for d in task.deferrals if d.counts_from == from_entry and (began or d.on) <= d.on <= day]
    return max(bound, key=lambda d: (d.on, d.id), default=None)


def _is_before(done: Done, origin: Origin) -> bool:
    """Tell whether work was done before the origin: by day, or by figure where the origin has no day."""
    if origin.on is not None:
        return done.on < origin.on
    return any(kind in done.life and done.life[kind].value < life for kind, life in origin.life.items())


def _walk(marks: Marks, facts: ItemFacts, task: Task, entries: Sequence[Done]) -> list[PastWork]:
    return [_take(marks, facts, task, task.version_on(done.on), done) for done in entries]


def _marks_at(origin: Origin | None) -> Marks:
    if origin is None:
        return Marks()
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
    counts_from = marks.calendar.done if marks.calendar is not None else None
    over = overruns(version, {kind: point for kind, (point, _) in points.items()}, done, counts_from)
    calendar = version.calendar
    if calendar is not None and calendar.once_each is not None:
        served, periods = _serve(marks, facts, task, version, calendar, done)
        if periods or not served:
            over.pop(Kind.CALENDAR, None)
        # A period still owed counts from the entry that served the one before it, and so does its deferral.
        _move(marks, points, done, from_entry=done.entry_id if served else marks.from_entry)
        note = "" if served else "its period was already served"
    else:
        marks.owed = None
        served, periods, note = "", (), ""
        _move(marks, points, done, from_entry=done.entry_id)
    after = next_points(facts, task, version, marks, done.on)
    missed = {kind: point.passed for kind, (point, _) in after.items() if point.passed}
    if periods:
        missed[Kind.CALENDAR] = periods
    return PastWork(done.entry_id, done.number, done.on, over, missed, served, note=note)


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
        lives = {kind: life.value for kind, life in done.life.items()}
        if not has_ended(deferral, done.on, lives):
            open_until = max(open_until, deferral.until_on)
    outcome = serve(trigger, owed, open_until, done.on)
    marks.owed = outcome.next
    served = say_period(each, outcome.period) if outcome.period else ""
    return served, tuple(period.last for period in outcome.missed)


def _day(point: Point) -> date:
    assert isinstance(point, date)
    return point
