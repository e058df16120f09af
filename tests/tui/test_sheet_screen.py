"""The valve lash sheet on the screen: few keys, drawn as the engine stands, judged and asked about as it is typed."""

from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.domain.sheets import CellKey, Phase
from fleetcare.tui.forms.base import Subject
from fleetcare.tui.screens.due import DueScreen
from fleetcare.tui.screens.sheet import SheetScreen
from tests.tui.conftest import Opened, line_with, press, seen, settle_down, type_in
from tests.tui.forms import form_with, stored
from tests.tui.sheets import SINGLE, SIX, SMALL, cell, enter_all, rows, said, sheet_of, values_of


async def test_twenty_four_values_take_their_digits_an_enter_each_and_fifteen_keys_more(
    opened: Opened, bench: Context
) -> None:
    set_to = {"I": ("18", "25"), "E": ("36", "45")}
    values = [value for side in "IEIEIEEIEIIE" for value in set_to[side]]
    keys = ["w", *"1000", "enter", *"Fenn", "ctrl+s", *(key for value in values for key in (*value, "enter")), "ctrl+s"]
    async with opened(size=SMALL, context=bench) as pilot:
        while "B-6" not in line_with(pilot, "▌"):
            await press(pilot, "down")
        await press(pilot, *keys)
        assert isinstance(pilot.app.screen, DueScreen)
        assert "Done: Valve lash." in said(pilot)
    assert len(values_of(bench)) == 24
    assert len(keys) <= sum(map(len, values)) + 24 + 15
    assert rows(bench, "select value from reading where entry_id = 1") == [("1000",)]
    assert rows(bench, "select person.name from log_entry join person on person.id = person_id") == [("Fenn",)]


async def test_a_value_left_as_found_costs_one_key(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        screen = await sheet_of(pilot, SINGLE)
        await enter_all(pilot, "25")
        assert cell(screen) == ("1I", "left")
        await press(pilot, "enter")
        assert cell(screen) == ("1E", "found")
        assert line_with(pilot, " I ", "0.25·", "same")
        await enter_all(pilot, "45", "")
        await press(pilot, "ctrl+s")
    assert values_of(bench) == [("1I", "found", "0.25"), ("1E", "found", "0.45")]


async def test_the_cursor_walks_the_valves_as_the_crank_is_turned(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        screen = await sheet_of(pilot, SIX)
        walked = []
        for _ in range(12):
            walked.append(cell(screen)[0])
            if len(walked) in {1, 7}:
                assert line_with(pilot, f"Stop {1 if len(walked) == 1 else 2} of 2")
            await press(pilot, "enter", "enter")
        # TM 5-3895-383-24 pp. 6-60 and 6-61: 1-5-3-6-2-4 with cylinder 1, then 6, at TDC on compression.
        assert walked == ["1I", "1E", "2I", "3E", "4I", "5E", "2E", "3I", "4E", "5I", "6I", "6E"]
        assert line_with(pilot, "turn on 360°: 6 at TDC on compression, 1 rocking")
        assert line_with(pilot, "That was the last one; Ctrl S stores it.")
        await press(pilot, "shift+tab")
        assert cell(screen) == ("6E", "found")


@pytest.mark.parametrize(
    ("typed", "told"),
    [
        ("25", "0.25 mm in, in 0.20 to 0.30 mm"),
        ("0,18", "0.18 mm alert, 0.02 mm below 0.20 to 0.30 mm, turn the screw 25° looser"),
        ("35", "0.35 mm alert, 0.05 mm above 0.20 to 0.30 mm"),
        ("25..30", "0.25..0.30 mm in, in 0.20 to 0.30 mm"),
        ("18..25", "not judged, the blades straddle 0.2 mm"),
        ("wide", "'wide' is not a gap"),
    ],
)
async def test_a_value_is_judged_while_it_is_typed(opened: Opened, bench: Context, typed: str, told: str) -> None:
    async with opened(size=(100, 30), context=bench) as pilot:
        await sheet_of(pilot, SINGLE)
        await press(pilot, *typed)
        assert told in said(pilot)


@pytest.mark.parametrize(("key", "kept"), [("m", "0.3"), ("r", "3.0")])
async def test_a_gap_ten_times_too_wide_is_asked_about_at_once(
    opened: Opened, bench: Context, key: str, kept: str
) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        screen = await sheet_of(pilot, SINGLE)
        await enter_all(pilot, "3.0")
        assert "0.3 mm is likely meant" in said(pilot)
        assert cell(screen) == ("1I", "found")
        await press(pilot, key)
        assert cell(screen) == ("1I", "left")
        await enter_all(pilot, "25", "45", "")
        await press(pilot, "ctrl+s")
        assert isinstance(pilot.app.screen, DueScreen)
    assert values_of(bench)[0] == ("1I", "found", kept)


async def test_a_slip_is_mended_by_typing_it_again(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        screen = await sheet_of(pilot, SINGLE)
        await enter_all(pilot, "3.0")
        await press(pilot, "escape", *"28", "enter")
        assert cell(screen) == ("1I", "left")
        assert line_with(pilot, " I ", "0.28·")


async def test_what_no_engine_has_cannot_be_let_stand(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await sheet_of(pilot, SINGLE)
        await enter_all(pilot, "30.0")
        assert "no valve lash is wider" in said(pilot)
        assert not [line for line in seen(pilot) if "it is right" in line]


async def test_nothing_is_stored_while_a_value_cannot_be_read(opened: Opened, bench: Context) -> None:
    before = stored(bench.path)
    async with opened(size=SMALL, context=bench) as pilot:
        screen = await sheet_of(pilot, SINGLE)
        await enter_all(pilot, "2x5", "", "45")
        await press(pilot, "ctrl+s")
        assert pilot.app.screen is screen
        assert cell(screen) == ("1I", "found")
        assert line_with(pilot, "Nothing is stored yet: a value cannot be read.")
        assert line_with(pilot, " I ", "2x5")
    assert stored(bench.path) == before


async def test_left_as_found_and_out_says_so_in_its_cell(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await sheet_of(pilot, SINGLE)
        await enter_all(pilot, "15", "")
        assert line_with(pilot, " I ", "0.15<", "same!")


async def test_a_shim_is_asked_for_where_the_gap_was_out_and_its_next_is_told(opened: Opened, bench: Context) -> None:
    async with opened(size=(100, 30), context=bench) as pilot:
        screen = await sheet_of(pilot, Subject("B-4", "Valve lash"))
        await enter_all(pilot, "25", "")
        assert screen.grid.cursor == CellKey("lash", "1I2", Phase.FOUND)
        await enter_all(pilot, "15")
        assert screen.grid.cursor == CellKey("shim", "1I2", Phase.FOUND)
        await enter_all(pilot, "2.75")
        assert screen.grid.cursor == CellKey("lash", "1I2", Phase.LEFT)
        assert "fit a 2.65 mm shim, which leaves 0.25 mm" in said(pilot)
        await enter_all(pilot, "25")
        assert screen.grid.cursor == CellKey("shim", "1I2", Phase.LEFT)
        await enter_all(pilot, "2.65")
        assert screen.grid.cursor == CellKey("lash", "1E1", Phase.FOUND)


async def test_blades_marked_in_inches_are_read_in_thousandths(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await sheet_of(pilot, Subject("B-2", "Valve lash"))
        await press(pilot, "5")
        assert line_with(pilot, "1I found: 0.005 in in, in 0.004 to 0.006 in")
        await press(pilot, "enter")
        assert line_with(pilot, " I ", ".005·")


async def test_another_unit_condition_and_gauge_are_said_above_the_valves(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        screen = await sheet_of(pilot, SINGLE)
        await press(pilot, "up", "h", "right", *"in", "right", *"set 2", "enter")
        assert cell(screen) == ("1I", "found")
        await press(pilot, *"10")
        assert line_with(pilot, "0.010 in not judged, the limits are for a cold engine")
        assert line_with(pilot, "hot", "in", "set 2")


async def test_what_is_no_condition_is_said_and_kept(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        screen = await sheet_of(pilot, SINGLE)
        await press(pilot, "up", *"luke", "ctrl+s")
        assert pilot.app.screen is screen
        assert screen.grid.cursor is not None
        assert screen.grid.cursor.quantity == "when"
        assert line_with(pilot, "'luke' is not known here; write cold or hot, or leave it empty")


async def test_an_engine_without_gaps_says_so_and_nothing_is_typed_into(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        type_in(bench.path, "engine", "edit", "B-1", "--adjuster", "hydraulic")
        await settle_down(pilot)
        await sheet_of(pilot, SINGLE)
        assert "the hydraulic adjusters of B-1 leave no gap to measure" in said(pilot)
        await press(pilot, "2", "enter", "ctrl+s", "escape")
        assert not isinstance(pilot.app.screen, SheetScreen)


async def test_the_cautions_of_the_job_stand_below_the_valves(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await sheet_of(pilot, SIX)
        assert line_with(pilot, "Shut the engine down and isolate it")
        await press(pilot, "pagedown")
        assert line_with(pilot, "The engine maker's manual comes before these limits")


async def test_a_sheet_without_limits_says_where_they_are_given(opened: Opened, db: Path) -> None:
    async with opened(size=SMALL) as pilot:
        await form_with(pilot, "lash", Subject("PS-1"), {"at": "305"})
        await press(pilot, "ctrl+s")
        assert line_with(pilot, "no check range is known; on the engine, x and then e give it")


async def test_what_the_rules_find_on_a_lash_sheet_is_said_while_it_is_typed(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        screen = await sheet_of(pilot, SINGLE)
        await enter_all(pilot, "25", "")
        assert "found: alert" not in said(pilot)
        await press(pilot, *"36")
        # B-1: exhaust 0.40 to 0.50 mm is in; 0.36 lies below it.
        assert line_with(pilot, "Stop 1 of 1", "found: alert closing valve at 1E")
        assert screen.read_sheet is not None
        assert screen.read_sheet.below()[0].startswith("ALERT closing valve at 1E")
