"""Items of any shape for the laws of due work: a meter read now and then, tasks of all forms, work on some days."""

from dataclasses import dataclass, replace
from datetime import date, timedelta
from decimal import Decimal

from hypothesis import strategies as st

from fleetcare.domain.engines import DutyFactor, Item, Status, StatusSpell
from fleetcare.domain.log import Done
from fleetcare.domain.meters import Counter, LifeFigure, Meter, MeterFit, Reading
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import (
    Anchor,
    CalendarTrigger,
    Combine,
    CountedTrigger,
    Deferral,
    Origin,
    Period,
    Task,
    TaskVersion,
    Trigger,
)
from fleetcare.rules.due.calendar import period_span
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.meters import counter_history

FIRST = date(2024, 1, 31)
METER = Meter(1, Kind.HOURS, "h")

days = st.dates(date(2023, 1, 1), date(2027, 12, 31))
figures = st.integers(1, 20_000).map(lambda tenths: Decimal(tenths) / 10)
factors = st.integers(1, 100).map(lambda percent: Decimal(percent) / 100)
spans = st.one_of(
    st.builds(Span, st.integers(1, 400), st.just("d")),
    st.builds(Span, st.integers(1, 60), st.just("w")),
    st.builds(Span, st.integers(1, 36), st.just("mo")),
    st.builds(Span, st.integers(1, 5), st.just("y")),
)


@dataclass(frozen=True, slots=True)
class Use:
    """Days of an engine's life with the life total on each, in order; the first is its start."""

    points: tuple[tuple[date, Decimal], ...]

    @property
    def last(self) -> tuple[date, Decimal]:
        """The last day and figure known."""
        return self.points[-1]


@st.composite
def counted_triggers(draw: st.DrawFn, kind: Kind = Kind.HOURS) -> CountedTrigger:
    """An interval of a tenth to 2,000, with a first interval, an ahead below it and a grace now and then."""
    interval = draw(figures)
    ahead = draw(st.none() | st.integers(0, 99).map(lambda percent: interval * percent / 100))
    return CountedTrigger(
        kind,
        interval,
        first=draw(st.none() | figures),
        ahead=ahead,
        grace=draw(st.just(Decimal(0)) | figures),
        grid_origin=draw(st.none() | figures),
    )


@st.composite
def calendar_triggers(draw: st.DrawFn) -> CalendarTrigger:
    """A plain interval with a grace, through month end, a window, or once each period."""
    form = draw(st.sampled_from(["plain", "month end", "window", "once each"]))
    if form == "once each":
        period = draw(st.sampled_from(Period))
        return CalendarTrigger(period_span(period), once_each=period, grace=draw(st.integers(0, 20)))
    interval = draw(spans)
    window = max(1, min(45, interval.nominal_days // 3)) if interval.nominal_days > 2 and form == "window" else None
    return CalendarTrigger(
        interval,
        first=draw(st.none() | spans),
        ahead=draw(st.none() | st.integers(0, interval.nominal_days - 1)),
        grace=0 if window is not None else draw(st.integers(0, 20)),
        grid_origin=draw(st.none() | days),
        window_days=window,
        month_end=form == "month end",
    )


@st.composite
def versions(draw: st.DrawFn, covers: tuple[int, ...] = ()) -> TaskVersion:
    """One or two intervals, combined and anchored in any way; a waiting task has its bound."""
    triggers: tuple[Trigger, ...] = draw(
        st.one_of(
            st.tuples(counted_triggers()),
            st.tuples(calendar_triggers()),
            st.tuples(counted_triggers(), calendar_triggers()),
        )
    )
    combine = draw(st.sampled_from(Combine))
    return TaskVersion(
        from_on=FIRST,
        triggers=triggers,
        combine=combine,
        anchor=draw(st.none() | st.sampled_from(Anchor)),
        not_later_than=Span(6, "y") if combine is Combine.LAST else None,
        covers=covers,
        needs_sheet=draw(st.sampled_from(["", "", "lash"])),
        pause_while_laid_up=draw(st.booleans()),
    )


@st.composite
def uses(draw: st.DrawFn) -> Use:
    """Up to a dozen days apart by a day to four months, with nothing up to 300 run in between."""
    points = [(FIRST, draw(st.just(Decimal(0)) | figures))]
    gaps = draw(st.lists(st.tuples(st.integers(1, 120), st.integers(0, 3000)), max_size=11))
    for gap, tenths in gaps:
        on, life = points[-1]
        points.append((on + timedelta(days=gap), life + Decimal(tenths) / 10))
    return Use(tuple(points))


@st.composite
def works(draw: st.DrawFn, use: Use) -> tuple[Done, ...]:
    """Work on some of the days, now and then twice on one."""
    chosen = sorted(draw(st.lists(st.sampled_from(use.points), max_size=5)))
    return tuple(
        Done(number, number, on, {Kind.HOURS: LifeFigure(life)}) for number, (on, life) in enumerate(chosen, 1)
    )


@st.composite
def deferrals(draw: st.DrawFn, use: Use, done: tuple[Done, ...]) -> tuple[Deferral, ...]:
    """At most one deferral, of the point that counts from the last entry, by a day, a figure or both."""
    if not draw(st.booleans()):
        return ()
    last_day, last_life = use.last
    by_day = draw(st.none() | st.integers(-30, 400).map(lambda n: last_day + timedelta(days=n)))
    by_figure = draw(st.just({}) | figures.map(lambda more: {Kind.HOURS: last_life + more - 100}))
    cap = draw(st.just({}) | figures.map(lambda more: {Kind.HOURS: last_life + more - 100}))
    from_entry = done[-1].entry_id if done else None
    return (Deferral(1, last_day, from_entry, "parts", "Fenn", by_day, by_figure, cap if by_day is not None else {}),)


def origins(use: Use) -> st.SearchStrategy[Origin | None]:
    """New at the first day, done then, or not known."""
    on, life = use.points[0]
    return st.sampled_from([Origin(True, on, {Kind.HOURS: life}), Origin(False, on, {Kind.HOURS: life}), None])


@st.composite
def items(draw: st.DrawFn) -> Item:
    """An engine with duty factors in force all its life, laid up for a while now and then."""
    found = [
        DutyFactor(kind, draw(factors), FIRST, "dust") for kind in (Kind.HOURS, Kind.CALENDAR) if draw(st.booleans())
    ]
    spells: tuple[StatusSpell, ...] = ()
    if draw(st.booleans()):
        begins = draw(st.dates(FIRST, date(2026, 12, 31)))
        spells = (
            StatusSpell(Status.LAID_UP, begins),
            StatusSpell(Status.IN_SERVICE, begins + timedelta(days=draw(st.integers(0, 300)))),
        )
    return Item(1, "P-01", True, in_service_on=FIRST, as_new=True, spells=spells, factors=tuple(found))


def facts_of(item: Item, tasks: tuple[Task, ...], done: dict[int, tuple[Done, ...]], use: Use, on: date) -> ItemFacts:
    """An item's facts on a day, its meter read on each day of its use."""
    rows = tuple(Reading(n, METER.id, when, life) for n, (when, life) in enumerate(use.points, 1))
    counter = Counter(Kind.HOURS, Decimal(0), (MeterFit(METER, None, Decimal(0)),), rows)
    start = {Kind.HOURS: use.points[0][1]}
    return ItemFacts(item, tasks, done, {Kind.HOURS: counter_history(counter, on)}, start, on=on)


@st.composite
def item_facts(draw: st.DrawFn, with_deferrals: bool = True) -> ItemFacts:
    """An item with one to three tasks, each of which may cover those after it, as of a day after its last reading."""
    use = draw(uses())
    count = draw(st.sampled_from([1, 2, 2, 3]))
    tasks, done = [], {}
    for number in range(1, count + 1):
        covers = tuple(n for n in range(number + 1, count + 1) if draw(st.booleans()))
        done[number] = draw(works(use))
        task = Task(number, f"Task {number}", (draw(versions(covers)),), origin=draw(origins(use)))
        tasks.append(replace(task, deferrals=draw(deferrals(use, done[number]))) if with_deferrals else task)
    on = use.last[0] + timedelta(days=draw(st.integers(0, 200)))
    return facts_of(draw(items()), tuple(tasks), done, use, on)
