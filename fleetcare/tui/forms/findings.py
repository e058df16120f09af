"""Forms that answer a finding: live with it, or have something done about it."""

from datetime import date
from typing import TYPE_CHECKING

from fleetcare.tui.forms.base import WHY, Field, Form, Said, Subject

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

    from fleetcare.drafts.findings import AnswerDraft
    from fleetcare.drafts.reading_in import Draft
    from fleetcare.operations.entering import Entered

_DECIDES = Field("by", "By", "who decides it", "people", kept_for_shift=True)


def _answer_draft() -> "type[Draft]":
    from fleetcare.drafts.findings import AnswerDraft

    return AnswerDraft


def _answer(session: "Session", subject: Subject, draft: "AnswerDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.answer import enter_answer

    return enter_answer(session, draft, today)


ACCEPT = Form(
    "accept",
    "Accept finding {task} of {tag}",
    (WHY, _DECIDES),
    _answer_draft,
    _answer,
    is_on_task=True,
    fixed=lambda subject, on: {"finding": subject.task, "accept": True, "on": on},
    start=lambda facts, subject, on: {},
)
FOLLOW_UP = Form(
    "follow-up",
    "Have something done about finding {task} of {tag}",
    (WHY, _DECIDES),
    _answer_draft,
    _answer,
    is_on_task=True,
    fixed=lambda subject, on: {"finding": subject.task, "follow_up": True, "on": on},
    start=lambda facts, subject, on: {},
)
