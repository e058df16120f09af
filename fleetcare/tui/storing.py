"""Screens that store something: in a thread, said afterwards, or why not."""

from collections.abc import Callable, Sequence
from functools import partial
from typing import TYPE_CHECKING

from textual.message import Message

from fleetcare.errors import AlreadyStored, FleetError
from fleetcare.tui.loading import LoadingScreen

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

    from fleetcare.operations.entering import Entered


class StoringScreen(LoadingScreen):
    """A screen that stores what was typed on it, once at a time."""

    class Stored(Message):
        """It was stored; what that was, in sentences."""

        def __init__(self, sentences: Sequence[str]) -> None:
            super().__init__()
            self.sentences = sentences

    class NotStored(Message):
        """Nothing was stored, and why."""

        def __init__(self, error: FleetError) -> None:
            super().__init__()
            self.error = error

    def store(self, enter: "Callable[[Session], Entered]") -> None:
        """Store in a thread; `enter` runs there on a session that is committed whole, or not at all."""
        self.run_worker(partial(self._enter, enter), thread=True, group="store", exit_on_error=False)

    def _enter(self, enter: "Callable[[Session], Entered]") -> None:
        try:
            with self.context.write() as session:
                entered = enter(session)
        except AlreadyStored as error:  # the program ended between storing it and letting the draft go
            self.fleet_app.drafts.drop_stored(str(self.context.path.absolute()), {error.import_key})
            self.post_message(self.Stored([f"Nothing new: {'; '.join(error.lines())}."]))
        except FleetError as error:
            self.post_message(self.NotStored(error))
        else:
            self.post_message(self.Stored(entered.sentences()))
