"""Which readings can be true together."""

from datetime import date, timedelta
from decimal import Decimal
from random import Random

import pytest

from fleetcare.rules.readings import breaks_rule, misfits, plausible_chain

FIRST = date(2026, 3, 2)
DAY = Decimal(24)
Figure = tuple[date, Decimal]


def figure(days: int, total: str | int) -> Figure:
    return FIRST + timedelta(days=days), Decimal(total)


def weekly(*totals: int) -> list[Figure]:
    return [figure(7 * week, total) for week, total in enumerate(totals)]


@pytest.mark.parametrize(
    ("later", "reason"),
    [
        (figure(3, "1000"), None),
        (figure(3, "1096"), None),  # a day of slack: dated, not timed
        (figure(0, "1024"), None),
        (figure(3, "999.9"), "lower by 0.1 h"),
        (figure(3, "1096.1"), "gains 96.1 h in 3 days, at most 24 h a day"),
        (figure(1, "1300"), "gains 300 h in 1 day, at most 24 h a day"),
        (figure(0, "1030"), "gains 30 h on one day, at most 24 h a day"),
    ],
)
def test_a_reading_lies_between_nothing_gained_and_the_cap_for_one_day_more(later: Figure, reason: str | None) -> None:
    assert breaks_rule(figure(0, "1000"), later, DAY, "h") == reason


def test_no_readings_make_no_chain() -> None:
    assert plausible_chain([], DAY) == frozenset()


def test_a_clean_history_is_kept_whole() -> None:
    assert plausible_chain(weekly(0, 40, 40, 90, 200), DAY) == {0, 1, 2, 3, 4}


def test_one_reading_typed_too_high_falls_off_alone() -> None:
    assert plausible_chain(weekly(100, 9150, 200, 250), DAY) == {0, 2, 3}


def test_one_reading_typed_too_low_falls_off_alone() -> None:
    assert plausible_chain(weekly(1000, 1050, 110, 1150), DAY) == {0, 1, 3}


def test_bad_readings_in_a_row_however_many_cut_no_chain() -> None:
    bad = [10**6 - week for week in range(30)]
    figures = weekly(*range(0, 200, 10), *bad, *range(500, 600, 10))
    assert plausible_chain(figures, DAY) == frozenset(range(20)) | frozenset(range(50, 60))


def test_of_two_chains_of_one_length_the_one_with_later_readings_is_kept() -> None:
    assert plausible_chain(weekly(500, 100), DAY) == {1}
    assert plausible_chain(weekly(100, 150, 120, 200), DAY) == {0, 2, 3}


def test_the_order_of_typing_does_not_count() -> None:
    figures = weekly(100, 9150, 200, 250)
    assert plausible_chain([figures[i] for i in (3, 1, 0, 2)], DAY) == {0, 2, 3}


def test_readings_of_one_day_count_by_value() -> None:
    assert plausible_chain([figure(0, 120), figure(0, 100), figure(0, 120)], DAY) == {0, 1, 2}


def test_a_reading_held_to_be_true_takes_everything_against_it_off_the_chain() -> None:
    figures = weekly(100, 150, 200, 20, 250, 60)
    assert plausible_chain(figures, DAY) == {0, 1, 2, 4}
    assert plausible_chain(figures, DAY, holding=3) == {3, 5}
    assert plausible_chain(figures, DAY, holding=5) == {3, 5}


def test_a_held_reading_stands_alone_where_nothing_agrees_with_it() -> None:
    assert plausible_chain(weekly(100, 150, 9000), DAY, holding=2) == {2}
    assert plausible_chain(weekly(9000, 150, 200), DAY, holding=0) == {0}


def test_a_held_reading_that_agrees_costs_nothing() -> None:
    figures = weekly(100, 9150, 200, 250)
    assert plausible_chain(figures, DAY, holding=2) == plausible_chain(figures, DAY)


def test_two_thousand_readings_with_errors_keep_all_the_good_ones() -> None:
    random = Random(1)
    figures = weekly(*(week * 30 for week in range(2000)))
    wrong = set(random.sample(range(2000), 60))
    spoiled = [(on, total + 10**6 if i in wrong else total) for i, (on, total) in enumerate(figures)]
    assert plausible_chain(spoiled, DAY) == frozenset(range(2000)) - wrong


def test_new_readings_that_fit_old_ones_and_each_other_are_all_taken() -> None:
    assert misfits(weekly(100, 140, 180, 220), [False, True, True, False], DAY) == {}


def test_every_new_reading_that_breaks_with_an_old_one_is_named_with_it() -> None:
    figures = weekly(100, 5000, 5010, 140, 180)
    assert misfits(figures, [False, True, True, False, True], DAY) == {1: 0, 2: 0}
    figures = weekly(1000, 1010, 140, 180)
    assert misfits(figures, [True, True, False, True], DAY) == {1: 2, 0: 2}


def test_of_new_readings_that_contradict_each_other_the_one_off_the_chain_is_named() -> None:
    assert misfits(weekly(100, 9150, 200, 250), [True] * 4, DAY) == {1: 0}
    assert misfits(weekly(9150, 100, 200, 250), [True] * 4, DAY) == {0: 1}
    assert misfits(weekly(500, 100), [True] * 2, DAY) == {0: 1}


def test_old_readings_are_not_tried_again() -> None:
    assert misfits(weekly(500, 100, 140), [False, False, True], DAY) == {}
