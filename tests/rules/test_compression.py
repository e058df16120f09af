"""Expected cranking pressure."""

from decimal import Decimal

import pytest

from fleetcare.errors import Refused
from fleetcare.rules.compression import (
    SEA_LEVEL_KPA,
    USUAL_EXPONENT,
    USUAL_EXPONENTS,
    IntakeClosing,
    cranking_pressure,
    pressure_ratio,
    stroke_left,
)


def _left(degrees: str = "50", stroke: str = "86", rod: str = "166") -> Decimal:
    return stroke_left(IntakeClosing(Decimal(degrees), Decimal(stroke), Decimal(rod)))


def test_isothermal_compression_is_ambient_times_the_ratio() -> None:
    expected = cranking_pressure(Decimal(10), exponent=Decimal(1))
    assert (expected.ambient, expected.absolute, expected.gauge) == (
        SEA_LEVEL_KPA,
        10 * SEA_LEVEL_KPA,
        9 * SEA_LEVEL_KPA,
    )
    assert expected.gauge_bar == expected.gauge / 100


def test_without_a_closing_angle_the_whole_ratio_counts_and_with_one_less() -> None:
    closing = IntakeClosing(Decimal(50), Decimal(86), Decimal(166))
    whole, closed = (cranking_pressure(Decimal(17), closing=given) for given in (None, closing))
    assert whole.effective_ratio == 17
    assert closed.effective_ratio < 17
    assert closed.gauge < whole.gauge


def test_an_intake_that_closes_at_bdc_leaves_the_whole_stroke() -> None:
    assert _left("0") == 1


def test_an_intake_that_closes_as_early_as_late_leaves_as_much() -> None:
    assert float(_left("-50")) == pytest.approx(float(_left("50")), rel=1e-14)


def test_the_usual_exponent_lies_between_the_usual_ends() -> None:
    low, high = USUAL_EXPONENTS
    assert low < USUAL_EXPONENT < high


def test_pressure_rises_below_sea_level() -> None:
    assert pressure_ratio(Decimal(-400)) > 1


@pytest.mark.parametrize(
    ("ratio", "altitude", "exponent", "wrong"),
    [
        ("1.9", "0", "1.3", "compression ratio 1.9 cannot be right; give a figure from 2 to 50"),
        ("50.1", "0", "1.3", "compression ratio 50.1 cannot be right"),
        ("9.5", "-501", "1.3", "altitude -501 m cannot be right"),
        ("9.5", "9001", "1.3", "altitude 9001 m cannot be right"),
        ("9.5", "0", "0.99", "exponent 0.99 cannot be right; give a figure from 1 to 1.4"),
        ("9.5", "0", "1.41", "exponent 1.41 cannot be right"),
    ],
)
def test_a_figure_that_cannot_be_right_is_refused_by_name(ratio: str, altitude: str, exponent: str, wrong: str) -> None:
    with pytest.raises(Refused, match=wrong):
        cranking_pressure(Decimal(ratio), altitude=Decimal(altitude), exponent=Decimal(exponent))


@pytest.mark.parametrize(
    ("figures", "wrong"),
    [
        ({"degrees": "121"}, "intake closing 121 degrees cannot be right"),
        ({"degrees": "-121"}, "intake closing -121 degrees cannot be right"),
        ({"stroke": "0"}, "stroke 0 mm cannot be right"),
        ({"rod": "4001"}, "rod 4001 mm cannot be right"),
        ({"rod": "43"}, "a rod of 43 mm cannot turn a crank with 86 mm of stroke"),
    ],
)
def test_a_crank_that_cannot_be_is_refused(figures: dict[str, str], wrong: str) -> None:
    with pytest.raises(Refused, match=wrong):
        _left(**figures)
