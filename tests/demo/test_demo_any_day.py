"""On whatever day the demo fleet is built for, it shows every state, anchor, deferral and form of calendar.

Told without a database, from the history's steps; that these are the facts the database gives is held on some days.
"""

from collections.abc import Iterable
from datetime import date, timedelta

import pytest

from fleetcare.context import Context
from fleetcare.demo.fleet import ITEMS
from fleetcare.demo.history import history
from fleetcare.demo.odd import MISREAD, MISTYPED
from fleetcare.demo.steps import Verb
from fleetcare.demo.yard import CHANGEOVER
from fleetcare.domain.lines import DueLine, State
from fleetcare.operations.load import item_facts
from tests.demo.features import ANY_DAY, Stand, missing, stand_of
from tests.demo.pure_facts import pure_facts
from tests.demo.test_demo_fleet import ANCHOR, COMMITTED

WITNESSES = {"EX-1", "LD-1", "MP-2", "PH-1", "PH-2", "PK-1", "PS-04", "PS-08", "SB-05", "SB-06", "TR-1", "WB-1"}
"""Plain items that between them show everything."""

PLAIN = WITNESSES | {
    "CH-1",
    "CP-1",
    "EX-2",
    "PS-09",
    "PS-10",
    "TH-1",
    "TR-2",
    "TR-4",
    "VN-2",
    "WB-1S",
    "WB-2",
    "WL-1",
}
"""All items whose facts can be told without a database."""

MONTHS = [date(2027, month, 1) for month in range(1, 13)]


def stand_without_database(anchor: date, tags: set[str] = WITNESSES, *, recorded_only: bool = False) -> Stand:
    """Give how some plain items stand on an anchor day."""
    items = [item for item in ITEMS if item.tag in tags]
    return stand_of(pure_facts(history(anchor, items), anchor), recorded_only)


def days_of(month: date) -> Iterable[date]:
    """Give the days of a month; of February those of a leap year."""
    first = month if month.month != 2 else date(2028, 2, 1)
    return (first + timedelta(days=n) for n in range(31) if (first + timedelta(days=n)).month == first.month)


@pytest.mark.parametrize("month", MONTHS, ids=lambda month: f"{month:%B}")
def test_on_every_day_of_the_year_each_state_anchor_deferral_and_calendar_form_is_there(month: date) -> None:
    stands = {day: stand_without_database(day, recorded_only=True) for day in days_of(month)}
    assert {day: gone for day, stand in stands.items() if (gone := missing(stand, ANY_DAY))} == {}


def told(lines: Iterable[DueLine]) -> set[tuple[object, ...]]:
    """Give what is compared of lines: how each stands, by what, and what a deferral makes of it."""
    return {
        (
            line.item.tag,
            line.task.name,
            line.state,
            line.estimated,
            line.likely_on,
            line.last_done_on,
            line.covered_by,
            line.deferral_ended,
            *((t.kind, t.own, t.point, t.remaining, t.state) for t in line.triggers),
        )
        for line in lines
    }


def test_the_facts_told_without_a_database_give_the_same_lines_as_those_of_the_database() -> None:
    with Context(str(COMMITTED), ANCHOR).read() as connection:
        facts = [each for each in item_facts(connection, ANCHOR) if each.item.tag in PLAIN]
    assert told(stand_without_database(ANCHOR, PLAIN).lines) == told(stand_of(facts).lines)


@pytest.mark.parametrize("month", MONTHS, ids=lambda month: f"{month:%B}")
def test_in_every_month_a_meter_long_unread_makes_a_line_worse_by_estimate_than_by_record(month: date) -> None:
    assert any(
        line.state is State.NEAR and line.estimated is State.OVERDUE
        for line in stand_without_database(month, {"EX-2"}).lines
    )


@pytest.mark.parametrize("month", MONTHS, ids=lambda month: f"{month:%B}")
def test_nothing_is_entered_before_it_happened_nor_after_the_anchor_day(month: date) -> None:
    assert [step for step in history(month) if not step.on <= step.entered <= month] == []


@pytest.mark.parametrize("month", MONTHS, ids=lambda month: f"{month:%B}")
def test_a_misread_or_mistyped_figure_is_entered_on_its_day_and_not_with_the_card_index(month: date) -> None:
    items = [item for item in ITEMS if item.tag in {MISTYPED, MISREAD}]
    for anchor in days_of(month):
        odd = [step for step in history(anchor, items) if step.verb in {Verb.READING, Verb.VOID_READING}]
        assert len(odd) == 4
        assert all(anchor - timedelta(days=CHANGEOVER) <= step.on == step.entered for step in odd)
