"""Keys, foot line, help and command palette say the same, because they are made from one list."""

import pytest
from textual.command import CommandPalette

from fleetcare.tui.actions import ACTIONS, EVERYWHERE, actions_of, bindings, called
from fleetcare.tui.app import FleetApp
from fleetcare.tui.frame import FramedScreen
from fleetcare.tui.screens.due import DueScreen
from fleetcare.tui.screens.engines import EnginesScreen
from fleetcare.tui.screens.entry import EntryScreen
from fleetcare.tui.screens.findings import FindingScreen, FindingsScreen
from fleetcare.tui.screens.form import FormScreen
from fleetcare.tui.screens.item import ItemScreen
from fleetcare.tui.screens.keys import KeysScreen
from fleetcare.tui.screens.more import MoreScreen
from fleetcare.tui.screens.narrow import NarrowScreen
from fleetcare.tui.screens.rules import RuleScreen, RulesScreen
from fleetcare.tui.screens.sheet import SheetScreen
from fleetcare.tui.screens.sums import SumScreen, SumsScreen
from fleetcare.tui.screens.tasks import TasksScreen
from fleetcare.tui.screens.working import WorkingScreen
from tests.tui.conftest import Opened, line_with, press, seen, settle_down

SCREENS = (
    DueScreen,
    EnginesScreen,
    EntryScreen,
    FindingScreen,
    FindingsScreen,
    FormScreen,
    ItemScreen,
    KeysScreen,
    MoreScreen,
    NarrowScreen,
    RuleScreen,
    RulesScreen,
    SheetScreen,
    SumScreen,
    SumsScreen,
    TasksScreen,
    WorkingScreen,
)


def test_every_place_is_a_screen_and_every_screen_a_place() -> None:
    assert {screen.place for screen in SCREENS} | {EVERYWHERE} == {action.place for action in ACTIONS}


@pytest.mark.parametrize("screen", SCREENS, ids=lambda screen: screen.place)
def test_every_action_of_a_place_is_something_its_screen_or_the_app_does(screen: type[FramedScreen]) -> None:
    for action in actions_of(screen.place):
        owner = FleetApp if action.place == EVERYWHERE else screen
        assert hasattr(owner, f"action_{action.method.partition('(')[0]}"), action


@pytest.mark.parametrize("screen", SCREENS, ids=lambda screen: screen.place)
def test_no_key_does_two_things_in_one_place(screen: type[FramedScreen]) -> None:
    keys = [key for action in actions_of(screen.place) for key in action.key.split(",")]
    assert len(keys) == len(set(keys))


@pytest.mark.parametrize("screen", SCREENS, ids=lambda screen: screen.place)
def test_the_keys_bound_are_those_listed(screen: type[FramedScreen]) -> None:
    assert bindings(screen.place) == screen.BINDINGS


def test_every_action_says_what_it_does() -> None:
    assert [action for action in ACTIONS if not (action.word and action.tells)] == []


async def test_help_lists_every_key_of_where_you_are_and_what_the_marks_mean(opened: Opened) -> None:
    async with opened("question_mark", size=(100, 50)) as pilot:
        text = "\n".join(seen(pilot))
        for action in actions_of("due"):
            assert action.tells in text
            assert action.keys_said[0] in text
        assert "!!" in text
        assert "past its point and what is allowed beyond" in text
        await press(pilot, "question_mark")
        assert line_with(pilot, "Enter working")


async def test_the_foot_line_shows_help_and_quit_in_any_width(opened: Opened) -> None:
    for width in (30, 60, 120):
        async with opened(size=(width, 20)) as pilot:
            assert seen(pilot)[-1].endswith("? keys  q quit")


async def test_the_palette_offers_what_the_keys_do_and_does_it(opened: Opened) -> None:
    async with opened(size=(100, 40)) as pilot:
        commands = {command.title: command for command in pilot.app.get_system_commands(pilot.app.screen)}
        assert [command.help for command in commands.values()] == [action.tells for action in actions_of("due")]
        await pilot.press("ctrl+p")
        await settle_down(pilot)
        assert isinstance(pilot.app.screen, CommandPalette)
        await pilot.press("escape")
        await settle_down(pilot)
        commands["Engines"].callback()
        await settle_down(pilot)
        assert isinstance(pilot.app.screen, EnginesScreen)


async def test_keys_of_the_foot_line_can_be_clicked(opened: Opened) -> None:
    async with opened() as pilot:
        place = seen(pilot)[-1].index("e engine")
        await pilot.click("KeyLine", offset=(place + 3, 0))
        await settle_down(pilot)
        assert isinstance(pilot.app.screen, ItemScreen)


async def test_a_view_can_be_clicked_and_a_line_opened_with_two_clicks(opened: Opened) -> None:
    async with opened() as pilot:
        await pilot.click("LongList", offset=(10, 3), times=2)
        await settle_down(pilot)
        assert " PS-1  Oil and filter" in seen(pilot)
        assert line_with(pilot, "last done")
        await pilot.click("TopBar", offset=(seen(pilot)[0].index("Engines"), 0))
        await settle_down(pilot)
        assert isinstance(pilot.app.screen, EnginesScreen)


def test_an_action_is_called_on_the_app_or_the_screen_in_front() -> None:
    calls = {called(action).partition(".")[0] for action in actions_of("due")}
    assert calls == {"app", "screen"}


async def test_q_leaves(opened: Opened) -> None:
    async with opened() as pilot:
        await pilot.press("q")
        await pilot.pause()
        assert not pilot.app.is_running
