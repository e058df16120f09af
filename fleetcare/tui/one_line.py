"""A screen that is one line to type in at the foot of the screen below it, kept as it is typed."""

from collections.abc import Iterator
from typing import TYPE_CHECKING

from textual.containers import Horizontal, Vertical
from textual.widget import Widget
from textual.widgets import Static

from fleetcare.errors import Refused
from fleetcare.tui.drafts_kept import IMPORT_KEY, DraftKey
from fleetcare.tui.filling import KEEP_AFTER, LEFT
from fleetcare.tui.frame import KeyLine, Notice
from fleetcare.tui.loading import LoadingScreen
from fleetcare.tui.widgets.form_fields import TextField
from fleetcare.tui.widgets.said_lines import HERE, SaidLines

if TYPE_CHECKING:
    from textual.timer import Timer


class OneLineScreen(LoadingScreen):
    """A line called `label`, and below it what there is to say of it; the rest shows the screen below."""

    AUTO_FOCUS = "TextField"
    label = ""

    def __init__(self) -> None:
        super().__init__()
        self.editor, self.said = TextField(), SaidLines()
        self._timer: Timer | None = None
        self._kept = self.import_key = ""

    def compose(self) -> Iterator[Widget]:
        """The line, what is said of it, and its keys."""
        line = Horizontal(Static(f"{HERE}{self.label}  "), self.editor)
        yield Vertical(line, self.said, Notice(), KeyLine(self.place))

    @property
    def text(self) -> str:
        """What is typed."""
        return self.editor.value

    @property
    def key(self) -> DraftKey:
        """What is typed here is kept under this, whatever screen it is over."""
        return DraftKey(str(self.context.path.absolute()), self.place, "")

    def typed(self) -> None:
        """Do something about what is typed now."""
        raise NotImplementedError

    def on_mount(self) -> None:
        """Put in what was kept."""
        super().on_mount()
        self.name_entry()
        try:
            kept = self.fleet_app.drafts.find(self.key)
            self._kept, self.import_key = kept.get("text", ""), kept.get(IMPORT_KEY, self.import_key)
        except Refused as error:
            self.notice.say(*error.lines(), is_wrong=True)
        if self._kept:
            self.notice.say(LEFT)
        self.put(self._kept)

    def on_unmount(self) -> None:
        """Keep what is typed however the line is left."""
        self._keep()

    def on_input_changed(self, event: TextField.Changed) -> None:
        """Keep what is typed."""
        if self._timer is None:
            self._timer = self.set_timer(KEEP_AFTER, self._keep)
        self.notice.say()
        self.typed()

    def name_entry(self) -> None:
        """Give what is typed next an import key of its own, so that it is stored once however often it is sent."""
        self.import_key = f"line {self.context.unused_uid()}"

    def put(self, text: str) -> None:
        """Put another text in the line, and keep it."""
        with self.editor.prevent(TextField.Changed):
            self.editor.value = text
            self.editor.cursor_position = len(text)
        self._keep()
        self.typed()

    def action_anew(self) -> None:
        """Throw away what is typed."""
        self.notice.say()
        self.put("")

    def action_help(self) -> None:
        """Show the keys."""
        self.fleet_app.action_keys()

    def _keep(self) -> None:
        """Keep what is typed; of an empty line nothing."""
        self._timer = None
        text = self.text
        if text == self._kept:
            return
        try:
            if text:
                self.fleet_app.drafts.keep(self.key, {"text": text, IMPORT_KEY: self.import_key})
            else:
                self.fleet_app.drafts.drop(self.key)
                self.name_entry()
            self._kept = text
        except Refused as error:
            self.notice.say(*error.lines(), is_wrong=True)
