"""Engine geometry against published figures; each case names its source."""

import csv
from decimal import Decimal
from pathlib import Path

import pytest

from fleetcare.rules.geometry import displacement, mean_piston_speed

CASES = list(csv.DictReader(Path(__file__).with_name("displacement.csv").read_text(encoding="utf-8").splitlines()))


@pytest.mark.parametrize("case", CASES, ids=[case["source"] for case in CASES])
def test_displacement_agrees_with_the_published_figure(case: dict[str, str]) -> None:
    swept = displacement(Decimal(case["bore_mm"]), Decimal(case["stroke_mm"]), int(case["cylinders"]))
    assert float(swept.litres) == pytest.approx(float(case["litres"]), rel=float(case["tolerance"]))


def test_mean_piston_speed_agrees_with_the_encyclopaedia() -> None:
    """Article "Mean piston speed": 90 mm of stroke at 3000 rpm is 9 m/s."""
    assert mean_piston_speed(Decimal(90), Decimal(3000)) == 9


def test_mean_piston_speed_agrees_with_the_textbook() -> None:
    """Pulkrabek, Engineering Fundamentals of the ICE, example 2-1 (from memory, recomputed): 8.60 cm, 3600 rpm, 10.32 m/s."""
    assert mean_piston_speed(Decimal("86.0"), Decimal(3600)) == Decimal("10.32")
