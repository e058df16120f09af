"""The demo fleet: the committed file is what the command builds, and it stands up on any day it is built for."""

import shutil
import sqlite3
from contextlib import closing
from datetime import date
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.db.reading import HEAD
from fleetcare.demo.build import build
from fleetcare.domain.lines import State
from fleetcare.operations.due import due_rows
from fleetcare.operations.load import item_facts
from fleetcare.operations.rows import fetch
from fleetcare.operations.upkeep import check
from tests.cli.conftest import Runner
from tests.cli.conftest import fleetcare as fleetcare  # the fixture
from tests.demo.features import ALL, missing, stand_of
from tests.demo.true_ahead import PULLED, SOUND, advised_longer, called_early
from tests.demo.true_causes import TRUE, has_proved, standing

COMMITTED = Path(__file__).parents[2] / "demo_fleet.db"
ANCHOR = date(2026, 5, 1)
"""The day the committed demo fleet stands on."""

COMMAND = "fleetcare --as-of 2026-05-01 demo --keep demo_fleet.db"

ODD_DAYS = {
    "leap day": date(2028, 2, 29),
    "new year": date(2027, 1, 1),
    "last of the year": date(2026, 12, 31),
    "end of a short month": date(2027, 2, 28),
    "end of a long month": date(2026, 8, 31),
    "clocks go back": date(2026, 10, 25),
}


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


def test_the_committed_demo_fleet_is_row_for_row_what_the_command_builds(fleetcare: Runner, tmp_path: Path) -> None:
    out = tmp_path / "kept.db"
    ran = fleetcare("--as-of", "2026-05-01", "demo", "--keep", str(out))
    assert (ran.status, ran.err) == (0, "")
    assert f"fleetcare --db {out} --as-of 2026-05-01 due" in ran.out
    rebuilt, committed = content(out), content(COMMITTED)
    assert committed.keys() == rebuilt.keys()
    for table, rows in rebuilt.items():
        assert committed[table] == rows, f"{table} differs; remove the file and build it again: {COMMAND}"


@pytest.mark.parametrize("day", [(), ("--as-of", "2026-05-01"), ("--as-of", "2026-04-01")])
def test_whoever_only_reads_the_committed_demo_fleet_leaves_every_byte_of_it(
    fleetcare: Runner, tmp_path: Path, day: tuple[str, ...]
) -> None:
    """All of it is judged by the rules of this program, and kept: nothing is left to be worked out and written."""
    path = Path(shutil.copy(COMMITTED, tmp_path / "demo.db"))
    before = path.read_bytes()
    for words in (
        ("due",),
        ("due", "--format", "csv"),
        ("findings",),
        ("rules",),
        ("show", "PS-01"),
        ("engine", "list"),
    ):
        assert fleetcare("--db", str(path), *day, *words).status == 0
        assert path.read_bytes() == before, f"{words} wrote into it; remove the file and build it again: {COMMAND}"


def test_the_committed_demo_fleet_is_sound_and_at_the_newest_revision() -> None:
    context = Context(str(COMMITTED), ANCHOR)
    assert check(context).problems == ()
    with context.read() as connection:
        assert fetch(connection, "select version_num from alembic_version") == [(HEAD,)]


def test_the_demo_fleet_is_of_about_forty_engines_with_three_years_of_history() -> None:
    with Context(str(COMMITTED), ANCHOR).read() as connection:
        engines = fetch(connection, "select count(*) from item where is_engine")[0][0]
        first, last = fetch(connection, 'select min("on"), max("on") from reading')[0]
    assert 38 <= engines <= 44
    assert (ANCHOR - date.fromisoformat(first)).days >= 3 * 365
    assert date.fromisoformat(last) <= ANCHOR


@pytest.mark.parametrize(
    ("what", "table", "where"),
    [
        ("corrections", "log_entry", "supersedes_id is not null and not is_void"),
        ("voided entries", "log_entry", "is_void"),
        ("repairs", "log_entry", "kind = 'repair' and downtime_hours is not null"),
        ("defects", "log_entry", "kind = 'defect'"),
        ("top-ups", "log_entry", "kind = 'top-up'"),
        ("work done in part", "log_task", "part_done"),
        ("work done along with a bigger job", "log_task", "covered_by_id is not null"),
        ("work of the card index", "log_entry", "import_key is not null"),
        ("readings of the card index", "reading", "import_key is not null"),
        ("suspect readings", "reading_mark", "mark = 'suspect'"),
        ("voided readings", "reading_mark", "mark = 'void'"),
        ("withdrawn engines", "item", "withdrawn_on is not null"),
        ("moved engines", "fitting", "to_on is not null"),
        ("caps of deferrals", "deferral_figure", "role = 'cap'"),
        ("follow-ups", "task_call", "1"),
        ("tasks of shipped schedules", "task_version", "source like '40 CFR 63 subpart ZZZZ, Table 2d item 4%'"),
    ],
)
def test_the_committed_demo_fleet_holds_every_kind_of_entry(what: str, table: str, where: str) -> None:
    with Context(str(COMMITTED), ANCHOR).read() as connection:
        assert fetch(connection, f"select count(*) from {table} where {where}")[0][0], what


def test_the_committed_demo_fleet_shows_everything_it_is_to_show() -> None:
    with Context(str(COMMITTED), ANCHOR).read() as connection:
        assert missing(stand_of(item_facts(connection, ANCHOR)), ALL) == []


@pytest.mark.parametrize("anchor", ODD_DAYS.values(), ids=ODD_DAYS)
def test_built_for_an_odd_day_the_demo_fleet_is_sound_and_shows_everything(anchor: date, tmp_path: Path) -> None:
    path = tmp_path / "odd.db"
    build(path, anchor)
    context = Context(str(path), anchor)
    assert check(context).problems == ()
    with context.read() as connection:
        assert missing(stand_of(item_facts(connection, anchor)), ALL) == []
    expected = {tag: [cause] for tag, cause in TRUE.items() if tag != "SB-04" or has_proved(anchor)}
    assert standing(path, anchor) == expected
    assert called_early(path, anchor) == {line: ahead.subject for line, ahead in PULLED.items()}
    assert [*advised_longer(path, anchor)] == [SOUND]


def test_months_later_the_demo_fleet_says_what_is_probably_due_from_meters_long_unread() -> None:
    later = date(2026, 12, 1)
    with Context(str(COMMITTED), later).read() as connection:
        rows = due_rows(connection, later)
    assert {row.state for row in rows} >= {State.OVERDUE, State.NEAR, State.CLEAR}
    assert sum(row.is_probably_due for row in rows) >= 10


def test_the_demo_command_never_writes_over_a_file(fleetcare: Runner, tmp_path: Path) -> None:
    taken = tmp_path / "taken.db"
    taken.write_text("mine")
    ran = fleetcare("--as-of", "2026-05-01", "demo", "--keep", str(taken))
    assert ran.status == 1
    assert "already there" in ran.err
    assert taken.read_text() == "mine"


def test_a_day_too_early_for_a_history_is_refused(fleetcare: Runner, tmp_path: Path) -> None:
    ran = fleetcare("--as-of", "1902-05-01", "demo", "--keep", str(tmp_path / "early.db"))
    assert ran.status == 1
    assert "does not fit before 1902-05-01" in ran.err
    assert list(tmp_path.iterdir()) == []
