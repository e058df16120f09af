"""Engines, and the page of one: plate, meters, lines and history."""

from pathlib import Path

from tests.tui.conftest import Opened, line_with, press, seen, type_in


async def test_engines_and_machines_stand_by_site_with_what_they_need_most(opened: Opened) -> None:
    async with opened("2", size=(120, 40)) as pilot:
        assert line_with(pilot, "PS-1", "Pump diesel", "PH-1", "302 h", "2026-04-30", "!! 1 overdue")
        assert line_with(pilot, "TR-2", "~  2 probably due")
        assert line_with(pilot, "PS-2", "laid up", "=  1 before return")
        assert line_with(pilot, "TR-1", "stood down")
        lines = seen(pilot)
        places = [next(n for n, line in enumerate(lines) if line.startswith(f" {head}")) for head in
                  ("Board Yard  3", "North Sluice  2", "Ousel Outfall  1", "withdrawn  1")]  # fmt: skip
        assert places == sorted(places)
        assert "PS-9" in lines[places[-1] + 1]


async def test_engines_can_be_found_by_words(opened: Opened) -> None:
    async with opened("2", "slash", *"tractor bucket", "enter") as pilot:
        assert line_with(pilot, "TR-2")
        assert not [line for line in seen(pilot) if "TR-1" in line]


async def test_a_page_opens_from_the_list_and_goes_back_to_it(opened: Opened) -> None:
    async with opened("2", "down", "enter") as pilot:
        assert seen(pilot)[1] == " TR-1  STOOD DOWN: NOT TO BE RUN  Tractor with flail mower  Board Yard"
        await press(pilot, "escape")
        assert line_with(pilot, "▌TR-1")


async def test_the_plate_has_derived_figures_factors_and_cautions(opened: Opened) -> None:
    async with opened("down", "e", size=(100, 40)) as pilot:
        assert line_with(pilot, "displacement", "8.27 L (bore/stroke 0.84, undersquare)")
        assert line_with(pilot, "mean piston speed", "6.8 m/s at rated speed")
        assert line_with(pilot, "Oil and filter", "Hot oil: let it cool.")
        assert line_with(pilot, "Limits and intervals are to be checked")
    async with opened("e", size=(100, 40)) as pilot:
        assert line_with(pilot, "duty factor", "hours × 0.98 from 2026-04-01: dust on the banks")


async def test_meters_are_plotted_as_life_totals_with_what_is_due_and_likely(opened: Opened) -> None:
    async with opened("down", "e", "m", size=(100, 40)) as pilot:
        lines = seen(pilot)
        assert line_with(pilot, "hours", "302 h on the dial, 1407.5 h of life, read 2026-04-30")
        assert [line for line in lines if "Oil and filter ╌" in line]
        assert line_with(pilot, "hours of life: read solid, likely dotted, its range thin")
        dots = {character for line in lines for character in line if "\u2800" < character <= "\u28ff"}
        assert dots
        assert line_with(pilot, "READING", "SHOWN")
        assert line_with(pilot, "2025-11-01", "3 h")


async def test_without_a_forecast_the_plot_says_why(opened: Opened) -> None:
    async with opened("2", "end", "up", "enter", "m", size=(100, 30)) as pilot:
        assert line_with(pilot, "no forecast: laid up")


async def test_history_keeps_what_was_corrected_readable(opened: Opened) -> None:
    async with opened("e", "h", size=(120, 30)) as pilot:
        assert line_with(pilot, "15 L", "corrected by entry 5")
        assert line_with(pilot, "▌    5", "1.5 L", "corrects entry 4, comma left out")
        assert line_with(pilot, "entry 5, 2026-02-16, top-up")


async def test_parts_are_a_letter_or_an_arrow_away(opened: Opened) -> None:
    async with opened("e") as pilot:
        for key, words in (
            ("l", "DIAL"), ("h", "FIGURES"), ("left", "DIAL"), ("right", "FIGURES"), ("right", "was found"),
            ("right", "is not known"), ("right", "No compression"), ("right", "No oil sample"), ("right", "tag"),
            ("m", "SHOWN"), ("g", "is not known"), ("k", "No compression"), ("e", "No oil sample"),
        ):  # fmt: skip
            await press(pilot, key)
            assert [line for line in seen(pilot) if words in line], key


async def test_a_line_of_a_page_opens_its_working_and_that_its_page(opened: Opened) -> None:
    async with opened("e", "l", "down", "enter") as pilot:
        assert " TR-1  Air filter" in seen(pilot)
        await press(pilot, "e")
        assert "STOOD DOWN" in seen(pilot)[1]
        await press(pilot, "escape", "escape", "escape")
        assert seen(pilot)[-1].startswith(" Enter working")


async def test_the_page_of_a_machine_has_no_status_and_its_own_lines(opened: Opened, db: Path) -> None:
    type_in(db, "task", "add", "PH-1", "Crane test", "--every", "12mo", "--last-done", "2025-05-10")
    async with opened("n", "n", "down", "e", "l") as pilot:
        assert line_with(pilot, "PH-1", "Pump house")
        assert line_with(pilot, ">  near", "Crane test", "2026-05-10")


async def test_a_withdrawn_engine_keeps_a_page_without_lines(opened: Opened) -> None:
    async with opened("2", "end", "enter", "l") as pilot:
        assert seen(pilot)[1].startswith(" PS-9  WITHDRAWN  Old pump diesel")
        assert line_with(pilot, "No tasks yet.")
