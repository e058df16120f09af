"""Bench sums on the screen: filled from the nameplate, worked out at each key."""

from textual.pilot import Pilot

from fleetcare.sums import SUMS
from fleetcare.tui.screens.sums import SumScreen
from tests.tui.conftest import Opened, line_with, press, seen

LARGE = (100, 40)


async def open_sum(pilot: Pilot[None], name: str) -> SumScreen:
    """Open a sum from the page of PS-1."""
    await press(pilot, "down", "e", "u", *["down"] * [one.name for one in SUMS].index(name), "enter")
    screen = pilot.app.screen
    assert isinstance(screen, SumScreen)
    return screen


async def test_a_sum_is_filled_from_the_nameplate_and_answers_at_once(opened: Opened) -> None:
    async with opened(size=LARGE) as pilot:
        await open_sum(pilot, "piston-speed")
        # 2 × 135 mm × 1500 rpm / 60 000 = 6.75 m/s: the formula of reference tables, by hand
        assert line_with(pilot, "Mean piston speed 6.75 m/s: 2 × 135 mm stroke × 1500 rpm / 60 000.")


async def test_what_is_missing_and_what_is_wrong_is_said_while_it_is_typed(opened: Opened) -> None:
    async with opened(size=LARGE) as pilot:
        screen = await open_sum(pilot, "adjuster")
        assert line_with(pilot, "missing: measured, target, pitch; give it")
        await press(pilot, *"0.35x")
        assert line_with(pilot, "! '0.35x' is not a number")
        await press(pilot, "backspace", "enter", *"0.25", "enter", "1")
        assert screen.rows["pitch"].value == "1"
        assert line_with(pilot, "Turn the screw 36° tighter")


async def test_a_word_is_one_of_those_there_are(opened: Opened) -> None:
    async with opened(size=LARGE) as pilot:
        screen = await open_sum(pilot, "valve-order")
        assert "set intake 1, 2, 4; exhaust 1, 3, 5" in " ".join(seen(pilot))
        screen.rows["method"].editor.value = "both"
        await press(pilot, "enter")
        assert line_with(pilot, "! 'both' is not known here; write two-position or one-by-one")


async def test_of_several_scales_exactly_one_is_given(opened: Opened) -> None:
    async with opened(size=LARGE) as pilot:
        await open_sum(pilot, "fuel-use")
        assert line_with(pilot, "0 figures are given; give exactly one of them")
        await press(pilot, *"10", "enter")
        assert "10 L/100 km is 23.5215 mpg (US)" in " ".join(seen(pilot))


async def test_letters_are_only_letters_in_a_sum_and_esc_goes_back(opened: Opened) -> None:
    async with opened(size=LARGE) as pilot:
        screen = await open_sum(pilot, "grade")
        await press(pilot, "q", "1")
        assert screen.rows["kv100"].value == "q1"
        await press(pilot, "escape", "escape")
        assert line_with(pilot, "Plate", "Meters")
