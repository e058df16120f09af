"""Figures known only from and to lie past a limit, inside it, or on neither side for certain."""

from fractions import Fraction

import pytest

from fleetcare.rules.judging.spans import Span, decimal, known
from tests.rules.measured import beyond, reach


def _span(low: int, high: int) -> Span:
    return Span(Fraction(low), Fraction(high))


@pytest.mark.parametrize(
    ("span", "limit", "high", "low"),
    [
        (known(4), beyond("5"), "inside", "past"),
        (known(5), beyond("5"), "inside", "inside"),
        (known(6), beyond("5"), "past", "inside"),
        (known(5), reach("5"), "past", "past"),
        (_span(0, 5), beyond("5"), "inside", "past"),  # "<5" is below 5
        (_span(0, 5), reach("5"), "inside", "past"),
        (_span(0, 5), beyond("3"), "untold", "untold"),
        (_span(0, 5), beyond("0"), "untold", "inside"),
        (_span(0, 5), reach("0"), "past", "untold"),
        (_span(6, 9), beyond("5"), "past", "inside"),
    ],
)
def test_a_span_lies_past_a_limit_only_for_certain(span: Span, limit: object, high: str, low: str) -> None:
    assert span.past_high(limit).value == high  # type: ignore[arg-type]
    assert span.past_low(limit).value == low  # type: ignore[arg-type]


def test_spans_add_and_take_away_by_their_ends() -> None:
    assert _span(1, 2) + _span(10, 20) == _span(11, 22)
    assert _span(10, 20) - _span(1, 2) == _span(8, 19)


def test_a_span_below_nothing_divides_to_its_widest() -> None:
    assert _span(-4, 8).over(_span(1, 2)) == _span(-4, 8)
    assert _span(2, 4).over(_span(1, 2)) == _span(1, 4)
    assert _span(1, 2).times(3) == _span(3, 6)


def test_a_fraction_that_ends_is_an_exact_decimal() -> None:
    assert str(decimal(Fraction(1, 8))) == "0.125"
    assert str(decimal(Fraction(1, 3))).startswith("0.33333333")
