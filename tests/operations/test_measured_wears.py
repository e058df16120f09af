"""Compression and oil sheets in the file pull the next check forward, and say how much longer a sound oil could stay in."""

import sqlite3
from contextlib import closing
from datetime import date
from decimal import Decimal

import pytest

from fleetcare.context import Context
from fleetcare.db.tables import ShopRules
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.work import DeferralDraft
from fleetcare.operations import judged
from fleetcare.operations.deferrals import defer
from fleetcare.operations.due import DueRow, due_rows
from fleetcare.operations.find import find_engine, find_item
from fleetcare.operations.items import fit_engine
from fleetcare.operations.kept_wears import kept_wears
from fleetcare.operations.load import item_facts
from fleetcare.operations.names import person_id
from fleetcare.operations.show import task_working
from fleetcare.operations.wears_json import WEARS_FORM
from tests.operations.importing import TODAY, engine, log, machine, reading, task
from tests.operations.measure_yard import take

DAYS = ("2025-09-01", "2025-12-01", "2026-01-01", "2026-02-01", "2026-03-01", "2026-04-01", "2026-05-01")
HOURS = ("1000", "1100", "1200", "1300", "1400", "1500", "1600")


def yard(ctx: Context) -> Context:
    """P-01 of four cylinders, run 100 h a month."""
    plate = {"cylinders": 4, "fuel": "diesel", "sump": "8", "oil_grade": "15W-40"}
    engine(ctx, "P-01", meter=["hours"], **plate)
    for on, figure in zip(DAYS, HOURS, strict=True):
        reading(ctx, "P-01", on, figure)
    return ctx


def falling(ctx: Context) -> Context:
    """The third cylinder falls 0.6 bar in 100 h against 26 bar: three quarters of that, 19.5 bar, are not far."""
    for on, third in zip(DAYS[2:], ("23.0", "22.4", "21.9", "21.2", "20.6"), strict=True):
        rows = [f"pressure,{place},dry,{third if place == 3 else '26.0'},bar" for place in range(1, 5)]
        take(ctx, "compression", *rows, on=on, sure=True)
    return ctx


def samples(
    ctx: Context, iron: str = "20 40 61 80", tbn: str = "9.0 8.9 8.8 8.6", topped_up: str = "top_up,,,0,L"
) -> Context:
    """Four samples of one fill, changed at 1200 h, without top-up; an empty row states nothing of it."""
    days = zip(DAYS[3:], (100, 200, 300, 400), iron.split(), tbn.split(), strict=True)
    for on, hours, ppm, base in days:
        stated = (f"hours_on_oil,,,{hours},h", topped_up, f"Fe,,,{ppm},ppm", f"tbn,,,{base},", "tbn,,new,9.2,")
        rows = [row for row in stated if row]
        take(ctx, "oil", *rows, on=on, sure=True)
    return ctx


def row(ctx: Context, name: str, on: date = TODAY) -> DueRow:
    with ctx.read() as connection:
        return next(row for row in due_rows(connection, on) if row.task == name)


def working(ctx: Context, name: str) -> dict[str, str]:
    with ctx.read() as connection:
        return dict(task_working(connection, "P-01", name, TODAY)[0])


def drained(ctx: Context, *every: str, **more: object) -> Context:
    """The oil of P-01 was changed on 1 January at 1200 h."""
    task(ctx, "P-01", "Oil", every=[*every], work="drain", **more)
    log(ctx, "2026-01-01", "Oil", at=["1200h"])
    return ctx


def with_samples_due(ctx: Context, iron: str = "40 80 121 160") -> Context:
    """P-01 with an oil sample due every 300 h from now on, and its oil every 1000 h."""
    drained(samples(yard(ctx), iron), "1000h")
    task(ctx, "P-01", "Sample", every=["300h"], needs_sheet="oil", last_done=["1600h", "2026-05-01"])
    return ctx


def with_tests_due(ctx: Context) -> Context:
    """P-01 with a compression test due every 400 h from now on."""
    task(falling(yard(ctx)), "P-01", "Pressures", every=["400h"], work="compression", last_done=["1600h", "2026-05-01"])
    return ctx


def test_a_falling_cylinder_pulls_the_next_compression_test_forward(ctx: Context) -> None:
    """By hand: b = -0.006 bar/h about (1400 h, 21.82 bar), s = 0.0516, t = 1.638: 19.5 bar at 1786.7 h, from 1764.2 on."""
    found = row(with_tests_due(ctx), "Pressures")
    assert (found.next_due_at, found.own_due_at) == (Decimal("1764.2"), Decimal(2000))
    assert found.reason == "pulled forward: cylinder 3 reaches 19.5 bar by 1764 to 1811 h"
    said = working(ctx, "Pressures")
    assert said["pulled forward"].startswith(
        "cylinder 3 falls 6 bar in 1000 h: reaches 19.5 bar by 1764 to 1811 h, likely 1787"
    )
    assert said["pulled forward"].endswith("at the early end, 1764.2 h: 235.8 h before its own point")
    assert said["not projected"] == "slope not told apart from none: cylinder 1, cylinder 2, cylinder 4"


def test_rising_iron_pulls_the_next_sample_and_not_the_drain(ctx: Context) -> None:
    """By hand: 0.401 ppm/h about (250 h, 100.25 ppm): 200 ppm at 498.8 h on the oil of 1200 h."""
    found, oil = row(with_samples_due(ctx), "Sample"), row(ctx, "Oil")
    assert (found.next_due_at, found.own_due_at) == (Decimal("1694.4"), Decimal(1900))
    assert found.reason == "pulled forward: Fe iron reaches 200 ppm by 1694 to 1704 h"
    assert (oil.next_due_at, oil.reason) == (Decimal(2200), "")


def test_where_no_task_takes_samples_rising_iron_pulls_the_drain(ctx: Context) -> None:
    drained(samples(yard(ctx), "40 80 121 160"), "1000h")
    assert (row(ctx, "Oil").next_due_at, row(ctx, "Oil").own_due_at) == (Decimal("1694.4"), Decimal(2200))


def test_an_oil_change_ends_the_pull_of_its_samples(ctx: Context) -> None:
    with_samples_due(ctx)
    log(ctx, "2026-05-01", "Oil", at=["1600h"])
    assert row(ctx, "Sample").next_due_at == 1900


def test_a_drain_of_the_machine_it_is_fitted_in_is_not_the_oil_of_the_engine(ctx: Context) -> None:
    with_samples_due(ctx)
    machine(ctx, "PH-1")
    with ctx.write() as session:
        fit_engine(session, find_engine(session.connection(), "P-01"), "PH-1", date(2026, 4, 1))
    task(ctx, "PH-1", "Gearbox", every=["12mo"], work="drain")
    log(ctx, "2026-05-01", "Gearbox", tag="PH-1")
    assert row(ctx, "Sample").reason.startswith("pulled forward: Fe iron")
    assert row(ctx, "Gearbox").reason == ""


def test_as_of_a_day_gone_by_only_sheets_up_to_it_pull(ctx: Context) -> None:
    with_tests_due(ctx)
    with ctx.read() as connection:
        item = find_item(connection, "P-01").id
        then = kept_wears(connection, date(2026, 4, 30), [item])[item]
    assert {len(one.segments[-1].points) for one in then.pulling} == {4}


def test_a_sound_oil_is_said_to_be_so_until_when_and_moves_nothing(ctx: Context) -> None:
    drained(samples(yard(ctx), "10 20 31 40"), "450h", "12mo")
    found = row(ctx, "Oil")
    assert (found.next_due_at, found.own_due_at) == (Decimal(1650), Decimal(1650))
    assert found.reason == "oil sound until 1900 h on the dial: a supervisor can put it off to there"
    said = working(ctx, "Oil")["longer drain"]
    assert "250 h beyond its own point" in said
    assert "never beyond 2027-01-01" in said


def test_a_supervisor_puts_a_drain_off_to_there_and_the_advice_has_done_its_work(ctx: Context) -> None:
    drained(samples(yard(ctx), "10 20 31 40"), "450h")
    with ctx.write() as session:
        given = {"tag": "P-01", "task": "Oil", "until": ["1900"], "why": "oil sound", "by": "Fenn", "on": "2026-05-01"}
        defer(session, read_draft(DeferralDraft, given))
    assert (row(ctx, "Oil").next_due_at, row(ctx, "Oil").reason) == (Decimal(1900), "oil sound")


def test_a_sample_that_flags_something_gives_no_advice(ctx: Context) -> None:
    drained(samples(yard(ctx), "30 60 91 120"), "450h")
    assert row(ctx, "Oil").reason == ""
    assert "longer drain" not in working(ctx, "Oil")


def test_what_is_kept_is_read_without_judging_and_made_anew_where_it_does_not_hold(
    ctx: Context, monkeypatch: pytest.MonkeyPatch
) -> None:
    with_tests_due(ctx)
    before = row(ctx, "Pressures")
    with monkeypatch.context() as patched:
        patched.setattr(judged, "wears_judged", None)
        assert row(ctx, "Pressures") == before
    for change in ("delete from judged_engine", "update judged_engine set book = 'x', content = '[]'"):
        with closing(sqlite3.connect(ctx.path)) as file, file:
            file.execute(change)
        assert row(ctx, "Pressures") == before
        with closing(sqlite3.connect(ctx.path)) as file:
            assert file.execute(f"select content like '__{WEARS_FORM} %' from judged_engine").fetchall() == [(1,)]


@pytest.mark.parametrize("from_on", [date(2026, 4, 1), TODAY])
def test_rules_of_the_shop_that_no_longer_fit_pull_nothing_and_break_nothing(ctx: Context, from_on: date) -> None:
    with_tests_due(ctx)
    with ctx.write() as session:
        by = person_id(session, "Fenn") or 0
        session.add(ShopRules(name="shop", text="nonsense", is_dropped=False, from_on=from_on, why="x", person_id=by))
    assert row(ctx, "Pressures").next_due_at == 2000
    with ctx.read() as connection:
        item = find_item(connection, "P-01").id
        assert bool(kept_wears(connection, date(2026, 4, 30), [item])[item].pulling) is (from_on == TODAY)


def test_facts_of_an_engine_hold_what_pulls_and_what_is_sound(ctx: Context) -> None:
    drained(samples(yard(ctx)), "450h")
    with ctx.read() as connection:
        facts = item_facts(connection, TODAY, [find_item(connection, "P-01").id])[0]
    assert [wear.subject for wear in facts.wears] == ["base number", "Fe iron"]
    assert [dict(wear.limits) for wear in facts.sound_oil][1] == {"high": 100}
