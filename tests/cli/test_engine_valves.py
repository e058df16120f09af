"""What a nameplate says of valves, bridges, screws and shims."""

from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner

Opener = Callable[[str], Runner]
YARD = "engine add P-01 --cylinders 4 --valves-per-cylinder 4"


@pytest.fixture
def run(open_yard: Opener) -> Runner:
    """P-01 of four cylinders with four valves each."""
    return open_yard(YARD)


def test_bridges_screws_and_shims_are_kept_and_shown_with_their_units(run: Runner) -> None:
    options = ("--bridged", "both", "--adjuster", "screw", "--screw-pitch", "1.25", "--screw-at", "centre")
    assert run("engine", "edit", "P-01", *options, "--rocker-ratio", "1.5", "--shim-step", "0.05").status == 0
    shown = [" ".join(line.split()) for line in run("show", "P-01").out.splitlines()]
    for line in (
        "bridged valves both",
        "adjuster screw",
        "screw pitch 1.25 mm",
        "screw at centre",
        "rocker ratio 1.5",
        "shim step 0.05 mm",
    ):
        assert line in shown


@pytest.mark.parametrize(
    ("words", "status", "err"),
    [
        (("--bridged", "top"), 2, "--bridged: 'top' is not known; use 'none', 'intake', 'exhaust' or 'both'"),
        (
            ("--bridged", "both", "--valves-per-cylinder", "3"),
            1,
            "a bridge joins two valves, and each cylinder has 1 ex",
        ),
        (("--screw-pitch", "11"), 1, "screw pitch 11 mm cannot be right"),
        (("--screw-pitch", "0"), 1, "--screw-pitch: 0 cannot be right"),
        (("--rocker-ratio", "11"), 1, "rocker ratio 11 cannot be right"),
        (("--shim-step", "1.5"), 1, "shim step 1.5 mm cannot be right"),
        (("--screw-at", "top"), 2, "--screw-at: 'top' is not known; use 'pushrod', 'valve' or 'centre'"),
    ],
)
def test_what_no_engine_has_is_refused(run: Runner, words: tuple[str, ...], status: int, err: str) -> None:
    ran = run("engine", "edit", "P-01", *words)
    assert (ran.status, ran.out) == (status, "")
    assert ran.err.startswith(err)


def test_a_bridge_stays_true_when_the_valves_are_edited(run: Runner) -> None:
    run("engine", "edit", "P-01", "--bridged", "exhaust")
    ran = run("engine", "edit", "P-01", "--valves-per-cylinder", "2")
    assert ran.err.startswith("a bridge joins two valves, and each cylinder has 1 exhaust valve;")


def test_a_bridge_needs_the_number_of_valves(open_yard: Opener) -> None:
    run = open_yard("engine add P-01 --cylinders 4")
    assert run("engine", "edit", "P-01", "--bridged", "both").err == (
        "a bridge needs the number of valves; give --valves-per-cylinder as well\n"
    )
    assert run("engine", "edit", "P-01", "--bridged", "none").status == 0


def test_a_setting_outside_its_check_range_is_refused_whichever_is_given_first(run: Runner) -> None:
    assert run("engine", "edit", "P-01", "--lash-intake", "0.20-0.30").status == 0
    ran = run("engine", "edit", "P-01", "--lash-set-intake", "0.35")
    assert ran.err == "--lash-set-intake 0.35 lies outside the check range 0.20 to 0.30; mend it, or the range\n"
    assert run("engine", "edit", "P-01", "--lash-set-intake", "0.30").status == 0
