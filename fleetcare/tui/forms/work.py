"""Forms on work: log it, correct an entry, take one back, put a due point off."""

from collections.abc import Mapping, Sequence
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.tui.forms.base import BY, METERS, NOTE, ON, WHY, Answer, Field, Form, Said, Subject

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session

    from fleetcare.drafts.entry_understood import Understood
    from fleetcare.drafts.reading_in import Draft
    from fleetcare.drafts.work import CorrectionDraft, DeferralDraft, LogDraft
    from fleetcare.operations.entering import Entered
    from fleetcare.operations.form_facts import FormFacts

TASKS = Field("task", "Tasks", "what was done; several with ; between", "task", several=True)
AT = Field(
    "at",
    "Meter",
    "what the dial showed, such as 1234; of two meters 1234h; 5600km",
    METERS,
    several=True,
)
PART = Field("part", "Parts", "parts used, such as Oil filter:1; several with ; between", "parts", several=True)
PART_DONE = Field("part_done", "In part", "done in part only, which closes nothing", is_yes_no=True)
TOP_UP = Field("top_up", "Topped up", "oil, such as 8L, 2galus or 2galimp")
REPAIR = Field("repair", "Repair", "what was repaired")
DEFECT = Field("defect", "Defect", "a defect seen")

RIGHT = Answer("r", "it is right as it stands; older readings that do not fit it count no more", {"sure": True})
WENT_ROUND = Answer("g", "the dial went round to 0", {"rolled_over": True})
FIGURE_ANSWERS = (RIGHT, WENT_ROUND, Answer("n", "it is a new meter; write that down first", leads_to="swap"))


def _log_draft() -> "type[Draft]":
    from fleetcare.drafts.work import LogDraft

    return LogDraft


def _log(session: "Session", subject: Subject, draft: "LogDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.entering import enter_work, note_findings

    return note_findings(session, enter_work(session, draft, today, said.get("at")), today)


def _log_start(facts: "FormFacts", subject: Subject, on: date) -> Mapping[str, str]:
    return {"on": on.isoformat(), "task": subject.task}


def log_preset(line: "Understood") -> dict[str, str]:
    """Give what the form to log work is filled in with from an entry line."""
    return {
        name: "; ".join(map(str, value)) if isinstance(value, tuple) else str(value)
        for name, value in line.work().items()
        if value
    }


def _correction_draft() -> "type[Draft]":
    from fleetcare.drafts.work import CorrectionDraft

    return CorrectionDraft


def _correct(session: "Session", subject: Subject, draft: "CorrectionDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.entering import enter_correction

    return enter_correction(session, draft, today)


def _deferral_draft() -> "type[Draft]":
    from fleetcare.drafts.work import DeferralDraft

    return DeferralDraft


def _defer(session: "Session", subject: Subject, draft: "DeferralDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.entering import enter_deferral

    return enter_deferral(session, draft, today)


LOG = Form(
    "log",
    "Log work on {tag}",
    (
        TASKS,
        ON,
        AT,
        BY,
        PART_DONE,
        PART,
        TOP_UP,
        REPAIR,
        DEFECT,
        Field("follow_up", "Follow-up", "raise a follow-up from the defect; it stands in the due list", is_yes_no=True),
        Field("until", "… until", "last day for the follow-up; left empty it is due at once"),
        NOTE,
    ),
    _log_draft,
    _log,
    start=_log_start,
    answers=FIGURE_ANSWERS,
    is_entry=True,
)
CORRECT = Form(
    "correct",
    "Correct entry {entry} of {tag}",
    (TASKS, ON, AT, BY, PART_DONE, PART, TOP_UP, REPAIR, DEFECT, NOTE, WHY),
    _correction_draft,
    _correct,
    fixed=lambda subject, on: {"entry": subject.entry},
    start=lambda facts, subject, on: facts.typed,
    only_changes=True,
)
VOID = Form(
    "void",
    "Take back entry {entry} of {tag}: nothing of it is true",
    (WHY, BY),
    _correction_draft,
    _correct,
    fixed=lambda subject, on: {"entry": subject.entry, "void": True},
    start=lambda facts, subject, on: {},
)


def _advice(connection: "Connection", subject: Subject, on: date) -> Mapping[str, str]:
    """Give until when an oil is advised to stay in, and that in a sentence; nothing where there is no advice."""
    from fleetcare.operations.longer_drains import find_advice

    advice = find_advice(connection, subject.tag, subject.task, on)
    return {"until": "".join(str(advice.until).split()), "advised": advice.said} if advice is not None else {}


def _above_deferral(facts: "FormFacts") -> tuple[str, Sequence[str]]:
    said = facts.typed.get("advised")
    return ("Advised", (said,)) if said else ("", ())


DEFER = Form(
    "defer",
    "Put off {task} of {tag}",
    (
        Field("until", "Until", "a day, a dial figure such as 1500h, or both with ; between", several=True),
        Field(
            "as_advised",
            "As advised",
            "yes: until the figure up to which the oil is known to be sound; for supervisors",
            is_yes_no=True,
            fills="until",
        ),
        WHY,
        Field("by", "By", "who decides it", "people", kept_for_shift=True),
    ),
    _deferral_draft,
    _defer,
    is_on_task=True,
    fixed=lambda subject, on: {"tag": subject.tag, "task": subject.task, "on": on},
    start=lambda facts, subject, on: {},
    above=_above_deferral,
    typed=_advice,
)
