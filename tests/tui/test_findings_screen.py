"""Findings and rules on the screen: those that want an answer first, whole with their working, answered with two keys."""

from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.tui.screens.findings import FindingScreen, FindingsScreen
from fleetcare.tui.screens.item import ItemScreen
from fleetcare.tui.screens.rules import RulesScreen
from tests.tui.conftest import Opened, line_with, press, seen, type_in
from tests.tui.sheets import said

LARGE = (120, 40)


async def test_a_finding_shows_whose_what_and_how_far(opened: Opened, found: Context) -> None:
    async with opened("3", size=LARGE, context=found) as pilot:
        assert line_with(pilot, "OPEN, that want an answer", "1")
        assert line_with(pilot, "!! alarm", "B-6", "low compression", "cylinder 3", "68 %", "2026-04-20")
        assert "7 % below the alarm limit of 75 %" in said(pilot)


async def test_a_finding_opens_with_its_working_and_its_source(opened: Opened, found: Context) -> None:
    async with opened("3", "enter", size=LARGE, context=found) as pilot:
        assert isinstance(pilot.app.screen, FindingScreen)
        assert line_with(pilot, "68 %, limit 75 %, margin -7 %")
        for label in ("how worked out", "measured values", "next step", "source", "caution"):
            assert [line for line in seen(pilot) if line.strip().startswith(label)], label
        await press(pilot, "escape")
        assert isinstance(pilot.app.screen, FindingsScreen)


async def test_an_accepted_finding_no_longer_stands_among_the_open(opened: Opened, found: Context) -> None:
    async with opened("3", "a", *"rings", "enter", *"Harbin", "ctrl+s", size=LARGE, context=found) as pilot:
        assert line_with(pilot, "ACCEPTED", "1")
        assert "accepted as alarm by Harbin" in said(pilot)


async def test_a_follow_up_of_a_finding_stands_in_the_due_list(opened: Opened, found: Context) -> None:
    async with opened("3", "f", *"rings", "enter", *"Harbin", "ctrl+s", size=LARGE, context=found) as pilot:
        assert line_with(pilot, "FOLLOW-UP RAISED", "1")
        await press(pilot, "1")
        assert line_with(pilot, "due", "B-6", "Low compression, cylinder 3")


async def test_an_answer_without_a_reason_is_refused_beside_its_field(opened: Opened, found: Context) -> None:
    async with opened("3", "a", "ctrl+s", size=LARGE, context=found) as pilot:
        assert said(pilot).count("! this is missing; give it") == 2


async def test_a_cleared_finding_shows_only_where_all_are_asked_for(
    opened: Opened, found: Context, tmp_path: Path
) -> None:
    good = tmp_path / "good.csv"
    good.write_text("quantity,point,phase,value,unit\n" + "".join(f"pressure,{n},dry,25,bar\n" for n in range(1, 7)))
    type_in(found.path, "measure", "compression", "B-6", str(good), "--on", "2026-04-29")
    async with opened("3", size=LARGE, context=found) as pilot:
        assert line_with(pilot, "No finding wants an answer")
        await press(pilot, "o")
        assert line_with(pilot, "CLEARED", "1")


async def test_findings_are_narrowed_by_words_and_lead_to_their_engine(opened: Opened, found: Context) -> None:
    async with opened("3", "slash", *"nothing", size=LARGE, context=found) as pilot:
        assert not [line for line in seen(pilot) if "low compression" in line]
        await press(pilot, "escape", "e")
        assert isinstance(pilot.app.screen, ItemScreen)


async def test_the_page_of_an_engine_has_its_findings(opened: Opened, found: Context) -> None:
    async with opened(size=LARGE, context=found) as pilot:
        pilot.app.push_screen(ItemScreen("B-6"))
        await press(pilot, "f")
        assert line_with(pilot, "!! alarm", "low compression", "cylinder 3")
        await press(pilot, "a", *"rings", "enter", *"Harbin", "ctrl+s")
        assert line_with(pilot, "ACCEPTED", "1")
        await press(pilot, "enter")
        assert isinstance(pilot.app.screen, FindingScreen)


async def test_every_rule_shows_its_limits_its_source_and_whom_it_judges(opened: Opened, found: Context) -> None:
    async with opened("4", "slash", *"compression", "enter", size=LARGE, context=found) as pilot:
        assert isinstance(pilot.app.screen, RulesScreen)
        await press(pilot, "enter")
        for label in ("state", "limits", "engines", "source", "next step"):
            assert [line for line in seen(pilot) if line.strip().startswith(label)], label


async def test_limits_of_rules_keep_their_units_on_a_small_screen(opened: Opened, found: Context) -> None:
    async with opened("4", context=found) as pilot:
        assert line_with(pilot, "compression-r70f-least", "alarm below 690 kPa")
        await press(pilot, "slash", *"compression-past", "enter")
        assert line_with(pilot, "alert below -15 %, alarm below -25 %")


@pytest.mark.parametrize("view", ["3", "4"])
async def test_a_view_of_measurements_says_small_and_plainly_that_there_is_no_file(
    opened: Opened, tmp_path: Path, view: str
) -> None:
    async with opened(view, size=(60, 18), context=Context(str(tmp_path / "none.db"))) as pilot:
        assert "none.db" in said(pilot)


async def test_the_due_list_says_how_many_findings_want_an_answer(opened: Opened, found: Context) -> None:
    async with opened(context=found) as pilot:
        assert line_with(pilot, "!! 1 alarm", "to answer; 3 shows them")
        while "B-6" not in line_with(pilot, "▌"):
            await press(pilot, "down")
        assert line_with(pilot, "Pump diesel, North Sluice; !! an alarm of it is open")
        await press(pilot, "3", "a", *"rings", "enter", *"Harbin", "ctrl+s", "1")
        assert line_with(pilot, "no finding wants an answer")
        assert "an alarm of it" not in said(pilot)
        await press(pilot, "slash", *"valve", "enter")
        assert line_with(pilot, "no finding wants an answer")
        assert line_with(pilot, 'only "valve": 5 of 5 lines, a shows all')


async def test_where_nothing_was_measured_the_due_list_says_nothing_of_findings(opened: Opened, bench: Context) -> None:
    async with opened(context=bench) as pilot:
        assert "answer" not in said(pilot)
