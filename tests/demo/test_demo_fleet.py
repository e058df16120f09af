"""The demo fleet: the committed file is what the command builds, and it stands up on any day it is built for."""

import sqlite3
from collections.abc import Callable
from contextlib import closing
from datetime import date
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.db.session import HEAD
from fleetcare.domain.lines import State
from fleetcare.operations.due import due_rows
from fleetcare.operations.upkeep import check
from tests.cli.conftest import Runner
from tests.cli.conftest import fleetcare as fleetcare  # the fixture
from tests.demo.conftest import ANCHOR, COMMITTED

Built = Callable[[date], Path]

COMMAND = "fleetcare --as-of 2026-05-01 demo --keep demo_fleet.db"

ODD_DAYS = (date(2028, 2, 29), date(2027, 1, 1))


def content(path: Path) -> dict[str, list[tuple[object, ...]]]:
    """Give the schema and every row of every table of a file, none left out."""
    with closing(sqlite3.connect(path)) as connection:
        schema = connection.execute(
            "select type, name, tbl_name, sql from sqlite_master order by type, name"
        ).fetchall()
        tables = [name for kind, name, *_ in schema if kind == "table"]
        return {"schema": schema} | {
            name: connection.execute(f'select * from "{name}" order by 1').fetchall() for name in tables
        }


@pytest.fixture(scope="module")
def rebuilt(demo_of: Built) -> dict[str, list[tuple[object, ...]]]:
    """The content of the demo fleet built anew for the anchor of the committed one."""
    return content(demo_of(ANCHOR))


def test_the_committed_demo_fleet_is_row_for_row_what_the_command_builds(
    rebuilt: dict[str, list[tuple[object, ...]]],
) -> None:
    committed = content(COMMITTED)
    assert committed.keys() == rebuilt.keys()
    for table, rows in rebuilt.items():
        assert committed[table] == rows, f"{table} differs; remove the file and build it again: {COMMAND}"


def test_the_committed_demo_fleet_is_at_the_newest_revision(rebuilt: dict[str, list[tuple[object, ...]]]) -> None:
    assert content(COMMITTED)["alembic_version"] == [(HEAD,)]
    assert rebuilt["ledger"]


@pytest.mark.parametrize("anchor", [ANCHOR, *ODD_DAYS], ids=str)
def test_the_demo_fleet_of_any_day_is_sound_and_has_a_line_in_every_state(demo_of: Built, anchor: date) -> None:
    context = Context(str(demo_of(anchor)), anchor)
    assert check(context).problems == ()
    with context.read() as connection:
        assert {row.state for row in due_rows(connection, anchor)} == set(State)


def test_months_later_the_demo_fleet_says_what_is_probably_due_from_meters_long_unread() -> None:
    later = date(2026, 12, 1)
    with Context(str(COMMITTED), later).read() as connection:
        rows = due_rows(connection, later)
    by_record = {row.engine for row in rows if row.state in {State.OVERDUE, State.DUE}}
    by_estimate = {row.engine for row in rows if row.estimated == State.OVERDUE and row.state == State.NEAR}
    assert by_record
    assert by_estimate


def test_the_demo_command_keeps_the_fleet_of_the_day_asked_for(fleetcare: Runner, tmp_path: Path) -> None:
    out = tmp_path / "kept.db"
    ran = fleetcare("--as-of", "2026-05-01", "demo", "--keep", str(out))
    assert (ran.status, ran.err) == (0, "")
    assert f"fleetcare --db {out} --as-of 2026-05-01 due" in ran.out
    assert content(out) == content(COMMITTED)


def test_the_demo_command_never_writes_over_a_file(fleetcare: Runner, tmp_path: Path) -> None:
    taken = tmp_path / "taken.db"
    taken.write_text("mine")
    ran = fleetcare("--as-of", "2026-05-01", "demo", "--keep", str(taken))
    assert ran.status == 1
    assert "already there" in ran.err
    assert taken.read_text() == "mine"


def test_a_day_too_early_for_a_history_is_refused(fleetcare: Runner, tmp_path: Path) -> None:
    ran = fleetcare("--as-of", "0003-05-01", "demo", "--keep", str(tmp_path / "early.db"))
    assert ran.status == 1
    assert "no history before 0003-05-01" in ran.err
    assert list(tmp_path.iterdir()) == []
