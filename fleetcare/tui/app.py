"""The screens as one program: its views, its colours, its keys."""

import os
from collections.abc import Iterable
from pathlib import Path
from typing import TYPE_CHECKING, ClassVar

from textual.app import App, SystemCommand
from textual.events import Event, Key, Paste
from textual.screen import Screen

from fleetcare.errors import FleetError
from fleetcare.tui.actions import ACTIONS, EVERYWHERE, TYPED_IN, actions_of, bindings, called
from fleetcare.tui.drafts_kept import KeptDrafts
from fleetcare.tui.frame import FramedScreen
from fleetcare.tui.looks import BAY, OFFICE, SIXTEEN
from fleetcare.tui.screens.due import DueScreen
from fleetcare.tui.typed_ahead import TypedAhead

if TYPE_CHECKING:
    from collections.abc import Callable

    from fleetcare.context import Context


def _engines() -> "Screen[None]":
    from fleetcare.tui.screens.engines import EnginesScreen  # loaded when the view is first opened

    return EnginesScreen()


def _findings() -> "Screen[None]":
    from fleetcare.tui.screens.findings import FindingsScreen  # loaded when the view is first opened

    return FindingsScreen()


def _rules() -> "Screen[None]":
    from fleetcare.tui.screens.rules import RulesScreen  # loaded when the view is first opened

    return RulesScreen()


_SHARED = {action.method.partition("(")[0] for action in ACTIONS if action.place == EVERYWHERE}


class FleetApp(App[None]):
    """The screens on one database, as of one day."""

    CSS_PATH = Path(__file__).with_name("fleetcare.tcss")
    TITLE = "fleetcare"
    BINDINGS = bindings(EVERYWHERE)
    MODES: ClassVar[dict[str, "str | Callable[[], Screen[None]]"]] = {
        "due": DueScreen,
        "engines": _engines,
        "findings": _findings,
        "rules": _rules,
    }
    DEFAULT_MODE = "due"
    VERTICAL_BREAKPOINTS = [(0, "-low"), (15, "-high")]  # noqa: RUF012 - an instance variable to the base class

    def __init__(self, context: "Context") -> None:
        # Without colour nothing but the terminal's own two is left; a theme of true colour would come out as greys.
        super().__init__(ansi_color=True if os.environ.get("NO_COLOR") else None)
        self.animation_level = "none"  # nothing glides: what is typed next is aimed at where things stand
        self.context = context
        self.trouble: FleetError | None = None
        self.drafts = KeptDrafts(context.drafts_folder)
        self.shift: dict[str, str] = {}  # what is filled in again on the next form, until the screens are left
        self.typed_ahead = TypedAhead(self, super().on_event)
        for theme in (BAY, OFFICE, SIXTEEN):
            self.register_theme(theme)
        few = self.console.color_system in {None, "standard", "windows"}
        self.theme = (SIXTEEN if few or self.no_color else BAY).name

    async def on_event(self, event: Event) -> None:
        """Deal with keys one by one, so that those typed ahead land where they were aimed at."""
        if isinstance(event, (Key, Paste)) and not event.is_forwarded:
            await self.typed_ahead.take(event)
        else:
            await super().on_event(event)

    def check_action(self, action: str, parameters: tuple[object, ...]) -> bool | None:
        """Let no letter do anything where letters are typed."""
        is_typed_in = isinstance(self.screen, FramedScreen) and self.screen.place in TYPED_IN
        return not (is_typed_in and action in _SHARED)

    def action_view(self, view: str) -> None:
        """Bring a view to the front."""
        self.switch_mode(view)

    def action_keys(self) -> None:
        """Show the keys of the screen in front."""
        from fleetcare.tui.screens.keys import KeysScreen

        if isinstance(self.screen, FramedScreen):
            self.push_screen(KeysScreen(self.screen.place))

    def action_entry_line(self) -> None:
        """Open the entry line over the screen in front, once."""
        from fleetcare.tui.screens.entry import EntryScreen

        if not any(isinstance(screen, EntryScreen) for screen in self.screen_stack):
            self.push_screen(EntryScreen())

    def action_daylight(self) -> None:
        """Change between dark and light colours; sixteen are the terminal's own to change."""
        if self.theme == SIXTEEN.name:
            if isinstance(self.screen, FramedScreen):
                self.screen.notice.say("This terminal shows colours of its own; change them there.")
            return
        self.theme = BAY.name if self.theme == OFFICE.name else OFFICE.name

    def get_system_commands(self, screen: Screen[object]) -> Iterable[SystemCommand]:
        """Give the command palette what the keys do here."""
        if isinstance(screen, FramedScreen):
            for action in actions_of(screen.place):
                yield SystemCommand(
                    action.word[0].upper() + action.word[1:], action.tells, _calling(self, called(action))
                )

    def status(self) -> int:
        """Give the exit status once the screens are left; raises the fault of ours that ended them."""
        if self._exception is not None:
            raise self._exception
        return self.trouble.exit_code if self.trouble is not None else 0

    def _fatal_error(self) -> None:
        """Close without a traceback on the screen: `status` raises the fault for whoever started the screens."""
        self._close_messages_no_wait()


def _calling(app: FleetApp, call: str) -> "Callable[[], None]":
    async def run() -> None:
        await app.run_action(call, app.screen)

    return lambda: app.call_next(run)


def run_screens(context: "Context") -> int:
    """Show the screens until they are left, and give the exit status."""
    app = FleetApp(context)
    app.run()
    return app.status()
