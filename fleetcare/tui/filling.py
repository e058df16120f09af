"""A screen with fields to fill in: what is typed is kept as it is typed, and names known are suggested."""

from collections.abc import Iterable, Sequence
from contextlib import suppress
from dataclasses import replace
from functools import partial
from typing import TYPE_CHECKING

from textual.containers import VerticalScroll
from textual.events import DescendantFocus
from textual.message import Message
from textual.widget import Widget
from textual.worker import get_current_worker

from fleetcare.errors import FleetError, Refusals, Refused
from fleetcare.tui.drafts_kept import IMPORT_KEY, DraftKey
from fleetcare.tui.forms.base import METERS, Form, Preview, Subject
from fleetcare.tui.frame import TopBar, say_day
from fleetcare.tui.loading import LoadingScreen
from fleetcare.tui.widgets.detail import Detail
from fleetcare.tui.widgets.form_fields import FieldRow, TextField, YesNo
from fleetcare.tui.widgets.form_head import FormFoot, FormHead, FormTitle
from fleetcare.tui.widgets.question import Question

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection
    from textual.timer import Timer

    from fleetcare.operations.form_facts import FormFacts

KEEP_AFTER = 0.3
"""Seconds after a key until what is typed is kept."""

LEFT = "As you left it; Ctrl N throws it away and begins anew."
"""Said where what was kept is there again."""

_MOST_NAMES = 12


class FillingScreen(LoadingScreen):
    """The fields of a form on a subject, as somebody fills them in."""

    class Previewed(Message):
        """What is typed would bring this: a heading and lines, or nothing that can be told yet."""

        def __init__(self, title: str = "", lines: Sequence[str] = ()) -> None:
            super().__init__()
            self.title, self.lines = title, lines

    place = "form"
    AUTO_FOCUS = "TextField, YesNo"

    def __init__(self, form: Form, subject: Subject) -> None:
        super().__init__()
        self.form, self.subject = form, subject
        self.rows = {field.name: FieldRow(field) for field in form.fields}
        self.facts: FormFacts | None = None
        self.start: dict[str, str] = {}
        self.import_key = ""  # what an entry is told again by, kept with what is typed
        self.is_done = False
        self._touched: set[str] = set()
        self._timer: Timer | None = None

    def body(self) -> Iterable[Widget]:
        """What it is about, its fields, help on the one the cursor is in, and the place for a question."""
        yield FormTitle(self.form.heading(self.subject))
        yield VerticalScroll(FormHead(), *self._grouped(), FormFoot(), can_focus=False)
        yield Detail()
        yield Question()

    @property
    def key(self) -> DraftKey:
        """What is typed here is kept under this."""
        return DraftKey(str(self.context.path.absolute()), self.form.name, self.form.names(self.subject))

    @property
    def values(self) -> dict[str, str]:
        """What stands in the fields."""
        return {name: row.value for name, row in self.rows.items()}

    def on_mount(self) -> None:
        """Fill in what was kept."""
        super().on_mount()
        self.query_one(TopBar).tell(say_day(self.context.today()))
        try:
            kept = self.fleet_app.drafts.find(self.key)
        except Refused as error:
            self.notice.say(*error.lines(), is_wrong=True)
            return
        self.import_key = kept.get(IMPORT_KEY, self.import_key)
        for name in kept.keys() & self.rows.keys():
            self.rows[name].fill(kept[name])
            self._touched.add(name)
        if kept:
            self.notice.say(LEFT)

    def read(self, connection: "Connection", on: "date", *, is_future: bool) -> "FormFacts":
        """Load what the form shows before anything is typed."""
        from fleetcare.operations.form_facts import form_facts

        facts = form_facts(connection, self.subject.tag, on, self.subject.entry)
        return replace(facts, typed={**facts.typed, **self.form.typed(connection, self.subject, on)})

    def fail(self, error: FleetError) -> None:
        """Say what is wrong; where there is no file yet, the first thing in it can be added all the same."""
        if isinstance(error, Refused):
            self.notice.say(*map(self.form.in_own_words, error.lines()), is_wrong=True, is_about_reading=True)
        elif self.has_file or self.subject.tag:
            super().fail(error)
        elif self.facts is None:
            from fleetcare.operations.form_facts import FormFacts, words_known

            self.show(FormFacts(words_known()))

    def show(self, found: "FormFacts") -> None:
        """Fill in what it opens with, where nobody typed; when the file changed only what is known changes."""
        is_first, self.facts = self.facts is None, found
        self.query_one(FormTitle).tell(found.whose)
        self.query_one(FormHead).tell(*self.form.above(found))
        for row in self.rows.values():
            is_known = not row.field.fills or row.field.fills in found.typed
            row.allow(is_known and (found.is_engine or not row.field.of_engines))
            if not is_known:  # a yes kept from when it was
                row.fill("")
        if is_first:
            kept = {
                name: self.fleet_app.shift.get(name, "") for name, row in self.rows.items() if row.field.kept_for_shift
            }
            self.start = {**kept, **self.form.start(found, self.subject, self.day), **self.subject.preset}
            self._fill()
        self._help()
        self._preview()

    def on_filling_screen_previewed(self, message: Previewed) -> None:
        """Show what would be added or changed by what is typed now."""
        self.query_one(FormFoot).tell(message.title, message.lines)

    def on_input_changed(self, event: TextField.Changed) -> None:
        """Keep what is typed, and suggest by it."""
        self._typed(event.input)

    def on_yes_no_changed(self, event: YesNo.Changed) -> None:
        """Keep what was said, and fill in what a yes fills."""
        self._fill_other(event.by)
        self._typed(event.by)

    def on_text_field_taken(self) -> None:
        """Take a name at the end of what is typed."""
        self.action_take()

    def action_say_yes(self) -> None:
        """Change the yes or no the cursor is on."""
        if isinstance(self.focused, YesNo):
            self.focused.turn()

    def action_take(self) -> None:
        """Take the first name suggested."""
        row, names = self._here(), self._names()
        if row is not None and names:
            row.take(names[0])

    def on_descendant_focus(self, event: DescendantFocus) -> None:
        """Mark the line the cursor is in and say what belongs there."""
        for row in self.rows.values():
            row.mark(row.editor is self.focused)
        self._help()

    def on_unmount(self) -> None:
        """Keep what is typed however the screen is left."""
        self._keep()

    def action_next(self, step: int) -> None:
        """Go to the next field or the one before."""
        if self.query_one(Question).display:
            return
        if step > 0:
            self.focus_next("TextField, YesNo")
        else:
            self.focus_previous("TextField, YesNo")

    def action_anew(self) -> None:
        """Throw away what was typed and begin anew."""
        self.fleet_app.drafts.drop(self.key)
        self._touched.clear()
        self.clear_wrong()
        self._fill()

    def action_help(self) -> None:
        """Show the keys."""
        self.fleet_app.action_keys()

    def clear_wrong(self) -> None:
        """Say no more what was wrong."""
        self.notice.say()
        for row in self.rows.values():
            row.say_wrong("")

    def say_wrong(self, name: str, error: FleetError) -> None:
        """Say an error beside the field of a name, else the one its words tell; one of no field at the foot."""
        self.fleet_app.typed_ahead.forget()  # it was meant for what comes after the form
        places: dict[str, list[str]] = {}
        for one in error.errors if isinstance(error, Refusals) else (error,):
            place = name or self.form.field_of(one, self.values)
            places.setdefault(place, []).append(self.form.in_own_words("; ".join(one.lines())))
        for place, texts in reversed(places.items()):
            if place in self.rows:
                self.rows[place].editor.focus(scroll_visible=False)  # what is wrong is brought in sight with it
                self.rows[place].say_wrong(" ! ".join(texts))
            else:
                self.notice.say(*texts, is_wrong=True)

    def finish(self) -> None:
        """Keep nothing any more: it was stored."""
        self.is_done = True
        self.fleet_app.drafts.drop(self.key)

    def _grouped(self) -> Iterable[Widget]:
        """Give the fields, each group under its heading."""
        for row in self.rows.values():
            if row.heading is not None:
                yield row.heading
            yield row

    def _preview(self) -> None:
        """Work out in a thread what is typed would bring."""
        if self.form.preview is not None:
            work = partial(self._run_preview, self.form.preview, self.values)
            self.run_worker(work, thread=True, group="preview", exclusive=True, exit_on_error=False)

    def _run_preview(self, preview: Preview, values: dict[str, str]) -> None:
        worker, found = get_current_worker(), self.Previewed()
        with suppress(FleetError), self.context.read() as connection:
            found = self.Previewed(*preview(connection, self.subject, values, self.context.today()))
        if not worker.is_cancelled:
            self.post_message(found)

    def _fill(self) -> None:
        """Put into untouched fields what they open with, and the cursor where something is still to be typed."""
        for name, row in self.rows.items():
            if name not in self._touched:
                row.fill(self.start.get(name, ""))
        if not self._touched:
            rows = [row for row in self.rows.values() if row.display]
            empty = [row for row in rows if not row.value and not self.form.is_edit]
            (*empty, *rows)[0].editor.focus()

    def _fill_other(self, editor: Widget) -> None:
        """Put what is known into the field that a yes fills; a no takes it out again."""
        for row in self.rows.values():
            if row.editor is editor and row.field.fills and self.facts is not None:
                other, known = self.rows[row.field.fills], self.facts.typed.get(row.field.fills, "")
                if row.value == "yes" or other.value == known:
                    other.fill(known if row.value == "yes" else "")
                    self._touched.add(row.field.fills)

    def _typed(self, editor: Widget) -> None:
        self._touched |= {name for name, row in self.rows.items() if row.editor is editor}
        self._preview()
        if self._timer is None:
            self._timer = self.set_timer(KEEP_AFTER, self._keep)
        self._help()

    def _keep(self) -> None:
        """Keep what differs from what the form opened with."""
        self._timer = None
        if self.is_done or not self._touched:
            return
        typed = {name: value for name, value in self.values.items() if name in self._touched}
        try:
            self.fleet_app.drafts.keep(self.key, {**typed, IMPORT_KEY: self.import_key})
        except Refused as error:
            self.notice.say(*error.lines(), is_wrong=True)

    def _here(self) -> FieldRow | None:
        return next((row for row in self.rows.values() if row.editor is self.focused), None)

    def _names(self) -> list[str]:
        """Give the names known for the field the cursor is in that hold what is typed, those that begin so first."""
        row = self._here()
        if row is None or self.facts is None:
            return []
        typed = row.typed.casefold()
        held = {part.strip().casefold() for part in row.value.split(";")}
        known = row.field.choices or self.facts.known.get(row.field.known, ())
        fitting = [n for n in known if typed in n.casefold() and n.casefold() not in held]
        return sorted(fitting, key=lambda name: not name.casefold().startswith(typed))

    def _help(self) -> None:
        """Say what belongs in the field the cursor is in."""
        row = self._here()
        if row is None:
            return
        names = self._names()[:_MOST_NAMES]
        known = f"→ takes {names[0]}" if names else ""
        others = f"; also {', '.join(names[1:])}" if names[1:] else ""
        shown = f"showed last: {self.facts.meters}" if row.field.known == METERS and self.facts else ""
        self.query_one(Detail).tell((f"{row.field.label}: {row.field.tells}", "quiet"), (known + others or shown, ""))
