"""Bench sums on oil, on the command line."""

import json

import pytest

from tests.cli.conftest import Runner

PAIR = ("--kv40", "95", "--kv100", "10.8")


@pytest.mark.parametrize(
    ("words", "sentence"),
    [
        (
            ("viscosity-index", "--kv40", "73.30", "--kv100", "8.86"),
            "Viscosity index 92 (92.43): 100 × (L − U) / (L − H), U = 73.3, L = 119.94, H = 69.48 (ASTM D2270, procedure A).",
        ),
        (
            ("viscosity-index", "--kv40", "22.83", "--kv100", "5.05"),
            "Viscosity index 156 (156.42): (10^N − 1) / 0.00715 + 100, N = (log H − log U) / log Y = 0.1472, U = 22.83, "
            "Y = 5.05, H = 28.975 (ASTM D2270, procedure B).",
        ),
        (
            ("viscosity", *PAIR, "--at", "60"),
            "38.0938 mm²/s at 60 °C: log log (v + 0.7) = A − B log T, T in kelvin, A = 9.1898, B = 3.5632 through the two "
            "figures given (ASTM D341).",
        ),
        (
            ("grade", "--kv100", "7.4", "--hths", "2.40"),
            "SAE 16: 7.4 mm²/s at 100 °C, HTHS 2.4 mPa·s; 16 from 6.1 to below 8.2 mm²/s, HTHS 2.3 or more "
            "(SAE J300, which grades new oil).",
        ),
        (
            ("wear-rate", "--ppm", "33", "--hours", "200", "--top-up", "1.2", "--sump", "8"),
            "Wear 17.7684 ppm per 100 h: 35.5369 ppm / 200 h × 100; 35.5369 ppm = 33 ppm × x / (1 − e^−x), "
            "x = 1.2 L / 8 L = 0.15, what the sample would read without top-up.",
        ),
        (
            ("wear-rate", "--ppm", "33", "--hours", "200"),
            "Wear 16.5 ppm per 100 h: 33 ppm / 200 h × 100.",
        ),
    ],
)
def test_each_sum_shows_its_working(fleetcare: Runner, words: tuple[str, ...], sentence: str) -> None:
    assert fleetcare("calc", *words).out == f"{sentence}\n"


@pytest.mark.parametrize("at", ["-10", "39.9", "100.1"])
def test_viscosity_outside_the_two_figures_is_called_extrapolated(fleetcare: Runner, at: str) -> None:
    words = ("calc", "viscosity", *PAIR, "--at", at)
    assert fleetcare(*words).out.endswith("Outside 40 to 100 °C this is extrapolated.\n")
    assert json.loads(fleetcare(*words, "--json").out)["extrapolated"] is True


@pytest.mark.parametrize(
    ("words", "begins", "ends"),
    [
        (("--kv100", "7.4"), "SAE 16 or 20; HTHS at 150 °C decides: 7.4 mm²/s", "grades new oil)."),
        (("--kv100", "14"), "SAE 40: 14 mm²/s at 100 °C; 40 from 12.5 to below 16.3", "grades new oil)."),
        (("--kv100", "14", "--hths", "3.6"), "SAE 40: 14 mm²/s at 100 °C, HTHS 3.6", "Only behind 0W, 5W, 10W."),
        (("--kv100", "3"), "No SAE grade: 3 mm²/s at 100 °C; no grade takes that", "grades new oil)."),
    ],
)
def test_grade_says_what_fits_and_what_decides(
    fleetcare: Runner, words: tuple[str, ...], begins: str, ends: str
) -> None:
    sentence = fleetcare("calc", "grade", *words).out.rstrip("\n")
    assert sentence.startswith(begins)
    assert sentence.endswith(ends)


def test_more_top_up_than_a_sump_is_called_rough(fleetcare: Runner) -> None:
    words = ("calc", "wear-rate", "--ppm", "33", "--hours", "200", "--sump", "8", "--top-up")
    assert "rough" not in fleetcare(*words, "8").out
    assert fleetcare(*words, "8.1").out.endswith("More than a whole sump was added: a rough figure.\n")


@pytest.mark.parametrize(
    ("words", "keys"),
    [
        (("viscosity-index", *PAIR), {"viscosity_index": 97, "unrounded": pytest.approx(96.90178, abs=1e-5)}),
        (
            ("viscosity", *PAIR, "--at", "60"),
            {"kinematic_viscosity_cst": pytest.approx(38.09375, abs=1e-5), "extrapolated": False},
        ),
        (("grade", "--kv100", "7.4"), {"candidates": ["16", "20"], "sae_j300": None, "only_behind": []}),
        (
            ("grade", "--kv100", "14", "--hths", "3.5"),
            {"candidates": ["40"], "sae_j300": "40", "only_behind": ["0W", "5W", "10W"]},
        ),
        (("grade", "--kv100", "30"), {"candidates": [], "sae_j300": None, "only_behind": []}),
        (
            ("wear-rate", "--ppm", "33", "--hours", "200", "--top-up", "1.2", "--sump", "8"),
            {
                "ppm_per_100h": pytest.approx(17.76843, abs=1e-5),
                "corrected_ppm": pytest.approx(35.53685, abs=1e-5),
                "uncorrected_ppm_per_100h": 16.5,
            },
        ),
    ],
)
def test_json_is_one_object_with_unrounded_figures(
    fleetcare: Runner, words: tuple[str, ...], keys: dict[str, object]
) -> None:
    assert json.loads(fleetcare("calc", *words, "--json").out) == keys


@pytest.mark.parametrize(
    ("words", "wrong"),
    [
        (
            ("viscosity-index", "--kv40", "5", "--kv100", "1.99"),
            "no viscosity index is defined for 1.99 mm²/s at 100 °C",
        ),
        (("viscosity-index", "--kv40", "10.8", "--kv100", "95"), "give the larger figure for 40 °C"),
        (("viscosity", *PAIR, "--at", "400"), "temperature 400 °C cannot be right"),
        (("viscosity", *PAIR, "--at", "-60"), "is not within 0.21 to 20 000 000 mm²/s"),
        (("grade", "--kv100", "0"), "viscosity at 100 °C 0 mm²/s cannot be right"),
        (("grade", "--kv100", "14", "--hths", "0"), "HTHS 0 mPa·s cannot be right"),
        (("wear-rate", "--ppm", "33", "--hours", "0"), "hours on the oil 0 h cannot be right"),
        (("wear-rate", "--ppm", "33", "--hours", "200", "--top-up", "1", "--sump", "0"), "sump 0 L cannot be right"),
    ],
)
def test_what_cannot_be_right_is_refused_in_one_line(fleetcare: Runner, words: tuple[str, ...], wrong: str) -> None:
    ran = fleetcare("calc", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (1, "", 1)
    assert wrong in ran.err


@pytest.mark.parametrize(
    ("words", "wrong"),
    [
        (("viscosity-index", "--kv40", "95"), "--kv100"),
        (("viscosity", *PAIR), "--at"),
        (("viscosity", *PAIR, "--at", "hot"), "argument --at: 'hot' is not a number"),
        (("grade", "--hths", "3.5"), "--kv100"),
        (
            ("wear-rate", "--ppm", "33", "--hours", "200", "--sump", "8"),
            "missing: --top-up; give all of --top-up, --sump",
        ),
    ],
)
def test_what_cannot_be_read_is_status_2(fleetcare: Runner, words: tuple[str, ...], wrong: str) -> None:
    ran = fleetcare("calc", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (2, "", 1)
    assert wrong in ran.err
