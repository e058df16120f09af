"""What is kept of judged engines is what judging them anew gives, after every kind of write, and it may go at any time."""

import shutil
import sqlite3
from collections.abc import Iterator
from contextlib import closing, contextmanager
from datetime import date
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.db.chain import DERIVED
from fleetcare.db.tables import ShopRules, metadata
from fleetcare.errors import Refused
from fleetcare.operations import judged, judged_touched
from fleetcare.operations.find import find_item
from fleetcare.operations.finding_rows import finding_rows
from fleetcare.operations.judged import finding_lives_on, judge_anew, wears_anew
from fleetcare.operations.judged_rows import keep, kept_rows, sheet_owners
from fleetcare.operations.kept_wears import kept_wears
from fleetcare.operations.measured import EngineSheets
from fleetcare.operations.names import person_id
from fleetcare.operations.rows import fetch
from fleetcare.operations.sheet_report import last_report
from fleetcare.operations.shop_book import shop_texts
from fleetcare.operations.shop_rules import try_rules
from fleetcare.operations.upkeep import check
from tests.cli.conftest import set_up
from tests.operations.importing import TODAY
from tests.operations.judged_yard import SHEETS, SHOP, WRITES, YARD


@pytest.fixture
def files(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """The sheets and the shop's rules as files of the folder one works in."""
    monkeypatch.chdir(tmp_path)
    for name, rows in SHEETS.items():
        Path(f"{name}.csv").write_text("\n".join(["quantity,point,phase,value,unit", *rows]))
    Path("shop.toml").write_text(SHOP)


@pytest.fixture
def yard(ctx: Context, files: None) -> Context:
    """A yard in which things were measured."""
    set_up(ctx.path, YARD)
    return Context(str(ctx.path), TODAY)


def assert_holds(ctx: Context, on: date = TODAY) -> None:
    """What is read is what judging everything anew gives, now and again once it is kept."""
    for _ in range(2):
        with ctx.read() as connection:
            ids = sheet_owners(connection)
            assert kept_wears(connection, on, ids) == wears_anew(connection, on, ids)
            assert finding_lives_on(connection, on) == judge_anew(connection, on, shop_texts(connection, on))
    assert check(ctx).problems == ()


def stale(ctx: Context) -> list[int]:
    """The engines whose rows are missing, or that the ledger touched since."""
    with ctx.read() as connection:
        owners = sheet_owners(connection)
        rows = kept_rows(connection, owners)
        is_touched = judged_touched.touched(connection, 0)
        return [item for item in owners if item not in rows or is_touched(item, rows[item].seq)]


def kept_as_of(ctx: Context) -> set[int]:
    """The entries of the ledger as of which rows are kept."""
    with ctx.read() as connection:
        return {row.seq for row in kept_rows(connection, sheet_owners(connection)).values()}


@contextmanager
def counted(monkeypatch: pytest.MonkeyPatch) -> Iterator[list[int]]:
    """The engines judged inside."""
    judging, done = judged.judge_lives, list[int]()

    def count(found: EngineSheets, *more: object) -> object:
        done.append(found.item_id)
        return judging(found, *more)  # type: ignore[arg-type]

    with monkeypatch.context() as patched:
        patched.setattr(judged, "judge_lives", count)
        yield done


def test_after_every_kind_of_write_what_is_read_is_what_judging_anew_gives(yard: Context) -> None:
    assert_holds(yard)
    for line in filter(None, map(str.strip, WRITES.splitlines())):
        with yard.read() as connection:
            waiting = [row.id for row in finding_rows(connection, TODAY) if row.state == "open"]
        set_up(yard.path, line.replace("FINDING", waiting[0]))
        assert_holds(yard)
        assert_holds(yard, date(2026, 3, 10))


def test_every_table_is_known_to_touch_an_engine_or_never_to() -> None:
    touching = judged_touched._OF_ITEM | judged_touched._BY_METER | judged_touched._OF_FAMILY | {"item"}
    assert not touching & judged_touched.NEVER
    everybody = {"setting"}
    assert set(metadata.tables) == touching | judged_touched.NEVER | everybody | {"ledger", *DERIVED}


def test_a_row_of_a_kind_that_is_not_known_touches_every_engine(yard: Context) -> None:
    set_up(yard.path, "setting shop-name Fen")
    with yard.read() as connection:
        seq = fetch(connection, "select max(seq) from ledger")[0][0]
        is_touched = judged_touched.touched(connection, seq - 1)
        assert is_touched(1, seq - 1)
        assert not is_touched(1, seq)


def test_a_measured_engine_is_judged_before_its_sheet_counts_as_stored(
    yard: Context, monkeypatch: pytest.MonkeyPatch
) -> None:
    assert_holds(yard)
    set_up(yard.path, "measure compression P-01 fine.csv --on 2026-04-01")
    with counted(monkeypatch) as done, yard.read() as connection:
        finding_lives_on(connection, TODAY)
    assert done == []


def test_a_write_that_leaves_the_facts_as_they_were_judges_nobody(
    yard: Context, monkeypatch: pytest.MonkeyPatch
) -> None:
    assert_holds(yard)
    set_up(yard.path, "log P-01 --repair Belt --on 2026-04-20")
    with counted(monkeypatch) as done, yard.read() as connection:
        finding_lives_on(connection, TODAY)
    assert done == []
    assert stale(yard) == []


def test_rows_that_hold_are_not_written_anew_for_each_entry_and_are_for_many(
    yard: Context, monkeypatch: pytest.MonkeyPatch
) -> None:
    assert_holds(yard)
    before = kept_as_of(yard)
    set_up(yard.path, "log P-04 --repair Belt --on 2026-04-20")
    assert_holds(yard)
    assert kept_as_of(yard) == before
    monkeypatch.setattr(judged, "FAR_BEHIND", 0)
    assert_holds(yard)
    assert len(kept_as_of(yard)) == 1
    assert min(kept_as_of(yard)) > max(before)


def test_work_and_readings_after_one_taken_since_the_newest_sheet_touch_nobody_and_an_earlier_one_does(
    yard: Context,
) -> None:
    set_up(yard.path, "measure oil P-01 more.csv --on 2026-04-02 --at 1200h")
    assert_holds(yard)
    set_up(yard.path, "reading P-01 1300 --on 2026-04-20")
    set_up(yard.path, "log P-01 --repair Belt --on 2026-04-25 --at 1310h")
    assert touched_since_kept(yard) == []
    set_up(yard.path, "reading P-01 1100 --on 2026-03-01")
    assert touched_since_kept(yard) == ["P-01"]
    assert_holds(yard)


@pytest.mark.parametrize("undone", ["reading --void {} --why misread", "correct 5 --void --why wrong-engine"])
def test_a_reading_that_no_longer_counts_tells_the_hours_of_no_sheet(yard: Context, undone: str) -> None:
    set_up(yard.path, "log P-01 --repair Belt --on 2026-03-10 --at 1100h")
    with yard.read() as connection:
        number = fetch(connection, "select max(id) from reading")[0][0]
    set_up(yard.path, undone.format(number))
    assert_holds(yard)
    set_up(yard.path, "reading P-01 1300 --on 2026-04-20")
    assert touched_since_kept(yard) == ["P-01"]
    assert_holds(yard)


def touched_since_kept(ctx: Context) -> list[str]:
    """The engines that the ledger touched since they were kept."""
    with ctx.read() as connection:
        rows = kept_rows(connection, sheet_owners(connection))
        is_touched = judged_touched.touched(connection, min(row.seq for row in rows.values()))
        items = [item for item, row in rows.items() if is_touched(item, row.seq)]
        return [row[0] for row in fetch(connection, "select tag from item where id in :ids order by tag", ids=items)]


def test_only_engines_that_a_write_touched_are_judged_again(yard: Context, monkeypatch: pytest.MonkeyPatch) -> None:
    assert_holds(yard)
    set_up(yard.path, "engine edit P-03 --sump 20")
    with counted(monkeypatch) as done, yard.read() as connection:
        finding_lives_on(connection, TODAY)
        (item,) = fetch(connection, "select id from item where tag = 'P-03'")[0]
    assert done == [item]


@pytest.mark.parametrize("drop", ["delete from judged_engine", "delete from judged_engine where item_id % 2 = 0"])
def test_rows_may_be_dropped_at_any_time(yard: Context, drop: str) -> None:
    assert_holds(yard)
    with closing(sqlite3.connect(yard.path)) as file, file:
        file.execute(drop)
    assert check(yard).problems == ()
    assert_holds(yard)
    assert stale(yard) == []


def test_rows_of_another_program_are_made_anew(yard: Context) -> None:
    with closing(sqlite3.connect(yard.path)) as file, file:
        file.execute("update judged_engine set book = 'older', content = 'in another form'")
    assert_holds(yard)


def test_a_file_that_cannot_be_written_is_read_all_the_same(yard: Context) -> None:
    with closing(sqlite3.connect(yard.path)) as file, file:
        file.execute("delete from judged_engine")
    with closing(sqlite3.connect(yard.path)) as other:
        other.execute("begin immediate")
        with yard.read() as connection:
            assert any(finding_lives_on(connection, TODAY).values())
        other.rollback()
    assert len(stale(yard)) == 3
    assert_holds(yard)
    assert stale(yard) == []


def test_a_row_never_takes_the_place_of_one_that_holds_longer(yard: Context) -> None:
    with yard.read() as connection:
        rows = list(kept_rows(connection, sheet_owners(connection)).values())
    with yard.write() as session:
        keep(session.connection(), [row.at(row.seq - 1)._replace(content="[]") for row in rows])
    with yard.read() as connection:
        assert list(kept_rows(connection, sheet_owners(connection)).values()) == rows


def test_rules_that_no_longer_fit_the_program_hinder_no_writing_and_are_said_to_whoever_asks(yard: Context) -> None:
    with yard.write() as session:
        by = person_id(session, "Old")
        session.add(
            ShopRules(name="shop", text="[[rule]]", from_on=date(2026, 1, 1), why="then it did", person_id=by or 0)
        )
    set_up(yard.path, "measure compression P-01 fine.csv --on 2026-04-01")
    with yard.read() as connection, pytest.raises(Refused, match="shop, rule 1"):
        finding_lives_on(connection, TODAY)
    with yard.read() as connection:
        report = last_report(connection, find_item(connection, "P-01"), TODAY, "compression")
        assert report is not None
        assert report.notes[0].startswith(
            "judged by the shipped rules alone, the shop's own do not fit them: shop, rule 1"
        )
        rejudged = try_rules(connection, Path("shop.toml"), TODAY)
        assert rejudged.notes[0].startswith("the rules before did not fit this program, so nothing went: shop, rule 1")
    set_up(yard.path, "rules --use shop.toml --why mended --by Fenn")
    assert_holds(yard)


def test_a_copy_of_the_file_brings_what_is_kept_along(
    yard: Context, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    assert_holds(yard)
    copy = Context(str(shutil.copy(yard.path, tmp_path / "copy.db")), TODAY)
    with counted(monkeypatch) as done, copy.read() as connection:
        assert any(finding_lives_on(connection, TODAY).values())
        assert fetch(connection, "select count(*) from judged_engine") == [(3,)]
    assert done == []


def test_judging_everybody_tells_how_far_it_has_come(yard: Context) -> None:
    told: list[tuple[int, int]] = []
    with yard.read() as connection:
        judge_anew(connection, TODAY, (), lambda done, of: told.append((done, of)))
    assert told == [(3, 3)]
