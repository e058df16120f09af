"""A round: the meters of a whole site on one form, made for the engines and machines that stand there."""

from collections.abc import Sequence
from datetime import date
from functools import partial
from typing import TYPE_CHECKING, Any

from fleetcare.tui.forms.base import BY, ON, Answer, Field, Form, Said, Subject
from fleetcare.tui.forms.work import RIGHT, WENT_ROUND

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

    from fleetcare.drafts.reading_in import Draft
    from fleetcare.operations.entering import Entered
    from fleetcare.operations.yard import YardRow


def round_form(site: str, rows: "Sequence[YardRow]") -> Form:
    """Make the form for a site: a field for each of the rows that has a meter."""
    read = [row for row in rows if row.shown]
    fields = tuple(
        Field(f"meter_{place}", row.tag, _tells(row), several=True, tag=row.tag) for place, row in enumerate(read)
    )
    return Form(
        f"round of {site}",
        f"Round of {site}".replace("{", "{{").replace("}", "}}"),
        (BY, *fields, ON),
        partial(_draft, fields),
        partial(_store, fields),
        fixed=lambda subject, on: {},
        answers=(RIGHT, WENT_ROUND, Answer("n", "it is a new meter; write that down first", leads_to="swap")),
    )


def _tells(row: "YardRow") -> str:
    day = row.read_on.isoformat() if row.read_on is not None else ""
    return f"{row.name}; showed last {row.shown} on {day}"


def _draft(fields: Sequence[Field]) -> "type[Draft]":
    from fleetcare.drafts.work import round_draft

    return round_draft([field.name for field in fields])


def _store(
    fields: Sequence[Field], session: "Session", subject: Subject, draft: Any, today: date, said: Said
) -> "Entered":
    from fleetcare.drafts.work import ReadingDraft
    from fleetcare.operations.entering import enter_round

    readings = [
        ReadingDraft(tag=field.tag, value=figure, on=draft.on, by=draft.by).model_copy(update=said.get(field.name))
        for field in fields
        for figure in getattr(draft, field.name)
    ]
    return enter_round(session, readings, today)
