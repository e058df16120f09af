"""Due: what the morning needs is on the first screen, and a key away from it."""

import csv
from pathlib import Path

from fleetcare.context import Context
from fleetcare.operations.show import task_working
from tests.tui.conftest import Opened, line_with, press, seen

GROUPS = ["OVERDUE", "DUE", "NEAR", "PROBABLY DUE BY ESTIMATE", "UNSET", "BEFORE RETURN", "CLEAR"]


def headings(lines: list[str]) -> list[str]:
    """Give the headings among the lines of a screen, without their counts."""
    return [line[1:].rstrip("0123456789").rstrip() for line in lines if line[1:].rstrip("0123456789 ") in GROUPS]


async def test_overdue_work_is_on_the_first_screen_without_a_key(opened: Opened) -> None:
    async with opened() as pilot:
        assert line_with(pilot, "!! overdue", "PS-1", "Oil and filter", "290 h", "12 h over")
        assert line_with(pilot, "!! overdue", "TR-1", "Hydraulic hoses", "2026-03-13", "49 d over")


async def test_lines_stand_in_the_groups_of_the_morning_each_with_its_count(opened: Opened) -> None:
    async with opened(size=(80, 40)) as pilot:
        assert headings(seen(pilot)) == GROUPS
        assert " PROBABLY DUE BY ESTIMATE  2" in seen(pilot)
        assert "!! 2 overdue  ! 1 due  > 1 near  ~ 2 probably due  ? 1 unset" in seen(pilot)[1]


async def test_every_line_has_mark_and_word_of_its_state(opened: Opened) -> None:
    async with opened(size=(80, 40)) as pilot:
        for mark_and_word, task in (
            ("!  due", "Exercise run"),
            (">  near", "4910 h"),
            ("~  overdue", "1100 h"),
            ("?  unset", "Gearbox"),
            ("=  overdue", "PS-2"),
            ("-  clear", "Coolant"),
        ):
            assert line_with(pilot, mark_and_word, task)


async def test_the_line_under_the_cursor_is_said_in_the_terms_of_the_dial(opened: Opened) -> None:
    async with opened("down") as pilot:
        lines = seen(pilot)
        assert " PS-1  Oil and filter" in lines
        assert " Pump diesel in PH-1, North Sluice" in lines
        assert " due at 290 h on the dial (1395.5 h of life), 12 h over; due on 2026-12-01" in lines


async def test_a_deferral_and_a_stood_down_engine_are_said_under_the_cursor(opened: Opened) -> None:
    async with opened() as pilot:
        said = " ".join(line.strip() for line in seen(pilot)[-5:-1])
        assert "stood down: not to be run; deferred until 2026-04-20; mowing first" in said


async def test_only_lines_with_all_words_typed_are_left(opened: Opened) -> None:
    async with opened("slash", *"oil north", size=(80, 40)) as pilot:
        assert [line for line in seen(pilot) if "Oil and filter" in line and "PS-1" in line]
        assert not [line for line in seen(pilot) if "PS-2" in line]
        await press(pilot, "enter")
        assert line_with(pilot, 'only "oil north": 1 of 11 lines, a shows all')
        await press(pilot, "a")
        assert line_with(pilot, "Gearbox")


async def test_escape_takes_back_what_was_typed(opened: Opened) -> None:
    async with opened("slash", *"hoses", "escape", size=(80, 40)) as pilot:
        assert headings(seen(pilot)) == GROUPS


async def test_nothing_found_says_how_to_see_all_again(opened: Opened) -> None:
    async with opened("slash", *"zzz", "enter") as pilot:
        assert line_with(pilot, "No line is like that. The key a shows all again.")


async def test_lines_can_be_narrowed_by_state_site_work_and_engine_together(opened: Opened) -> None:
    async with opened("f", size=(80, 40)) as pilot:
        lines = seen(pilot)
        assert [word for word in ("STATE", "SITE", "KIND OF WORK", "ENGINE") if any(word in line for line in lines)]
        await press(pilot, "enter", "n", "enter", "escape")  # overdue, Board Yard
        assert line_with(pilot, "only overdue, Board Yard: 1 of 11 lines")
        assert line_with(pilot, "TR-1", "Hydraulic hoses", "49 d over")
        assert not [line for line in seen(pilot) if "PS-1" in line]


async def test_choosing_none_shows_all_lines(opened: Opened) -> None:
    async with opened("f", "space", "a", "f", size=(80, 40)) as pilot:
        assert headings(seen(pilot)) == GROUPS


async def test_lines_can_be_arranged_by_the_day_they_likely_fall_due(opened: Opened) -> None:
    async with opened("s", size=(80, 40)) as pilot:
        lines = seen(pilot)
        assert [line for line in lines if line.startswith(" by today  6")]
        assert [line for line in lines if line.startswith(" by Sunday 2026-05-10  1")]
        assert [line for line in lines if line.startswith(" in 2028-02  1")]
        assert "by likely day" in lines[2]


async def test_lines_can_be_arranged_by_site_and_by_engine_and_again_by_urgency(opened: Opened) -> None:
    async with opened("s", "s", size=(80, 40)) as pilot:
        assert [line for line in seen(pilot) if line.startswith(" Ousel Outfall  1")]
        await press(pilot, "s")
        assert [line for line in seen(pilot) if line.startswith(" TR-2, Tractor with bucket, Board Yard  2")]
        await press(pilot, "s")
        assert headings(seen(pilot)) == GROUPS


async def test_keys_go_from_heading_to_heading(opened: Opened) -> None:
    async with opened("n") as pilot:
        assert " SB-1  Exercise run" in seen(pilot)
        await press(pilot, "n", "p", "p")
        assert " TR-1  Hydraulic hoses" in seen(pilot)


async def test_the_csv_holds_exactly_the_lines_shown_and_its_path_is_said(opened: Opened, tmp_path: Path) -> None:
    async with opened("slash", *"air", "enter", "c", size=(120, 40)) as pilot:
        assert line_with(pilot, f"2 lines written to {tmp_path}/due-2026-05-01.csv")
        await press(pilot, "c")
        assert line_with(pilot, "due-2026-05-01-2.csv")
    with (tmp_path / "due-2026-05-01.csv").open(newline="") as file:
        rows = list(csv.DictReader(file))
    assert [(row["engine"], row["task"]) for row in rows] == [("TR-1", "Air filter"), ("TR-2", "Air filter")]


async def test_the_working_is_what_the_show_command_prints(opened: Opened, ctx: Context) -> None:
    with ctx.read() as connection:
        working, past = task_working(connection, "PS-1", "Oil and filter", ctx.today())
    async with opened("down", "enter", size=(120, 60)) as pilot:
        text = " ".join(" ".join(seen(pilot)).split())
        for label, sentence in (*working, *past):
            assert " ".join(f"{label} {sentence}".split()) in text
        await press(pilot, "escape")
        assert " PS-1  Oil and filter" in seen(pilot)
