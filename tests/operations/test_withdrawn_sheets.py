"""Sheets of an engine that was withdrawn by the time they come."""

from datetime import date

import pytest

from fleetcare.context import Context
from fleetcare.domain.engines import Status
from fleetcare.operations.find import find_item
from fleetcare.operations.measured import load_engine_sheets
from fleetcare.operations.rows import fetch
from fleetcare.operations.spells import change_status
from tests.operations.importing import engine, log
from tests.operations.measure_yard import take, yard_of_four
from tests.operations.sheet_yard import refused


@pytest.fixture
def yard(ctx: Context) -> Context:
    """P-01 of four cylinders, nothing measured yet."""
    return yard_of_four(ctx)


def withdraw(ctx: Context, on: str) -> None:
    """Sell P-01."""
    with ctx.write() as session:
        item = find_item(session.connection(), "P-01")
        change_status(session, item, Status.WITHDRAWN, date.fromisoformat(on), why="sold")


def test_results_that_come_after_an_engine_was_withdrawn_are_taken_for_it(yard: Context) -> None:
    withdraw(yard, "2026-04-25")
    take(yard, "oil", on="2026-04-20", received="2026-04-30")
    with yard.read() as connection:
        assert [one.engine.tag for one in load_engine_sheets(connection, date(2026, 4, 24))] == ["P-01"]
    assert refused(yard, lambda ctx: take(ctx, "oil", on="2026-04-25")) == [
        "P-01 is withdrawn since 2026-04-25; add it anew with fleetcare engine add"
    ]


def test_a_sheet_belongs_to_the_engine_that_had_the_tag_on_its_day(yard: Context) -> None:
    withdraw(yard, "2026-04-25")
    engine(yard, "P-01", meter=["hours"], cylinders=6, fuel="diesel")
    take(yard, "oil", on="2026-04-20", received="2026-04-30")
    take(yard, "oil", on="2026-04-28")
    with yard.read() as connection:
        found = fetch(connection, "select taken_on, item_id from sheet order by id")
    assert [tuple(row) for row in found] == [("2026-04-20", 1), ("2026-04-28", 2)]


def test_work_goes_to_the_engine_that_has_the_tag_now(yard: Context) -> None:
    withdraw(yard, "2026-04-25")
    engine(yard, "P-01", meter=["hours"], cylinders=6, fuel="diesel")
    entry = log(yard, "2026-04-20", note="looked at")
    with yard.read() as connection:
        assert fetch(connection, "select item_id from log_entry where id = :id", id=entry)[0][0] == 2
