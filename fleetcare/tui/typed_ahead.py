"""Keys typed faster than screens open: each waits until what the one before it began is in front."""

import asyncio
from collections import deque
from collections.abc import Awaitable, Callable

from textual.app import App
from textual.events import Key, Paste

from fleetcare.tui.actions import TYPED_IN
from fleetcare.tui.frame import FramedScreen

_MOST_TURNS = 300
"""Turns of the event loop a key waits for messages to be dealt with: some screen might send them for ever."""

_LEAVES = "ctrl+q"
_LOOK_EVERY = 0.01
"""Seconds between two looks at a screen that reads or stores."""


class TypedAhead:
    """What was typed and not dealt with yet, in order; `deal` deals with one of it."""

    def __init__(self, app: App[None], deal: Callable[[Key | Paste], Awaitable[None]]) -> None:
        self._app, self._deal = app, deal
        self._waiting: deque[Key | Paste] = deque()
        self._turns = 0

    async def take(self, typed: Key | Paste) -> None:
        """Deal with it at once, or once those before it are dealt with."""
        if _leaves(typed) or (not self._waiting and self._is_ready()):
            await self._deal(typed)
            return
        self._waiting.append(typed)
        if len(self._waiting) == 1:
            self._app.call_later(self._go_on)

    def forget(self) -> None:
        """Let go of it: it was meant for a screen that does not come."""
        self._waiting.clear()

    async def _go_on(self) -> None:
        if not self._waiting:
            return
        if self._is_ready() or (self._turns > _MOST_TURNS and not _holds_keys(self._app)):
            self._turns = 0
            await self._deal(self._waiting.popleft())
        else:
            self._turns += 1
            await asyncio.sleep(_LOOK_EVERY if _holds_keys(self._app) else 0)
        if self._waiting:
            self._app.call_later(self._go_on)

    def _is_ready(self) -> bool:
        """Whether all that was begun is done, and the screen in front takes keys."""
        app, screen = self._app, self._app.screen
        if _holds_keys(app) or not screen.is_mounted or screen._callbacks:
            return False
        if isinstance(screen, FramedScreen) and screen.place in TYPED_IN and screen.focused is None:
            return False
        pumps = (app, *screen.walk_children(with_self=True))
        return not any(pump.message_queue_size or pump._next_callbacks for pump in pumps)


def _leaves(typed: Key | Paste) -> bool:
    """Whether it leaves the program, which nothing that hangs may keep anybody from."""
    return isinstance(typed, Key) and typed.key == _LEAVES


def _holds_keys(app: App[None]) -> bool:
    return isinstance(app.screen, FramedScreen) and app.screen.holds_keys
