"""Days as people type them."""

from datetime import date

import pytest

from fleetcare.domain.days import parse_day
from fleetcare.errors import Misread, Refused


@pytest.mark.parametrize(("text", "day"), [("2026-05-01", date(2026, 5, 1)), (" 2024-02-29 ", date(2024, 2, 29))])
def test_an_iso_day_is_read(text: str, day: date) -> None:
    assert parse_day(text) == day


@pytest.mark.parametrize(
    "text", ["", "01.05.2026", "2026-5-1", "20260501", "2026-W18-5", "2026-05-01T06:00", "٢026-05-01"]
)
def test_any_other_form_is_misread(text: str) -> None:
    with pytest.raises(Misread, match="write year-month-day"):
        parse_day(text)


@pytest.mark.parametrize("text", ["2026-02-30", "2025-02-29", "2026-13-01", "0000-01-01"])
def test_a_day_the_calendar_does_not_have_is_misread(text: str) -> None:
    with pytest.raises(Misread, match="there is no day"):
        parse_day(text)


@pytest.mark.parametrize("text", ["1899-12-31", "2200-01-01", "9999-12-31"])
def test_a_day_no_engine_sees_is_refused(text: str) -> None:
    with pytest.raises(Refused, match="give a day from 1900-01-01 to 2199-12-31"):
        parse_day(text)


@pytest.mark.parametrize("text", ["1900-01-01", "2199-12-31"])
def test_the_first_and_the_last_day_are_read(text: str) -> None:
    assert parse_day(text).isoformat() == text
