"""Copies of the database, and bringing one up to the program."""

from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.errors import NoDatabase, Refused
from fleetcare.operations import upkeep
from tests.operations.small_use import add_site, complaint, sites


def test_a_backup_is_a_database_with_everything_in_it(ctx: Context, tmp_path: Path) -> None:
    add_site(ctx)
    out = upkeep.backup(ctx, tmp_path / "copy.db")
    assert sites(Context(str(out))) == ["North Sluice"]
    assert upkeep.check(Context(str(out))) == upkeep.check(ctx)
    assert sorted(path.name for path in tmp_path.iterdir()) == ["copy.db", "yard.db"]


def test_a_backup_never_overwrites(ctx: Context, tmp_path: Path) -> None:
    (tmp_path / "copy.db").write_text("mine")
    with pytest.raises(Refused, match="already there; name a file that is not"):
        upkeep.backup(ctx, tmp_path / "copy.db")
    assert (tmp_path / "copy.db").read_text() == "mine"


def test_a_backup_into_a_missing_folder_is_one_line(ctx: Context, tmp_path: Path) -> None:
    with pytest.raises(NoDatabase) as error:
        upkeep.backup(ctx, tmp_path / "none" / "copy.db")
    assert complaint(error).startswith(f"the folder {tmp_path / 'none'} does not exist")


def test_a_backup_of_a_missing_file_is_refused(tmp_path: Path) -> None:
    with pytest.raises(NoDatabase, match="there is no database"):
        upkeep.backup(Context(str(tmp_path / "none.db")), tmp_path / "copy.db")


def test_a_current_database_needs_no_upgrade(ctx: Context) -> None:
    assert upkeep.upgrade(ctx) is None


def test_without_a_name_a_backup_lies_beside_the_database_with_the_day(ctx: Context, db: Path) -> None:
    add_site(ctx)
    first, second = upkeep.backup(ctx), upkeep.backup(ctx)
    assert (first, second) == (db.with_name("yard-2026-05-01.db"), db.with_name("yard-2026-05-01-2.db"))
    assert sites(Context(str(first))) == sites(Context(str(second))) == ["North Sluice"]


def test_a_backup_of_today_is_never_taken_for_a_place_to_write(ctx: Context, db: Path) -> None:
    taken = db.with_name("yard-2026-05-01.db")
    taken.mkdir()
    assert upkeep.backup(ctx) == db.with_name("yard-2026-05-01-2.db")
    assert list(taken.iterdir()) == []
