"""Units and fuel use against pint and the published factors of NIST SP 811 (2008), Appendix B."""

from decimal import Decimal

import pint
import pytest

from fleetcare.domain.quantities import BASE_UNIT, UNITS, Unit
from fleetcare.rules.fuel_use import Scale, fuel_use, reciprocal_constant

PINT_NAMES = {
    "h": "hour",
    "km": "kilometre",
    "mi": "mile",
    "L": "litre",
    "galus": "US_liquid_gallon",
    "galimp": "imperial_gallon",
    "starts": "count",
}


@pytest.fixture(scope="module")
def registry() -> "pint.UnitRegistry[Decimal]":
    return pint.UnitRegistry(non_int_type=Decimal)


@pytest.mark.parametrize("unit", UNITS.values(), ids=UNITS.keys())
def test_each_factor_is_the_one_an_independent_library_has(registry: "pint.UnitRegistry[Decimal]", unit: Unit) -> None:
    one = registry.Quantity(Decimal(1), PINT_NAMES[unit.symbol])
    assert one.to(PINT_NAMES[BASE_UNIT[unit.kind]]).magnitude == unit.to_base


def test_each_exact_factor_is_the_published_one() -> None:
    """NIST SP 811 (2008), Appendix B.8: mile, US liquid gallon, gallon (Canadian and UK)."""
    published = {"mi": "1.609344", "galus": "3.785411784", "galimp": "4.54609"}
    assert {symbol: UNITS[symbol].to_base for symbol in published} == {
        symbol: Decimal(factor) for symbol, factor in published.items()
    }


@pytest.mark.parametrize(("scale", "constant"), [(Scale.MPG_US, "235.2146"), (Scale.MPG_IMP, "282.4809")])
def test_the_economy_constants_are_those_the_published_factors_give(scale: Scale, constant: str) -> None:
    """Worked from the exact factors of NIST SP 811 (2008), Appendix B, four decimals."""
    assert round(reciprocal_constant(scale), 4) == Decimal(constant)


@pytest.mark.parametrize(("mpg", "scale", "litres"), [("25", Scale.MPG_US, "9.4086"), ("25", Scale.MPG_IMP, "11.2992")])
def test_fuel_use_agrees_with_sums_worked_by_hand(mpg: str, scale: Scale, litres: str) -> None:
    """Worked from the exact factors of NIST SP 811 (2008), Appendix B, four decimals."""
    assert round(fuel_use(Decimal(mpg), scale).litres_per_100km, 4) == Decimal(litres)


def test_an_imperial_mpg_is_more_than_a_us_one_by_the_ratio_of_the_gallons() -> None:
    """mpg (imp) = 1.200950 mpg (US), from the exact factors of NIST SP 811 (2008), Appendix B."""
    assert round(fuel_use(Decimal(1), Scale.MPG_US).mpg_imp, 6) == Decimal("1.200950")


def test_fuel_use_agrees_with_an_independent_library(registry: "pint.UnitRegistry[Decimal]") -> None:
    distance_per_gallon = registry.Quantity(Decimal(31), "mile / US_liquid_gallon")
    litres = (1 / distance_per_gallon).to("litre / kilometre").magnitude * 100
    assert float(fuel_use(Decimal(31), Scale.MPG_US).litres_per_100km) == pytest.approx(float(litres), rel=1e-15)
