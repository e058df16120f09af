"""Laws of pulled checks, whatever was measured and however the line stands."""

from dataclasses import replace
from decimal import Decimal

from hypothesis import given
from hypothesis import strategies as st

from fleetcare.domain.lines import DueLine
from fleetcare.domain.quantities import Kind
from fleetcare.domain.trends import End, Point, Segment
from fleetcare.domain.wear import Wear
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.next_checks import with_its_chance
from tests.property.strategies import item_facts


@st.composite
def wears(draw: st.DrawFn, known: ItemFacts) -> Wear:
    """A lash point measured some times up to the latest reading, closing towards a limit not far off."""
    latest = known.counters[Kind.HOURS].latest
    until = latest.life if latest is not None else Decimal(1000)
    count = draw(st.integers(1, 7))
    intervals = [t.interval for task in known.tasks for t in task.versions[0].counted if t.kind is Kind.HOURS]
    apart = max(intervals, default=Decimal(100)) * draw(st.decimals("0.1", "0.6", places=1))
    step = draw(st.decimals("0.005", "0.05", places=3))
    noise = st.decimals("-0.2", "0.2", places=2)
    points = tuple(
        Point(until + apart * (n - 7), Decimal("0.9") - step * (n + draw(noise))) for n in range(8 - count, 8)
    )
    low = Decimal("0.9") - step * (7 + draw(st.decimals("0.1", "3", places=1)))
    limits = {End.LOW: low, End.HIGH: Decimal(1)}
    return Wear("lash", "1E", Kind.HOURS, "mm", (Segment(points),), limits, known.on)


@st.composite
def measured_items(draw: st.DrawFn) -> ItemFacts:
    """An item of any shape, some of whose tasks are about its lash, with what was measured."""
    known = draw(item_facts())
    tasks = tuple(
        replace(task, versions=tuple(replace(version, work="lash") for version in task.versions))
        if draw(st.booleans())
        else task
        for task in known.tasks
    )
    known = replace(known, tasks=tasks)
    return replace(known, wears=tuple(draw(st.lists(wears(known), max_size=3))))


def both(known: ItemFacts) -> list[tuple[DueLine, DueLine]]:
    """Each line without what was measured and with it."""
    without = item_lines(replace(known, wears=()), recorded_only=True)
    return list(zip(without, item_lines(known, recorded_only=True), strict=True))


@given(measured_items())
def test_a_pull_never_makes_a_line_later_or_milder(known: ItemFacts) -> None:
    """Neither its state nor any point in force."""
    for before, after in both(known):
        assert after.state.rank <= before.state.rank
        for was, now in zip(before.triggers, after.triggers, strict=True):
            assert now.state.rank <= was.state.rank
            if now.pull is not None:
                assert isinstance(now.point, Decimal)
                assert isinstance(was.point, Decimal)
                assert now.point < was.point
            else:
                assert now == was


@given(measured_items())
def test_a_pull_changes_neither_own_points_nor_what_the_past_was_held_against(known: ItemFacts) -> None:
    """Overruns come from the replay alone."""
    for before, after in both(known):
        assert [trigger.own for trigger in after.triggers] == [trigger.own for trigger in before.triggers]
        assert after.past == before.past


@given(measured_items())
def test_a_pull_lies_at_or_after_the_last_value_and_moves_only_what_measures_it(known: ItemFacts) -> None:
    """And never a trigger that counts something else."""
    for _, line in both(known):
        for trigger in line.triggers:
            if trigger.pull is not None:
                assert trigger.kind is Kind.HOURS
                assert "lash" in {line.version.work, line.version.needs_sheet}
                assert trigger.pull.at >= trigger.pull.wear.segments[-1].points[-1].x


@given(measured_items())
def test_the_order_of_what_was_measured_never_matters(known: ItemFacts) -> None:
    """The earliest pulls, whoever was measured first."""
    turned = replace(known, wears=known.wears[::-1])
    points = [[trigger.point for trigger in line.triggers] for _, line in both(known)]
    assert [[trigger.point for trigger in line.triggers] for _, line in both(turned)] == points


@given(measured_items())
def test_what_is_said_beforehand_not_to_pull_never_would_have(known: ItemFacts) -> None:
    """Lines are the same, whether it was said or each projection is worked out."""
    said = replace(known, wears=tuple(map(with_its_chance, known.wears)))
    points = [[trigger.point for trigger in line.triggers] for _, line in both(known)]
    assert [[trigger.point for trigger in line.triggers] for _, line in both(said)] == points
