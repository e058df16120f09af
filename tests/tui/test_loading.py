"""Long reading on the screen: how far it has come, and that it can be stopped."""

from collections.abc import Iterable
from datetime import date
from threading import Event
from typing import TYPE_CHECKING

from textual.widget import Widget

from fleetcare.context import Context
from fleetcare.tui.loading import LoadingScreen
from fleetcare.tui.widgets.prose import Prose
from tests.tui.conftest import Opened
from tests.tui.sheets import said

if TYPE_CHECKING:
    from sqlalchemy import Connection


class LongReading(LoadingScreen):
    """Judges a hundred engines, twenty whenever it may go on."""

    place = "findings"

    def __init__(self) -> None:
        super().__init__()
        self.may_go_on, self.told, self.shown = Event(), Event(), ""
        self.judged = 0

    def body(self) -> Iterable[Widget]:
        yield Prose()

    def read(self, connection: "Connection", on: date, *, is_future: bool) -> str:
        for done in range(20, 101, 20):
            self.tell_progress(done, 100)
            self.judged = done
            self.told.set()
            self.may_go_on.wait(5)
        return "all judged"

    def show(self, found: str) -> None:
        self.shown = found


async def test_long_judging_says_how_far_it_has_come_and_then_what_it_found(opened: Opened, bench: Context) -> None:
    async with opened(context=bench) as pilot:
        await pilot.app.push_screen(screen := LongReading())
        while not screen.told.is_set():
            await pilot.pause()
        await pilot.pause()
        assert "Judging every sheet: 20 of 100 engines …, Esc stops" in said(pilot)
        screen.may_go_on.set()
        await pilot.app.workers.wait_for_complete()
        await pilot.pause()
        assert screen.shown == "all judged"
        assert "Judging" not in said(pilot)


async def test_long_judging_stops_at_a_key_and_begins_again_when_one_comes_back(opened: Opened, bench: Context) -> None:
    async with opened(context=bench) as pilot:
        await pilot.app.push_screen(screen := LongReading())
        while not screen.told.is_set():
            await pilot.pause()
        screen.action_stop()
        screen.may_go_on.set()
        await pilot.pause()
        assert "Stopped; nothing is changed by it." in said(pilot)
        assert (screen.judged, screen.shown) == (20, "")
        screen.on_screen_resume()
        await pilot.app.workers.wait_for_complete()
        await pilot.pause()
        assert screen.shown == "all judged"
