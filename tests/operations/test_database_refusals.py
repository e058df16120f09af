"""What the system will not let be done with the file is one clear line, and the file is left whole."""

import os
import sqlite3
import tempfile
from collections.abc import Iterator
from contextlib import closing
from datetime import date
from pathlib import Path

import pytest
from sqlalchemy.exc import IntegrityError

from fleetcare.context import Context
from fleetcare.db import reading as file
from fleetcare.db.tables import Item
from fleetcare.errors import NoDatabase
from tests.operations.small_use import BOTH, Use, add_site, add_what_does_not_fit, complaint, sites


@pytest.fixture
def shelf(new_database: Path) -> Iterator[Path]:
    """A folder that may not be written, with two databases: yard.db that may not be either, and loose.db that may.

    Root is not bound by permissions, so where root runs the tests, this one is run as nobody.
    """
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        for file_name, mode in (("yard.db", 0o444), ("loose.db", 0o666)):
            (folder / file_name).write_bytes(new_database.read_bytes())
            (folder / file_name).chmod(mode)
        folder.chmod(0o555)
        was = os.geteuid()
        if was == 0:
            os.seteuid(65534)
        yield folder
        os.seteuid(was)
        folder.chmod(0o755)


def test_a_database_in_a_read_only_folder_can_be_read(shelf: Path) -> None:
    assert sites(Context(str(shelf / "yard.db"))) == []


def test_a_database_in_a_read_only_folder_cannot_be_written(shelf: Path) -> None:
    with pytest.raises(NoDatabase) as error:
        add_site(Context(str(shelf / "yard.db")))
    assert "may not be written, nothing was changed" in complaint(error)


def test_a_writable_file_in_a_read_only_folder_is_left_whole(shelf: Path) -> None:
    ctx = Context(str(shelf / "loose.db"))
    with pytest.raises(NoDatabase) as error:
        add_site(ctx)
    assert "may not be written, nothing was changed" in complaint(error)
    assert sites(ctx) == []


def test_a_missing_file_in_a_read_only_folder_is_not_made(shelf: Path) -> None:
    with pytest.raises(NoDatabase, match="may not be written, nothing was changed"):
        add_site(Context(str(shelf / "new.db")))


def test_a_full_disk_is_one_line_and_changes_nothing(ctx: Context) -> None:
    with pytest.raises(NoDatabase) as error:
        add_what_does_not_fit(ctx)
    assert "does not fit on the disk, nothing was changed" in complaint(error)
    assert sites(ctx) == []


@BOTH
def test_a_file_somebody_keeps_locked_is_one_line(
    ctx: Context, db: Path, monkeypatch: pytest.MonkeyPatch, use: Use
) -> None:
    monkeypatch.setattr(file, "PATIENCE", 0.01)
    with closing(sqlite3.connect(db)) as other:
        other.execute("BEGIN EXCLUSIVE")
        with pytest.raises(NoDatabase) as error:
            use(ctx)
    assert complaint(error) == f"{db} is kept locked by another program; close that program, then repeat"


def test_a_file_somebody_keeps_writing_to_can_be_read_but_not_written(
    ctx: Context, db: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(file, "PATIENCE", 0.01)
    with closing(sqlite3.connect(db)) as other:
        other.execute("BEGIN IMMEDIATE")
        assert sites(ctx) == []
        with pytest.raises(NoDatabase, match="is kept locked by another program"):
            add_site(ctx)


def test_a_broken_constraint_is_no_failure_of_the_file(ctx: Context) -> None:
    add_site(ctx)
    with pytest.raises(IntegrityError):
        add_site(ctx)


def test_a_reference_to_nothing_is_refused_by_the_database(ctx: Context) -> None:
    with pytest.raises(IntegrityError), ctx.write() as session:
        session.add(Item(tag="P-01", tag_key="p-01", is_engine=True, site_id=7))


def test_a_tag_is_taken_by_one_item_at_a_time_and_free_once_that_is_withdrawn(ctx: Context) -> None:
    with ctx.write() as session:
        session.add(Item(tag="P-01", tag_key="p-01", is_engine=True))
    with pytest.raises(IntegrityError), ctx.write() as session:
        session.add(Item(tag="p-01", tag_key="p-01", is_engine=False))
    with ctx.write() as session:
        session.get_one(Item, 1).withdrawn_on = date(2026, 4, 1)
    with ctx.write() as session:
        session.add(Item(tag="p-01", tag_key="p-01", is_engine=False))
