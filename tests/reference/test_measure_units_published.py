"""Units of what is measured against the published factors of NIST SP 811 (2008), Appendix B, and against pint, exactly."""

from decimal import Decimal
from fractions import Fraction

import pint
import pytest

from fleetcare.domain.measures import QUANTITIES, UNITS, exactly, read_unit

# Appendix B.8 and B.9: from, to, factor as printed.
PRINTED = [
    ("psi", "kPa", "6.894757"),
    ("bar", "kPa", "100"),
    ("mbar", "kPa", "0.1"),
    ("kgf/cm2", "kPa", "98.0665"),
    ("in", "mm", "25.4"),
    ("galus", "L", "3.785412"),
    ("galimp", "L", "4.54609"),
    ("hp", "kW", "0.7456999"),
    ("PS", "kW", "0.7354988"),
    ("cSt", "mm2/s", "1"),
]
PINT = {
    "kPa": "kilopascal", "Pa": "pascal", "mbar": "millibar", "bar": "bar", "MPa": "megapascal", "psi": "psi",
    "kgf/cm2": "kilogram_force / centimeter ** 2", "mm": "millimeter", "in": "inch", "ppm": "ppm", "%": "percent",
    "h": "hour", "min": "minute", "kW": "kilowatt", "hp": "horsepower", "PS": "metric_horsepower", "L": "liter",
    "galus": "gallon", "galimp": "imperial_gallon", "mm2/s": "millimeter ** 2 / second", "cSt": "centistokes",
    "rpm": "rpm", "V": "volt",
}  # fmt: skip
NOT_THERE = {"mg/kg", "mg KOH/g", "A/cm", "°C", "°F"}


@pytest.fixture(scope="module")
def registry() -> "pint.UnitRegistry[Fraction]":
    return pint.UnitRegistry(non_int_type=Fraction)


@pytest.mark.parametrize(("unit", "into", "factor"), PRINTED)
def test_a_factor_is_the_printed_one_to_every_digit_given(unit: str, into: str, factor: str) -> None:
    printed = Decimal(factor)
    ours = exactly(Decimal(1), unit, into)
    step = Fraction(1, 10 ** max(0, -int(printed.as_tuple().exponent)))
    assert abs(ours - Fraction(printed)) <= step / 2


def test_a_factor_is_exactly_that_of_an_independent_library(registry: "pint.UnitRegistry[Fraction]") -> None:
    assert set(PINT) | NOT_THERE == set(UNITS)
    for symbol, name in PINT.items():
        base = next(unit.symbol for unit in UNITS.values() if unit.dimension == UNITS[symbol].dimension)
        theirs = registry.Quantity(Fraction(7), name).to(PINT[base]).magnitude
        assert exactly(Decimal(7), symbol, base) == theirs, symbol


@pytest.mark.parametrize(
    ("fahrenheit", "celsius"), [("32", "0"), ("212", "100"), ("-40", "-40"), ("230", "110"), ("98.6", "37")]
)
def test_temperatures_have_the_offset_of_the_definition(fahrenheit: str, celsius: str) -> None:
    """NIST SP 811, B.8: t/degC = (t/degF - 32) / 1.8."""
    assert exactly(Decimal(fahrenheit), "°F", "°C") == Decimal(celsius)
    assert exactly(Decimal(celsius), "°C", "°F") == Decimal(fahrenheit)


@pytest.mark.parametrize(
    ("figure", "unit", "into", "expected"),
    [
        ("45", "ppm", "mg/kg", "45"),  # ASTM D5185 reports mg/kg, which is ppm by mass
        ("1", "%", "mg/kg", "10000"),  # 1 % by mass
        ("0.1", "%", "ppm", "1000"),  # water: 0.1 % is 1 000 ppm
        ("3000", "ppm", "%", "0.3"),  # DTNA: water of 3 000 ppm
    ],
)
def test_shares_of_the_oil_convert_as_laboratories_print_them(figure: str, unit: str, into: str, expected: str) -> None:
    assert exactly(Decimal(figure), unit, into) == Decimal(expected)


def test_a_gauge_of_80_psi_shows_5_52_bar_and_552_kpa_as_service_texts_print() -> None:
    """Chrysler Dakota 2002, leak-down: 552 kPa (80 psi) in, 414 kPa (60 psi) held."""
    assert round(exactly(Decimal(80), "psi", "kPa")) == 552
    assert round(exactly(Decimal(60), "psi", "kPa")) == 414
    assert round(float(exactly(Decimal(80), "psi", "bar")), 2) == 5.52


def test_every_quantity_takes_every_unit_of_its_measure_and_no_other() -> None:
    for quantity in QUANTITIES.values():
        fits = {"", *(unit.dimension for unit in UNITS.values() if unit.symbol == quantity.unit), *quantity.also} - {""}
        for unit in UNITS.values():
            if unit.dimension in fits:
                assert read_unit(quantity.name, unit.symbol) == unit.symbol
