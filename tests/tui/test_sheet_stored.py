"""What becomes of a valve lash sheet on the screen: closed or left open, raised, mended, kept half typed."""

from textual.pilot import Pilot

from fleetcare.context import Context
from fleetcare.domain.sheets import CellKey, Phase
from fleetcare.tui.forms.base import Subject
from fleetcare.tui.screens.due import DueScreen
from fleetcare.tui.screens.item import ItemScreen
from fleetcare.tui.screens.sheet import SheetScreen
from fleetcare.tui.sheets.measured import GAUGE
from fleetcare.tui.writing import WritingScreen
from tests.tui.conftest import Opened, line_with, press
from tests.tui.forms import form_with
from tests.tui.sheets import SINGLE, SMALL, cell, enter_all, rows, said, sheet_of, values_of


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


async def test_a_stored_sheet_keeps_its_gauge_until_that_is_emptied(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        await form_with(pilot, "compression", Subject("B-1"), {"at": "1000", "by": "Fenn"})
        await press(pilot, "ctrl+s")
        screen = pilot.app.screen
        assert isinstance(screen, SheetScreen)
        screen.grid.go(GAUGE)
        await press(pilot, "G", "1", "enter", *"2650", "ctrl+s")
        for text in ("G1", ""):
            pilot.app.push_screen(ItemScreen("B-1"))
            await press(pilot, "h", "s")
            screen = pilot.app.screen
            assert isinstance(screen, SheetScreen)
            screen.grid.go(CellKey("pressure", "1", Phase.DRY))
            await press(pilot, *"2700")
            if not text:
                screen.grid.go(GAUGE)
                await press(pilot, "delete")
            await press(pilot, "ctrl+s", "escape")
    assert rows(bench, "select gauge from sheet order by id") == [("G1",), ("G1",), ("",)]


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


async def test_what_is_no_cell_of_a_half_typed_sheet_is_passed_over(opened: Opened, bench: Context) -> None:
    async with opened(size=SMALL, context=bench) as pilot:
        screen = await sheet_of(pilot, SINGLE)
        await press(pilot, "escape")
        screen.fleet_app.drafts.keep(screen.key, {"lash|1I|found": "25", "lash|1E|later": "3", "nothing": "4"})
        screen = await sheet_of_open_form(pilot)
        assert screen.texts == {CellKey("lash", "1I", Phase.FOUND): "25"}
