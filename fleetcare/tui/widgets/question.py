"""A doubt said, and the answers to it, each one key."""

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any, ClassVar, cast

from textual import events
from textual.binding import Binding, BindingType
from textual.content import Content
from textual.message import Message
from textual.widget import Widget

from fleetcare.tui.forms.base import Answer
from fleetcare.tui.widgets.text import fit, wrap

if TYPE_CHECKING:
    from fleetcare.tui.app import FleetApp

CORRECT_IT = Answer("c", "correct it (Esc)")


class Question(Widget, can_focus=True):
    """What is asked back before something likely to be a slip is stored. Any other key leaves it standing."""

    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape", "correct", show=False)]

    class Answered(Message):
        """One answer was given."""

        def __init__(self, answer: Answer) -> None:
            super().__init__()
            self.answer = answer

    def __init__(self) -> None:
        super().__init__()
        self._doubt = ""
        self._answers: Sequence[Answer] = ()

    def ask(self, doubt: str, answers: Sequence[Answer]) -> None:
        """Say a doubt and take the keys, those typed from now on: what was typed ahead is no answer to it."""
        cast("FleetApp", self.app).typed_ahead.forget()
        self._doubt, self._answers = doubt, (*answers, CORRECT_IT)
        self.display = True
        self.refresh(layout=True)
        self.focus()

    def check_consume_key(self, key: str, character: str | None) -> bool:
        """Keep letters from meaning anything else meanwhile."""
        return character is not None and character.isprintable()

    def on_key(self, event: events.Key) -> None:
        """Take an answer."""
        answer = next((answer for answer in self._answers if answer.key == event.key), None)
        if answer is not None:
            self._give(answer)

    def action_correct(self) -> None:
        """Go back to what was typed."""
        self._give(CORRECT_IT)

    def get_content_height(self, container: Any, viewport: Any, width: int) -> int:
        """As high as doubt and answers."""
        return len(self._lines(width))

    def render(self) -> Content:
        """Draw the doubt and one line for each answer, literally."""
        return Content("\n".join(self._lines(self.size.width)))

    def _lines(self, width: int) -> list[str]:
        answers = [fit(f"  {answer.key}  {answer.words}", max(width, 1)) for answer in self._answers]
        return [*wrap(self._doubt, max(width, 1)), *answers]

    def _give(self, answer: Answer) -> None:
        self.display = False
        self.post_message(self.Answered(answer))
