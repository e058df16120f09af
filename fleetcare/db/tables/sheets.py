"""Measurements taken together."""

from datetime import date
from decimal import Decimal

from fleetcare.db.columns import Row, choice, exact, key, ref
from fleetcare.domain.sheets import Phase


class Sheet(Row, table=True):
    """One occasion of measuring, with the gauge used and the conditions it was taken in; who and at what, its entry says."""

    __tablename__ = "sheet"

    item_id: int = ref("item")
    entry_id: int = ref("log_entry")
    kind: str
    taken_on: date
    conditions: str = ""
    gauge: str = ""
    lab_number: str = ""
    received_on: date | None = None
    import_key: str | None = key(unique=True, default=None)


class SheetValue(Row, table=True):
    """One value of a sheet: a figure, a go / no-go interval, or a bound such as <1 told by its qualifier."""

    __tablename__ = "sheet_value"

    sheet_id: int = ref("sheet")
    quantity: str
    point: str = ""
    phase: Phase = choice("phase", Phase, default=Phase.NONE)
    value: Decimal | None = exact(default=None)
    low: Decimal | None = exact(default=None)
    high: Decimal | None = exact(default=None)
    unit: str = ""
    qualifier: str = ""
