"""A forecast in words: no more exact than its range allows."""

from datetime import date

import pytest

from fleetcare.domain.forecasts import Clue, Forecast
from fleetcare.rules.explain_forecast import say_clues, say_range


@pytest.mark.parametrize(
    ("early", "late", "words"),
    [
        (date(2023, 11, 6), date(2023, 11, 20), "about 2023-11-11 (2023-11-06 to 2023-11-20)"),
        (date(2023, 11, 5), date(2023, 11, 20), "about the week of 2023-11-06 (weeks of 2023-10-30 to 2023-11-20)"),
        (date(2023, 10, 26), date(2023, 12, 25), "about the week of 2023-11-06 (weeks of 2023-10-23 to 2023-12-25)"),
        (date(2023, 10, 13), date(2023, 12, 25), "about 2023-11 (2023-10 to 2023-12)"),
        (date(2023, 10, 13), None, "not before 2023-10-13"),
    ],
)
def test_a_range_is_said_to_the_day_the_week_or_the_month_as_its_width_allows(
    early: date, late: date | None, words: str
) -> None:
    assert say_range(Forecast(early, date(2023, 11, 11), late, 33)) == words


def test_without_a_date_the_reason_is_said() -> None:
    assert say_range(Forecast(None, None, None, 0, "no readings")) == "no date: no readings"


def test_what_a_forecast_rests_on_is_said_with_its_weight() -> None:
    clues = (Clue("last 13 weeks", (62.4,), 0.25), Clue("same date in 2021, 2022", (131.0, 134.6), 0.75))
    forecast = Forecast(date(2023, 10, 13), date(2023, 11, 11), None, 33, clues=clues)
    assert say_clues(forecast) == "last 13 weeks: 62 d (25 %); same date in 2021, 2022: 131 d, 135 d (75 %)"


def test_an_unknown_season_is_said_without_days() -> None:
    clues = (Clue("last 42 days", (62.4,), 1), Clue("season not known yet", (), 0))
    assert say_clues(Forecast(None, None, None, 5, clues=clues)) == "last 42 days: 62 d (100 %); season not known yet"
