"""One form on the screen: filled in, kept as it is typed, read, stored, and what may be wrong said beside it."""

from collections.abc import Iterable, Mapping, Sequence
from functools import partial
from typing import TYPE_CHECKING

from textual.containers import VerticalScroll
from textual.events import DescendantFocus
from textual.message import Message
from textual.widget import Widget

from fleetcare.errors import Doubted, FleetError, Refused
from fleetcare.tui.drafts_kept import DraftKey
from fleetcare.tui.forms.base import Answer, Form, Subject
from fleetcare.tui.frame import TopBar, say_day
from fleetcare.tui.loading import LoadingScreen
from fleetcare.tui.widgets.detail import Detail
from fleetcare.tui.widgets.form_fields import FieldRow, TextField, YesNo
from fleetcare.tui.widgets.form_head import FormHead
from fleetcare.tui.widgets.question import Question

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection
    from textual.timer import Timer

    from fleetcare.drafts.reading_in import Draft
    from fleetcare.operations.form_facts import FormFacts

KEEP_AFTER = 0.3
"""Seconds after a key until what is typed is kept."""

_LEFT = "As you left it; Ctrl N begins anew."
_MOST_NAMES = 8


class FormScreen(LoadingScreen):
    """A form on a subject. It is left with what was stored, in sentences, or with None."""

    place = "form"
    AUTO_FOCUS = "TextField, YesNo"

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

    def __init__(self, form: Form, subject: Subject) -> None:
        super().__init__()
        self.form, self.subject = form, subject
        self.rows = {field.name: FieldRow(field) for field in form.fields}
        self.facts: FormFacts | None = None
        self._start: dict[str, str] = {}
        self._touched: set[str] = set()
        self._draft: Draft | None = None
        self._timer: Timer | None = None
        self._is_done = False

    def body(self) -> Iterable[Widget]:
        """What it is about, its fields, help on the one the cursor is in, and the place for a question."""
        yield FormHead(self.form.heading(self.subject))
        scroll = VerticalScroll(*self.rows.values(), can_focus=False)
        yield scroll
        yield Detail()
        yield Question()

    def on_mount(self) -> None:
        """Fill in what was kept."""
        super().on_mount()
        self.query_one(TopBar).tell(say_day(self.context.today()))
        self._key = DraftKey(str(self.context.path.absolute()), self.form.name, self.subject.words())
        try:
            kept = self.fleet_app.drafts.find(self._key)
        except Refused as error:
            self.notice.say(*error.lines(), is_wrong=True)
            return
        for name in kept.keys() & self.rows.keys():
            self.rows[name].fill(kept[name])
            self._touched.add(name)
        if kept:
            self.notice.say(_LEFT)

    def read(self, connection: "Connection", on: "date", *, is_future: bool) -> "FormFacts":
        """Load what the form shows before anything is typed."""
        from fleetcare.operations.form_facts import form_facts

        return form_facts(connection, self.subject.tag, on, self.subject.entry)

    def show(self, found: "FormFacts") -> None:
        """Fill in what it opens with, where nobody typed; later only what is known changes."""
        is_first, self.facts = self.facts is None, found
        self.query_one(FormHead).tell(found.whose, *self.form.above(found))
        if is_first:
            shift = {name: self.fleet_app.shift.get(name, "") for name, row in self.rows.items() if row.field.kept_for_shift}
            self._start = {**shift, **self.form.start(found, self.subject, self.day), **self.subject.preset}
            for name, row in self.rows.items():
                if name not in self._touched:
                    row.fill(self._start.get(name, ""))
            if not self._touched:
                self._to_first_empty()
        self._help()

    @property
    def values(self) -> dict[str, str]:
        """What stands in the fields."""
        return {name: row.value for name, row in self.rows.items()}

    def on_input_changed(self, event: TextField.Changed) -> None:
        """Keep what is typed, and suggest by it."""
        self._typed(event.input)

    def on_yes_no_changed(self) -> None:
        """Keep what was said."""
        self._typed(self.focused)

    def on_text_field_taken(self) -> None:
        """Take the first name suggested."""
        row, names = self._here(), self._names()
        if row is not None and names:
            row.take(names[0])

    def on_descendant_focus(self, event: DescendantFocus) -> None:
        """Mark the line the cursor is in and say what belongs there."""
        for row in self.rows.values():
            row.mark(row.editor is event.widget)
        self._help()

    def action_next(self, step: int) -> None:
        """Go to the next field or the one before."""
        if step > 0:
            self.focus_next("TextField, YesNo")
        else:
            self.focus_previous("TextField, YesNo")

    def action_anew(self) -> None:
        """Throw away what was typed."""
        self.fleet_app.drafts.drop(self._key)
        self._touched.clear()
        self._clear()
        for name, row in self.rows.items():
            row.fill(self._start.get(name, ""))
        self._to_first_empty()

    def action_help(self) -> None:
        """Show the keys."""
        self.fleet_app.action_keys()

    def action_back(self) -> None:
        """Leave; what is typed is kept, unless it is being stored just now."""
        if self._draft is None:
            self._keep()
            self.dismiss(None)

    def on_unmount(self) -> None:
        """Keep what is typed however the form is left."""
        self._keep()

    def action_store(self) -> None:
        """Read what is typed; store it, or say beside each field what is wrong."""
        from fleetcare.drafts.reading_in import try_draft

        if self._draft is not None:
            return
        self._clear()
        sent, emptied = self._sent()
        fixed = self.form.fixed(self.subject, self.context.today())
        draft, wrong = try_draft(self.form.draft(), {**fixed, **sent})
        for name, error in (*emptied, *wrong):
            self._say_wrong(name, error)
        if draft is not None and not emptied:
            self._begin(draft, {})

    def on_form_screen_stored(self, message: Stored) -> None:
        """Keep nothing any more, and go back with what was stored."""
        self._finish()
        for name, row in self.rows.items():
            if row.field.kept_for_shift and row.value.strip():
                self.fleet_app.shift[name] = row.value.strip()
        self.dismiss(message.sentences)

    def on_form_screen_not_stored(self, message: NotStored) -> None:
        """Ask about a doubt; say anything else at the foot, with the cursor in the field it is about."""
        error = message.error
        if isinstance(error, Doubted) and self.form.answers:
            self.query_one(Question).ask(error.detail, self.form.answers)
            return
        self._draft = None
        self._say_wrong("", error)

    def on_question_answered(self, message: Question.Answered) -> None:
        """Store as answered, go where the answer leads, or back to what was typed."""
        answer, draft = message.answer, self._draft
        self._draft = None
        if answer.says and draft is not None:
            self._begin(draft, answer.says)
            return
        self._to_figure()
        if answer.leads_to:
            self._go_on(answer)

    def _begin(self, draft: "Draft", said: Mapping[str, bool]) -> None:
        self._draft = draft
        self.run_worker(partial(self._store, draft, said), thread=True, group="store", exit_on_error=False)

    def _store(self, draft: "Draft", said: Mapping[str, bool]) -> None:
        try:
            with self.context.write() as session:
                entered = self.form.store(session, draft, self.context.today(), said)
        except FleetError as error:
            self.post_message(self.NotStored(error))
        else:
            self.post_message(self.Stored(entered.sentences()))
