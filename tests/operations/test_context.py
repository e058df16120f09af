"""The one clock: the shop's local day, unless a day is asked about."""

from collections.abc import Callable
from datetime import UTC, date, datetime

import pytest

from fleetcare.context import Context, new_uid, utc_now


def standing(*moment: int) -> Callable[[], datetime]:
    """A clock that stands at a moment in UTC."""
    return lambda: datetime(*moment, tzinfo=UTC)  # type: ignore[misc, arg-type]


@pytest.mark.parametrize(
    ("moment", "local"),
    [
        ((2026, 1, 14, 23, 30), date(2026, 1, 14)),
        ((2026, 7, 14, 22, 59), date(2026, 7, 14)),
        ((2026, 7, 14, 23, 0), date(2026, 7, 15)),  # British summer time is an hour ahead of UTC
        ((2026, 3, 29, 0, 59), date(2026, 3, 29)),  # the night the clocks go forward
        ((2026, 10, 24, 23, 30), date(2026, 10, 25)),  # the night they go back
        ((2028, 2, 29, 12, 0), date(2028, 2, 29)),
    ],
)
def test_today_is_the_shops_local_day(moment: tuple[int, ...], local: date) -> None:
    assert Context(clock=standing(*moment)).today() == local


def test_a_day_asked_about_stands_in_for_today() -> None:
    assert Context(as_of=date(2027, 3, 1), clock=standing(2026, 5, 1)).today() == date(2027, 3, 1)


@pytest.mark.parametrize(
    ("as_of", "is_future"),
    [(None, False), (date(2026, 4, 30), False), (date(2026, 5, 1), False), (date(2026, 5, 2), True)],
)
def test_a_day_is_in_the_future_only_after_the_real_one(as_of: date | None, is_future: bool) -> None:
    assert Context(as_of=as_of, clock=standing(2026, 5, 1)).is_future is is_future


def test_the_clock_and_the_uids_are_real_where_none_are_given() -> None:
    assert utc_now().tzinfo is UTC
    assert new_uid() != new_uid()
