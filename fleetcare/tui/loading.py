"""The screen that reads: in a thread, and again whenever the file changes; then it shows what came, or why nothing did."""

from functools import partial
from typing import TYPE_CHECKING, Any

from textual.message import Message
from textual.worker import Worker, WorkerState, get_current_worker

from fleetcare.errors import FleetError
from fleetcare.operations.follow import Stamp, stamp
from fleetcare.tui.frame import FramedScreen

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection

FOLLOW_EVERY = 1.0
"""Seconds between two looks at the file."""

_SILENT = 0.5  # seconds of reading before it is worth a word


class Stopped(Exception):
    """Nobody waits any more for what is being read."""


class LoadingScreen(FramedScreen):
    """A screen filled by one read operation."""

    class Loaded(Message):
        """What the operation found."""

        def __init__(self, found: Any) -> None:
            super().__init__()
            self.found = found

    class Progressed(Message):
        """How far long work has come: so many engines of so many."""

        def __init__(self, done: int, of: int) -> None:
            super().__init__()
            self.done, self.of = done, of

    class Failed(Message):
        """Why the operation found nothing."""

        def __init__(self, error: FleetError) -> None:
            super().__init__()
            self.error = error

    def __init__(self) -> None:
        super().__init__()
        self._seen: Stamp | None = None
        self._worker: Worker[None] | None = None
        self._has_failed = False
        self._is_stopped = False

    def on_mount(self) -> None:
        """Begin to look whether the file changed."""
        self.set_interval(FOLLOW_EVERY, self._look)

    @property
    def has_file(self) -> bool:
        """Whether there was anything to read."""
        return self._seen is not None and self._seen.file is not None and self._seen.file[2] > 0

    @property
    def day(self) -> "date":
        """The day what is shown was read for."""
        return self._seen.on if self._seen is not None else self.context.today()

    def read(self, connection: "Connection", on: "date", *, is_future: bool) -> Any:
        """Run the operation this screen shows. Called in a thread: touches no widget."""
        raise NotImplementedError

    def show(self, found: Any) -> None:
        """Fill the widgets with what was found."""
        raise NotImplementedError

    def tell_progress(self, done: int, of: int) -> None:
        """Say how far the reading has come; called in its thread. Ends it where nobody waits for it any more."""
        if get_current_worker().is_cancelled:
            raise Stopped
        self.post_message(self.Progressed(done, of))

    def fail(self, error: FleetError) -> None:
        """Say what is wrong; what was shown before stays."""
        self.notice.say(*error.lines(), is_wrong=True, is_about_reading=True)

    def load(self) -> None:
        """Read in a thread; a reading still under way is dropped."""
        self._is_stopped = False
        self._seen = stamp(self.context)
        self._worker = self.run_worker(partial(self._run, self._seen), thread=True, exclusive=True, exit_on_error=False)
        self.set_timer(_SILENT, partial(self._still_reading, self._worker))

    def follow(self) -> None:
        """Read again if the file or the day changed since, or it could not be read, and nothing is being read."""
        is_reading = self._worker is not None and not self._worker.is_finished
        if not is_reading and (self._has_failed or stamp(self.context) != self._seen):
            self.load()

    def on_screen_resume(self) -> None:
        """Come back to what holds now; the first time, and where it was stopped, read."""
        if self._is_stopped:
            self.load()
        else:
            self.follow()

    def action_stop(self) -> None:
        """Stop a reading under way; else take away what was said."""
        if self._worker is None or self._worker.is_finished:
            self.action_hush()
            return
        self._is_stopped = True
        self._worker.cancel()
        self.notice.say("Stopped; nothing is changed by it. Leave this view and come back to begin again.")

    def on_loading_screen_progressed(self, message: Progressed) -> None:
        """Show how far long work has come."""
        if not self._is_stopped:
            self.notice.say(
                f"Judging every sheet: {message.done} of {message.of} engines …, Esc stops", is_about_reading=True
            )

    def on_loading_screen_loaded(self, message: Loaded) -> None:
        """Show what came."""
        self._has_failed, self.fleet_app.trouble = False, None
        if self.notice.is_about_reading:
            self.notice.say()
        self.show(message.found)

    def on_loading_screen_failed(self, message: Failed) -> None:
        """Show why nothing came."""
        self._has_failed, self.fleet_app.trouble = True, message.error
        self.fail(message.error)

    def on_worker_state_changed(self, event: Worker.StateChanged) -> None:
        """A fault of ours ends the program; it is not a failure of the database."""
        if event.state is WorkerState.ERROR and event.worker.error is not None:
            raise event.worker.error

    def _run(self, seen: Stamp) -> None:
        worker, context = get_current_worker(), self.context
        answer: LoadingScreen.Loaded | LoadingScreen.Failed
        try:
            with context.read() as connection:
                answer = self.Loaded(self.read(connection, seen.on, is_future=context.is_future))
        except Stopped:
            return
        except FleetError as error:
            answer = self.Failed(error)
        if not worker.is_cancelled:
            self.post_message(answer)

    def _look(self) -> None:
        if self.is_current:
            self.follow()

    def _still_reading(self, worker: Worker[None]) -> None:
        is_quiet = not self._has_failed and not self.notice.display  # what was said of a thing stored stays
        if worker is self._worker and not worker.is_finished and is_quiet:
            self.notice.say("Reading …", is_about_reading=True)
