"""The valve lash sheet on the screen: few keys, judged as typed, asked about, stored once, and never lost."""

import sqlite3
from contextlib import closing

import pytest
from textual.pilot import Pilot

from fleetcare.context import Context
from fleetcare.domain.sheets import CellKey, Phase
from fleetcare.tui.forms.base import Subject
from fleetcare.tui.screens.due import DueScreen
from fleetcare.tui.screens.item import ItemScreen
from fleetcare.tui.screens.sheet import SheetScreen
from fleetcare.tui.writing import WritingScreen
from tests.tui.conftest import Opened, line_with, press, seen, settle_down
from tests.tui.forms import form_with, stored

SIX = Subject("B-6", "Valve lash")
SINGLE = Subject("B-1", "Valve lash")
SMALL = (80, 24)


def rows(context: Context, query: str) -> list[tuple[object, ...]]:
    """Ask a database."""
    with closing(sqlite3.connect(context.path)) as connection:
        return connection.execute(query).fetchall()


def values_of(context: Context) -> list[tuple[object, ...]]:
    """Give the values stored, as point, phase and figure."""
    return rows(context, "select point, phase, coalesce(value, low || '..' || high) from sheet_value order by id")


async def sheet_of(pilot: Pilot[None], subject: Subject) -> SheetScreen:
    """Open the sheet of a task through the form its work is logged on."""
    await form_with(pilot, "log", subject, {"at": "1000", "by": "Fenn"})
    await press(pilot, "ctrl+s")
    screen = pilot.app.screen
    assert isinstance(screen, SheetScreen)
    return screen


def cell(screen: SheetScreen) -> tuple[str, str]:
    """Give point and phase of the cell under the cursor."""
    assert screen.grid.cursor is not None
    return screen.grid.cursor.point, screen.grid.cursor.phase


def said(pilot: Pilot[None]) -> str:
    """Give all that stands on the screen, in one line."""
    return " ".join(" ".join(seen(pilot)).split())


async def enter_all(pilot: Pilot[None], *texts: str) -> None:
    """Type values, Enter after each."""
    for text in texts:
        await press(pilot, *text, "enter")


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


async def test_a_sheet_that_closes_nothing_can_be_kept_with_the_task_left_open(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await sheet_of(pilot, SINGLE)
        await enter_all(pilot, "25")
        await press(pilot, "ctrl+s")
        assert line_with(pilot, "Valve lash does not close with this sheet: 1E not measured.")
        await press(pilot, "o")
        assert "Done in part, still open: Valve lash." in said(pilot)
    assert values_of(bench) == [("1I", "found", "0.25")]


async def test_a_sheet_can_close_its_task_as_it_stands(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await sheet_of(pilot, SINGLE)
        await enter_all(pilot, "25")
        await press(pilot, "ctrl+s", "s")
        assert "Done: Valve lash." in said(pilot)


async def test_what_is_left_out_of_limits_is_raised_as_a_follow_up_if_one_says_so(
    opened: Opened, bench: Context
) -> None:
    async with opened(size=(120, 40), context=bench) as pilot:
        await sheet_of(pilot, SINGLE)
        await enter_all(pilot, "25", "", "36", "38")
        assert line_with(pilot, " E ", "0.36<", "0.38<")
        await press(pilot, "ctrl+s")
        assert line_with(pilot, "Valve lash left out of limits: 1E 0.38 mm.")
        await press(pilot, "f")
        assert line_with(pilot, "!  due", "B-1", "Valve lash left out of limits: 1E")


async def test_a_follow_up_is_not_raised_by_itself(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await sheet_of(pilot, SINGLE)
        await enter_all(pilot, "25", "", "36", "38")
        await press(pilot, "ctrl+s", "w")
        assert isinstance(pilot.app.screen, DueScreen)
    assert rows(bench, "select count(*) from task_call") == [(0,)]


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


async def test_lash_is_measured_without_a_task_too(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await form_with(pilot, "lash", Subject("B-1"), {"at": "1000"})
        await press(pilot, "ctrl+s")
        assert isinstance(pilot.app.screen, SheetScreen)
        await enter_all(pilot, "25", "", "45")
        await press(pilot, "ctrl+s")
        assert isinstance(pilot.app.screen, WritingScreen)
        assert "Valve lash stays open" in said(pilot)
    assert values_of(bench) == [("1I", "found", "0.25"), ("1E", "found", "0.45")]


async def test_what_is_typed_is_there_again_after_esc_and_gone_after_ctrl_n(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await sheet_of(pilot, SINGLE)
        await press(pilot, *"25", "enter", "enter", "4", "escape")
        screen = await sheet_of_open_form(pilot)
        assert line_with(pilot, " I ", "0.25·", "same")
        assert screen.texts[CellKey("lash", "1E", Phase.FOUND)] == "4"
        assert line_with(pilot, "As you left it")
        await press(pilot, "ctrl+n")
        assert not any(screen.texts.values())
        assert cell(screen) == ("1I", "found")
        await press(pilot, "escape")
        screen = await sheet_of_open_form(pilot)
        assert not any(screen.texts.values())


async def sheet_of_open_form(pilot: Pilot[None]) -> SheetScreen:
    """Go on from the form in front to its sheet."""
    await press(pilot, "ctrl+s")
    screen = pilot.app.screen
    assert isinstance(screen, SheetScreen)
    return screen


async def test_an_engine_without_gaps_says_so_and_nothing_is_typed_into(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        from tests.tui.conftest import type_in

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


async def stored_sheet(pilot: Pilot[None]) -> SheetScreen:
    """Store a sheet of the single and open it again from the history of its engine."""
    await sheet_of(pilot, SINGLE)
    await enter_all(pilot, "25", "", "36", "45")
    await press(pilot, "ctrl+s")
    pilot.app.push_screen(ItemScreen("B-1"))
    await press(pilot, "h", "s")
    screen = pilot.app.screen
    assert isinstance(screen, SheetScreen)
    return screen


async def test_a_stored_sheet_is_opened_from_the_history_and_mended(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        screen = await stored_sheet(pilot)
        assert line_with(pilot, " E ", "0.36<", "0.45·")
        screen.grid.go(CellKey("lash", "1E", Phase.FOUND))
        await press(pilot, *"39", "ctrl+s")
        assert isinstance(pilot.app.screen, ItemScreen)
        assert "corrects entry 1" in said(pilot)
    now = "select value from sheet_value v join sheet s on s.id = v.sheet_id where s.entry_id = 2 order by v.id"
    assert rows(bench, now) == [("0.25",), ("0.39",), ("0.45",)]
    assert rows(bench, "select count(*) from sheet_value where sheet_id = 1") == [(3,)]


async def test_a_sheet_mended_to_close_nothing_leaves_its_task_open(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        screen = await stored_sheet(pilot)
        screen.grid.go(CellKey("lash", "1E", Phase.LEFT))
        await press(pilot, "delete", "ctrl+s")
        assert line_with(pilot, "Valve lash does not close with this sheet: 1E found out and not set.")
        await press(pilot, "o")
        assert "Done in part, still open: Valve lash." in said(pilot)


async def test_an_entry_without_a_sheet_has_none_to_open(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        pilot.app.push_screen(ItemScreen("B-1"))
        await press(pilot, "h", "s")
        assert line_with(pilot, "put the cursor on an entry with a sheet")


async def test_what_lies_half_typed_is_said_at_the_next_start(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await sheet_of(pilot, SINGLE)
        await press(pilot, "2", "escape", "escape")
    async with opened(size=SMALL, context=bench) as pilot:
        assert line_with(pilot, "Half typed and kept:", "log B-1", "sheet lash B-1")
        await press(pilot, "escape")
        assert "Half typed" not in said(pilot)
