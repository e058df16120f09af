"""Figures with units, as typed and in base units."""

from decimal import Decimal

import pytest
from hypothesis import given
from hypothesis import strategies as st

from fleetcare.domain.quantities import (
    BASE_UNIT,
    COUNTED,
    UNITS,
    Amount,
    Figure,
    Kind,
    Span,
    SpanUnit,
    from_base,
    parse_dial,
    parse_figure,
    parse_interval,
    parse_span,
    plain,
    tenth,
    to_base,
)
from fleetcare.errors import Misread, Refused


@pytest.mark.parametrize("kind", COUNTED)
def test_the_base_unit_of_each_counted_kind_is_a_unit_of_factor_1(kind: Kind) -> None:
    base = UNITS[BASE_UNIT[kind]]
    assert base.kind is kind
    assert base.to_base == 1


def test_an_amount_keeps_what_was_entered_beside_its_base_figure() -> None:
    amount = Amount(Decimal("100.0"), "mi")
    assert (amount.kind, amount.base, str(amount)) == (Kind.DISTANCE, Decimal("160.9344"), "100 mi")


@pytest.mark.parametrize("unit", UNITS)
def test_a_figure_survives_the_way_to_the_base_unit_and_back(unit: str) -> None:
    assert from_base(to_base(Decimal("1234.5"), unit), unit) == Decimal("1234.5")


@pytest.mark.parametrize("unit", ["mi", "galus", "galimp"])
@given(figure=st.decimals(0, 999_999_999, places=3))
def test_a_figure_typed_in_the_base_unit_comes_back_from_another_as_it_was(unit: str, figure: Decimal) -> None:
    assert to_base(from_base(figure, unit), unit) == figure


@pytest.mark.parametrize(
    ("unit", "months", "days", "nominal"),
    [("d", 0, 2, 2), ("w", 0, 14, 14), ("mo", 2, 0, 60), ("y", 24, 0, 730)],
)
def test_a_span_is_whole_months_or_whole_days_and_has_a_nominal_length(
    unit: SpanUnit, months: int, days: int, nominal: int
) -> None:
    span = Span(2, unit)
    assert (span.months, span.days, span.nominal_days, str(span)) == (months, days, nominal, f"2 {unit}")


@pytest.mark.parametrize(
    ("value", "written"),
    [
        ("1484", "1484"),
        ("0.250", "0.25"),
        ("1193.40", "1193.4"),
        ("1E+3", "1000"),
        ("100", "100"),
        ("-0.0", "0"),
        ("0", "0"),
        ("-1.50", "-1.5"),
    ],
)
def test_a_figure_is_written_without_exponent_or_trailing_zeros(value: str, written: str) -> None:
    assert plain(Decimal(value)) == written


@pytest.mark.parametrize(
    ("value", "shown"),
    [
        ("12.34", "12.3"),
        ("0", "0.0"),
        ("0.05", "0.1"),
        ("0.001", "0.1"),
        ("-0.001", "-0.1"),
        ("-0.06", "-0.1"),
        ("-12.36", "-12.4"),
    ],
)
def test_a_remainder_is_never_rounded_to_nothing(value: str, shown: str) -> None:
    assert tenth(Decimal(value)) == Decimal(shown)


@pytest.mark.parametrize(
    ("text", "figure"),
    [
        ("250h", ("250", "h")),
        ("1234.5", ("1234.5", None)),
        (" 12 MO ", ("12", "mo")),
        (".5 L", ("0.5", "L")),
        ("30 GalImp", ("30", "galimp")),
    ],
)
def test_a_figure_is_read_with_its_unit_in_either_case(text: str, figure: tuple[str, str | None]) -> None:
    assert parse_figure(text) == (Decimal(figure[0]), figure[1])


@pytest.mark.parametrize(
    ("text", "remedy"),
    [
        ("", "write digits"),
        ("-5h", "write digits"),
        ("1,234", "write digits"),
        ("nan", "write digits"),
        ("1e3h", "write digits"),
        ("٣h", "write digits"),
        ("5 gal", "galus or galimp"),
        ("5 parsec", "use one of h km mi"),
    ],
)
def test_what_is_no_figure_is_misread_with_a_way_out(text: str, remedy: str) -> None:
    with pytest.raises(Misread, match=remedy):
        parse_figure(text)


def test_an_interval_is_counted_or_a_calendar_span_by_its_unit() -> None:
    assert parse_interval("250h") == Amount(Decimal(250), "h")
    assert parse_interval("12mo") == Span(12, "mo")


def test_an_interval_without_a_unit_is_misread_and_shown_one() -> None:
    with pytest.raises(Misread, match=r"'250' has no unit; add one of .*, such as 250h"):
        parse_interval("250")


@pytest.mark.parametrize("text", ["1.5mo", "250h", "30"])
def test_a_span_must_be_a_whole_number_of_calendar_units(text: str) -> None:
    with pytest.raises(Misread, match="is not a whole number of days, weeks, months or years"):
        parse_span(text)


def test_a_whole_span_may_be_written_with_a_point() -> None:
    assert parse_span("2.0 w") == Span(2, "w")


@pytest.mark.parametrize(
    ("text", "figure", "kind", "shown"),
    [
        ("1234.50", Figure(Decimal("1234.5")), None, "1234.5"),
        ("5600 KM", Figure(Decimal(5600), "km"), Kind.DISTANCE, "5600 km"),
    ],
)
def test_a_dial_figure_may_leave_its_unit_to_the_meter(
    text: str, figure: Figure, kind: Kind | None, shown: str
) -> None:
    assert parse_dial(text) == figure
    assert (figure.kind, str(figure)) == (kind, shown)


def test_a_span_of_time_is_not_a_dial_figure() -> None:
    with pytest.raises(Misread, match="'12mo' is a span of time"):
        parse_dial("12mo")


@pytest.mark.parametrize("text", ["1000000000", "1000000000h", "99999999999999999999.5km"])
def test_a_figure_beyond_nine_digits_is_refused_because_no_dial_shows_it(text: str) -> None:
    with pytest.raises(Refused, match="cannot be right; give a figure up to 999999999"):
        parse_figure(text)


def test_nine_digits_are_read() -> None:
    assert parse_figure("999999999km") == (Decimal(999_999_999), "km")


@pytest.mark.parametrize("text", ["101y", "36501d", "5300w"])
def test_a_span_of_more_than_a_century_is_refused_because_its_end_may_lie_beyond_the_calendar(text: str) -> None:
    with pytest.raises(Refused, match="give a span of up to 100 years"):
        parse_span(text)


def test_a_century_is_read() -> None:
    assert parse_span("100y") == Span(100, "y")
