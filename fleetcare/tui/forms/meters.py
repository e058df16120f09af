"""Forms on meters: what one shows, readings that were wrong or right after all, a new one in place of an old one."""

from datetime import date
from typing import TYPE_CHECKING

from fleetcare.tui.forms.base import BY, METERS, NOTE, ON, WHY, Answer, Field, Form, Said, Subject
from fleetcare.tui.forms.work import RIGHT, WENT_ROUND

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

    from fleetcare.drafts.reading_in import Draft
    from fleetcare.drafts.work import ReadingDraft, RestoreDraft, SwapDraft, VoidDraft
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


def _void_draft() -> "type[Draft]":
    from fleetcare.drafts.work import VoidDraft

    return VoidDraft


def _void(session: "Session", subject: Subject, draft: "VoidDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.entering import enter_void

    return enter_void(session, draft, today)


def _restore_draft() -> "type[Draft]":
    from fleetcare.drafts.work import RestoreDraft

    return RestoreDraft


def _restore(session: "Session", subject: Subject, draft: "RestoreDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.entering import enter_restored

    return enter_restored(session, draft.model_copy(update=said.get("why")), today)


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
VOID_READING = Form(
    "void-reading",
    "Take back reading {reading} of {tag}: it counts for nothing",
    (WHY,),
    _void_draft,
    _void,
    fixed=lambda subject, on: {"reading": subject.reading},
    start=lambda facts, subject, on: {},
)
RESTORE_READING = Form(
    "restore-reading",
    "Bring back reading {reading} of {tag}: it counts again",
    (WHY,),
    _restore_draft,
    _restore,
    fixed=lambda subject, on: {"reading": subject.reading},
    start=lambda facts, subject, on: {},
    answers=(RIGHT,),
)
