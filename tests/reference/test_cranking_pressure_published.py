"""Expected cranking pressure against the standard atmosphere, sums worked by hand, and a crank turned step by step."""

import csv
from decimal import Decimal
from math import cos, radians, sqrt
from pathlib import Path

import pint
import pytest

from fleetcare.rules.compression import (
    KPA_PER_BAR,
    KPA_PER_PSI,
    SEA_LEVEL_KPA,
    IntakeClosing,
    cranking_pressure,
    pressure_ratio,
    stroke_left,
)

ATMOSPHERE = list(
    csv.DictReader(Path(__file__).with_name("standard_atmosphere.csv").read_text(encoding="utf-8").splitlines())
)


def _closing(degrees: str, stroke: str, rod: str) -> IntakeClosing:
    return IntakeClosing(Decimal(degrees), Decimal(stroke), Decimal(rod))


@pytest.mark.parametrize("row", ATMOSPHERE, ids=[f"{row['altitude_m']} m" for row in ATMOSPHERE])
def test_ambient_pressure_is_that_of_the_standard_atmosphere(row: dict[str, str]) -> None:
    """ISO 2533 / U.S. Standard Atmosphere 1976, formulas as published, by geopotential altitude."""
    ratio = pressure_ratio(Decimal(row["altitude_m"]))
    assert round(ratio, 5) == Decimal(row["ratio"])
    assert float(1000 * SEA_LEVEL_KPA * ratio) == pytest.approx(float(row["pressure_pa"]), abs=0.06)


def test_a_map_altitude_is_close_enough_to_a_geopotential_one() -> None:
    """U.S. Standard Atmosphere 1976 tables by geometric altitude: 89 876 Pa at 1 000 m."""
    assert float(1000 * SEA_LEVEL_KPA * pressure_ratio(Decimal(1000))) == pytest.approx(89_876, rel=2e-5)


def test_the_atmosphere_in_feet_is_the_same() -> None:
    """Published in feet: p = 14.696 psi (1 - 6.8754e-6 Z)^5.2559."""
    feet = 5000
    psi = SEA_LEVEL_KPA * pressure_ratio(Decimal(feet) * Decimal("0.3048")) / KPA_PER_PSI
    assert float(psi) == pytest.approx(14.696 * (1 - 6.8754e-6 * feet) ** 5.2559, rel=1e-5)


def test_gauge_units_are_those_of_an_independent_library_and_of_nist() -> None:
    """NIST SP 811 (2008), Appendix B.8: psi 6.894 757 kPa, bar 100 kPa."""
    registry: pint.UnitRegistry[Decimal] = pint.UnitRegistry(non_int_type=Decimal)
    for unit, factor in (("psi", KPA_PER_PSI), ("bar", KPA_PER_BAR)):
        assert float(registry.Quantity(Decimal(1), unit).to("kPa").magnitude) == pytest.approx(float(factor), rel=1e-15)
    assert round(KPA_PER_PSI, 6) == Decimal("6.894757")


@pytest.mark.parametrize(
    ("ratio", "gauge_psi"),
    [
        ("8.5", ("177.0", "198.6", "222.7", "249.5")),
        ("9.5", ("204.3", "230.4", "259.6", "292.3")),
        ("10.5", ("232.3", "263.1", "297.7", "336.7")),
        ("17", ("425.6", "492.6", "569.8", "658.8")),
    ],
)
def test_the_whole_stroke_at_sea_level_gives_the_table_worked_by_hand(ratio: str, gauge_psi: tuple[str, ...]) -> None:
    """Worked from 14.696 psi (CR^n - 1) for n 1.20, 1.25, 1.30 and 1.35, one decimal."""
    for exponent, psi in zip(("1.20", "1.25", "1.30", "1.35"), gauge_psi, strict=True):
        expected = cranking_pressure(Decimal(ratio), exponent=Decimal(exponent))
        assert float(expected.gauge_psi) == pytest.approx(float(psi), abs=0.06)


@pytest.mark.parametrize(
    ("exponent", "kpa", "psi"), [("1.20", "1184.3", "171.8"), ("1.25", "1327.9", "192.6"), ("1.30", "1487.5", "215.7")]
)
def test_a_late_intake_takes_its_share_off_the_ratio(exponent: str, kpa: str, psi: str) -> None:
    """Worked by hand: CR 9.5, stroke 86 mm, rod 166 mm, intake closes 50 degrees after BDC: x/S 0.85978, CRe 8.3081."""
    closing = _closing("50", "86", "166")
    expected = cranking_pressure(Decimal("9.5"), exponent=Decimal(exponent), closing=closing)
    assert round(stroke_left(closing), 5) == Decimal("0.85978")
    assert round(expected.effective_ratio, 4) == Decimal("8.3081")
    assert (round(expected.gauge, 1), round(expected.gauge_psi, 1)) == (Decimal(kpa), Decimal(psi))


def test_an_endless_rod_would_leave_less_of_the_stroke() -> None:
    """Worked by hand: with an infinite rod x/S is (1 + cos 50) / 2 = 0.8214."""
    assert float(stroke_left(_closing("50", "1", "4000"))) == pytest.approx(0.8214, abs=1e-4)


@pytest.mark.parametrize(("altitude", "psi"), [(0, "173.4"), (1500, "144.7"), (3000, "120.0")])
def test_pressure_falls_with_altitude_as_ambient_pressure_does(altitude: int, psi: str) -> None:
    """Worked by hand: CR 8.5, stroke 90 mm, rod 150 mm, intake closes 45 degrees after BDC, n 1.25."""
    expected = cranking_pressure(
        Decimal("8.5"), altitude=Decimal(altitude), exponent=Decimal("1.25"), closing=_closing("45", "90", "150")
    )
    assert round(expected.gauge_psi, 1) == Decimal(psi)


def test_a_reading_at_altitude_goes_back_to_sea_level_by_the_pressure_ratio() -> None:
    """Worked by hand: 145 psi at 1 500 m is 145 / 0.8345 = 173.8 psi."""
    assert round(145 / pressure_ratio(Decimal(1500)), 1) == Decimal("173.8")


@pytest.mark.parametrize("degrees", [-30, 0, 20, 50, 90, 120])
def test_the_stroke_left_is_where_a_crank_walked_along_its_rod_stands(degrees: int) -> None:
    """A rod of fixed length between crank pin and piston pin: its length is checked, not the slider-crank formula."""
    stroke, rod = 96.0, 160.0
    left = float(stroke_left(_closing(str(degrees), str(stroke), str(rod)))) * stroke
    angle = radians(180 - degrees)
    pin_height = stroke / 2 * cos(angle)
    piston_height = stroke / 2 + rod - left
    pin_aside = sqrt((stroke / 2) ** 2 - pin_height**2)
    assert sqrt((piston_height - pin_height) ** 2 + pin_aside**2) == pytest.approx(rod, rel=1e-12)
