"""Units of measurement convert exactly, and a unit that does not fit a quantity is refused with those that do."""

from decimal import Decimal
from fractions import Fraction

import pint
import pytest

from fleetcare.domain.measures import UNITS, can_convert, dimension, exactly, in_base, read_unit
from fleetcare.errors import Misread

REGISTRY: pint.UnitRegistry[float] = pint.UnitRegistry()
PINT = {
    "kPa": "kilopascal",
    "Pa": "pascal",
    "mbar": "millibar",
    "bar": "bar",
    "MPa": "megapascal",
    "psi": "psi",
    "kgf/cm2": "kilogram_force / centimeter ** 2",
    "mm": "millimeter",
    "in": "inch",
    "h": "hour",
    "min": "minute",
    "kW": "kilowatt",
    "hp": "horsepower",
    "PS": "metric_horsepower",
    "L": "liter",
    "galus": "gallon",
    "galimp": "imperial_gallon",
    "°C": "degC",
    "°F": "degF",
    "mm2/s": "millimeter ** 2 / second",
    "cSt": "centistokes",
    "rpm": "rpm",
    "V": "volt",
}


@pytest.mark.parametrize(("symbol", "known"), PINT.items())
def test_a_unit_converts_as_an_independent_library_says(symbol: str, known: str) -> None:
    base = next(unit.symbol for unit in UNITS.values() if unit.dimension == UNITS[symbol].dimension)
    expected = REGISTRY.Quantity(50.0, known).to(PINT[base]).magnitude
    assert float(exactly(Decimal(50), symbol, base)) == pytest.approx(expected, rel=1e-9)


def test_percent_and_ppm_are_one_measure() -> None:
    assert exactly(Decimal("0.3"), "%", "ppm") == 3000
    assert exactly(Decimal(100), "mg/kg", "%") == Fraction(1, 100)


def test_a_figure_converted_there_and_back_is_the_figure_itself() -> None:
    there = exactly(Decimal("145.1"), "psi", "kPa")
    assert exactly(there, "kPa", "psi") == Decimal("145.1")
    assert exactly(exactly(Decimal(-40), "°F", "°C"), "°C", "°F") == -40


def test_a_unit_not_known_here_converts_to_itself_alone() -> None:
    assert exactly(Decimal(3), "beads", "beads") == 3
    assert dimension("beads") == "beads"
    assert not can_convert("beads", "ppm")
    assert can_convert("bar", "psi")


@pytest.mark.parametrize(
    ("quantity", "text", "unit"),
    [
        ("pressure", "", "kPa"),
        ("pressure", " PSI ", "psi"),
        ("kv100", "mm²/s", "mm2/s"),
        ("kv100", "cst", "cSt"),
        ("water", "vol %", "%"),
        ("water", "ppm", "ppm"),
        ("tbn", "mgKOH/g", "mg KOH/g"),
        ("tbn", "mg KOH/g", "mg KOH/g"),
        ("coolant", "C", "°C"),
        ("load", "kw", "kW"),
        ("load", "%", "%"),
        ("ph", "", ""),
    ],
)
def test_a_unit_is_read_as_people_spell_it(quantity: str, text: str, unit: str) -> None:
    assert read_unit(quantity, text) == unit


@pytest.mark.parametrize(("quantity", "text"), [("pressure", "ppm"), ("Fe", "stone"), ("ph", "kPa")])
def test_a_unit_that_does_not_fit_is_refused_with_those_that_do(quantity: str, text: str) -> None:
    with pytest.raises(Misread, match=f"is no unit of {quantity}"):
        read_unit(quantity, text)


def test_a_figure_in_its_base_unit_is_the_same_whatever_unit_it_came_in() -> None:
    assert in_base(Decimal("0.010"), "in") == in_base(Decimal("0.254"), "mm")
    assert in_base(Decimal(212), "°F") == in_base(Decimal(100), "°C") == 100
    assert in_base(Decimal("4.9"), "") == Fraction("4.9")


@pytest.mark.parametrize(
    ("typed", "unit"),
    [
        ("kg/cm2", "kgf/cm2"),
        ("kg/cm²", "kgf/cm2"),
        ("KGF/CM²", "kgf/cm2"),
        ("psig", "psi"),
        ("barg", "bar"),
        ("PSI", "psi"),
    ],
)
def test_a_pressure_may_be_written_as_its_gauge_prints_it(typed: str, unit: str) -> None:
    assert read_unit("pressure", typed) == unit
