"""A round: the meters of a site on one form, stored together, the odd ones asked about."""

from pathlib import Path

from fleetcare.tui.forms.base import Subject
from fleetcare.tui.screens.engines import EnginesScreen
from fleetcare.tui.screens.form import FormScreen
from tests.tui.conftest import Opened, line_with, press, seen
from tests.tui.forms import form_with, stored

# The cursor of Engines stands in Board Yard: SB-1 shows 24 h, TR-1 4905 h, TR-2 1094 h.
ROUND = ("2", "o", *"Fenn", "enter")


async def test_all_meters_of_a_site_are_on_one_form_and_enter_goes_down(opened: Opened, db: Path) -> None:
    async with opened(*ROUND, *"25", "enter", *"4911", "enter", *"1100", "ctrl+s", size=(100, 30)) as pilot:
        assert isinstance(pilot.app.screen, EnginesScreen)
        assert "3 readings stored." in " ".join(seen(pilot))
        assert line_with(pilot, "TR-1", "4911 h", "2026-05-01")
        assert line_with(pilot, "TR-2", "1100 h", "2026-05-01")
        await form_with(pilot, "reading", Subject("TR-1"), {})
        assert line_with(pilot, " By", "Fenn")


async def test_what_a_meter_showed_last_is_said_beside_it(opened: Opened) -> None:
    async with opened(*ROUND, size=(100, 30)) as pilot:
        assert line_with(pilot, "▌SB-1")
        assert line_with(pilot, "SB-1: Standby set; showed last 24 h on 2026-04-27")


async def test_a_meter_not_read_is_left_out_and_a_round_of_nothing_is_refused(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened(*ROUND, "ctrl+s", size=(100, 30)) as pilot:
        assert line_with(pilot, "nothing was read; give at least one figure")
        assert stored(db) == before
        await press(pilot, "down", "up", *"25", "ctrl+s")
        assert "1 reading stored." in " ".join(seen(pilot))


async def test_an_odd_figure_is_asked_about_in_its_place_and_nothing_is_stored_before(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened(*ROUND, *"25", "enter", *"4811", "enter", *"1093", "ctrl+s", size=(100, 30)) as pilot:
        form = pilot.app.screen
        assert isinstance(form, FormScreen)
        assert line_with(pilot, "4811 h on 2026-05-01 does not fit", "of TR-1")
        await press(pilot, "r")
        assert line_with(pilot, "1093 h on 2026-05-01 does not fit", "of TR-2")
        assert stored(db) == before
        await press(pilot, "c")
        assert line_with(pilot, "▌TR-2", "1093")
        await press(pilot, "backspace", *"9", "ctrl+s", "r")
        assert "3 readings stored." in " ".join(seen(pilot))
    assert stored(db) > before


async def test_wrong_figures_of_a_round_are_each_said_below_their_own(opened: Opened, db: Path) -> None:
    before = stored(db)
    async with opened(*ROUND, *"many", "enter", "enter", *"some", "ctrl+s", size=(100, 30)) as pilot:
        lines = seen(pilot)
        for tag, said in (("SB-1", "'many' is not"), ("TR-2", "'some' is not")):
            place = next(n for n, line in enumerate(lines) if line[1:].startswith(tag))
            assert said in lines[place + 1]
    assert stored(db) == before


async def test_a_round_half_done_is_there_again(opened: Opened) -> None:
    async with opened(*ROUND, *"25", "escape", "o", size=(100, 30)) as pilot:
        assert line_with(pilot, "SB-1", "25")
        assert line_with(pilot, "As you left it")
