"""Every figure typed is what a dial showed on its day: what becomes of the meter later does not change what it meant."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.context import Context
from fleetcare.drafts.items import EngineDraft
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.tasks import TaskDraft
from fleetcare.drafts.work import DeferralDraft, ReadingDraft
from fleetcare.operations.deferrals import defer
from fleetcare.operations.due import DueRow, due_rows
from fleetcare.operations.find import find_item
from fleetcare.operations.items import add_item
from fleetcare.operations.readings import record_reading
from fleetcare.operations.tasks import add_task, edit_task

BEFORE, SWAP, AFTER = date(2026, 1, 5), date(2026, 3, 1), date(2026, 3, 2)


def engine(ctx: Context, *, meter: str = "hours", digits: str = "", start: str = "100") -> None:
    """Add P-01, in service for years, not counted as new."""
    values = {"tag": "P-01", "meter": [meter], "meter_digits": digits, "in_service": "2020-01-10", "start_at": start}
    with ctx.write() as session:
        add_item(session, read_draft(EngineDraft, values), BEFORE)


def task(ctx: Context, on: date = BEFORE, **values: object) -> None:
    """Add the task Oil to P-01."""
    with ctx.write() as session:
        item = find_item(session.connection(), "P-01")
        add_task(session, item, read_draft(TaskDraft, {"name": "Oil", **values}), on)


def reading(ctx: Context, value: str, on: date, **values: object) -> None:
    """Read the meter of P-01."""
    with ctx.write() as session:
        record_reading(session, read_draft(ReadingDraft, {"tag": "P-01", "value": value, "on": on, **values}))


def new_meter(ctx: Context) -> None:
    """Stop the meter at 4980; the new one begins at 0 after 150 h without one."""
    reading(ctx, "0", SWAP, replaced=["4980", "0"], unmetered="150h")


def line(ctx: Context, on: date = AFTER) -> DueRow:
    """The one line there is."""
    with ctx.read() as connection:
        (row,) = due_rows(connection, on)
    return row


def test_a_last_done_without_a_day_stays_a_figure_of_the_meter_it_was_read_off(ctx: Context) -> None:
    engine(ctx)
    reading(ctx, "4950", BEFORE)
    task(ctx, every=["250h"], last_done=["4900h"])
    new_meter(ctx)
    assert (line(ctx).next_due_at, line(ctx).next_due_dial) == (Decimal(5150), Decimal(20))


def test_a_last_done_without_a_day_lies_before_a_turn_of_the_dial_that_came_later(ctx: Context) -> None:
    engine(ctx, digits="4.0", start="100")
    reading(ctx, "9950", BEFORE)
    task(ctx, every=["250h"], last_done=["9900h"])
    reading(ctx, "10", SWAP, rolled_over=True)
    assert (line(ctx).next_due_at, line(ctx).next_due_dial) == (Decimal(10150), Decimal(150))


def test_the_origin_of_a_grid_is_a_dial_figure_of_the_day_it_was_typed(ctx: Context) -> None:
    engine(ctx)
    reading(ctx, "4950", BEFORE)
    new_meter(ctx)
    task(ctx, AFTER, every=["500h"], anchor="on-grid", grid_origin=["0"], last_done=["0"])
    assert (line(ctx).next_due_at, line(ctx).next_due_dial) == (Decimal(5630), Decimal(500))


def test_an_edit_that_leaves_the_grid_alone_leaves_its_origin_where_it_was(ctx: Context) -> None:
    engine(ctx)
    reading(ctx, "4950", BEFORE)
    task(ctx, every=["500h"], anchor="on-grid", grid_origin=["4750"], last_done=["4900"])
    new_meter(ctx)
    with ctx.write() as session:
        edit_task(session, find_item(session.connection(), "P-01"), "Oil", {"labour": "2h"}, (), AFTER, AFTER)
    assert line(ctx).next_due_at == Decimal(5250)


@pytest.mark.parametrize("until", ["1100mi", "1770.2784km"])
def test_a_deferral_means_the_same_figure_in_any_unit_of_its_kind(ctx: Context, until: str) -> None:
    engine(ctx, meter="distance:mi", start="100")
    reading(ctx, "900", BEFORE)
    task(ctx, every=["500mi"], last_done=["500mi"])
    with ctx.write() as session:
        values = {"tag": "P-01", "task": "Oil", "until": [until], "why": "no parts", "by": "Fenn", "on": BEFORE}
        defer(session, read_draft(DeferralDraft, values))
    assert line(ctx, BEFORE).next_due_at == Decimal(1100)
