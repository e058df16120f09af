"""Plain numbers as people type them."""

from decimal import Decimal

import pytest

from fleetcare.domain.numbers import parse_number, parse_whole
from fleetcare.errors import Misread


@pytest.mark.parametrize(
    ("text", "number"),
    [("12.50", "12.50"), ("-3", "-3"), ("+0.1", "0.1"), (".5", "0.5"), ("7.", "7"), ("9" * 15, "9" * 15)],
)
def test_a_plain_number_is_read_exactly(text: str, number: str) -> None:
    assert parse_number(text) == Decimal(number)


@pytest.mark.parametrize("text", ["", ".", "1e3", "1,5", "1 000", "٣", "NaN", "inf", "9" * 16, "--1", "0x10", " 1"])
def test_anything_else_is_misread_with_the_way_out(text: str) -> None:
    with pytest.raises(Misread, match="is not a number") as caught:
        parse_number(text)
    assert caught.value.remedy == "write digits, with a point for decimals"


@pytest.mark.parametrize(("text", "number"), [("0", 0), ("-12", -12), ("+7", 7), ("007", 7)])
def test_a_whole_number_is_read(text: str, number: int) -> None:
    assert parse_whole(text) == number


@pytest.mark.parametrize("text", ["", "1.0", "1e3", "٣", "9" * 16])
def test_a_number_with_a_fraction_or_in_other_digits_is_no_whole_number(text: str) -> None:
    with pytest.raises(Misread, match="is not a whole number"):
        parse_whole(text)
