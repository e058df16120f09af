"""Bench sums on the command line."""

import json
import subprocess
import sys

import pytest

from tests.cli.conftest import Runner


def test_piston_speed_shows_its_working(fleetcare: Runner) -> None:
    ran = fleetcare("calc", "piston-speed", "--stroke", "90", "--rpm", "3000")
    assert ran.out == "Mean piston speed 9 m/s: 2 × 90 mm stroke × 3000 rpm / 60 000.\n"


def test_displacement_shows_its_working(fleetcare: Runner) -> None:
    ran = fleetcare("calc", "displacement", "--bore", "92", "--stroke", "96", "--cylinders", "4")
    assert ran.out == ("Displacement 2.5527 L: π/4 × (92 mm)² × 96 mm × 4; bore/stroke 0.9583, undersquare.\n")


@pytest.mark.parametrize(
    ("option", "figure", "sentence"),
    [
        ("--mpg-us", "25", "25 mpg (US) is 9.4086 L/100 km, 30.0237 mpg (imperial)"),
        ("--mpg-imp", "25", "25 mpg (imperial) is 11.2992 L/100 km, 20.8169 mpg (US)"),
        ("--litres-per-100km", "10", "10 L/100 km is 23.5215 mpg (US), 28.2481 mpg (imperial)"),
    ],
)
def test_fuel_use_shows_the_other_scales_and_the_constants(
    fleetcare: Runner, option: str, figure: str, sentence: str
) -> None:
    ran = fleetcare("calc", "fuel-use", option, figure)
    assert ran.out == f"{sentence}: L/100 km = 235.2146 / mpg (US) = 282.4809 / mpg (imperial).\n"


@pytest.mark.parametrize(
    ("words", "keys"),
    [
        (("piston-speed", "--stroke", "90", "--rpm", "3000"), {"mean_piston_speed_m_s": 9}),
        (
            ("displacement", "--bore", "92", "--stroke", "96", "--cylinders", "4"),
            {"litres": 2.552682261118465, "bore_stroke_ratio": 0.9583333333333334, "class": "undersquare"},
        ),
        (
            ("fuel-use", "--mpg-us", "25"),
            {"litres_per_100km": 9.408583333333334, "mpg_us": 25, "mpg_imp": 30.02374813762137},
        ),
    ],
)
def test_json_is_one_object_with_unrounded_figures(
    fleetcare: Runner, words: tuple[str, ...], keys: dict[str, float | str]
) -> None:
    answer = json.loads(fleetcare("calc", *words, "--json").out)
    assert answer.keys() == keys.keys()
    for key, value in keys.items():
        assert answer[key] == (value if isinstance(value, str) else pytest.approx(value, rel=1e-12))


@pytest.mark.parametrize(
    "words",
    [
        ("piston-speed", "--stroke", "0", "--rpm", "3000"),
        ("piston-speed", "--stroke", "90", "--rpm", "-1"),
        ("piston-speed", "--stroke", "90", "--rpm", "300000"),
        ("displacement", "--bore", "9200", "--stroke", "96", "--cylinders", "4"),
        ("displacement", "--bore", "92", "--stroke", "96", "--cylinders", "0"),
        ("fuel-use", "--mpg-us", "0"),
    ],
)
def test_a_figure_that_cannot_be_right_is_refused_in_one_line(fleetcare: Runner, words: tuple[str, ...]) -> None:
    ran = fleetcare("calc", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (1, "", 1)
    assert "cannot be right; give a figure above 0" in ran.err


@pytest.mark.parametrize(
    "words",
    [
        ("piston-speed", "--stroke", "ninety", "--rpm", "3000"),
        ("piston-speed", "--stroke", "nan", "--rpm", "3000"),
        ("piston-speed", "--stroke", "90", "--rpm", "inf"),
        ("displacement", "--bore", "92", "--stroke", "96", "--cylinders", "4.5"),
        ("fuel-use", "--mpg-us", "25", "--mpg-imp", "25"),
        ("fuel-use",),
    ],
)
def test_a_figure_that_cannot_be_read_is_status_2(fleetcare: Runner, words: tuple[str, ...]) -> None:
    ran = fleetcare("calc", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (2, "", 1)


EVERY_SUM = """
valve-order --firing-order 1-5-3-6-2-4
shim --measured 0.09 --target 0.15 --fitted 2.75 --step 0.05
adjuster --measured 0.30 --target 0.20 --pitch 1
cranking-pressure --compression-ratio 9.5
piston-speed --stroke 90 --rpm 3000
displacement --bore 92 --stroke 96 --cylinders 4
viscosity-index --kv40 95 --kv100 10.8
viscosity --kv40 95 --kv100 10.8 --at 60
grade --kv100 7.4
wear-rate --ppm 33 --hours 200
fuel-use --mpg-us 25
"""


def test_no_sum_loads_a_database_a_form_or_a_screen() -> None:
    """In one child process, as what this one has loaded says nothing."""
    look = f"""
import sys
from fleetcare.__main__ import main
statuses = [main(("calc", *words.split())) for words in {EVERY_SUM.split(chr(10))!r} if words]
heavy = {{"textual", "rich", "sqlmodel", "sqlalchemy", "alembic", "pydantic", "dateutil"}}
print(statuses, sorted(heavy & {{name.partition(".")[0] for name in sys.modules}}), file=sys.stderr)
"""
    ran = subprocess.run([sys.executable, "-c", look], capture_output=True, text=True, check=True)
    assert ran.stderr == f"{[0] * 11} []\n"


def test_every_sum_is_in_the_help(fleetcare: Runner) -> None:
    words_of_help = fleetcare("calc", "--help").out.split()
    names = [words.split()[0] for words in EVERY_SUM.splitlines() if words]
    assert [name for name in names if name not in words_of_help] == []
