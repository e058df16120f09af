"""Screens from which something is written down about what the cursor is on."""

from collections.abc import Sequence
from typing import TYPE_CHECKING

from fleetcare.tui.loading import LoadingScreen

if TYPE_CHECKING:
    from fleetcare.tui.forms.base import Form, Subject


class WritingScreen(LoadingScreen):
    """A screen that opens forms, and says afterwards what they stored."""

    def subject(self) -> "Subject | None":
        """Give what the cursor is on, None where it is on nothing."""
        raise NotImplementedError

    def action_write(self, name: str) -> None:
        """Open the form of a name on what the cursor is on."""
        from fleetcare.tui.forms.all import FORMS

        subject = self.subject()
        if subject is not None and FORMS[name].is_on_task and not subject.task:
            self.notice.say(
                "Put the cursor on a line of a task first: 1 has all lines, l on a page those of one engine."
            )
        elif subject is not None:
            self.open_form(name, subject)

    def open_form(self, name: str, subject: "Subject") -> None:
        """Open the form of a name on a subject."""
        from fleetcare.tui.forms.all import FORMS

        self.show_form(FORMS[name], subject)

    def show_form(self, form: "Form", subject: "Subject") -> None:
        """Open a form on a subject."""
        from fleetcare.tui.screens.edit import EditScreen
        from fleetcare.tui.screens.form import FormScreen

        self.app.push_screen((EditScreen if form.is_edit else FormScreen)(form, subject), self._written)

    def action_more(self) -> None:
        """Choose what else to write down about what the cursor is on."""
        from fleetcare.tui.screens.more import MoreScreen

        subject = self.subject()
        if subject is not None:
            self.app.push_screen(MoreScreen(subject.tag), self._chosen)

    def action_tasks(self) -> None:
        """Show all tasks of what the cursor is on."""
        from fleetcare.tui.screens.tasks import TasksScreen

        subject = self.subject()
        if subject is not None:
            self.app.push_screen(TasksScreen(subject.tag))

    async def _chosen(self, method: str | None) -> None:
        if method is not None:
            await self.run_action(method)

    def _written(self, sentences: Sequence[str] | None) -> None:
        if sentences is not None:
            from fleetcare.tui.forms.words import on_screen

            self.notice.say(on_screen(" ".join(sentences)))
