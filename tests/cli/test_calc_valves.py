"""Bench sums on valves, on the command line."""

import json

import pytest

from tests.cli.conftest import Runner

SHIM = ("shim", "--measured", "0.09", "--target", "0.15", "--fitted", "2.75", "--step", "0.05")
ADJUSTER = ("adjuster", "--measured", "0.30", "--target", "0.20", "--pitch", "1", "--rocker-ratio", "1.5")


def test_valve_order_says_what_to_set_at_each_stop_and_what_it_assumes(fleetcare: Runner) -> None:
    assert fleetcare("calc", "valve-order", "--firing-order", "1-5-3-6-2-4").out.splitlines() == [
        "Firing order 1-5-3-6-2-4, firing taken to be even, every 120°; 0° is cylinder 1 at TDC on compression:",
        "  0° (1 at TDC on compression, 6 rocking): set intake 1, 2, 4; exhaust 1, 3, 5",
        "  360°, one full turn on (6 at TDC on compression, 1 rocking): set intake 3, 5, 6; exhaust 2, 4, 6",
        "An intake valve is set from TDC on compression to short of overlap, an exhaust valve from past overlap to TDC"
        " on compression; assumed, as usual: IVO 20°, IVC 50°, EVO 50°, EVC 20°, with 15° to spare.",
        "Mates, at TDC together: 1-6, 2-5, 3-4.",
    ]


def test_valve_order_one_by_one_stops_at_each_cylinder(fleetcare: Runner) -> None:
    ran = fleetcare("calc", "valve-order", "--firing-order", "1-3-2", "--method", "one-by-one")
    assert ran.out.splitlines() == [
        "Firing order 1-3-2, firing taken to be even, every 240°; 0° is cylinder 1 at TDC on compression:",
        "  0° (1 at TDC on compression): set intake 1; exhaust 1",
        "  240° (3 at TDC on compression): set intake 3; exhaust 3",
        "  480° (2 at TDC on compression): set intake 2; exhaust 2",
        "Both valves of a cylinder are closed at its own TDC on compression, when its mate, if any, is rocking.",
    ]


def test_valve_order_with_timing_names_the_valves_that_are_free_too(fleetcare: Runner) -> None:
    timing = ("--ivo", "20", "--ivc", "50", "--evo", "50", "--evc", "20")
    lines = fleetcare("calc", "valve-order", "--firing-order", "1-8-7-2-6-5-4-3", *timing).out.splitlines()
    assert lines[1].endswith("set intake 1, 3, 4, 5; exhaust 1, 2, 7, 8 (free too: intake 8; exhaust 3)")
    assert "; given: IVO 20°," in lines[3]


def test_valve_order_of_an_uneven_engine_takes_its_intervals(fleetcare: Runner) -> None:
    ran = fleetcare("calc", "valve-order", "--firing-order", "1-2", "--intervals", "315-405")
    assert ran.out.splitlines()[:3] == [
        "Firing order 1-2, firing at the intervals given; 0° is cylinder 1 at TDC on compression:",
        "  0° (1 at TDC on compression): set intake 1; exhaust 1, 2",
        "  360°, one full turn on (no cylinder at TDC on compression, 1 rocking): set intake 2",
    ]


def test_valve_order_goes_one_by_one_where_two_positions_come_too_near_a_cam(fleetcare: Runner) -> None:
    words = ("calc", "valve-order", "--firing-order", "1-2", "--intervals", "330-390")
    assert fleetcare(*words).out.splitlines()[1:] == [
        "  0° (1 at TDC on compression): set intake 1; exhaust 1",
        "  330° (2 at TDC on compression): set intake 2; exhaust 2",
        "Both valves of a cylinder are closed at its own TDC on compression, when its mate, if any, is rocking."
        " Two positions would bring a valve too near its cam.",
    ]
    assert json.loads(fleetcare(*words, "--json").out)["method"] == "one-by-one"


def test_valve_order_in_json_has_positions_and_mates(fleetcare: Runner) -> None:
    answer = json.loads(fleetcare("calc", "valve-order", "--firing-order", "1-3-4-2", "--json").out)
    assert answer == {
        "method": "two-position",
        "positions": [
            {
                "crank_deg": 0,
                "tdc_compression": 1,
                "intake": [1, 2],
                "exhaust": [1, 3],
                "rocking": 4,
                "also_intake": [],
                "also_exhaust": [],
            },
            {
                "crank_deg": 360,
                "tdc_compression": 4,
                "intake": [3, 4],
                "exhaust": [2, 4],
                "rocking": 1,
                "also_intake": [],
                "also_exhaust": [],
            },
        ],
        "mates": [[1, 4], [2, 3]],
    }


def test_an_odd_engine_has_null_for_the_cylinder_at_tdc_and_no_mates(fleetcare: Runner) -> None:
    answer = json.loads(fleetcare("calc", "valve-order", "--firing-order", "1-2-4-5-3", "--json").out)
    assert [position["tdc_compression"] for position in answer["positions"]] == [1, None]
    assert answer["mates"] == []


def test_crank_degrees_in_json_are_not_rounded(fleetcare: Runner) -> None:
    words = ("valve-order", "--firing-order", "1-3-5-7-2-4-6", "--method", "one-by-one", "--json")
    second = json.loads(fleetcare("calc", *words).out)["positions"][1]
    assert second["crank_deg"] == pytest.approx(720 / 7, rel=1e-15)


def test_shim_shows_its_working(fleetcare: Runner) -> None:
    assert fleetcare("calc", *SHIM).out == (
        "Fit the 2.7 mm shim: 2.75 fitted + 0.09 measured − 0.15 wanted = 2.69 mm, to the nearest 0.05 mm; "
        "expected lash 0.14 mm.\n"
    )
    assert json.loads(fleetcare("calc", *SHIM, "--json").out) == {
        "ideal_mm": 2.69,
        "shim_mm": 2.7,
        "expected_lash_mm": 0.14,
    }


def test_adjuster_shows_its_working(fleetcare: Runner) -> None:
    assert fleetcare("calc", *ADJUSTER).out == (
        "Turn the screw 24° tighter (-0.0667 turn): (0.2 wanted − 0.3 measured) / (1 mm pitch × k), k = R, R = 1.5.\n"
    )
    answer = json.loads(fleetcare("calc", *ADJUSTER, "--json").out)
    assert answer == {"turns": pytest.approx(-1 / 15, rel=1e-15), "degrees": -24, "direction": "tighter"}


def test_an_adjuster_that_is_right_is_left_alone(fleetcare: Runner) -> None:
    words = ("adjuster", "--measured", "0.2", "--target", "0.20", "--pitch", "1")
    assert fleetcare("calc", *words).out == "Leave the screw: the lash is 0.2 mm as wanted.\n"
    assert json.loads(fleetcare("calc", *words, "--json").out) == {"turns": 0, "degrees": 0, "direction": "none"}


@pytest.mark.parametrize(
    ("screw_at", "lash_at", "lever", "degrees"),
    [
        ("pushrod", "valve", "R", -24),
        ("pushrod", "cam", "1", -36),
        ("valve", "valve", "1", -36),
        ("valve", "cam", "1/R", -54),
        ("centre", "valve", "1 + R", -14.4),
        ("centre", "cam", "(1 + R)/R", -21.6),
    ],
)
def test_adjuster_takes_the_lever_of_every_place(
    fleetcare: Runner, screw_at: str, lash_at: str, lever: str, degrees: float
) -> None:
    places = ("--screw-at", screw_at, "--lash-at", lash_at)
    assert f"k = {lever}, R = 1.5." in fleetcare("calc", *ADJUSTER, *places).out
    assert json.loads(fleetcare("calc", *ADJUSTER, *places, "--json").out)["degrees"] == pytest.approx(degrees)


@pytest.mark.parametrize(
    ("words", "wrong"),
    [
        (("valve-order", "--firing-order", "1-2-2"), "leaves out cylinder 3 and names more than once cylinder 2"),
        (("valve-order", "--firing-order", "1-2", "--intervals", "300-300"), "do not fit 2 cylinders"),
        (
            ("valve-order", "--firing-order", "1-2", "--intervals", "330-390", "--method", "two-position"),
            "use the one-by-one method",
        ),
        (
            ("valve-order", "--firing-order", "1-2", "--ivo", "200", "--ivc", "50", "--evo", "50", "--evc", "20"),
            "IVO 200 degrees cannot be right",
        ),
        ((*SHIM, "--stock-min", "2.8"), "the nearest, 2.8 mm, would leave 0.04 mm of lash"),
        ((*SHIM, "--stock-min", "2.71", "--stock-max", "2.74"), "no shim in steps of 0.05 mm lies from 2.71 to 2.74"),
        ((*SHIM[:-1], "0"), "step 0 mm cannot be right"),
        ((*ADJUSTER, "--rocker-ratio", "0"), "rocker ratio 0 cannot be right"),
    ],
)
def test_what_cannot_be_set_is_refused_in_one_line(fleetcare: Runner, words: tuple[str, ...], wrong: str) -> None:
    ran = fleetcare("calc", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (1, "", 1)
    assert wrong in ran.err


@pytest.mark.parametrize(
    ("words", "wrong"),
    [
        (("valve-order",), "--firing-order"),
        (("valve-order", "--firing-order", "one-two"), "'one-two' is not a firing order"),
        (("valve-order", "--firing-order", "1-2", "--method", "both"), "invalid choice: 'both'"),
        (("valve-order", "--firing-order", "1-2", "--intervals", "360-"), "argument --intervals: '' is not a number"),
        (("valve-order", "--firing-order", "1-2", "--ivo", "20"), "missing: --ivc, --evo, --evc; give all of --ivo"),
        (("shim", "--measured", "0.09"), "--target, --fitted, --step"),
        ((*SHIM[:-1], "wide"), "argument --step: 'wide' is not a number"),
        ((*ADJUSTER, "--screw-at", "cam"), "invalid choice: 'cam'"),
    ],
)
def test_what_cannot_be_read_is_status_2(fleetcare: Runner, words: tuple[str, ...], wrong: str) -> None:
    ran = fleetcare("calc", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (2, "", 1)
    assert wrong in ran.err
