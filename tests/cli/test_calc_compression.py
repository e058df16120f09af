"""The bench sum on compression, on the command line."""

import json

import pytest

from tests.cli.conftest import Runner

SUM = ("calc", "cranking-pressure", "--compression-ratio", "9.5")
CLOSING = ("--intake-closes", "50", "--stroke", "86", "--rod", "166")


def test_cranking_pressure_shows_its_working_and_the_usual_band(fleetcare: Runner) -> None:
    assert fleetcare(*SUM, *CLOSING, "--exponent", "1.25").out == (
        "About 1327.9 kPa on the gauge (192.6 psi, 13.28 bar): 101.325 kPa at 0 m × (8.3081^1.25 − 1); of the ratio 9.5 "
        "the closed intake leaves 8.3081. Exponents of 1.2 to 1.35, as usual in cranking, give 1184.3 to 1664.9 kPa: "
        "a guide, never a limit.\n"
    )


def test_cranking_pressure_of_the_whole_stroke_is_called_the_most(fleetcare: Runner) -> None:
    assert "(9.5^1.3 − 1); at most, as when the intake closes is not given." in fleetcare(*SUM).out


def test_cranking_pressure_in_json_has_every_unit(fleetcare: Runner) -> None:
    answer = json.loads(fleetcare(*SUM, *CLOSING, "--altitude", "1500", "--json").out)
    assert answer == {
        "ambient_kpa": pytest.approx(84.5560, abs=1e-4),
        "absolute_kpa": pytest.approx(1325.84, abs=0.05),
        "gauge_kpa": pytest.approx(1241.28, abs=0.05),
        "gauge_psi": pytest.approx(180.03, abs=0.01),
        "gauge_bar": pytest.approx(12.4128, abs=0.0005),
        "effective_compression_ratio": pytest.approx(8.3081, abs=1e-4),
        "usual_gauge_kpa": [pytest.approx(988.3, abs=0.1), pytest.approx(1389.4, abs=0.1)],
    }


def test_the_altitude_may_lie_below_the_sea(fleetcare: Runner) -> None:
    assert json.loads(fleetcare(*SUM, "--altitude", "-3", "--json").out)["ambient_kpa"] > 101.325


@pytest.mark.parametrize(
    ("words", "wrong"),
    [
        (("--exponent", "0"), "exponent 0 cannot be right"),
        (("--altitude", "15000"), "altitude 15000 m cannot be right"),
        (("--compression-ratio", "1"), "compression ratio 1 cannot be right"),
        (("--intake-closes", "50", "--stroke", "86", "--rod", "40"), "a rod of 40 mm cannot turn a crank"),
    ],
)
def test_what_cannot_be_right_is_refused_in_one_line(fleetcare: Runner, words: tuple[str, ...], wrong: str) -> None:
    ran = fleetcare(*SUM, *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (1, "", 1)
    assert wrong in ran.err


@pytest.mark.parametrize(
    ("words", "wrong"),
    [
        (("--intake-closes", "50"), "missing: --stroke, --rod; give all of --intake-closes, --stroke, --rod, or none"),
        (("--altitude", "high"), "argument --altitude: 'high' is not a number"),
    ],
)
def test_what_cannot_be_read_is_status_2(fleetcare: Runner, words: tuple[str, ...], wrong: str) -> None:
    ran = fleetcare(*SUM, *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (2, "", 1)
    assert wrong in ran.err
