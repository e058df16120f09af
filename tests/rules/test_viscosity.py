"""Viscosity index, viscosity at a temperature, and SAE grades."""

from decimal import Decimal
from itertools import pairwise

import pytest

from fleetcare.errors import Refused
from fleetcare.rules.j300 import GRADES, grade_oil
from fleetcare.rules.viscosity import ViscosityIndex, viscosity_index, walther


def _names(kv100: str, hths: str | None = None) -> tuple[list[str], str | None]:
    grading = grade_oil(Decimal(kv100), None if hths is None else Decimal(hths))
    return [grade.name for grade in grading.candidates], grading.grade.name if grading.grade else None


def test_no_index_is_defined_below_2_and_one_is_at_2() -> None:
    with pytest.raises(
        Refused, match=r"no viscosity index is defined for 1.99 mm²/s at 100 °C; ASTM D2270 begins at 2"
    ):
        viscosity_index(Decimal(7), Decimal("1.99"))
    assert viscosity_index(Decimal("6.394"), Decimal(2)).rounded == 100


@pytest.mark.parametrize(
    ("kv40", "kv100", "index"),
    [("147.7", "10", 0), ("82.87", "10", 100), ("1023", "30", 0), ("421.7", "30", 100), ("4905", "70", 0)],
)
def test_a_reference_oil_has_the_index_it_stands_for(kv40: str, kv100: str, index: int) -> None:
    assert viscosity_index(Decimal(kv40), Decimal(kv100)).unrounded == index


def test_an_oil_worse_than_the_worst_reference_has_a_negative_index() -> None:
    assert viscosity_index(Decimal(160), Decimal(10)).rounded < 0


def test_both_procedures_meet_at_100() -> None:
    just_below, just_above = (viscosity_index(Decimal(kv40), Decimal(10)) for kv40 in ("82.8701", "82.8699"))
    assert just_below.power is None
    assert just_above.power is not None
    assert float(just_above.unrounded - just_below.unrounded) == pytest.approx(0, abs=0.001)


@pytest.mark.parametrize(("unrounded", "rounded"), [("96.5", 96), ("97.5", 98), ("97.4999", 97), ("-0.5", 0)])
def test_exact_halves_go_to_the_even_number(unrounded: str, rounded: int) -> None:
    assert ViscosityIndex(Decimal(unrounded), Decimal(1), Decimal(1), None).rounded == rounded


@pytest.mark.parametrize("sum_of", [viscosity_index, walther])
@pytest.mark.parametrize(
    ("kv40", "kv100", "wrong"),
    [
        ("0.2", "3", "viscosity at 40 °C 0.2 mm²/s cannot be right; give a figure from 0.21 to 100000"),
        ("100001", "3", "viscosity at 40 °C 100001 mm²/s cannot be right"),
        ("3", "0", "viscosity at 100 °C 0 mm²/s cannot be right"),
        ("10.8", "95", "10.8 mm²/s at 40 °C and 95 at 100 °C cannot be right; give the larger figure for 40 °C"),
        ("10", "10", "cannot be right"),
    ],
)
def test_viscosities_that_cannot_be_right_are_refused(sum_of: object, kv40: str, kv100: str, wrong: str) -> None:
    assert callable(sum_of)
    with pytest.raises(Refused, match=wrong):
        sum_of(Decimal(kv40), Decimal(kv100))


@pytest.mark.parametrize(("temperature", "viscosity"), [(40, 95), (100, 10.8)])
def test_the_line_goes_through_the_two_figures_given(temperature: int, viscosity: float) -> None:
    assert float(walther(Decimal(95), Decimal("10.8")).at(Decimal(temperature))) == pytest.approx(viscosity, rel=1e-12)


@pytest.mark.parametrize("temperature", ["-60.1", "300.1"])
def test_a_temperature_no_oil_is_used_at_is_refused(temperature: str) -> None:
    with pytest.raises(Refused, match=f"temperature {temperature} °C cannot be right; give a figure from -60 to 300"):
        walther(Decimal(95), Decimal("10.8")).at(Decimal(temperature))


@pytest.mark.parametrize(
    ("kv40", "kv100", "temperature"),
    [("95", "10.8", "-60"), ("0.9", "0.3", "180"), ("99999", "0.21", "-60"), ("99999", "0.21", "300")],
)
def test_an_oil_too_thick_or_too_thin_for_the_standard_is_refused(kv40: str, kv100: str, temperature: str) -> None:
    with pytest.raises(Refused, match=r"is not within 0.21 to 20 000 000 mm²/s; ask for a temperature nearer to 40"):
        walther(Decimal(kv40), Decimal(kv100)).at(Decimal(temperature))


@pytest.mark.parametrize(
    ("kv100", "candidates", "grade"),
    [
        ("3.9", [], None),
        ("4.0", ["8"], "8"),
        ("5.0", ["8", "12"], None),
        ("6.1", ["12", "16"], None),
        ("6.9", ["12", "16", "20"], None),
        ("7.1", ["16", "20"], None),
        ("8.2", ["20"], "20"),
        ("9.3", ["30"], "30"),
        ("12.499", ["30"], "30"),
        ("12.5", ["40"], "40"),
        ("26.0", ["60"], "60"),
        ("26.1", [], None),
    ],
)
def test_a_band_takes_its_lower_end_and_not_its_upper_one(kv100: str, candidates: list[str], grade: str | None) -> None:
    assert _names(kv100) == (candidates, grade)


@pytest.mark.parametrize(
    ("kv100", "hths", "candidates", "grade"),
    [
        ("7.0", "2.6", ["12", "16", "20"], "20"),
        ("7.0", "2.59", ["12", "16"], "16"),
        ("7.0", "1.99", [], None),
        ("14", "3.5", ["40"], "40"),
        ("14", "3.49", [], None),
    ],
)
def test_with_high_shear_viscosity_the_thickest_that_fits_is_the_grade(
    kv100: str, hths: str, candidates: list[str], grade: str | None
) -> None:
    assert _names(kv100, hths) == (candidates, grade)


@pytest.mark.parametrize(("hths", "needs"), [(None, False), ("3.5", True), ("3.69", True), ("3.7", False)])
def test_a_40_of_little_high_shear_viscosity_needs_a_thin_winter_grade_in_front(hths: str | None, needs: bool) -> None:
    assert grade_oil(Decimal(14), None if hths is None else Decimal(hths)).needs_thin_winter is needs


def test_the_bands_leave_no_gap() -> None:
    for thinner, thicker in pairwise(GRADES):
        assert thinner.least < thicker.least <= thinner.below < thicker.below


@pytest.mark.parametrize(
    ("kv100", "hths", "wrong"), [("0", None, "viscosity at 100 °C 0"), ("14", "0", "HTHS 0"), ("14", "101", "HTHS 101")]
)
def test_a_grade_of_figures_that_cannot_be_right_is_refused(kv100: str, hths: str | None, wrong: str) -> None:
    with pytest.raises(Refused, match=wrong):
        _names(kv100, hths)
