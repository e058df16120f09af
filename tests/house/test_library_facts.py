"""Behaviour of the libraries under us that this code is built around, so that an upgrade cannot change it unseen."""

import sqlite3
from collections.abc import Iterator
from contextlib import closing
from datetime import UTC, datetime
from decimal import Decimal
from enum import StrEnum
from pathlib import Path

import pytest
from sqlalchemy import Engine, MetaData, create_engine, text
from sqlalchemy.exc import IntegrityError, StatementError
from sqlmodel import Field, Session, SQLModel

from fleetcare.db import reading
from fleetcare.db import session as file
from fleetcare.db.columns import choice, exact
from tests.conftest import AS_SHIPPED


class Mark(StrEnum):
    """Two words, named differently from what they say."""

    GOOD = "in order"
    BAD = "out of order"


class Plain(SQLModel, table=True):
    """Columns as the library makes them when it is not told otherwise."""

    metadata = MetaData()
    id: int = Field(default=None, primary_key=True)
    figure: Decimal = Decimal(0)
    mark: Mark = Mark.GOOD
    at: datetime = Field(default=None, nullable=True)


class Ours(SQLModel, table=True):
    """The same columns as this program makes them."""

    metadata = MetaData()
    id: int = Field(default=None, primary_key=True)
    figure: Decimal = exact(default=Decimal(0))
    mark: Mark = choice("mark", Mark, default=Mark.GOOD)


@pytest.fixture
def engine() -> Iterator[Engine]:
    """Both tables, in memory."""
    made = create_engine("sqlite://")
    Plain.metadata.create_all(made)
    Ours.metadata.create_all(made)
    yield made
    made.dispose()


def stored(engine: Engine, row: SQLModel) -> tuple[object, ...]:
    """Store a row and give its figure and mark as the file holds them."""
    with Session(engine) as session:
        session.add(row)
        session.flush()
        return tuple(session.connection().execute(text(f"SELECT figure, mark FROM {row.__tablename__}")).one())


def test_a_table_class_takes_any_value_so_drafts_must_check_them() -> None:
    assert Plain(figure="about ten").figure == "about ten"  # type: ignore[arg-type]


def test_a_decimal_column_of_the_library_keeps_a_binary_fraction(engine: Engine) -> None:
    assert stored(engine, Plain(figure=Decimal("0.250"))) == (0.25, "GOOD")


def test_our_figures_keep_every_digit(engine: Engine) -> None:
    with Session(engine) as session:
        session.add(Ours(figure=Decimal("0.250")))
        session.add(Ours(figure=Decimal("1E+3")))
        session.commit()
        assert [str(session.get_one(Ours, n).figure) for n in (1, 2)] == ["0.250", "1000"]


@pytest.mark.parametrize("value", [0.25, 1, "0.25", Decimal("NaN"), Decimal("Infinity")])
def test_our_figures_take_nothing_but_a_finite_decimal(engine: Engine, value: object) -> None:
    with pytest.raises(StatementError, match="finite Decimal"):
        stored(engine, Ours(figure=value))  # type: ignore[arg-type]


def test_an_enumeration_is_stored_by_the_name_of_its_member_unless_told_otherwise(engine: Engine) -> None:
    assert stored(engine, Plain(mark=Mark.BAD))[1] == "BAD"


def test_our_words_are_stored_as_they_are_said_and_held_to_their_list(engine: Engine) -> None:
    assert stored(engine, Ours(mark=Mark.BAD))[1] == "out of order"
    with pytest.raises(IntegrityError), engine.begin() as connection:
        connection.execute(text("INSERT INTO ours (figure, mark) VALUES ('1', 'BAD')"))


def test_a_moment_must_be_aware_and_comes_back_in_utc(engine: Engine) -> None:
    moment = datetime(2026, 5, 1, 8, 30, tzinfo=UTC)
    with Session(engine) as session:
        session.add(Plain(at=moment))
        session.commit()
        assert session.get_one(Plain, 1).at == moment
        session.add(Plain(at=moment.replace(tzinfo=None)))
        with pytest.raises(StatementError, match="timezone"):
            session.commit()


def test_references_are_checked_only_where_a_connection_asks_for_it(db: Path) -> None:
    orphan = "INSERT INTO task (uid, recorded_at, item_id, name, name_key) VALUES ('u', '2026-05-01', 7, 'Oil', 'oil')"
    with closing(sqlite3.connect(db)) as connection:
        connection.execute(orphan)
    with file.engine(db).connect() as ours, pytest.raises(IntegrityError):
        ours.execute(text(orphan))


def test_the_switch_for_references_does_nothing_inside_a_transaction(db: Path) -> None:
    with file.engine(db).begin() as connection:
        connection.execute(text("PRAGMA foreign_keys = 0"))
        assert connection.execute(text("PRAGMA foreign_keys")).scalar_one() == 1


def test_an_acknowledged_commit_outlasts_a_power_cut(db: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(reading, "SYNCHRONOUS", AS_SHIPPED)
    with file.engine(db).connect() as connection:
        modes = [connection.execute(text(f"PRAGMA {name}")).scalar_one() for name in ("journal_mode", "synchronous")]
    assert modes == ["delete", 3]  # 3 is EXTRA: https://www.sqlite.org/pragma.html#pragma_synchronous
