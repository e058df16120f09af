"""Fuel use on its three scales."""

from decimal import Decimal

import pytest

from fleetcare.errors import Refused
from fleetcare.rules.fuel_use import FuelUse, Scale, fuel_use


def _on(use: FuelUse, scale: Scale) -> Decimal:
    return {
        Scale.LITRES_PER_100KM: use.litres_per_100km,
        Scale.MPG_US: use.mpg_us,
        Scale.MPG_IMP: use.mpg_imp,
    }[scale]


@pytest.mark.parametrize("scale", Scale)
def test_the_figure_that_came_in_comes_out_unchanged(scale: Scale) -> None:
    assert _on(fuel_use(Decimal("7.3"), scale), scale) == Decimal("7.3")


@pytest.mark.parametrize("there", Scale)
@pytest.mark.parametrize("here", Scale)
def test_going_to_another_scale_and_back_gives_the_same_figure(here: Scale, there: Scale) -> None:
    other = _on(fuel_use(Decimal("7.3"), here), there)
    assert float(_on(fuel_use(other, there), here)) == pytest.approx(7.3, rel=1e-20)


@pytest.mark.parametrize("value", ["0", "-5", "20000.1"])
def test_a_fuel_use_that_cannot_be_right_is_refused(value: str) -> None:
    with pytest.raises(Refused, match="cannot be right"):
        fuel_use(Decimal(value), Scale.MPG_US)
