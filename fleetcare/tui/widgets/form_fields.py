"""The lines of a form: a label, what is typed, and below it what is wrong with that."""

from collections.abc import Iterator

from textual import events
from textual.containers import Horizontal, Vertical
from textual.content import Content
from textual.message import Message
from textual.reactive import reactive
from textual.widget import Widget
from textual.widgets import Input, Static

from fleetcare.domain.printable import clean
from fleetcare.tui.forms.base import Field
from fleetcare.tui.widgets.plain_input import PlainInput

_EDGE = "▌"
_WRONG = "! "


class TextField(PlainInput):
    """A line of text; at its end → takes the name suggested, if there is one."""

    class Taken(Message):
        """The key that takes a name was pressed at the end of the line."""

    def __init__(self) -> None:
        super().__init__(compact=True, select_on_focus=False)

    def action_cursor_right(self, select: bool = False) -> None:
        """Move right; at the end take the name suggested."""
        if self.cursor_at_end and not select:
            self.post_message(self.Taken())
        else:
            super().action_cursor_right(select)


class YesNo(Widget, can_focus=True):
    """A yes or no: the space bar changes it, y and n say it."""

    value: reactive[str] = reactive("no")

    class Changed(Message):
        """The person changed it."""

        def __init__(self, by: "YesNo") -> None:
            super().__init__()
            self.by = by

    def render(self) -> Content:
        """Draw box and word."""
        return Content(f"[{'x' if self.value == 'yes' else ' '}] {self.value}")

    def check_consume_key(self, key: str, character: str | None) -> bool:
        """Keep letters from meaning anything else while the cursor is here."""
        return character is not None and character.isprintable() and key != "space"

    def on_key(self, event: events.Key) -> None:
        """Say it by its first letter."""
        self.say({"y": "yes", "n": "no"}.get(event.key, self.value))

    def on_click(self) -> None:
        """Change it with the mouse."""
        self.turn()

    def turn(self) -> None:
        """Change a yes to a no and back."""
        self.say("no" if self.value == "yes" else "yes")

    def say(self, said: str) -> None:
        """Say yes or no, as a person does."""
        if said != self.value:
            self.value = said
            self.post_message(self.Changed(self))


class FieldRow(Horizontal):
    """One field of a form."""

    def __init__(self, field: Field) -> None:
        self.field = field
        self.editor: TextField | YesNo = YesNo() if field.is_yes_no else TextField()
        self._label = Static(f" {field.label}", classes="label", markup=False)
        self._error = Static("", classes="error", markup=False)
        self.heading = Static(f" {field.group}", classes="group", markup=False) if field.group else None
        super().__init__()

    def compose(self) -> Iterator[Widget]:
        """Label, line, and below it the place for what is wrong."""
        yield self._label
        yield Vertical(self.editor, self._error)

    @property
    def value(self) -> str:
        """What stands in it."""
        return self.editor.value

    def allow(self, is_asked: bool) -> None:
        """Show it, with the heading above it, or hide it where it is not asked."""
        for widget in filter(None, (self.heading, self)):
            widget.display = is_asked

    def fill(self, text: str) -> None:
        """Put text in it, not as if somebody typed it."""
        if isinstance(self.editor, YesNo):
            self.editor.value = text or "no"
            return
        with self.editor.prevent(Input.Changed):
            self.editor.value = text
            self.editor.cursor_position = len(text)

    def take(self, name: str) -> None:
        """Put a suggested name in the place of what is typed of it, as if it were typed."""
        assert isinstance(self.editor, TextField)
        before, semicolon, _ = self.editor.value.rpartition(";") if self.field.several else ("", "", "")
        self.editor.value = f"{before}; {name}" if semicolon else name
        self.editor.cursor_position = len(self.editor.value)

    @property
    def typed(self) -> str:
        """What is typed of the name now being written."""
        return (self.value.rpartition(";")[2] if self.field.several else self.value).strip()

    def say_wrong(self, text: str) -> None:
        """Say what is wrong with it; nothing takes that away."""
        self._error.update(Content(f"{_WRONG}{clean(text)}" if text else ""))
        self._error.display = bool(text)
        if text:  # it stands below the field, which may be the last line in sight
            self.call_after_refresh(self.scroll_visible, animate=False)

    def on_resize(self) -> None:
        """Keep what is wrong in sight once there is room for it."""
        if self._error.display:
            self.scroll_visible(animate=False)

    def mark(self, is_here: bool) -> None:
        """Mark the line the cursor is in, with or without colour."""
        self._label.update(Content(f"{_EDGE if is_here else ' '}{self.field.label}"))
        self._label.set_class(is_here, "-here")
