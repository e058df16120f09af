"""Any size, any colours, any text: nothing breaks, nothing drives the terminal, states stay readable."""

import re
import shutil
from decimal import Decimal
from itertools import product
from pathlib import Path

import pytest
from textual.color import Color

from fleetcare.context import Context
from fleetcare.tui.app import FleetApp
from fleetcare.tui.looks import BAY, MARKS, OFFICE
from tests.tui.conftest import Opened, line_with, press, seen, settle_down, type_in

# Keys that bring every screen to the front in turn.
TOUR = ("enter", "escape", "e", "m", "l", "h", "escape", "f", "escape", "question_mark", "escape", "2", "1")
CONTROL = re.compile("[\x00-\x1f\x7f-\x9f\u202a-\u202e\u2066-\u2069]")


@pytest.mark.parametrize("size", [(200, 60), (120, 40), (80, 24), (60, 18), (20, 5)], ids=str)
async def test_every_screen_shows_in_any_size(opened: Opened, size: tuple[int, int]) -> None:
    async with opened(*TOUR, size=size) as pilot:
        assert seen(pilot)[0].startswith("  1 Due")


async def test_every_screen_can_be_resized_while_open(opened: Opened) -> None:
    async with opened(size=(200, 60)) as pilot:
        for key, size in zip(TOUR, [(60, 18), (120, 40), (80, 24), (200, 60)] * 4, strict=False):
            await press(pilot, key)
            await pilot.resize_terminal(*size)
            await settle_down(pilot)
            assert seen(pilot)[0].startswith("  1 Due")


async def test_at_60_by_18_state_engine_task_and_what_is_left_still_show(opened: Opened) -> None:
    async with opened(size=(60, 18)) as pilot:
        assert line_with(pilot, "!! overdue", "TR-1", "Hydraulic hoses", "49 d over")
        assert line_with(pilot, "? keys  q quit")


@pytest.mark.parametrize(
    ("environment", "theme"),
    [
        ({"COLORTERM": "truecolor"}, "bay"),
        ({"COLORTERM": "", "TERM": "xterm-256color"}, "bay"),
        ({"COLORTERM": "", "TERM": "xterm"}, "sixteen"),
        ({"COLORTERM": "", "TERM": "linux"}, "sixteen"),
        ({"NO_COLOR": "1"}, "sixteen"),
    ],
    ids=str,
)
async def test_the_colours_are_those_the_terminal_has(
    opened: Opened, monkeypatch: pytest.MonkeyPatch, environment: dict[str, str], theme: str
) -> None:
    for name, value in environment.items():
        monkeypatch.setenv(name, value)
    async with opened() as pilot:
        assert pilot.app.theme == theme


async def test_every_screen_shows_in_sixteen_colours(opened: Opened, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("COLORTERM", "")
    monkeypatch.setenv("TERM", "linux")
    async with opened(*TOUR) as pilot:
        assert seen(pilot)[0].startswith("  1 Due")


async def test_without_colour_no_colour_is_sent_and_the_cursor_is_still_marked(
    opened: Opened, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("NO_COLOR", "1")
    async with opened() as pilot:
        strips = pilot.app.screen._compositor.render_strips(pilot.app.size)
        styles = [segment.style for strip in strips for segment in strip if segment.style is not None]
        assert {style.color.name for style in styles if style.color} <= {"default"}
        assert {style.bgcolor.name for style in styles if style.bgcolor} <= {"default"}
        (cursor,) = [strip for strip in strips if "".join(s.text for s in strip).startswith("▌")]
        assert all(segment.style is not None and segment.style.reverse for segment in cursor if segment.text.strip())


async def test_day_and_night_change_with_a_key(opened: Opened) -> None:
    async with opened("d") as pilot:
        assert pilot.app.theme == "office"
        await press(pilot, "d")
        assert pilot.app.theme == "bay"


async def test_sixteen_colours_are_the_terminal_s_own_to_change(
    opened: Opened, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("NO_COLOR", "1")
    async with opened("d") as pilot:
        assert line_with(pilot, "This terminal shows colours of its own; change them there.")
        assert pilot.app.theme == "sixteen"


def luminance(color: str) -> Decimal:
    """Relative luminance (WCAG 2.1, definition of relative luminance)."""
    parts = [Decimal(part) for part in Color.parse(color).normalized]
    red, green, blue = [p / Decimal("12.92") if p <= Decimal("0.03928") else ((p + Decimal("0.055")) / Decimal("1.055")) ** Decimal("2.4") for p in parts]  # fmt: skip
    return Decimal("0.2126") * red + Decimal("0.7152") * green + Decimal("0.0722") * blue


@pytest.mark.parametrize("theme", [BAY, OFFICE], ids=lambda theme: theme.name)
def test_every_tone_stands_out_from_every_ground_it_stands_on(theme: object) -> None:
    """Contrast of 4.5 to 1 for text (WCAG 2.1, success criterion 1.4.3)."""
    assert theme in (BAY, OFFICE)
    chosen = BAY if theme is BAY else OFFICE
    grounds = [chosen.background, chosen.panel, chosen.variables["cursor"]]
    inks = [chosen.foreground, chosen.error, chosen.warning, chosen.accent, chosen.success, chosen.primary]
    inks += [chosen.variables[name] for name in ("near", "probably", "quiet")]
    for ink, ground in product(inks, grounds):
        assert ink is not None
        assert ground is not None
        light, dark = sorted((luminance(ink), luminance(ground)), reverse=True)
        assert (light + Decimal("0.05")) / (dark + Decimal("0.05")) >= Decimal("4.5"), f"{ink} on {ground}"


def test_every_mark_is_one_any_keyboard_and_font_has_and_no_two_are_alike() -> None:
    assert all(mark.isascii() for mark in MARKS.values())
    assert len(set(MARKS.values())) == len(MARKS)


async def test_text_from_people_is_shown_as_typed_and_drives_nothing(opened: Opened, db: Path) -> None:
    nasty = "[/b]\x1b[2J\u202e[red]@click=app.quit"
    type_in(db, "engine", "add", "[/b]", "--name", nasty, "--site", nasty, "--in-service", "2024-01-10", "--as-new",
            "--start-at", "0", "--meter", "hours")  # fmt: skip
    type_in(db, "task", "add", "[/b]", nasty, "--every", "10d", "--source", nasty, "--caution", nasty)
    type_in(db, "log", "[/b]", "--defect", nasty, "--note", nasty, "--by", nasty, "--on", "2026-04-01")
    async with opened("slash", *"[/b]", "enter", size=(120, 40)) as pilot:
        for key in TOUR:
            lines = seen(pilot)
            assert not [line for line in lines if CONTROL.search(line)]
            await press(pilot, key)
        await press(pilot, "e", "h")
        assert line_with(pilot, "entry", "[/b]\\x1b[2J\\u202e[red]@click=app.quit", "2026-04-01")


async def test_a_tag_of_forty_characters_leaves_the_list_in_line_and_is_whole_below(opened: Opened, db: Path) -> None:
    tag = "THE-PORT-MAIN-OF-THE-WEED-BOAT-SEDGE-HEN"
    assert len(tag) == 40
    type_in(db, "engine", "add", tag, "--in-service", "2024-01-10", "--meter", "hours")
    type_in(db, "task", "add", tag, "Oil", "--every", "10d", "--last-done", "2026-01-01")
    async with opened() as pilot:
        assert line_with(pilot, "!! overdue", "THE-PORT-", "110 d over")
        assert f" {tag}  Oil" in seen(pilot)
        await press(pilot, "e")
        assert seen(pilot)[1].startswith(f" {tag}")


async def test_an_empty_database_says_how_to_begin_everywhere(
    opened: Opened, new_database: Path, tmp_path: Path
) -> None:
    context = Context(str(shutil.copy(new_database, tmp_path / "empty.db")))
    async with opened(context=context) as pilot:
        assert line_with(pilot, "Add a first engine: 2 shows the engines, and there a adds one.")
        await press(pilot, "enter", "e", "f", "escape", "s", "c", "2", "enter")
        assert line_with(pilot, "a adds an engine, m a machine such as")


async def test_one_engine_without_tasks_says_what_comes_next(
    opened: Opened, new_database: Path, tmp_path: Path
) -> None:
    path = Path(shutil.copy(new_database, tmp_path / "one.db"))
    type_in(path, "engine", "add", "P-01", "--in-service", "2024-01-10")
    async with opened(size=(100, 24), context=Context(str(path))) as pilot:
        assert line_with(pilot, "x gives the one under the cursor the tasks of a ready-made schedule")
        await press(pilot, "2", "enter", "m")
        assert line_with(pilot, "No readings yet.")


async def test_a_fault_of_ours_is_handed_to_whoever_started_the_screens(ctx: Context) -> None:
    class Broken(FleetApp):
        def action_daylight(self) -> None:
            raise RuntimeError("a wire is loose")

    app = Broken(ctx)
    await app.run_async(headless=True, auto_pilot=lambda pilot: pilot.press("d"))
    with pytest.raises(RuntimeError, match="a wire is loose"):
        app.status()
