"""What the tables share: the three columns every row has, and kinds of column the library lacks."""

from datetime import datetime
from decimal import Decimal
from enum import StrEnum
from typing import Any

from sqlalchemy import Enum, MetaData, String
from sqlalchemy.engine.interfaces import Dialect
from sqlalchemy.types import TypeDecorator
from sqlmodel import Field, SQLModel

# Every constraint has a name, because a later migration can only change what it can name.
NAMES = {
    "ix": "ix_%(table_name)s_%(column_0_N_name)s",
    "uq": "uq_%(table_name)s_%(column_0_N_name)s",
    "ck": "ck_%(table_name)s_%(constraint_name)s",
    "fk": "fk_%(table_name)s_%(column_0_name)s",
    "pk": "pk_%(table_name)s",
}


class Exact(TypeDecorator[Decimal]):
    """A figure as it was entered, kept as text: 0.250 comes back as 0.250.

    SQLite would keep a NUMERIC column as a binary fraction. Text sorts as text, so figures are
    compared in Python, never in SQL.
    """

    impl = String
    cache_ok = True

    def process_bind_param(self, value: Decimal | None, dialect: Dialect) -> str | None:
        """Give the digits to store. Raises TypeError for anything but a finite Decimal."""
        if value is None:
            return None
        if not isinstance(value, Decimal) or not value.is_finite():
            raise TypeError(f"a figure is stored from a finite Decimal, not {value!r}")
        return format(value, "f")

    def process_result_value(self, value: str | None, dialect: Dialect) -> Decimal | None:
        """Give the figure back with the digits it was stored with."""
        return None if value is None else Decimal(value)


class Stored(SQLModel):
    """Anything that is a table of the one schema."""

    metadata = MetaData(naming_convention=NAMES)


class Row(Stored):
    """A row that the ledger vouches for. The session fills `uid` and `recorded_at` (UTC) when it is stored."""

    id: int = Field(default=None, primary_key=True)
    uid: str = Field(default=None, unique=True)
    recorded_at: datetime = Field(default=None, nullable=False)


def key(*, unique: bool = False, default: Any = ...) -> Any:
    """A column of text that rows are found by."""
    return Field(default=default, unique=unique, nullable=default is None)


def ref(table: str, *, unique: bool = False, default: Any = ...) -> Any:
    """A column that names a row of `table`; nullable where its default is None."""
    return Field(default=default, foreign_key=f"{table}.id", unique=unique, index=not unique, nullable=default is None)


def exact(*, default: Any = ...) -> Any:
    """A column for a measured or counted figure; nullable where its default is None."""
    return Field(default=default, sa_type=Exact, nullable=default is None)


def choice(name: str, *values: type[StrEnum] | str, default: Any = ...) -> Any:
    """A column that takes only the given words, held to them by a CHECK called after the column.

    An enumeration is stored by the value of its members, the words of the design.
    """
    kind: Any = Enum(
        *values,  # type: ignore[arg-type]  # the stubs know either words or one enumeration
        name=name,
        values_callable=lambda members: [member.value for member in members],
        native_enum=False,
        create_constraint=True,
        length=20,
    )
    return Field(default=default, sa_type=kind, nullable=default is None)
