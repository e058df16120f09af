"""The lash part of an engine's page: points in a list, the one under the cursor in words and as a plot."""

from pathlib import Path

import pytest

from tests.tui.conftest import Grown, Opened, line_with, press, seen, type_in

TO_PS_1 = ("2", "slash", *"ps-1", "enter", "enter")
LIMITS = ("--lash-intake", "0.20-0.30", "--lash-exhaust", "0.40-0.50", "--lash-set-exhaust", "0.45")


def sheet(db: Path, on: str, *rows: str, tag: str = "PS-1", when: str = "cold") -> None:
    """Measure an engine."""
    file = db.with_name("lash.csv")
    file.write_text("\n".join(["quantity,point,phase,value,unit", *rows]), encoding="utf-8")
    type_in(db, "measure", "lash", tag, str(file), "--on", on, "--when", when)


@pytest.fixture
def closing(made_yard: Path, grown: Grown, db: Path) -> Path:
    """PS-1, whose exhaust 1 closed, was set, and closes again; exhaust 2 was only ever gauged hot, the rest never."""
    return grown(made_yard, close, db)


def close(db: Path) -> None:
    """Let exhaust 1 of PS-1 close, from sheet to sheet."""
    type_in(db, "engine", "edit", "PS-1", *LIMITS, "--lash-when", "cold")
    sheet(db, "2024-08-01", "lash,1I,found,0.25,", "lash,1E,found,0.45,")
    sheet(db, "2025-05-20", "lash,1E,found,0.38,", "lash,1E,left,0.46,")
    sheet(db, "2026-04-30", "lash,1E,found,0.36,")
    sheet(db, "2026-04-30", "lash,2E,found,0.41,", when="hot")


async def test_the_list_says_last_value_where_it_lies_and_how_it_changed(opened: Opened, closing: Path) -> None:
    async with opened(*TO_PS_1, "g") as pilot:
        assert line_with(pilot, "POINT", "LAST", "STANDS", "ON", "CHANGE")
        assert line_with(pilot, "▌1I", "0.25 mm", "-  in", "2024-08-01")
        assert line_with(pilot, "1E", "0.36 mm", "!  0.04 below", "2026-04-30", "-0.1 over 587 h")
        assert line_with(pilot, "2I", "?  never measured")


async def test_the_plot_has_limits_setting_found_and_set_values(opened: Opened, closing: Path) -> None:
    async with opened(*TO_PS_1, "g", "down") as pilot:
        assert line_with(pilot, "╌╌╌", "most 0.50")
        assert line_with(pilot, "╌╌╌", "least 0.40")
        assert line_with(pilot, "◂ set 0.45")
        assert line_with(pilot, "1E over hours of life: ○ found, ● set to")
        lines = seen(pilot)
        assert sum(line.count("○") for line in lines) == 4  # three found values, and the legend
        assert sum(line.count("●") for line in lines) == 2
        assert any("│" in line.partition("│")[2] for line in lines), "no bar from found to set"
        assert line_with(pilot, "412 h", "1408 h")
        assert [line for line in lines if "Last set: left 0.46 mm on 2025-05-20" in line]


async def test_the_key_again_goes_on_to_the_next_point_and_from_the_last_to_the_first(
    opened: Opened, closing: Path
) -> None:
    async with opened(*TO_PS_1, "g", "g") as pilot:
        assert line_with(pilot, "1E over hours of life")
        await press(pilot, "end", "g")
        assert line_with(pilot, "1I over hours of life")


def closes_evenly(db: Path) -> None:
    """Exhaust 2 gauged four times cold, and a task that gauges it every 800 h."""
    last = ("--last-done", "2025-12-01", "--last-done", "40h")
    type_in(db, "task", "add", "PS-1", "Exhaust gap", "--every", "800h", "--needs-sheet", "lash", *last)
    for on, gap in (("2024-08-01", 49), ("2025-01-01", 475), ("2025-05-20", 46), ("2026-04-29", 42)):
        sheet(db, on, f"lash,2E,found,0.{gap},")


async def test_the_way_to_the_limit_is_drawn_beyond_the_last_value_and_said(opened: Opened, closing: Path) -> None:
    closes_evenly(closing)
    async with opened(*TO_PS_1, "g", *["down"] * 3) as pilot:
        assert line_with(pilot, "▌2E")
        assert line_with(pilot, "2E over hours of life: ○ found, ● set to, likely dotted")
        assert line_with(pilot, "Falls 0.07 mm in 1000 h: reaches 0.40 mm by 1652 to 1720 h")
        assert line_with(pilot, "412 h", "1719 h")  # beyond today's figure
        assert sum("┊" in line for line in seen(pilot)) > 3  # where it is likely reached


async def test_the_due_list_says_what_pulls_a_line_forward(opened: Opened, closing: Path) -> None:
    closes_evenly(closing)
    async with opened("slash", *"gap", "enter") as pilot:
        assert line_with(pilot, "pulled forward: 2E reaches 0.40 mm by 1652")


async def test_what_cannot_be_drawn_says_why_and_what_to_do(opened: Opened, closing: Path) -> None:
    async with opened(*TO_PS_1, "g", "down", "down") as pilot:
        assert line_with(pilot, "2I, intake valve: never measured. Measure it: x and v on this page, or")
        await press(pilot, "down")
        assert line_with(pilot, "Not drawn: 2026-04-30 0.41 mm, taken hot.")
        assert not [line for line in seen(pilot) if "╌" in line]


async def test_values_that_are_not_drawn_are_counted_below_the_plot(opened: Opened, closing: Path) -> None:
    sheet(closing, "2026-05-01", "lash,1E,found,0.40,", when="hot")
    async with opened(*TO_PS_1, "g", "down") as pilot:
        assert line_with(pilot, "1E over hours of life: ○ found, ● set to, 1 not drawn")
        assert line_with(pilot, "▌1E", "?  not judged")


async def test_an_engine_without_cylinders_and_one_with_hydraulic_adjusters_say_so(opened: Opened, db: Path) -> None:
    async with opened("2", "slash", *"sb-1", "enter", "enter", "g") as pilot:
        assert line_with(pilot, "The number of cylinders of SB-1 is not known")
    type_in(db, "engine", "edit", "PS-1", "--adjuster", "hydraulic")
    async with opened(*TO_PS_1, "g") as pilot:
        assert line_with(pilot, "leave no gap to measure")
        await press(pilot, "g", "down")
        assert line_with(pilot, "leave no gap to measure")


async def test_an_engine_counted_in_nothing_is_drawn_over_days(opened: Opened, db: Path) -> None:
    type_in(db, "engine", "add", "LE-1", "--cylinders", "2", "--site", "Board Yard", *LIMITS)
    for on, gap in (("2025-01-01", "0.45"), ("2026-01-01", "0.44")):
        sheet(db, on, f"lash,1E,found,{gap},", tag="LE-1")
    async with opened("2", "slash", *"le-1", "enter", "enter", "g", "g") as pilot:
        assert line_with(pilot, "1E over days: ○ found, ● set to")
        assert line_with(pilot, "2025-01-01", "2026-05-01")
        assert line_with(pilot, "▌1E", "-0.01 over 365 d")


async def test_a_sheet_stored_elsewhere_is_drawn_and_the_cursor_stays(opened: Opened, closing: Path) -> None:
    async with opened(*TO_PS_1, "g", "down") as pilot:
        sheet(closing, "2026-05-01", "lash,1E,found,0.35,")
        pilot.app.screen.follow()  # type: ignore[attr-defined]
        await press(pilot)
        await pilot.app.workers.wait_for_complete()
        await press(pilot, "f24")
        assert line_with(pilot, "▌1E", "0.35 mm", "0.05 below")


@pytest.mark.parametrize("size", [(60, 18), (80, 24), (120, 40)])
async def test_list_words_and_plot_have_room_in_every_size(
    opened: Opened, closing: Path, size: tuple[int, int], monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("NO_COLOR", "1")
    async with opened(*TO_PS_1, "g", "g", size=size) as pilot:
        assert line_with(pilot, "▌1E", "0.36 mm", "!  0.04 below")
        assert line_with(pilot, "least 0.40")
        assert line_with(pilot, "○ found, ● set to")
        assert [line for line in seen(pilot) if "1E, exhaust valve: found 0.36 mm" in line]
