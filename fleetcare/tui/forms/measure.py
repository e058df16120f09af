"""Forms on measurements taken without any work: who took them and at what figure; their sheet follows."""

from collections.abc import Callable
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.measured import COMPRESSION, LASH, LEAKDOWN, OIL, RUN, SPOT
from fleetcare.tui.forms.base import BY, NOTE, ON, Form, Said, Subject
from fleetcare.tui.forms.work import AT, FIGURE_ANSWERS

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

    from fleetcare.drafts.reading_in import Draft
    from fleetcare.drafts.work import MeasureDraft
    from fleetcare.operations.entering import Entered


def _draft() -> "type[Draft]":
    from fleetcare.drafts.work import MeasureDraft

    return MeasureDraft


def _storing(kind: str) -> "Callable[[Session, Subject, MeasureDraft, date, Said], Entered]":
    """Give what stores a sheet of a kind."""

    def store(session: "Session", subject: Subject, draft: "MeasureDraft", today: date, said: Said) -> "Entered":
        from fleetcare.operations.entering import enter_measured, note_findings

        return note_findings(session, enter_measured(session, draft, kind, today, said.get("at")), today)

    return store


MEASURES = tuple(
    Form(
        kind,
        f"{title} of {{tag}}",
        (ON, AT, BY, NOTE),
        _draft,
        _storing(kind),
        above=lambda facts: ("First", ("when it was taken, at what figure and by whom; Ctrl S goes on to the sheet",)),
        answers=FIGURE_ANSWERS,
        is_entry=True,
    )
    for kind, title in (
        (LASH, "Valve lash"),
        (COMPRESSION, "Compression"),
        (LEAKDOWN, "Leak-down"),
        (RUN, "Test run"),
        (SPOT, "Spot readings"),
        (OIL, "Oil sample"),
    )
)
"""A form for each kind of sheet, by its name."""
