"""Sheets in the file pull the next check forward, in the due list and in every answer that shows the line."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.context import Context
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.work import DeferralDraft, LogDraft
from fleetcare.errors import Refused
from fleetcare.operations.deferrals import defer
from fleetcare.operations.due import DueRow, due_rows, watch_moves
from fleetcare.operations.find import find_item
from fleetcare.operations.load import item_facts
from fleetcare.operations.measure import measure
from fleetcare.operations.page import full_page
from fleetcare.operations.show import task_working
from tests.cli.conftest import set_up
from tests.operations.importing import TODAY, correct, engine, log, reading, task
from tests.operations.sheet_yard import FOUND_IN, LASH, do, sheet, take, yard_with_valves

CLOSING = dict(
    zip(
        ("2024-05-01", "2024-11-01", "2025-05-01", "2025-11-01", "2026-05-01"),
        ("0.49", "0.47", "0.45", "0.43", "0.411"),
        strict=True,
    )
)
"""Exhaust 2 of P-01 at 500, 750, 1000, 1250 and 1500 h: 0.079 mm in 1000 h, 0.40 mm at about 1632 h."""


def closing(ctx: Context, **plate: object) -> Context:
    """P-01, whose lash was last done at 1000 h and is due again at 2000, while its exhaust 2 closes."""
    yard_with_valves(ctx, **plate)
    for number, on in enumerate(list(CLOSING)[:-1]):
        reading(ctx, "P-01", on, str(500 + 250 * number))
    for on, gap in CLOSING.items():
        rows = (*FOUND_IN[:3], f"lash,2E,found,{gap},")
        if on == "2025-05-01":
            do(ctx, "Lash", rows=rows, on=on, when="cold")
        else:
            take(ctx, *rows, on=on, when="cold")
    return ctx


def lash(ctx: Context, on: date = TODAY, name: str = "Lash") -> DueRow:
    with ctx.read() as connection:
        return next(row for row in due_rows(connection, on) if row.task == name)


def is_pulled(ctx: Context, on: date = TODAY) -> bool:
    return lash(ctx, on).reason.startswith("pulled forward")


def test_a_closing_valve_pulls_its_line_forward_and_the_own_point_stays(ctx: Context) -> None:
    row = lash(closing(ctx))
    assert row.own_due_at == 2000
    assert row.next_due_at is not None
    assert 1600 < row.next_due_at < 1632
    assert row.state == "clear"
    assert row.reason.startswith("pulled forward: 2E reaches 0.40 mm by 16")


def test_other_tasks_of_the_engine_stay_where_they_were(ctx: Context) -> None:
    log(closing(ctx), "2026-05-01", "Oil")
    row = lash(ctx, name="Oil")
    assert (row.next_due_at, row.reason) == (row.own_due_at, "")


def test_as_of_a_day_before_the_last_sheets_nothing_is_pulled_yet(ctx: Context) -> None:
    assert not is_pulled(closing(ctx), date(2025, 10, 1))


def test_the_next_sheet_of_the_task_ends_the_pull(ctx: Context) -> None:
    set_now = (*FOUND_IN[:3], "lash,2E,found,0.411,", "lash,2E,left,0.48,")
    do(closing(ctx), "Lash", rows=set_now, when="cold")
    row = lash(ctx)
    assert (row.next_due_at, row.own_due_at, row.reason) == (Decimal(2500), Decimal(2500), "")


def test_a_sheet_taken_back_no_longer_pulls(ctx: Context) -> None:
    before = lash(closing(ctx)).next_due_at
    correct(ctx, 5, void=True, why="other engine")
    assert lash(ctx).next_due_at != before


def test_a_sheet_entered_says_which_line_it_moved(ctx: Context) -> None:
    closing(ctx)
    with ctx.write() as session, watch_moves(session, "P-01", TODAY) as moves:
        rows = (*FOUND_IN[:3], "lash,2E,found,0.400,")
        measure(session, read_draft(LogDraft, {"tag": "P-01", "on": "2026-05-01", "sheet": sheet(*rows)}), TODAY)
    assert [(moved.after.task, moved.after.own_due_at) for moved in moves.moved if moved.after] == [
        ("Lash", Decimal(2000))
    ]


@pytest.mark.parametrize(("on", "holds"), [("2026-05-01", True), ("2026-04-30", False)])
def test_a_deferral_holds_against_sheets_up_to_its_day_and_a_later_one_pulls_again(
    ctx: Context, on: str, holds: bool
) -> None:
    closing(ctx)
    put_off(ctx, "2100", on)
    assert is_pulled(ctx) is not holds
    assert (lash(ctx).next_due_at == 2100) is holds
    assert lash(ctx).reason.endswith("parts")


def put_off(ctx: Context, until: str, on: str = "2026-05-01") -> None:
    with ctx.write() as session:
        given = {"tag": "P-01", "task": "Lash", "until": [until], "why": "parts", "by": "Fenn", "on": on}
        defer(session, read_draft(DeferralDraft, given))


def test_a_pulled_line_can_be_put_off_to_before_its_own_point_but_not_to_before_the_pulled_one(ctx: Context) -> None:
    closing(ctx)
    with pytest.raises(Refused, match="1600 does not lie after the due point of 16"):
        put_off(ctx, "1600")
    put_off(ctx, "1700")
    row = lash(ctx)
    assert (row.next_due_at, row.own_due_at, row.reason) == (Decimal(1700), Decimal(2000), "parts")


def test_a_pulled_line_put_off_to_a_day_is_capped_by_what_the_meter_likely_shows_then(ctx: Context) -> None:
    closing(ctx)
    put_off(ctx, "2026-08-01")
    row = lash(ctx)
    assert row.next_due_at is not None
    assert 1610 < row.next_due_at < 1650  # 250 h in half a year: 125 h in three months
    assert row.next_due_on == date(2026, 8, 1)


def test_the_page_the_working_and_the_due_list_tell_the_same_projection(ctx: Context) -> None:
    row = lash(closing(ctx))
    with ctx.read() as connection:
        working = dict(task_working(connection, "P-01", "Lash", TODAY)[0])
        point = next(one for one in full_page(connection, "P-01", TODAY).lash.rows if one.name == "2E")
    reached = row.reason.removeprefix("pulled forward: 2E ")
    assert reached in working["pulled forward"]
    assert reached in point.said
    assert point.ahead is not None
    assert point.ahead.start.x == 1500
    assert point.ahead.limit == 0.40
    assert point.ahead.early < point.ahead.likely < point.ahead.late


def test_engines_without_a_gap_without_cylinders_or_without_hours_are_passed_over(ctx: Context) -> None:
    closing(ctx)
    engine(ctx, "P-02", meter=["distance"], start_at=["100km"], in_service="2024-01-01", cylinders=2, **LASH)
    task(ctx, "P-02", "Lash", every=["1000km"], needs_sheet="lash")
    set_up(ctx.path, "engine edit P-01 --adjuster hydraulic")
    assert not is_pulled(ctx)


def test_the_trends_of_an_engine_no_task_measures_by_hours_say_so(ctx: Context) -> None:
    closing(ctx)
    with ctx.write() as session:
        session.connection().exec_driver_sql("update task_trigger set kind = 'starts'")
    with ctx.read() as connection:
        rows = full_page(connection, "P-01", TODAY).lash.rows
    assert "Not projected: no task measures it again by hours." in rows[-1].said
    assert rows[-1].ahead is None


def test_the_trends_of_a_line_that_is_unset_say_so(ctx: Context) -> None:
    take(yard_with_valves(ctx), *FOUND_IN, when="cold")
    assert "Not projected: Lash is unset." in said_of_first_point(ctx)


def said_of_first_point(ctx: Context) -> str:
    with ctx.read() as connection:
        return full_page(connection, "P-01", TODAY).lash.rows[0].said


def test_the_trends_of_work_done_since_without_a_sheet_say_so(ctx: Context) -> None:
    engine(ctx, "P-01", meter=["hours"], cylinders=2, **LASH)
    reading(ctx, "P-01", "2026-04-01", "1400")
    task(ctx, "P-01", "Gap", every=["500h"], work="lash")
    take(ctx, *FOUND_IN, on="2026-04-01", when="cold")
    log(ctx, "2026-05-01", "Gap", at=["1500h"])
    assert "Not projected: Gap was done since without a sheet." in said_of_first_point(ctx)


def test_facts_of_an_engine_hold_a_wear_for_each_point(ctx: Context) -> None:
    closing(ctx)
    with ctx.read() as connection:
        facts = item_facts(connection, TODAY, [find_item(connection, "P-01").id])[0]
    assert [wear.subject for wear in facts.wears] == ["1I", "1E", "2I", "2E"]
    assert len(facts.wears[-1].segments[0].points) == 5
