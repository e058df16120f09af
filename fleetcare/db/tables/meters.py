"""Meters, for whom they count, and what was read off them."""

from datetime import date
from decimal import Decimal

from sqlalchemy import Computed, Float
from sqlmodel import Field

from fleetcare.db.columns import Row, choice, exact, key, ref
from fleetcare.domain.quantities import Kind


class Meter(Row, table=True):
    """A counter on an item. `digits` and `decimals` stand before and after the point and give the rollover."""

    __tablename__ = "meter"

    item_id: int = ref("item")
    kind: Kind = choice("kind", Kind)
    unit: str
    digits: int | None = None
    decimals: int | None = None
    counts: str = ""


class MeterFit(Row, table=True):
    """A stretch of time in which a meter counts for an item.

    `from_on` None means since ever, `to_on` None until further notice. `first` and `last` are stated where a meter
    is new or replaced; None stands for what its readings say of that day, however late they come in.
    `unmetered` is what ran after the end without being counted.
    """

    __tablename__ = "meter_fit"

    meter_id: int = ref("meter")
    item_id: int = ref("item")
    from_on: date | None = None
    first: Decimal | None = exact(default=None)
    to_on: date | None = None
    last: Decimal | None = exact(default=None)
    unmetered: Decimal = exact(default=Decimal(0))


class Reading(Row, table=True):
    """A dated dial figure, as entered with its unit.

    The database works out `value_sort` itself; it is for ordering only and never compared with anything.
    """

    __tablename__ = "reading"

    meter_id: int = ref("meter")
    on: date
    value: Decimal = exact()
    unit: str
    value_sort: float = Field(
        default=None, sa_type=Float, sa_column_args=[Computed("CAST(value AS REAL)", persisted=True)]
    )
    rolled_over: bool = False
    entry_id: int | None = ref("log_entry", default=None)
    note: str = ""
    person_id: int | None = ref("person", default=None)
    import_key: str | None = key(unique=True, default=None)


class ReadingMark(Row, table=True):
    """What was decided about a reading afterwards; the newest mark holds."""

    __tablename__ = "reading_mark"

    reading_id: int = ref("reading")
    mark: str = choice("mark", "suspect", "void", "restored")
    why: str = ""
    on: date
