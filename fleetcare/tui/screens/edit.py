"""A form on what is there already: it opens with what is in force, and sends what was changed."""

from collections.abc import Iterator

from fleetcare.errors import FleetError, Refused
from fleetcare.tui.screens.form import FormScreen
from fleetcare.tui.widgets.form_fields import YesNo


class EditScreen(FormScreen):
    """A form that sends changed fields only, and the names of those emptied."""

    def _sent(self) -> dict[str, str]:
        """Give the fields that changed, those that hold together with one of them, and what was emptied."""
        changed = self._changed()
        if changed & self.form.together:
            changed |= self.form.together
        sent = {name: value for name, value in self.values.items() if name in changed}
        cleared = [name for name in changed & self.form.clears if not sent[name].strip()]
        return {**sent, "cleared": "; ".join(sorted(cleared))} if cleared else sent

    def _emptied(self) -> Iterator[tuple[str, FleetError]]:
        """Give an error for each field that cannot be emptied, and each yes that cannot be taken back."""
        changed = self._changed() - self.form.clears
        for name in filter(changed.__contains__, self.rows):
            if self.rows[name].value.strip() in ({"no"} if isinstance(self.rows[name].editor, YesNo) else {""}):
                yield (
                    name,
                    Refused(f"{self.start[name]} stands here and cannot be taken away", "change it, or Ctrl N"),
                )

    def _changed(self) -> set[str]:
        start = {name: self.start.get(name) or self._empty(name) for name in self.rows}
        return {name for name, value in self.values.items() if value.strip() != start[name].strip()}

    def _empty(self, name: str) -> str:
        return "no" if isinstance(self.rows[name].editor, YesNo) else ""
