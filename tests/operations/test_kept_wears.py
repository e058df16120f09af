"""What is kept of lash never hides a change: each shows in the due list at once, and is what judging anew gives."""

import sqlite3
from contextlib import closing as closed
from datetime import date
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.db.tables import ShopRules
from fleetcare.operations import judged
from fleetcare.operations.due import due_rows
from fleetcare.operations.find import find_item
from fleetcare.operations.judged import wears_anew
from fleetcare.operations.kept_wears import kept_wears
from fleetcare.operations.names import person_id
from tests.cli.conftest import set_up
from tests.operations.importing import TODAY
from tests.operations.sheet_yard import FOUND_IN, HEADER
from tests.operations.test_wears import closing

LATER = date(2026, 5, 20)
CHANGES = (
    "reading --void 5 --why misread",
    "reading --void 1 --why misread\nreading P-01 5 --on 2026-04-01 --replaced 1400 0 --unmetered 20h",
    "engine edit P-01 --lash-exhaust 0.38-0.50",
    "engine edit P-01 --lash-when hot",
    "engine edit P-01 --cylinders 1 --firing-order 1",
    "engine edit P-01 --valves-per-cylinder 4",
    "engine edit P-01 --bridged exhaust --valves-per-cylinder 4",
    "engine edit P-01 --adjuster hydraulic",
    "correct 5 --void --why wrong-engine",
    "correct 4 --on 2025-12-01",
    "correct 4 --on 2025-11-01 --sheet other.csv",
    "measure lash P-01 other.csv --on 2025-12-01 --when cold",
    "measure lash P-01 other.csv --on 2025-12-01 --when cold --at 1290h",
)


@pytest.fixture
def ctx(ctx: Context, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Context:
    """The engine whose exhaust 2 closes, and beside it a sheet that says something else of it."""
    monkeypatch.chdir(tmp_path)
    Path("other.csv").write_text("\n".join([HEADER, *FOUND_IN[:3], "lash,2E,found,0.425,"]))
    return closing(ctx)


def shown(ctx: Context, on: date = TODAY) -> tuple[object, ...]:
    """The line of the lash, and all that its points show; the same as judging anew gives."""
    with ctx.read() as connection:
        (row,) = (row for row in due_rows(connection, on) if row.task == "Lash")
        items = [find_item(connection, "P-01").id]
        kept = kept_wears(connection, on, items)
        assert kept == wears_anew(connection, on, items)
    return row.next_due_at, row.reason, kept


@pytest.mark.parametrize("change", CHANGES)
def test_whatever_lash_wears_rest_on_shows_in_the_due_list_as_soon_as_it_is_changed(ctx: Context, change: str) -> None:
    before = shown(ctx)
    set_up(ctx.path, change)
    after = shown(ctx)
    assert after != before
    assert shown(ctx) == after
    with closed(sqlite3.connect(ctx.path)) as file, file:
        file.execute("delete from judged_engine")
    assert shown(ctx) == after


def test_a_reading_beside_a_sheet_that_has_none_of_its_day_moves_it(ctx: Context) -> None:
    set_up(ctx.path, "correct 4 --on 2025-12-01")
    before = shown(ctx)
    set_up(ctx.path, "reading P-01 1330 --on 2025-12-15")
    after = shown(ctx)
    assert after != before
    set_up(ctx.path, "reading P-01 1270 --on 2025-11-20")
    assert shown(ctx) != after


def test_a_reading_that_is_restored_brings_back_what_it_told(ctx: Context) -> None:
    before = shown(ctx)
    set_up(ctx.path, "reading --void 5 --why misread")
    set_up(ctx.path, "reading --restore 5")
    assert shown(ctx) == before


def test_as_of_a_day_before_a_spec_came_into_force_the_one_before_it_holds(ctx: Context) -> None:
    before = shown(ctx)
    set_up(ctx.path, f"engine edit P-01 --lash-exhaust 0.38-0.50 --as-of {LATER}")
    assert shown(ctx) == before
    assert shown(ctx, LATER)[0] != before[0]


def test_what_is_kept_of_lash_is_read_without_judging(ctx: Context, monkeypatch: pytest.MonkeyPatch) -> None:
    before = shown(ctx)
    set_up(ctx.path, "log P-01 --repair Belt")
    with monkeypatch.context() as patched:
        patched.setattr(judged, "load_engine_sheets", None)
        with ctx.read() as connection:
            (row,) = (row for row in due_rows(connection, TODAY) if row.task == "Lash")
    assert (row.next_due_at, row.reason) == before[:2]


def test_lash_is_told_even_where_the_rules_of_the_shop_no_longer_fit_the_program(ctx: Context) -> None:
    before = shown(ctx)
    with ctx.write() as session:
        by = person_id(session, "Fenn") or 0
        session.add(ShopRules(name="shop", text="nonsense", from_on=date(2026, 4, 1), why="x", person_id=by))
    assert shown(ctx) == before
