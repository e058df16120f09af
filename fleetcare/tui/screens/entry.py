"""The entry line: one line over any screen, read back as a sentence while it is typed, and stored only as it was read back."""

from collections.abc import Sequence
from functools import partial
from typing import TYPE_CHECKING

from textual.message import Message

from fleetcare.errors import FleetError
from fleetcare.tui.forms.base import Subject
from fleetcare.tui.loading import LoadingScreen
from fleetcare.tui.one_line import OneLineScreen
from fleetcare.tui.storing import StoringScreen
from fleetcare.tui.widgets.entry_said import HOW, NOBODY, lines_of, stored_lines
from fleetcare.tui.widgets.form_fields import TextField
from fleetcare.tui.widgets.said_lines import SaidLine

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection
    from sqlalchemy.orm import Session

    from fleetcare.drafts.entry_questions import Choice, Question
    from fleetcare.drafts.entry_vocabulary import Vocabulary
    from fleetcare.operations.entering import Entered
    from fleetcare.operations.entry_line import ReadBack

_FORMS = {"sheet": "log", "meter": "swap"}
"""The form in which somebody says what takes more than a line can hold."""
_INSTEAD = frozenset({"sheet"})
"""Of those, what holds all that the line says, so that nothing is left of it to store."""

_NO_ROOM = "There is no room to show all that this would do; make the window larger, then Enter stores it."


class EntryScreen(OneLineScreen, StoringScreen):  # the style sheet knows a screen by its first base alone
    """A line to type in, over the screen it was opened from."""

    place = "entry"
    label = "entry line"

    class Understood(Message):
        """A line was read back, with the words known then."""

        def __init__(self, back: "ReadBack", vocabulary: "Vocabulary") -> None:
            super().__init__()
            self.back, self.vocabulary = back, vocabulary

    class NotUnderstood(Message):
        """A line could not be read back, because the database could not be read."""

        def __init__(self, error: FleetError) -> None:
            super().__init__()
            self.error = error

    def __init__(self) -> None:
        super().__init__()
        self.vocabulary: Vocabulary | None = None
        self.back: ReadBack | None = None
        """What stands on the screen; it is stored or answered only if it is of the very text typed."""
        self.marked = -1  # which answer, none
        self._is_reading = self._has_nobody = False
        self._storing: ReadBack | None = None
        self._stored: Sequence[SaidLine] = ()

    def read(self, connection: "Connection", on: "date", *, is_future: bool) -> "Vocabulary":
        """Load all that a line may name."""
        from fleetcare.operations.entry_line import load_vocabulary

        return load_vocabulary(connection, on)

    def show(self, found: "Vocabulary") -> None:
        """Read the line back again with the names there are now."""
        self.vocabulary, self.back, self._has_nobody = found, None, not found.names_any
        self.typed()

    def fail(self, error: FleetError) -> None:
        """Where there is no file yet, say how to begin."""
        if self.has_file:
            super().fail(error)
        else:
            self._has_nobody = True
            self.said.tell(NOBODY)

    def on_input_submitted(self, event: TextField.Submitted) -> None:
        """Enter comes this way from the line itself, after every key typed before it."""
        self.action_store()

    def on_entry_screen_understood(self, message: Understood) -> None:
        """Show what was read back if it is what is typed by now; else read again."""
        self._is_reading = False
        if message.back.line.text != self.text or message.vocabulary is not self.vocabulary:
            self.typed()
            return
        self._show(message.back, -1)

    def on_entry_screen_not_understood(self, message: NotUnderstood) -> None:
        """Say why; the next key tries again."""
        self._is_reading = False
        self.fail(message.error)

    def on_storing_screen_stored(self, message: StoringScreen.Stored) -> None:
        """Say what came of it. What was typed on behind it meanwhile is the next line."""
        storing, self._storing = self._storing, None
        self._finish(storing.line.text if storing is not None else "", message.sentences)

    def on_storing_screen_not_stored(self, message: StoringScreen.NotStored) -> None:
        """Say why, and read the line back again: something changed."""
        self._storing = self.back = None
        self.notice.say(*message.error.lines(), is_wrong=True)
        self.typed()

    def action_store(self) -> None:
        """Store what is read back, or take the answer marked. What is not read back yet is waited for."""
        back = self.back
        if self.vocabulary is None or back is None or back.line.text != self.text or self._storing:
            return
        if back.can_be_stored and not self.said.are_whole:
            self.notice.say(_NO_ROOM, is_wrong=True)
        elif back.can_be_stored:
            self._storing = back
            self.store(partial(self._enter_line, back, self.vocabulary.on))
        elif self.marked < 0:
            self.action_answer(1)
        else:
            self._take(back, back.questions[0], back.questions[0].choices[self.marked])

    def action_answer(self, step: int) -> None:
        """Mark another answer to the first question."""
        choices = self.back.questions[0].choices if self.back is not None and self.back.questions else ()
        if self.back is not None and choices:
            self._show(self.back, min(max(self.marked + step, -1), len(choices) - 1))

    def action_back(self) -> None:
        """Close the line; what is typed is kept. What is being stored just now is waited for."""
        if self._storing is None:
            self.dismiss(None)

    def typed(self) -> None:
        """Read back what is typed, one line at a time: the newest as soon as the one before is done."""
        text = self.text
        if not text.strip():
            self.back = None
            self.said.tell(self._stored or (NOBODY if self._has_nobody else HOW))
        elif self.vocabulary is not None and not self._is_reading and self._storing is None:
            self._is_reading = True
            reading = partial(self._understand, text, self.vocabulary)
            self.run_worker(reading, thread=True, group="back", exit_on_error=False)

    def _understand(self, text: str, vocabulary: "Vocabulary") -> None:
        """Read a line back. Runs in a thread: touches no widget."""
        from fleetcare.operations.entry_line import read_back

        try:
            with self.context.read() as connection:
                back = read_back(connection, text, vocabulary.on, vocabulary)
        except FleetError as error:
            self.post_message(self.NotUnderstood(error))
        else:
            self.post_message(self.Understood(back, vocabulary))

    def _enter_line(self, back: "ReadBack", on: "date", session: "Session") -> "Entered":
        """Store a line as it was read back. Runs in a thread: touches no widget."""
        from fleetcare.operations.entry_line import store_line

        return store_line(session, back, on, self.import_key)

    def _show(self, back: "ReadBack", marked: int) -> None:
        """Show what was read back; only once it stands on the screen can it be stored."""
        self.marked = marked
        self.said.tell(lines_of(back, marked))
        self.call_after_refresh(self._stands, back)

    def _stands(self, back: "ReadBack") -> None:
        self.back = back

    def _finish(self, text: str, sentences: Sequence[str]) -> None:
        """Say what was stored, take the line away, and let the screens below see what changed."""
        self._stored = stored_lines(sentences)
        self.notice.say()
        self.name_entry()
        self.put(self.text.removeprefix(text).lstrip())
        for screen in self.app.screen_stack:
            if isinstance(screen, LoadingScreen):
                screen.follow()

    def _take(self, back: "ReadBack", question: "Question", choice: "Choice") -> None:
        """Put an answer in the place of what it is about, or go on to the form it leads to."""
        line = back.line
        if choice.text is not None:
            self.put(f"{line.text[: question.start]}{choice.text}{line.text[question.end :]}")
            return
        from fleetcare.tui.forms.all import FORMS
        from fleetcare.tui.forms.work import log_preset
        from fleetcare.tui.screens.form import FormScreen

        is_instead = choice.leads_to in _INSTEAD
        figure = {"on": line.on.isoformat(), "value": line.text[question.start : question.end]}
        subject = Subject(line.tag, preset=log_preset(line) if is_instead else figure)
        form = FormScreen(FORMS[_FORMS[choice.leads_to]], subject)
        self.app.push_screen(form, partial(self._led, line.text, is_instead))

    def _led(self, text: str, is_instead: bool, sentences: Sequence[str] | None) -> None:
        """Come back from a form an answer led to."""
        if sentences is not None and is_instead:
            self._finish(text, sentences)
        elif sentences is not None:
            self.notice.say(" ".join(sentences))
