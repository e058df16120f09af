"""Compression and oil on an engine's page: subjects in a list, the one under the cursor in words and as a plot."""

from pathlib import Path

import pytest

from tests.tui.conftest import Grown, Opened, line_with, press, seen, type_in
from tests.tui.wear_yard import compressions, sample, sheet

TO_PS_1 = ("2", "slash", *"ps-1", "enter", "enter")
FRESH = ("kv100,,new,14.8,", "tbn,,new,10.2,")


def page(pilot_lines: list[str]) -> str:
    return " ".join(" ".join(pilot_lines).split())


@pytest.fixture
def falling(made_yard: Path, grown: Grown, db: Path) -> Path:
    """PS-1, whose cylinder 3 falls evenly while the others stand; first measured with another gauge."""
    return grown(made_yard, fall, db)


def fall(db: Path) -> None:
    """Let cylinder 3 of PS-1 fall, from sheet to sheet."""
    sheet(db, "compression", "2024-08-01", *compressions("27.0", "27.1", "27.0", "27.2", "27.0", "27.1"), gauge="old")
    for on, third in (("2024-12-01", "25.4"), ("2025-05-20", "24.1"), ("2025-12-01", "22.8"), ("2026-04-30", "22.0")):
        sheet(db, "compression", on, *compressions("26.0", "26.1", third, "26.2", "26.0", "26.1"), gauge="C 2")


@pytest.fixture
def sampled(made_yard: Path, grown: Grown, db: Path) -> Path:
    """PS-1, four samples of one fill: iron comes evenly, silicon stays below what shows, the base number falls."""
    return grown(made_yard, sample_four, db)


def sample_four(db: Path) -> None:
    """Sample the oil of PS-1 four times."""
    type_in(db, "engine", "edit", "PS-1", "--sump", "12")
    samples = (("2025-12-20", "12"), ("2026-02-01", "19"), ("2026-03-10", "30"), ("2026-04-20", "37"))
    for place, (on, iron) in enumerate(samples):
        rows = sample(str(50 * place + 50), iron, "Si,,,<5,ppm", "kv100,,,14.1,", f"tbn,,,{10 - place},", *FRESH)
        sheet(db, "oil", on, *rows, gauge="Lab A", at=f"{50 * place + 100}h")


async def test_the_list_says_how_each_cylinder_stands_and_the_one_under_the_cursor_is_drawn(
    opened: Opened, falling: Path
) -> None:
    async with opened(*TO_PS_1, "k", "k", "k") as pilot:
        assert line_with(pilot, "CYLINDER", "LAST", "STANDS", "ON", "CHANGE")
        assert line_with(pilot, "▌3", "22.0 bar", "-  in", "2026-04-30", "-0.8 in 262 h")
        assert line_with(pilot, "╌╌╌", "alarm 19.65")  # 75 % of the highest, 26.2 bar
        assert line_with(pilot, "3 over hours of life: ○ measured")
        said = page(seen(pilot))
        assert "Cylinder 3, 22.0 bar on 2026-04-30" in said
        assert sum(line.count("○") for line in seen(pilot)) == 6  # five values, and the legend


async def test_another_gauge_is_told(opened: Opened, falling: Path) -> None:
    sheet(
        falling, "compression", "2026-05-01", *compressions("24.0", "24.1", "20.0", "24.2", "24.0", "24.1"), gauge="new"
    )
    async with opened(*TO_PS_1, "k", size=(120, 40)) as pilot:
        assert line_with(pilot, "▌1", "24.0 bar", "another gauge")
        assert "Of 3 gauges, each a line of its own (old, C 2, new): another is not a trend." in page(seen(pilot))


async def test_the_oil_list_has_a_rate_and_leaves_out_what_was_never_reported(opened: Opened, sampled: Path) -> None:
    async with opened(*TO_PS_1, "e") as pilot:
        assert line_with(pilot, "OIL", "LAST", "STANDS", "ON", "PER 100 h", "CHANGE")
        assert line_with(pilot, "Si silicon", "<5 ppm", "a bound")
        assert line_with(pilot, "visc. 100 °C", "14.1 mm2/s")
        assert line_with(pilot, "Fe iron", "37 ppm", "+18.5")
        assert "copper" not in page(seen(pilot))


async def test_an_element_is_drawn_over_the_hours_on_the_oil(opened: Opened, sampled: Path) -> None:
    async with opened(*TO_PS_1, "e", "end") as pilot:
        assert line_with(pilot, "▌Fe iron")
        assert line_with(pilot, "Fe iron over hours on the oil: ○ measured")
        assert line_with(pilot, " 50 h ", "252 h")
        said = page(seen(pilot))
        assert "Iron, 37 ppm on 2026-04-20" in said
        assert "Rises 170 ppm in 1000 h" in said


async def test_new_oil_and_bounds_have_signs_of_their_own(opened: Opened, sampled: Path) -> None:
    async with opened(*TO_PS_1, "e") as pilot:
        assert line_with(pilot, "Si silicon over hours on the oil: ○ measured, ▽ at most")
        assert sum(line.count("▽") for line in seen(pilot)) == 5
        await press(pilot, "down", "down")
        assert line_with(pilot, "base number over hours on the oil: ○ measured, ◇ new oil")
        assert line_with(pilot, "╌", "alert 5.1")  # half of new, 10.2


async def test_a_fill_begins_anew_on_the_axis(opened: Opened, sampled: Path) -> None:
    sheet(sampled, "oil", "2026-04-30", *sample("10", "5", *FRESH), gauge="Lab A")
    async with opened(*TO_PS_1, "e", "end") as pilot:
        assert line_with(pilot, "▌Fe iron", "5 ppm", "another fill")
        assert line_with(pilot, " 50 h", " 10 h")


async def test_without_hours_on_the_oil_or_top_up_it_says_why_nothing_is_projected(opened: Opened, db: Path) -> None:
    sheet(db, "oil", "2026-04-20", "Fe,,,37,ppm")
    async with opened(*TO_PS_1, "e") as pilot:
        assert line_with(pilot, "▌Fe iron", "37 ppm")
        assert "Not projected: the sheet does not state the hours on the oil." in page(seen(pilot))
        assert line_with(pilot, "Fe iron over hours of life: ○ measured")
    sheet(db, "oil", "2026-04-21", "hours_on_oil,,,200,h", "Fe,,,37,ppm")
    async with opened(*TO_PS_1, "e") as pilot:
        assert (
            "Not projected: neither sheet nor log say what was topped up; write 0 on the sheet where nothing was."
            in page(seen(pilot))
        )


async def test_one_test_is_drawn_and_asks_for_more(opened: Opened, db: Path) -> None:
    sheet(db, "compression", "2026-04-20", *compressions("26.0", "26.1"))
    async with opened(*TO_PS_1, "k") as pilot:
        assert "No slope yet: 3 more values needed." in page(seen(pilot))
        assert line_with(pilot, "1 over hours of life")


async def test_nothing_measured_says_how_to_begin_and_a_machine_where(opened: Opened, db: Path) -> None:
    async with opened(*TO_PS_1, "k") as pilot:
        assert "No compression was measured yet. Write one down: x and c on this page" in page(seen(pilot))
        await press(pilot, "e", "e", "down")
        assert "No oil sample was taken yet. Write one down: x and o on this page" in page(seen(pilot))
    async with opened("2", "slash", *"ph-1", "enter", "enter", "e") as pilot:
        assert "PH-1 is a machine: its engines are measured, each on its own page." in page(seen(pilot))


async def test_without_a_meter_compression_is_drawn_over_days(opened: Opened, db: Path) -> None:
    type_in(db, "engine", "add", "LE-1", "--cylinders", "2", "--site", "Board Yard")
    for on, low in (("2025-01-01", "25.0"), ("2026-01-01", "24.8")):
        sheet(db, "compression", on, *compressions(low, "25.5"), tag="LE-1")
    async with opened("2", "slash", *"le-1", "enter", "enter", "k") as pilot:
        assert line_with(pilot, "1 over days: ○ measured")
        assert line_with(pilot, "▌1", "-0.2 in 365 d")
        assert "Not projected: the hours of life it was taken at are not known." in page(seen(pilot))


@pytest.mark.parametrize("size", [(60, 18), (80, 24), (120, 40)])
async def test_list_words_and_plot_have_room_in_every_size(
    opened: Opened, sampled: Path, size: tuple[int, int], monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("NO_COLOR", "1")
    async with opened(*TO_PS_1, "e", "end", size=size) as pilot:
        assert line_with(pilot, "Lash", "Compression", "Oil")
        assert line_with(pilot, "▌Fe iron", "37 ppm", "-  in")
        assert line_with(pilot, "○ measured")
        assert [line for line in seen(pilot) if "┤" in line]
