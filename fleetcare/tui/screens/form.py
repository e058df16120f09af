"""One form on the screen: read, stored, asked about where it is likely a slip, and left with what was stored."""

from collections.abc import Iterator, Mapping, Sequence
from functools import partial
from typing import TYPE_CHECKING

from fleetcare.errors import Doubted, FleetError, Refused, SheetWanted
from fleetcare.tui.drafts_kept import IMPORT_KEY
from fleetcare.tui.filling import FillingScreen
from fleetcare.tui.forms.base import Answer, Form, Said, Subject
from fleetcare.tui.sheets.base import SheetFor
from fleetcare.tui.storing import StoringScreen
from fleetcare.tui.widgets.question import Question

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

    from fleetcare.drafts.reading_in import Draft
    from fleetcare.operations.entering import Entered


class FormScreen(FillingScreen, StoringScreen):
    """A form on a subject. It is left with what was stored, in sentences, or with None."""

    _draft: "Draft | None" = None
    """What is being stored, or asked about, just now."""

    def __init__(self, form: Form, subject: Subject) -> None:
        super().__init__(form, subject)
        self._said: Said = {}
        self._doubted = ""

    @property
    def holds_keys(self) -> bool:
        """What is typed waits for what its fields open with; while it is stored it is for the sheet that may follow."""
        is_storing = self._draft is not None and not self.query_one(Question).display
        return is_storing or (self.facts is None and not self._has_failed)

    def on_mount(self) -> None:
        """Fill in what was kept; an entry goes under the key it was kept with, else under a new one."""
        super().on_mount()
        self._name_entry()

    def action_anew(self) -> None:
        """Throw away what was typed and begin anew, with another entry."""
        self.import_key = ""
        self._name_entry()
        super().action_anew()

    def action_back(self) -> None:
        """Leave; what is typed is kept. What is being stored just now is waited for."""
        if self._draft is None:
            self.dismiss(None)

    def action_store(self) -> None:
        """Store it, once the keys typed before are in their fields."""
        self.call_after_refresh(self._read)

    def _read(self) -> None:
        """Read what is typed; store it, or say beside each field what is wrong."""
        from fleetcare.drafts.reading_in import try_draft

        if self._draft is not None:
            return
        self.clear_wrong()
        fixed = self.form.fixed(self.subject, self.context.today())
        draft, wrong = try_draft(self.form.draft(), {**fixed, **self._sent(), IMPORT_KEY: self.import_key})
        wrong = [*self._emptied(), *wrong]
        for name, error in reversed(wrong):  # the cursor ends in the first of them
            self.say_wrong(name or self.form.field_of(error, self.values), error)
        if draft is not None and not wrong:
            self._begin(draft, {})

    def on_storing_screen_stored(self, message: StoringScreen.Stored) -> None:
        """Go back with what was stored."""
        self._leave(message.sentences)

    def _leave(self, sentences: Sequence[str]) -> None:
        self.fleet_app.typed_ahead.forget()  # it was meant for a sheet that was not wanted
        self.finish()
        for name, row in self.rows.items():
            if row.field.kept_for_shift and row.value.strip():
                self.fleet_app.shift[name] = row.value.strip()
        self.dismiss(sentences)

    def on_storing_screen_not_stored(self, message: StoringScreen.NotStored) -> None:
        """Ask about a doubt, once a field; go on to the sheet the work needs; say anything else at the foot."""
        error = message.error
        if isinstance(error, SheetWanted) and self._draft is not None:
            self._fill_in(error, self._draft)
            return
        doubted = self.form.field_of(error, self.values) if isinstance(error, Doubted) and self.form.answers else ""
        if doubted and doubted not in self._said:
            self._doubted = doubted
            self.query_one(Question).ask(error.detail, self.form.answers)
            return
        self._draft = None
        self.say_wrong("", error)

    def on_question_answered(self, message: Question.Answered) -> None:
        """Store as answered, or go back to what was typed, or on to the form an answer leads to."""
        answer, draft = message.answer, self._draft
        self._draft = None
        self.rows[self._doubted].editor.focus()
        if answer.says and draft is not None:
            self._begin(draft, {**self._said, self._doubted: answer.says})
        elif answer.leads_to:
            self._go_on(answer)

    def _name_entry(self) -> None:
        if self.form.is_entry and not self.import_key:
            self.import_key = f"form {self.context.unused_uid()}"

    def _sent(self) -> dict[str, str]:
        """Give what goes into the draft: all that is typed, of a correction what was changed."""
        values = self.values.items()
        return {name: value for name, value in values if not self.form.only_changes or value != self.start.get(name)}

    def _emptied(self) -> Iterator[tuple[str, FleetError]]:
        """Give an error for each field that a correction cannot empty."""
        for name, value in self.values.items():
            if self.form.only_changes and self.start.get(name) and not value.strip():
                yield (
                    name,
                    Refused(f"{self.start[name]} cannot be left out", "take the entry back and log the work anew"),
                )

    def _begin(self, draft: "Draft", said: Said) -> None:
        self._draft, self._said = draft, said
        self.store(partial(self._record, draft))

    def _record(self, draft: "Draft", session: "Session") -> "Entered":
        return self.form.store(session, self.subject, draft, self.context.today(), self._said)

    def _fill_in(self, wanted: SheetWanted, draft: "Draft") -> None:
        """Open the sheet the work needs; it is stored together with what is typed here."""
        from fleetcare.tui.screens.sheet import SheetScreen
        from fleetcare.tui.sheets.all import SHEETS

        self._draft = None
        taken_on = getattr(draft, "on", None) or self.context.today()
        about = SheetFor(
            self.subject.tag,
            taken_on,
            wanted.task,
            self.facts.whose if self.facts else "",
            figures=getattr(draft, "at", ()),
            explained=self._said.get("at", {}),
            topped_up=getattr(draft, "top_up", None),
            import_key=self.import_key,
        )
        self.app.push_screen(
            SheetScreen(SHEETS[wanted.kind], about, partial(self._record_with, draft)), self._filled_in
        )

    def _record_with(self, draft: "Draft", session: "Session", came: Mapping[str, object]) -> "Entered":
        """Store what is typed here with the sheet that came along; both may tell of a defect."""
        defects = [defect for defect in (getattr(draft, "defect", None), came.get("defect")) if defect]
        told = {"defect": "; ".join(map(str, defects))} if defects else {}
        return self._record(draft.model_copy(update={**came, **told}), session)

    def _filled_in(self, sentences: Sequence[str] | None) -> None:
        if sentences is not None:
            self._leave(sentences)

    def _go_on(self, answer: Answer) -> None:
        """Open the form an answer leads to, with the day and figure typed here."""
        from fleetcare.tui.forms.all import FORMS

        form, values = FORMS[answer.leads_to], self.values
        carried = {"on": values["on"], "value": values[self._doubted]}
        subject = Subject(self.rows[self._doubted].field.tag or self.subject.tag, preset=carried)
        self.app.push_screen(FormScreen(form, subject), partial(self._gone_on, answer))

    def _gone_on(self, answer: Answer, sentences: Sequence[str] | None) -> None:
        if sentences is None:
            return
        if answer.is_instead:
            self.finish()
            self.dismiss(sentences)
        else:
            self.notice.say(" ".join(sentences))
