"""Laws of due points: where they lie after the work, in any unit, under any duty factor, month by month."""

from dataclasses import replace
from datetime import date, timedelta
from decimal import Decimal

from hypothesis import assume, given
from hypothesis import strategies as st

from fleetcare.domain.log import Done
from fleetcare.domain.meters import Counter, Meter, MeterFit, Reading
from fleetcare.domain.quantities import Kind, to_base
from fleetcare.domain.schedules import Anchor, CalendarTrigger, CountedTrigger, Task, TaskVersion
from fleetcare.rules.due.calendar import shorten
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.triggers import CalendarMark, CountedMark, calendar_next, counted_next
from fleetcare.rules.meters import counter_history
from tests.builders import a_task, an_item, every, facts, last_done
from tests.property.strategies import (
    FIRST,
    calendar_triggers,
    counted_triggers,
    days,
    factors,
    figures,
    spans,
)

# Units


@st.composite
def typed_figures(draw: st.DrawFn) -> dict[str, Decimal]:
    """An interval, its ahead and grace, and what the dial read when it was done and now: bare numbers."""
    interval = draw(figures)
    done_at = draw(figures)
    return {
        "interval": interval,
        "first": draw(figures),
        "ahead": interval * draw(st.integers(0, 99)) / 100,
        "grace": draw(figures),
        "done_at": done_at,
        "now": done_at + draw(figures),
    }


@given(typed_figures(), st.sampled_from([("km", "mi"), ("L", "galus"), ("L", "galimp")]), st.sampled_from(Anchor))
def test_the_same_figures_mean_the_same_in_any_unit(
    typed: dict[str, Decimal], units: tuple[str, str], anchor: Anchor
) -> None:
    """Miles or kilometres, litres or gallons: state, remaining share and the dial at which it is due are alike."""
    seen = []
    for unit in units:
        kind = Kind.DISTANCE if units[0] == "km" else Kind.FUEL
        base = {name: to_base(figure, unit) for name, figure in typed.items()}
        trigger = CountedTrigger(kind, base["interval"], base["first"], base["ahead"], base["grace"])
        meter = Meter(1, kind, unit)
        rows = (Reading(1, 1, FIRST, typed["done_at"]), Reading(2, 1, FIRST + timedelta(days=9), typed["now"]))
        counter = Counter(kind, Decimal(0), (MeterFit(meter, None, Decimal(0)),), rows)
        task = a_task(trigger, anchor=anchor, origin=last_done(**{kind.value: str(base["done_at"])}))
        known = facts(task, on="2024-06-01", item=an_item())
        (line,) = item_lines(replace(known, counters={kind: counter_history(counter, known.on)}))
        (only,) = line.triggers
        assert isinstance(only.point, Decimal)
        assert only.share is not None
        dial = counter_history(counter, known.on).dial_of(only.point)
        assert dial is not None
        seen.append((line.state, round(only.share, 20), round(dial, 15)))
    assert seen[0] == seen[1]


# Points


@given(counted_triggers(), figures, figures | st.none(), st.sampled_from(Anchor), figures)
def test_a_counted_point_lies_after_the_work_by_at_most_an_interval_and_early_credit(
    trigger: CountedTrigger, done: Decimal, own: Decimal | None, anchor: Anchor, origin: Decimal
) -> None:
    """On a grid it is a multiple of the interval; nothing passed lies at or after it."""
    found = counted_next(trigger, CountedMark(done, own), anchor, Decimal(1), origin)
    assert isinstance(found.point, Decimal)
    credit = trigger.interval / 4 if anchor is Anchor.ON_GRID else 0
    assert done < found.point <= done + trigger.interval + credit
    if anchor is Anchor.ON_GRID:
        assert (found.point - origin) % trigger.interval == 0
    assert all(isinstance(point, Decimal) and point < found.point for point in found.passed)


@given(counted_triggers(), figures, figures, factors, factors, st.sampled_from([Anchor.FROM_DONE, Anchor.FROM_DUE]))
def test_a_lower_duty_factor_never_makes_a_counted_point_later(
    trigger: CountedTrigger, done: Decimal, own: Decimal, one: Decimal, other: Decimal, anchor: Anchor
) -> None:
    """Unless whole intervals were missed, of which a shorter one may fit in more."""
    low, high = sorted((one, other))
    sooner, later = (counted_next(trigger, CountedMark(done, own), anchor, f, Decimal(0)) for f in (low, high))
    assume(not sooner.passed)
    assert sooner.point <= later.point  # type: ignore[operator]


@given(spans, days, factors, factors)
def test_a_lower_duty_factor_never_makes_a_calendar_point_later(
    span: object, done: date, one: Decimal, other: Decimal
) -> None:
    """Whole months and days, rounded down, never below one."""
    trigger = CalendarTrigger(span)  # type: ignore[arg-type]
    low, high = sorted((one, other))
    sooner, later = (calendar_next(trigger, CalendarMark(done), Anchor.FROM_DONE, f, done)[0] for f in (low, high))
    assert done < sooner.point <= later.point  # type: ignore[operator]
    shortest = shorten(trigger.interval, low)
    assert shortest.count >= 1


@given(st.integers(1, 36), days, st.lists(st.integers(0, 20), max_size=6), st.booleans())
def test_so_many_months_never_skip_a_month(months: int, start: date, late: list[int], through_end: bool) -> None:
    """Done on its day or days late within the month, each point lies so many months after the one before."""
    trigger = CalendarTrigger(every(f"{months}mo").interval, month_end=through_end)  # type: ignore[arg-type]
    mark = CalendarMark(start)
    for delay in late:
        found, chain = calendar_next(trigger, mark, Anchor.FROM_DUE, Decimal(1), start)
        assert isinstance(found.point, date)
        assert month_of(found.point) == month_of(mark.own or mark.done) + months
        done = found.point + timedelta(days=delay)
        assume(month_of(done) == month_of(found.point))
        mark = CalendarMark(done, found.point, chain)


def month_of(day: date) -> int:
    return 12 * day.year + day.month


@given(calendar_triggers(), days, days)
def test_the_first_calendar_point_lies_after_the_day_it_counts_from(
    trigger: CalendarTrigger, done: date, origin: date
) -> None:
    """Whatever the anchor and the form, and a window opens before its last day."""
    assume(trigger.once_each is None)
    for anchor in Anchor:
        found, _ = calendar_next(trigger, CalendarMark(done), anchor, Decimal(1), origin)
        assert isinstance(found.point, date)
        assert found.point > done
        assert found.opens is None or found.opens < found.point


@given(days, st.lists(st.integers(1, 60), min_size=1, max_size=5))
def test_work_before_its_window_leaves_the_line_as_it_was(start: date, gaps: list[int]) -> None:
    """However often it is done early, point and state stay."""
    task = Task(1, "Oil", (TaskVersion(FIRST, (CalendarTrigger(every("1y").interval, window_days=30),)),))  # type: ignore[arg-type]
    task = replace(task, origin=last_done(start.isoformat()))
    on = (start + timedelta(days=sum(gaps))).isoformat()
    assume(sum(gaps) < 365 - 31)
    early = [Done(n, n, start + timedelta(days=sum(gaps[:n]))) for n in range(1, len(gaps) + 1)]
    (before,) = item_lines(facts(task, on=on))
    (after,) = item_lines(facts(task, on=on, done=early))
    assert replace(after, past=()) == before
