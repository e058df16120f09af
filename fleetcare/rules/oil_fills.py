"""Oil samples told apart by the fill they were taken from, the hours that lie between, and what was topped up meanwhile.

All by what the sheets state; only top-ups are taken from the log where a sheet says nothing of them. A log without any
since the oil was filled in says nothing either: never that there were none.
"""

from collections.abc import Iterable, Sequence
from dataclasses import replace
from decimal import Decimal
from enum import Enum
from typing import NamedTuple

from fleetcare.domain.measured import MeasuredSheet, TopUp
from fleetcare.rules.judging.facts import CannotTell
from fleetcare.rules.judging.rates import is_other_fill
from fleetcare.rules.judging.spans import decimal
from fleetcare.rules.judging.values import HOURS_ON_OIL, TOP_UP, single
from fleetcare.rules.oil import MOST_HOURS


class Along(Enum):
    """What values are drawn along: the hours on the oil, fill after fill, the hours of life of the engine, or days."""

    OIL = "oil"
    LIFE = "life"
    DAYS = "days"


class Fill(NamedTuple):
    """A fill of oil: the entry of its first sample, and the hours seen on the fills before it."""

    first: int
    begins: Decimal


def fills_of(sheets: Iterable[MeasuredSheet]) -> dict[int, Fill]:
    """Tell the fills of oil samples apart, by entry; samples whose hours nobody stated are left out."""
    fills: dict[int, Fill] = {}
    then: tuple[MeasuredSheet, Decimal] | None = None
    for sheet in sheets:
        hours = hours_on_oil(sheet)
        if hours is None:
            continue
        if then is None:
            fill = Fill(sheet.entry, Decimal(0))
        elif is_other_fill(then, (sheet, hours)):
            fill = Fill(sheet.entry, fill.begins + then[1])
        fills[sheet.entry] = fill
        then = sheet, hours
    return fills


def along_of(sheets: Iterable[MeasuredSheet], *, counts_hours: bool) -> Along:
    """Say what oil samples are drawn along: where any does not state its hours, what is known of all of them."""
    if all(hours_on_oil(sheet) is not None for sheet in sheets):
        return Along.OIL
    return Along.LIFE if counts_hours else Along.DAYS


def places_of(sheets: Sequence[MeasuredSheet], along: Along) -> dict[int, Decimal]:
    """Give where each sheet is drawn, by entry; those of which it is not known are left out.

    Along the oil it is where the fill begins, which is the sum of the hours seen on the fills before, and its own hours.
    """
    if along is Along.DAYS:
        return {sheet.entry: Decimal(sheet.on.toordinal()) for sheet in sheets}
    if along is Along.LIFE:
        return {sheet.entry: sheet.engine_hours for sheet in sheets if sheet.engine_hours is not None}
    fills = fills_of(sheets)
    return {
        sheet.entry: fills[sheet.entry].begins + hours for sheet in sheets if (hours := hours_on_oil(sheet)) is not None
    }


def seen_until(sheets: Sequence[MeasuredSheet], life: Decimal | None) -> Decimal:
    """Give where the oil stands by now, fill after fill: its newest sample, and what the engine ran since; 0 without any.

    `life` is the life total of the engine now, h, None where not known.
    """
    fills = fills_of(sheets)
    known = [sheet for sheet in sheets if sheet.entry in fills]
    if not known:
        return Decimal(0)
    return fills[known[-1].entry].begins + (hours_on_oil(known[-1]) or 0) + run_since(known[-1], life)


def run_since(sheet: MeasuredSheet, life: Decimal | None) -> Decimal:
    """Give the hours an engine ran since a sheet, 0 where that is not known."""
    then = sheet.engine_hours
    return max(life - then, Decimal(0)) if life is not None and then is not None else Decimal(0)


def _stated(sheet: MeasuredSheet, quantity: str, unit: str) -> Decimal | None:
    one = single(sheet, quantity)
    try:
        return decimal(one.within(unit).low) if one is not None and one.span.is_known else None
    except CannotTell:
        return None


def hours_on_oil(sheet: MeasuredSheet) -> Decimal | None:
    """Give the hours a sample's oil had run, None where the sheet states none that can be right."""
    hours = _stated(sheet, HOURS_ON_OIL, "h")
    return hours if hours is not None and 0 < hours <= MOST_HOURS else None


def top_up(sheet: MeasuredSheet) -> Decimal | None:
    """Give the litres topped up since the oil change, as the sheet states them, else by the log; None where neither does."""
    return _stated(sheet, TOP_UP, "L") if sheet.logged_top_up is None else sheet.logged_top_up


def with_logged(sheet: MeasuredSheet, top_ups: Sequence[TopUp]) -> MeasuredSheet:
    """Give an oil sample that says nothing of top-ups with what the log of its engine has of its fill; any other as it is.

    The oil was filled in at the hours of life then, less those on the oil; a top-up at just that figure belongs to the
    fill before.
    """
    life, hours = sheet.engine_hours, hours_on_oil(sheet) if top_ups else None
    if life is None or hours is None or any(value.quantity == TOP_UP for value in sheet.values):
        return sheet
    litres = [one.litres for one in top_ups if life - hours < one.life <= life]
    return replace(sheet, logged_top_up=sum(litres, Decimal(0))) if litres else sheet
