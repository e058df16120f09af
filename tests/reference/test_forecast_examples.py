"""Forecasts and bad readings against figures from outside the program.

Sources: the dates were worked by hand from the way the meters were run, the ranges by a simulation of the published
method: inverse-error weights after Bates & Granger 1969, an 80 % log-normal range from the errors on six past days.
The chains follow from the speed limit of Song, Zhang, Wang, Yu, SCREEN, SIGMOD 2015, by hand.
"""

from datetime import date, timedelta
from decimal import Decimal

import pytest

from fleetcare.rules.forecast import History
from fleetcare.rules.readings import breaks_rule, plausible_chain


def test_a_steady_engine_of_70_hours_a_fortnight_needs_70_days_for_350_hours() -> None:
    figures = [(date(2021, 1, 4) + timedelta(days=14 * n), Decimal(1000 + 70 * n)) for n in range(79)]
    assert figures[-1] == (date(2024, 1, 1), Decimal(6460))
    answer = History(figures).reach(Decimal(6810))
    assert answer.likely == date(2024, 3, 11)  # 350 h at 5 h a day, by hand
    assert (answer.early, answer.late) == (date(2024, 2, 26), date(2024, 4, 1))  # by simulation


def test_a_winter_pump_read_in_july_needs_100_hours_until_november() -> None:
    figures, total, on = [], Decimal(500), date(2020, 11, 1)
    while on <= date(2023, 7, 1):
        if on.day == 1:
            figures.append((on, total))
        total += 10 if on.month in {11, 12, 1, 2, 3} else 0
        on += timedelta(days=1)
    assert figures[-1] == (date(2023, 7, 1), Decimal(5030))
    answer = History(figures).reach(Decimal(5130))
    assert answer.likely == date(2023, 11, 11)  # ten days into the season at 10 h a day, by hand
    assert (answer.early, answer.late) == (date(2023, 10, 13), date(2023, 12, 25))  # by simulation


@pytest.mark.parametrize(
    ("totals", "cap", "kept"),
    [
        ([4512, 4548, 5486, 4621, 4660], 24, {0, 1, 3, 4}),  # 4586 with two digits swapped
        ([4512, 4548, 4586, 4621, 4660], 24, {0, 1, 2, 3, 4}),
        ([999400, 999800, 150, 560], 1800, {2, 3}),  # rolled over and not said so: the later of two equal chains
        ([999400, 999800, 1000150, 1000560], 1800, {0, 1, 2, 3}),  # the same with the turn counted
    ],
)
def test_weekly_readings_keep_the_longest_plausible_chain(totals: list[int], cap: int, kept: set[int]) -> None:
    figures = [(date(2026, 1, 5) + timedelta(days=7 * n), Decimal(total)) for n, total in enumerate(totals)]
    assert plausible_chain(figures, Decimal(cap)) == kept


@pytest.mark.parametrize(("gained", "is_possible"), [("0", True), ("192", True), ("192.1", False), ("-0.1", False)])
def test_a_week_holds_at_most_eight_days_of_24_hours(gained: str, is_possible: bool) -> None:
    earlier = (date(2026, 1, 5), Decimal(4512))
    later = (date(2026, 1, 12), Decimal(4512) + Decimal(gained))
    assert (breaks_rule(earlier, later, Decimal(24), "h") is None) is is_possible
