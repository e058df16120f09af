"""Forms on meters: what one shows, and a new one in the place of an old one."""

from datetime import date
from typing import TYPE_CHECKING

from fleetcare.tui.forms.base import BY, METERS, NOTE, ON, Answer, Field, Form, Said, Subject
from fleetcare.tui.forms.work import RIGHT, WENT_ROUND

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

    from fleetcare.drafts.reading_in import Draft
    from fleetcare.drafts.work import ReadingDraft, SwapDraft
    from fleetcare.operations.entering import Entered


def _reading_draft() -> "type[Draft]":
    from fleetcare.drafts.work import ReadingDraft

    return ReadingDraft


def _read(session: "Session", subject: Subject, draft: "ReadingDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.entering import enter_reading

    return enter_reading(session, draft.model_copy(update=said.get("value")), today)


def _swap_draft() -> "type[Draft]":
    from fleetcare.drafts.work import SwapDraft

    return SwapDraft


def _swap(session: "Session", subject: Subject, draft: "SwapDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.entering import enter_reading

    return enter_reading(session, draft.reading(), today)


READING = Form(
    "reading",
    "Reading of {tag}",
    (
        Field("value", "Meter", "what the dial shows, such as 1250; of two meters 1250h", METERS),
        ON,
        BY,
        NOTE,
    ),
    _reading_draft,
    _read,
    answers=(RIGHT, WENT_ROUND, Answer("n", "it is a new meter", leads_to="swap", is_instead=True)),
)
SWAP = Form(
    "swap",
    "A new meter on {tag}",
    (
        ON,
        Field("old_last", "Old one", "the last figure of the old meter", METERS),
        Field("new_first", "New one", "the first figure of the new meter"),
        Field("unmetered", "Unmetered", "run between the two without being counted, such as 150h; empty for none"),
        Field("value", "Shows now", "what the new one shows, if it ran since that day"),
        BY,
        NOTE,
    ),
    _swap_draft,
    _swap,
)
