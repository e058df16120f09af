"""The migrations make exactly the tables the code declares, and bring an older file up without loss."""

import ast
import shutil
import sqlite3
import subprocess
import sys
from collections.abc import Callable, Sequence
from contextlib import closing
from pathlib import Path

import pytest
from alembic import command
from alembic.autogenerate import compare_metadata
from alembic.migration import MigrationContext
from alembic.script import ScriptDirectory
from sqlalchemy import create_engine, text

from fleetcare.context import Context
from fleetcare.db import migrate, reading, session
from fleetcare.db.chain import entries
from fleetcare.db.tables import Item, Site, metadata
from fleetcare.errors import NoDatabase
from fleetcare.operations import upkeep
from fleetcare.operations.rows import Row, fetch
from tests.cli.conftest import set_up

COMMITTED = Path(__file__).parents[2] / "demo_fleet.db"
YARD = """
engine add P-01 --site "North Sluice" --cylinders 1 --meter hours --in-service 2024-01-10 --start-at 0 --as-new
task add P-01 "Oil and filter" --every 250h --every 12mo
reading P-01 1250 --on 2026-05-01
log P-01 "Oil and filter" --on 2026-04-20 --at 1234h --by Fenn
defer P-01 "Oil and filter" --until 2027-05-01 --why "harvest first" --by Harbin
"""
NEXT = "20270101_next"
REVISION = f"""
import sqlalchemy as sa
from alembic import op

revision = "{NEXT}"
down_revision = "{reading.HEAD}"


def upgrade() -> None:
    op.create_table("round", sa.Column("id", sa.Integer(), primary_key=True), sa.Column("uid", sa.String()))
    with op.batch_alter_table("site", recreate="always") as site:
        site.create_check_constraint("named", "name <> ''")
"""
ORPHANS = REVISION + '    op.execute("DELETE FROM site")\n'


def declared(path: Path) -> dict[str, list[str]]:
    """The lines of SQL a file's tables and indexes are declared by, in no particular order."""
    with closing(sqlite3.connect(path)) as connection:
        rows = connection.execute("SELECT name, sql FROM sqlite_master WHERE sql IS NOT NULL").fetchall()
    return {name: sorted(line.strip(" \t,") for line in sql.splitlines()) for name, sql in rows}


def dumped(path: Path) -> list[str]:
    """Everything a file holds, as SQL."""
    with closing(sqlite3.connect(path)) as connection:
        return list(connection.iterdump())


def test_there_is_one_newest_revision_and_the_program_knows_it() -> None:
    scripts = ScriptDirectory.from_config(migrate.config(migrate.scripts_folder()))
    assert scripts.get_heads() == [reading.HEAD]


def test_the_migrations_declare_every_table_index_and_constraint_as_the_code_does(db: Path, tmp_path: Path) -> None:
    metadata.create_all(create_engine(f"sqlite:///{tmp_path / 'code.db'}"))
    by_migration = declared(db)
    del by_migration["alembic_version"]
    assert by_migration == declared(tmp_path / "code.db")


def test_nothing_is_left_for_a_new_migration_to_say(db: Path) -> None:
    with session.engine(db).connect() as connection:
        assert compare_metadata(MigrationContext.configure(connection), metadata) == []


def test_up_down_and_up_again_gives_the_same_tables(db: Path) -> None:
    before = declared(db)
    with session.engine(db, foreign_keys=False).begin() as connection:
        command.downgrade(migrate.config(migrate.scripts_folder(), connection), "base")
    assert list(declared(db)) == ["alembic_version"]
    with session.engine(db, foreign_keys=False).begin() as connection:
        migrate.run(connection)
    assert declared(db) == before


def test_importing_the_tables_as_the_migrations_do_forgets_none(db: Path) -> None:
    script = "from fleetcare.db.tables import metadata; print(*sorted(metadata.tables))"
    clean = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=True)
    with closing(sqlite3.connect(db)) as connection:
        found = connection.execute("SELECT name FROM sqlite_master WHERE type = 'table' AND name <> 'alembic_version'")
        assert clean.stdout.split() == sorted(name for (name,) in found)


def test_every_constraint_has_a_name_a_later_migration_can_call_it_by(db: Path) -> None:
    lines = [line for sql in declared(db).values() for line in sql]
    unnamed = [line for line in lines if line.startswith(("CHECK", "UNIQUE", "FOREIGN KEY", "PRIMARY KEY"))]
    assert unnamed == []


@pytest.mark.parametrize("revision", sorted((migrate.scripts_folder() / "versions").glob("*.py")), ids=lambda p: p.stem)
def test_a_revision_imports_nothing_that_changes_with_the_program(revision: Path) -> None:
    nodes = list(ast.walk(ast.parse(revision.read_text())))
    modules = {name.name for node in nodes if isinstance(node, ast.Import) for name in node.names}
    modules |= {node.module or "." for node in nodes if isinstance(node, ast.ImportFrom)}
    assert modules <= {"sqlalchemy", "alembic", "typing"}


# An older file, seen by the program of tomorrow


@pytest.fixture
def tomorrow(tmp_path: Path) -> Path:
    """The migrations with one more to come."""
    folder = Path(shutil.copytree(migrate.scripts_folder(), tmp_path / "scripts"))
    (folder / "versions" / f"{NEXT}.py").write_text(REVISION)
    return folder


@pytest.fixture
def older(ctx: Context, db: Path) -> Path:
    """A file of today with a site and an engine that refers to it."""
    with ctx.write() as writing:
        site = Site(name="North Sluice", name_key="north sluice")
        writing.add(site)
        writing.flush()
        writing.add(Item(tag="P-01", tag_key="p-01", is_engine=True, site_id=site.id))
    return db


def test_an_older_file_is_copied_and_then_upgraded_with_every_row_kept(older: Path, tomorrow: Path) -> None:
    before = dumped(older)
    copy = migrate.bring_up(older, tomorrow)
    assert copy == older.with_name(f"yard.db.before-{reading.HEAD}.db")
    assert dumped(copy) == before
    with session.engine(older).connect() as connection:
        assert reading.revision(connection) == NEXT
        assert connection.execute(text("SELECT tag, site.name FROM item JOIN site ON site.id = site_id")).one() == (
            "P-01",
            "North Sluice",
        )


def test_the_copy_of_an_earlier_upgrade_is_kept_too(older: Path, tomorrow: Path) -> None:
    before = older.read_bytes()
    first = migrate.bring_up(older, tomorrow)
    older.write_bytes(before)
    second = migrate.bring_up(older, tomorrow)
    assert (first.name, second.name) == (
        f"yard.db.before-{reading.HEAD}.db",
        f"yard.db.before-{reading.HEAD}-2.db",
    )


def test_an_upgrade_that_would_leave_orphans_changes_nothing(older: Path, tomorrow: Path) -> None:
    (tomorrow / "versions" / f"{NEXT}.py").write_text(ORPHANS)
    before = older.read_bytes()
    with pytest.raises(NoDatabase, match="in item something refers to rows that are not there; run fleetcare check"):
        migrate.bring_up(older, tomorrow)
    assert older.read_bytes() == before


def test_a_file_of_a_revision_nobody_here_knows_is_newer(older: Path, tomorrow: Path) -> None:
    migrate.bring_up(older, tomorrow)
    with pytest.raises(NoDatabase, match="made by a newer fleetcare; update the program"):
        migrate.bring_up(older, migrate.scripts_folder())


@pytest.fixture
def program_of_tomorrow(tomorrow: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """The program as it will be once the next migration is in."""
    monkeypatch.setattr(reading, "HEAD", NEXT)
    monkeypatch.setattr(migrate, "HEAD", NEXT)
    monkeypatch.setattr(migrate, "scripts_folder", lambda: tomorrow)


def rounds_read(ctx: Context) -> Sequence[Row]:
    with ctx.read() as connection:
        return fetch(connection, "SELECT count(*) FROM round")


def rounds_before_a_write(ctx: Context) -> Sequence[Row]:
    with ctx.write() as writing:
        return fetch(writing.connection(), "SELECT count(*) FROM round")


@pytest.mark.usefixtures("older", "program_of_tomorrow")
@pytest.mark.parametrize("use", [rounds_read, rounds_before_a_write])
def test_using_an_older_file_upgrades_it_and_leaves_a_copy(
    ctx: Context, use: Callable[[Context], Sequence[Row]]
) -> None:
    assert use(ctx) == [(0,)]
    assert ctx.path.with_name(f"yard.db.before-{NEXT}.db").exists()


@pytest.mark.usefixtures("older", "program_of_tomorrow")
def test_the_upgrade_command_names_the_copy_it_made(ctx: Context) -> None:
    assert upkeep.upgrade(ctx) == ctx.path.with_name(f"yard.db.before-{NEXT}.db")
    assert upkeep.upgrade(ctx) is None


@pytest.mark.usefixtures("older")
def test_an_upgrade_leaves_the_ledger_as_it_was(ctx: Context, tomorrow: Path) -> None:
    with ctx.read() as connection:
        before = list(entries(connection))
    migrate.bring_up(ctx.path, tomorrow)
    with reading.reading(ctx.path, as_is=True) as connection:
        assert list(entries(connection)) == before


def test_checking_an_older_file_says_so_and_does_not_upgrade_it(
    ctx: Context, older: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    before = older.read_bytes()
    monkeypatch.setattr("fleetcare.db.check.HEAD", NEXT)
    assert upkeep.check(ctx).problems == (
        f"the tables are those of {reading.HEAD}, this program's are those of {NEXT}",
    )
    assert older.read_bytes() == before


# A file as the first release of the tables left it


def counted(path: Path) -> dict[str, int]:
    """How many rows each table of a file holds."""
    with closing(sqlite3.connect(path)) as connection:
        names = [name for (name,) in connection.execute("SELECT name FROM sqlite_master WHERE type = 'table'")]
        return {name: connection.execute(f'SELECT count(*) FROM "{name}"').fetchone()[0] for name in names}


@pytest.fixture
def of_the_first_tables(tmp_path: Path) -> Path:
    """A small yard in the tables of the first revision: nobody had answered a finding then, or had rules of their own."""
    sheet = tmp_path / "lash.csv"
    sheet.write_text("quantity,point,phase,value,unit\nlash,1I,found,25,mm\nlash,1E,found,36,mm\n")
    path = set_up(tmp_path / "yard.db", f"{YARD}\nmeasure lash P-01 {sheet} --on 2026-04-20 --by Fenn")
    with session.engine(path, foreign_keys=False).begin() as connection:
        command.downgrade(migrate.config(migrate.scripts_folder(), connection), "20261201_first_tables")
    return path


def test_a_file_of_the_first_tables_keeps_every_row_and_is_sound(of_the_first_tables: Path) -> None:
    before = counted(of_the_first_tables)
    assert "finding_answer" not in before
    with Context(str(of_the_first_tables)).read() as connection:
        assert reading.revision(connection) == reading.HEAD
    after = counted(of_the_first_tables)
    assert {name: after[name] for name in before} == before
    assert upkeep.check(Context(str(of_the_first_tables))).problems == ()
