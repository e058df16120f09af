"""Statuses and duty factors in force on a day."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.domain.engines import DutyFactor, Status, StatusSpell, factor_on, status_on
from fleetcare.domain.quantities import Kind

SPELLS = (
    StatusSpell(Status.LAID_UP, date(2026, 11, 1)),
    StatusSpell(Status.IN_SERVICE, date(2027, 3, 1)),
)
FACTORS = (
    DutyFactor(Kind.HOURS, Decimal("0.5"), date(2026, 5, 1), "dust"),
    DutyFactor(Kind.CALENDAR, Decimal("0.8"), date(2026, 5, 1), "salt"),
    DutyFactor(Kind.HOURS, Decimal("0.7"), date(2026, 9, 1), "less dust"),
)


@pytest.mark.parametrize(
    ("day", "status"),
    [
        (date(2026, 10, 31), Status.IN_SERVICE),
        (date(2026, 11, 1), Status.LAID_UP),
        (date(2027, 2, 28), Status.LAID_UP),
        (date(2027, 3, 1), Status.IN_SERVICE),
    ],
)
def test_a_spell_counts_from_its_first_day_to_the_day_before_the_next(day: date, status: Status) -> None:
    assert status_on(SPELLS, day) is status


@pytest.mark.parametrize(
    ("day", "factor"),
    [(date(2026, 4, 30), "1"), (date(2026, 5, 1), "0.5"), (date(2026, 8, 31), "0.5"), (date(2026, 9, 1), "0.7")],
)
def test_a_duty_factor_holds_for_its_kind_until_the_next_one(day: date, factor: str) -> None:
    assert factor_on(FACTORS, Kind.HOURS, day) == Decimal(factor)
