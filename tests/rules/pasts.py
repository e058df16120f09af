"""Compression tests and oil samples of one engine, and what they make of the past of a cylinder and of the iron in its oil."""

from decimal import Decimal

from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.sheets import SheetValue
from fleetcare.rules.measured_past import MeasuredPast, compression_pasts, oil_pasts
from tests.rules.measured import a_sheet, value

BANKS = ((1, 2),)


def a_test(days: int, hours: str | None, *figures: str, unit: str = "bar", gauge: str = "") -> MeasuredSheet:
    """A compression sheet, cylinder by cylinder, so many days ago, at hours of life."""
    values = [value("pressure", text, unit, str(place), "dry") for place, text in enumerate(figures, start=1) if text]
    life = Decimal(hours) if hours is not None else None
    return a_sheet(*values, kind="compression", days=days, engine_hours=life, gauge=gauge)


def sampled(
    days: int, on_oil: str, iron: str, *more: SheetValue, life: str | None = None, added: str = "0", lab: str = ""
) -> MeasuredSheet:
    """An oil sample, so many days ago; what is empty is not stated."""
    stated = (("hours_on_oil", on_oil), ("top_up", added), ("Fe", iron))
    values = [value(quantity, text) for quantity, text in stated if text]
    hours = Decimal(life) if life is not None else None
    return a_sheet(*values, *more, days=days, engine_hours=hours, gauge=lab)


def cylinder(*sheets: MeasuredSheet, counts_hours: bool = True) -> MeasuredPast:
    """The past of cylinder 1."""
    return compression_pasts(sheets, BANKS, counts_hours=counts_hours)[0]


def iron(
    *sheets: MeasuredSheet, sump: str | None = "8", fresh: tuple[SheetValue, ...] = (), counts_hours: bool = True
) -> MeasuredPast:
    """The past of iron."""
    pasts = oil(*sheets, sump=sump, fresh=fresh, counts_hours=counts_hours)
    return next(past for past in pasts if past.quantity == "Fe")


def oil(
    *sheets: MeasuredSheet, sump: str | None = "8", fresh: tuple[SheetValue, ...] = (), counts_hours: bool = True
) -> list[MeasuredPast]:
    """All that was found in the oil."""
    return oil_pasts(sheets, Decimal(sump) if sump else None, fresh, counts_hours=counts_hours)


def fitted(past: MeasuredPast) -> list[list[tuple[str, str]]]:
    """Give what is fitted, line by line."""
    return [[(f"{point.x:f}", f"{point.y:f}") for point in segment.points] for segment in past.segments]
