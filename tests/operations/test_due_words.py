"""A row of the due list in words: the same on the screen and in the table."""

from dataclasses import replace
from datetime import date
from decimal import Decimal

import pytest

from fleetcare.operations.due import DueRow
from fleetcare.operations.due_words import (
    Group,
    group_of,
    grouped,
    notes,
    say_counted,
    say_dial,
    say_due,
    say_likely,
    say_remaining,
)
from fleetcare.rules.due.row import due_row
from tests.builders import a_task, every, facts, line, new_at


def a_row(**changes: object) -> DueRow:
    """The row of an oil change every 250 h of a new engine read at 262 h on 1 May 2026: 12 h over."""
    task = a_task(every("250h"), origin=new_at(0))
    row = due_row(line(task, on="2026-05-01", hours=262), facts(task, on="2026-05-01", hours=262))
    return replace(row, **changes)  # type: ignore[arg-type]


def test_an_overrun_is_said_in_the_terms_of_the_dial() -> None:
    assert say_due(a_row()) == "due at 250 h on the dial, 12 h over"


def test_a_point_on_a_later_meter_gives_dial_and_life() -> None:
    row = a_row(next_due_dial=Decimal("593.1"), next_due_at=Decimal("4959.64"))
    assert say_counted(row) == "593.1 h on the dial (4959.6 h of life)"
    assert say_dial(row) == "593.1 h"
    assert say_due(row) == "due at 593.1 h on the dial (4959.6 h of life), 12 h over"


def test_a_point_no_dial_comes_to_is_given_as_life_alone() -> None:
    row = a_row(next_due_dial=None)
    assert say_counted(row) == say_dial(row) == "250 h of life"


def test_the_deciding_trigger_is_said_first() -> None:
    by_day = {"next_due_on": date(2026, 4, 20), "trigger": "calendar", "unit": "d", "remaining": Decimal(-11)}
    assert say_due(a_row(**by_day)) == "due on 2026-04-20, 11 d over; due at 250 h on the dial"
    assert say_due(a_row(next_due_on=date(2027, 4, 20))) == "due at 250 h on the dial, 12 h over; due on 2027-04-20"


def test_a_row_without_a_point_gives_its_state() -> None:
    row = a_row(state="unset", next_due_at=None, next_due_dial=None, remaining=None)
    assert (say_due(row), say_counted(row), say_dial(row), say_remaining(row)) == ("unset", "", "", "")


def test_a_remainder_is_never_rounded_away() -> None:
    assert say_remaining(a_row(remaining=Decimal("-0.04"))) == "under 0.1 h over"


def test_a_likely_day_comes_with_its_range_and_an_open_end_is_said() -> None:
    days = {"early_date": date(2026, 5, 20), "likely_date": date(2026, 6, 1), "late_date": None}
    row = a_row(remaining=Decimal(40), **days)
    assert say_likely(row) == "likely 2026-06-01 (2026-05-20 to open)"


def test_no_likely_day_is_said_of_a_calendar_day_or_of_what_is_past_its_point() -> None:
    row = a_row(likely_date=date(2026, 6, 1), remaining=Decimal(40))
    assert say_likely(replace(row, unit="d")) == ""
    assert say_likely(replace(row, remaining=Decimal(-1))) == ""
    assert say_likely(replace(row, likely_date=None)) == ""


@pytest.mark.parametrize(
    ("changes", "group"),
    [
        ({}, Group.OVERDUE),
        ({"state": "near"}, Group.NEAR),
        ({"state": "near", "estimated": "due"}, Group.PROBABLY),
        ({"state": "overdue", "estimated": "overdue"}, Group.OVERDUE),
        ({"engine_status": "laid up"}, Group.BEFORE_RETURN),
        ({"state": "unset"}, Group.UNSET),
        ({"state": "clear", "engine_status": "stood down"}, Group.CLEAR),
    ],
)
def test_a_row_stands_in_one_group_of_the_morning(changes: dict[str, object], group: Group) -> None:
    row = a_row(**changes)
    assert group_of(row) is group
    assert [name for name, rows in grouped([row]).items() if rows] == [group]


def test_whatever_else_bears_on_a_row_stands_in_its_notes() -> None:
    row = a_row(
        engine_status="stood down",
        estimated="overdue",
        deferred_until="2026-05-09",
        covered_by="Full service",
        reason="on order",
    )
    assert notes(row) == [
        "stood down: not to be run",
        "by estimate overdue",
        "deferred until 2026-05-09",
        "with Full service",
        "on order",
    ]
    assert notes(a_row(engine_status="laid up")) == ["overdue"]
    assert notes(a_row()) == []
