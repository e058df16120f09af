"""Engine geometry."""

from decimal import Decimal

import pytest

from fleetcare.errors import Refused
from fleetcare.rules.geometry import BoreStroke, displacement, mean_piston_speed


@pytest.mark.parametrize(
    ("bore", "shape"),
    [
        ("98.99", BoreStroke.UNDERSQUARE),
        ("99", BoreStroke.SQUARE),
        ("100", BoreStroke.SQUARE),
        ("101", BoreStroke.SQUARE),
        ("101.01", BoreStroke.OVERSQUARE),
    ],
)
def test_an_engine_is_square_up_to_and_including_1_percent_either_way(bore: str, shape: BoreStroke) -> None:
    assert displacement(Decimal(bore), Decimal(100), 1).shape is shape


def test_displacement_grows_with_the_number_of_cylinders() -> None:
    one, six = (displacement(Decimal(100), Decimal(120), n).litres for n in (1, 6))
    assert six == 6 * one


def test_piston_speed_is_exact_for_decimal_figures() -> None:
    assert mean_piston_speed(Decimal("88.9"), Decimal(1500)) == Decimal("4.445")


@pytest.mark.parametrize(
    ("bore", "stroke", "cylinders", "name"),
    [
        ("0", "1", 1, "bore 0 mm"),
        ("1", "-1", 1, "stroke -1 mm"),
        ("1", "1", 0, "cylinders 0 "),
        ("2001", "1", 1, "bore 2001 mm"),
    ],
)
def test_a_dimension_that_cannot_be_right_is_refused_by_name(bore: str, stroke: str, cylinders: int, name: str) -> None:
    with pytest.raises(Refused, match=name):
        displacement(Decimal(bore), Decimal(stroke), cylinders)


def test_the_largest_figure_of_sense_is_still_worked_with() -> None:
    assert displacement(Decimal(2000), Decimal(2000), 64).shape is BoreStroke.SQUARE
    with pytest.raises(Refused, match="give a figure above 0 and up to 50000 rpm"):
        mean_piston_speed(Decimal(90), Decimal(50001))
