"""When a figure will be reached: what is told, what is withheld and why, and what it rests on."""

from collections.abc import Callable
from datetime import date, timedelta
from decimal import Decimal

import pytest

from fleetcare.rules.forecast import History
from fleetcare.rules.use_curve import UseCurve

FIRST = date(2021, 1, 4)
Use = Callable[[date], float]


def a_history(use: Use, days: int, every: int = 14) -> History:
    """Readings every so many days of a meter that gains `use(day)` hours on each, from 1000 h on 4 January 2021."""
    total, figures = 1000.0, []
    for n in range(days + 1):
        on = FIRST + timedelta(days=n)
        if n % every == 0:
            figures.append((on, total))
        total += use(on)
    return History(figures)


def steady(_: date) -> float:
    return 5


def in_winter(on: date) -> float:
    return 10 if on.month in {11, 12, 1, 2, 3} else 0


def after(n: int) -> date:
    return FIRST + timedelta(days=n)


@pytest.mark.parametrize(
    ("figures", "reason"),
    [
        ([], "no readings; three over at least 14 days are needed"),
        ([(0, 10)], "only 1 reading; three over at least 14 days are needed"),
        ([(0, 10), (20, 30)], "only 2 readings; three over at least 14 days are needed"),
        ([(0, 10), (0, 12), (20, 30)], "only 2 readings; three over at least 14 days are needed"),
        ([(0, 10), (5, 12), (13, 30)], "the readings cover only 13 days; three over at least 14 days are needed"),
        ([(0, 10), (20, 10), (40, 10)], "no use since the reading of 2021-01-04"),
    ],
)
def test_too_little_to_go_on_gives_no_date_and_says_what_is_needed(figures: list[tuple[int, int]], reason: str) -> None:
    history = History([(after(n), Decimal(total)) for n, total in figures])
    answer = history.reach(Decimal(500))
    assert (answer.early, answer.likely, answer.late, answer.clues) == (None, None, None, ())
    assert answer.reason == reason
    assert history.likely_value(after(60)) is None


def test_three_readings_over_fourteen_days_are_enough() -> None:
    answer = History([(FIRST, 10), (after(7), 20), (after(14), 30)]).reach(40)
    assert answer.likely == after(21)
    assert answer.readings_used == 3
    assert answer.reason is None


@pytest.mark.parametrize("target", [6460, Decimal(6000)])
def test_a_target_already_reached_has_no_dates_and_says_so(target: Decimal | int) -> None:
    answer = History([(FIRST, 10), (date(2024, 1, 1), Decimal(6460))]).reach(target)
    assert (answer.early, answer.likely, answer.late) == (None, None, None)
    assert answer.reason == "already reached by the reading of 2024-01-01"


def test_a_target_more_than_a_century_away_has_no_date() -> None:
    answer = a_history(steady, 700).reach(1000 + 700 * 5 + 5 * 36600)
    assert answer.likely is None
    assert answer.reason == "more than 100 years away at the use so far"


def test_a_late_date_beyond_1500_days_is_left_open() -> None:
    answer = a_history(steady, 700).reach(1000 + 700 * 5 + 5 * 1490)
    assert answer.likely == after(700 + 1490)
    assert answer.late is None


def test_a_day_past_the_end_of_the_calendar_is_its_last() -> None:
    answer = History([(date(9999, 11, 1), 0), (date(9999, 11, 20), 10), (date(9999, 12, 10), 20)]).reach(60)
    assert (answer.likely, answer.late) == (date.max, date.max)


def test_the_highest_of_several_readings_on_a_day_counts() -> None:
    plain = [(FIRST, 10), (after(7), 20), (after(14), 30)]
    assert History([(after(14), 25), *plain, (after(7), 12)]).reach(40) == History(plain).reach(40)


def test_a_fall_counts_as_nothing_used() -> None:
    plain = [(FIRST, 10), (after(10), 20), (after(20), 20), (after(30), 30)]
    fallen = [(on, 15 if on == after(20) else total) for on, total in plain]
    assert History(fallen).reach(40) == History(plain).reach(40)


def test_under_thirteen_months_the_season_is_said_to_be_unknown() -> None:
    recent, season = a_history(steady, 378).reach(3000).clues
    assert (recent.label, recent.weight) == ("last 13 weeks", 1)
    assert (season.label, season.days, season.weight) == ("season not known yet", (), 0)


def test_a_short_history_names_the_days_it_has() -> None:
    assert a_history(steady, 42).reach(1500).clues[0].label == "last 42 days"


def test_from_thirteen_months_the_same_date_of_earlier_years_is_a_clue() -> None:
    recent, season = a_history(steady, 1092).reach(1000 + 1092 * 5 + 350).clues
    assert recent.days == pytest.approx((70,))
    assert season.label == "same date in 2022, 2023"
    assert season.days == pytest.approx((70, 70))
    assert recent.weight + season.weight == pytest.approx(1)


def test_no_more_than_four_earlier_years_are_looked_at() -> None:
    season = a_history(steady, 2184).reach(1000 + 2184 * 5 + 350).clues[1]
    assert season.label == "same date in 2022, 2023, 2024, 2025"


def test_in_a_seasonal_engine_the_season_outweighs_the_recent_weeks() -> None:
    recent, season = a_history(in_winter, 1092).reach(1000 + 4520 + 350).clues
    assert season.weight > 0.9 > recent.weight


def test_in_an_engine_with_new_work_the_recent_weeks_outweigh_the_season() -> None:
    history = a_history(lambda on: 1 + 0.002 * (on - FIRST).days ** 1.3, 840)
    recent, season = history.reach(history.likely_value(after(900)) or 0).clues
    assert recent.weight > 0.5 > season.weight


def test_an_idle_spell_of_a_settled_engine_does_not_mean_never() -> None:
    busy_then_idle = a_history(lambda on: 5 if on < after(395) else 0.05, 487)
    recent = busy_then_idle.reach(3300).clues[0]
    at_life_rate = (3300 - 1000 - 395 * 5 - 92 * 0.05) * 487 / (395 * 5 + 92 * 0.05)
    assert recent.days[0] == pytest.approx(at_life_rate + 150, abs=10)


def test_an_engine_idle_for_thirteen_weeks_is_taken_at_its_whole_life_rate() -> None:
    idle = a_history(lambda on: 5 if on < after(98) else 0, 196)
    assert idle.reach(1490 + 25).clues[0].days == pytest.approx((10,))


def test_an_engine_long_idle_before_its_first_use_gets_a_date() -> None:
    late_starter = a_history(lambda on: 0 if on < after(700) else 5, 770)
    assert late_starter.reach(1350 + 50).likely is not None


def test_an_amount_never_yet_used_from_the_same_date_goes_on_at_the_whole_life_rate() -> None:
    season = a_history(steady, 406).reach(1000 + 406 * 5 + 2000).clues[1]
    assert season.days == pytest.approx((400,))


def test_erratic_use_leaves_a_young_engine_without_a_late_date() -> None:
    answer = History([(FIRST, 0), (after(10), 1), (after(20), 100), (after(30), 101)]).reach(400)
    assert answer.likely is not None
    assert answer.late is None


def test_the_likely_value_is_the_figure_whose_likely_date_is_that_day() -> None:
    history = a_history(steady, 1092)
    value = history.likely_value(after(1092 + 70))
    assert value == pytest.approx(1000 + 1092 * 5 + 350, abs=0.05)


@pytest.mark.parametrize("later", [1, 30, 400, 4000])
def test_the_likely_value_leads_back_to_its_day(later: int) -> None:
    history = a_history(steady, 490)
    value = history.likely_value(after(490 + later))
    assert value is not None
    assert history.reach(value).likely == after(490 + later)


def test_the_likely_value_is_never_below_the_last_reading() -> None:
    assert a_history(steady, 98).likely_value(after(50)) == 1490


def test_the_likely_value_stands_still_in_an_idle_season() -> None:
    history = a_history(in_winter, 1204)  # to 22 April 2024
    june, august = (history.likely_value(date(2024, month, 1)) for month in (6, 8))
    assert june is not None
    assert june == pytest.approx(august, abs=0.5)


def test_a_curve_gives_the_first_day_on_which_a_total_was_reached() -> None:
    curve = UseCurve([(after(0), 10), (after(10), 20), (after(50), 20), (after(60), 30)])
    days = [curve.day_of(total) - curve.first for total in (10, 15, 20, 25, 30)]
    assert days == pytest.approx([0, 5, 10, 55, 60], abs=1e-6)


def test_a_curve_gives_totals_between_its_readings() -> None:
    curve = UseCurve([(after(0), 10), (after(10), 20), (after(50), 20)])
    assert [curve.total_on(curve.first + n) for n in (0, 5, 10, 30, 50)] == [10, 15, 20, 20, 20]
