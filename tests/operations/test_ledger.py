"""What the ledger records by itself, and what a check finds when somebody went round it."""

import json
import sqlite3
from collections.abc import Callable
from contextlib import closing
from datetime import UTC, date, datetime, timedelta, timezone
from decimal import Decimal
from pathlib import Path

import pytest
from sqlalchemy import insert, update

from fleetcare.context import Context
from fleetcare.db.chain import Entry, entries, seal
from fleetcare.db.tables import Fitting, Item, Meter, Reading, Site
from fleetcare.domain.quantities import Kind
from fleetcare.errors import Misread
from fleetcare.operations import upkeep
from fleetcare.operations.rows import fetch
from tests.conftest import NOW, counted_uids

Tamper = Callable[[str], None]


@pytest.fixture
def yard(ctx: Context) -> Context:
    """A yard of one engine in one machine, one meter, three readings: ledger entries 1 to 7."""
    fill(ctx)
    return ctx


def fill(context: Context) -> None:
    """Store the yard."""
    with context.write() as session:
        engine = Item(tag="P-01", tag_key="p-01", is_engine=True)
        machine = Item(tag="PH-1", tag_key="ph-1", is_engine=False)
        session.add_all([engine, machine])
        session.flush()
        meter = Meter(item_id=engine.id, kind=Kind.HOURS, unit="h")
        session.add_all([meter, Fitting(engine_id=engine.id, machine_id=machine.id, from_on=date(2024, 1, 10))])
        session.flush()
        session.add_all(
            Reading(meter_id=meter.id, on=date(2026, 3, day), value=Decimal(figure), unit="h")
            for day, figure in ((1, "1200"), (8, "1225.50"), (15, "1250"))
        )


@pytest.fixture
def behind(yard: Context) -> Tamper:
    """Change the file with plain SQL, as somebody with any database tool could."""

    def run(script: str) -> None:
        with closing(sqlite3.connect(yard.path)) as connection:
            connection.executescript(script)

    return run


def recorded(context: Context) -> list[Entry]:
    """All entries of the ledger."""
    with context.read() as connection:
        return list(entries(connection))


def problems(context: Context, head: str | None = None) -> tuple[str, ...]:
    """What a check complains of."""
    return upkeep.check(context, head).problems


def test_every_stored_row_gets_a_ledger_entry_in_the_order_of_dependency(yard: Context) -> None:
    kinds = [(entry.seq, entry.kind) for entry in recorded(yard)]
    assert kinds == list(enumerate(("item", "item", "fitting", "meter", "reading", "reading", "reading"), start=1))


def test_a_ledger_entry_holds_the_whole_row_with_its_figure_as_entered(yard: Context) -> None:
    row = json.loads(recorded(yard)[5].payload)
    assert row == {
        "id": 2,
        "uid": "u6",
        "recorded_at": "2026-05-01 08:30:00.000000",
        "meter_id": 1,
        "on": "2026-03-08",
        "value": "1225.50",
        "unit": "h",
        "value_sort": 1225.5,
        "rolled_over": 0,
        "entry_id": None,
        "note": "",
        "person_id": None,
        "import_key": None,
    }


def test_closing_a_row_appends_a_further_entry_for_the_same_row(yard: Context) -> None:
    with yard.write() as session:
        session.get_one(Fitting, 1).to_on = date(2026, 4, 1)
    *_, last = recorded(yard)
    assert (last.seq, last.kind, last.row_uid) == (8, "fitting", recorded(yard)[2].row_uid)
    assert json.loads(last.payload)["to_on"] == "2026-04-01"
    assert problems(yard) == ()


def test_setting_a_column_to_what_it_was_appends_nothing(yard: Context) -> None:
    with yard.write() as session:
        session.get_one(Fitting, 1).to_on = None
    assert len(recorded(yard)) == 7


def test_the_same_entries_stored_in_another_file_give_the_same_head(yard: Context, tmp_path: Path) -> None:
    other = Context(str(tmp_path / "other.db"), clock=lambda: NOW, uids=counted_uids())
    fill(other)
    assert upkeep.check(other) == upkeep.check(yard)


def test_a_seal_is_the_sha256_of_a_canonical_text() -> None:
    # printf '%s' '[1,"site","u1",1,"{}","00"]' | sha256sum
    digits = "95bd5736c3bb670806482dee49a205e16da9aaa3052e2d030f428afb62ca7095"
    assert seal(1, "site", "u1", 1, "{}", "00") == digits


def test_a_moment_is_recorded_in_utc_whatever_zone_the_clock_is_in(db: Path) -> None:
    clock = datetime(2026, 5, 1, 10, 30, tzinfo=timezone(timedelta(hours=2)))
    context = Context(str(db), clock=lambda: clock)
    with context.write() as session:
        site = Site(name="North Sluice", name_key="north sluice")
        session.add(site)
    with context.write() as session:
        assert session.get_one(Site, site.id).recorded_at == datetime(2026, 5, 1, 8, 30, tzinfo=UTC)
    assert '"recorded_at":"2026-05-01 08:30:00.000000"' in recorded(context)[0].payload


def test_a_row_cannot_be_deleted(yard: Context) -> None:
    with pytest.raises(RuntimeError, match="never deleted"), yard.write() as session:
        session.delete(session.get_one(Reading, 1))
    assert len(recorded(yard)) == 7


@pytest.mark.parametrize("bulk", [insert(Site).values(name="x", name_key="x"), update(Reading).values(note="x")])
def test_a_bulk_statement_that_would_pass_the_ledger_by_is_refused(yard: Context, bulk: object) -> None:
    with pytest.raises(RuntimeError, match="one at a time"), yard.write() as session:
        session.execute(bulk)  # type: ignore[call-overload]


def test_a_reading_connection_cannot_write(yard: Context) -> None:
    with pytest.raises(Exception, match="may not be written"), yard.read() as connection:
        fetch(connection, "UPDATE reading SET note = 'x'")


def test_an_untouched_database_is_sound(yard: Context) -> None:
    assert problems(yard) == ()


def test_a_database_with_nothing_in_it_is_sound(ctx: Context) -> None:
    assert upkeep.check(ctx) == upkeep.Soundness((), "0:" + "0" * 64)


def test_an_edited_row_is_found_and_both_values_named(yard: Context, behind: Tamper) -> None:
    behind("UPDATE reading SET value = '1226' WHERE id = 2")
    assert problems(yard) == (
        "reading 2 is not what ledger entry 6 says: "
        "value is '1226' and was '1225.50', value_sort is 1226.0 and was 1225.5",
    )


def test_a_figure_rewritten_with_other_digits_of_the_same_worth_is_found(yard: Context, behind: Tamper) -> None:
    behind("UPDATE reading SET value = '1225.5' WHERE id = 2")
    assert problems(yard) == ("reading 2 is not what ledger entry 6 says: value is '1225.5' and was '1225.50'",)


def test_an_inserted_row_is_found(yard: Context, behind: Tamper) -> None:
    behind("INSERT INTO site (uid, recorded_at, name, name_key) VALUES ('x', '2026-05-01', 'West', 'west')")
    assert problems(yard) == ("site 1 was put in behind the tool's back: the ledger does not know it",)


def test_a_removed_row_is_found(yard: Context, behind: Tamper) -> None:
    behind("DELETE FROM reading WHERE id = 3")
    assert problems(yard) == ("the reading of ledger entry 7 was removed",)


def test_a_removed_parent_row_is_found_with_the_rows_that_refer_to_it(yard: Context, behind: Tamper) -> None:
    behind("DELETE FROM item WHERE id = 2")
    assert problems(yard) == (
        "fitting 1 refers to a row of item that is not there",
        "the item of ledger entry 2 was removed",
    )


def test_a_removed_row_whose_ledger_entry_went_with_it_is_found(yard: Context, behind: Tamper) -> None:
    behind("DELETE FROM reading WHERE id = 2; DELETE FROM ledger WHERE seq = 6")
    assert problems(yard) == ("ledger entry 6 is missing",)


def test_several_entries_removed_in_a_row_are_named_together(yard: Context, behind: Tamper) -> None:
    behind("DELETE FROM ledger WHERE seq IN (1, 2, 3); DELETE FROM fitting; DELETE FROM item; DELETE FROM meter")
    assert "ledger entries 1 to 3 are missing" in problems(yard)


def test_an_edited_entry_does_not_fit_its_seal(yard: Context, behind: Tamper) -> None:
    behind(
        "UPDATE reading SET note = 'fine' WHERE id = 2;"
        """UPDATE ledger SET payload = replace(payload, '"note":""', '"note":"fine"') WHERE seq = 6"""
    )
    assert problems(yard) == ("ledger entry 6 was edited: its seal does not fit what it says",)


def test_an_edited_entry_sealed_anew_no_longer_leads_to_the_next(yard: Context, behind: Tamper) -> None:
    entry = recorded(yard)[5]
    forged = entry._replace(payload=entry.payload.replace('"note":""', '"note":"fine"'))
    behind(
        f"UPDATE reading SET note = 'fine' WHERE id = 2;"
        f"UPDATE ledger SET payload = '{forged.payload}', hash = '{seal(*forged[:-1])}' WHERE seq = 6"
    )
    assert problems(yard) == ("ledger entry 7 does not follow from entry 6: one of them was replaced",)


def test_an_entry_that_is_no_longer_readable_is_named_without_its_words(yard: Context, behind: Tamper) -> None:
    behind("UPDATE ledger SET payload = 'gone' WHERE seq = 7")
    assert problems(yard) == (
        "ledger entry 7 was edited: its seal does not fit what it says",
        "reading 3 is not what ledger entry 7 says",
    )


def test_a_table_that_does_not_belong_is_named(yard: Context, behind: Tamper) -> None:
    behind("CREATE TABLE notes (line TEXT)")
    assert problems(yard) == ("the table notes is none of fleetcare's",)


def test_a_word_that_is_not_in_its_list_is_found_by_the_database_too(yard: Context, behind: Tamper) -> None:
    behind("PRAGMA ignore_check_constraints = 1; UPDATE meter SET kind = 'weight'")
    assert problems(yard) == (
        "the file is damaged: CHECK constraint failed in meter",
        "meter 1 is not what ledger entry 4 says: kind is 'weight' and was 'hours'",
    )


def test_a_head_printed_before_anything_was_stored_always_fits(yard: Context) -> None:
    assert problems(yard, "0:00000000") == ()


def test_a_cut_end_is_found_only_against_a_head_that_was_printed(yard: Context, behind: Tamper) -> None:
    head = upkeep.check(yard).head
    behind("DELETE FROM reading WHERE id = 3; DELETE FROM ledger WHERE seq = 7")
    assert problems(yard) == ()
    assert problems(yard, head) == ("ledger entry 7 was printed but is not there; the ledger ends at 6",)


def test_a_ledger_written_anew_is_found_against_a_head_that_was_printed(yard: Context, db: Path) -> None:
    head = upkeep.check(yard).head
    assert problems(yard, head) == ()
    seq, digits = head.split(":")
    other = f"{seq}:{digits[:-1]}{'0' if digits[-1] != '0' else '1'}"
    assert problems(yard, other) == ("ledger entry 7 is not the one that was printed",)


def test_an_older_head_still_fits_after_more_was_stored(yard: Context) -> None:
    head = upkeep.check(yard).head
    with yard.write() as session:
        session.add(Site(name="West", name_key="west"))
    assert problems(yard, head) == ()


def test_the_first_eight_digits_of_a_head_are_enough(yard: Context) -> None:
    assert problems(yard, upkeep.check(yard).head[:10]) == ()


@pytest.mark.parametrize("head", ["7", "7:", "7:1234567", "x:12345678", "7:1234567g", "-1:12345678", ":12345678"])
def test_a_head_that_cannot_be_one_is_misread(yard: Context, head: str) -> None:
    with pytest.raises(Misread, match="as it is printed"):
        problems(yard, head)
