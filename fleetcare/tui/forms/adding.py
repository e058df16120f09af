"""Forms on what is new: an engine, a task, the tasks of a schedule."""

from datetime import date
from typing import TYPE_CHECKING

from fleetcare.tui.forms.base import Field, Form, Said, Subject

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

    from fleetcare.drafts.items import EngineDraft
    from fleetcare.drafts.reading_in import Draft
    from fleetcare.drafts.schedules import ApplyDraft
    from fleetcare.drafts.tasks import TaskDraft
    from fleetcare.operations.entering import Entered


def _engine_draft() -> "type[Draft]":
    from fleetcare.drafts.items import EngineDraft

    return EngineDraft


def _add_engine(session: "Session", subject: Subject, draft: "EngineDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.adding import enter_item

    return enter_item(session, draft, today)


def _task_draft() -> "type[Draft]":
    from fleetcare.drafts.tasks import TaskDraft

    return TaskDraft


def _add_task(session: "Session", subject: Subject, draft: "TaskDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.adding import enter_task

    return enter_task(session, subject.tag, draft, today)


def _apply_draft() -> "type[Draft]":
    from fleetcare.drafts.schedules import ApplyDraft

    return ApplyDraft


def _apply(session: "Session", subject: Subject, draft: "ApplyDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.adding import enter_schedule
    from fleetcare.rulebook.schedules import find_schedule

    (entered,) = enter_schedule(session, find_schedule(draft.name), [subject.tag], draft, today)
    entered.moved.clear()  # the new lines stand in the list below; what is said has three lines at the foot
    return entered


ENGINE = Form(
    "engine",
    "Add an engine",
    (
        Field("tag", "Tag", "the shop's tag, such as P-01"),
        Field("name", "Name", "what people call it"),
        Field("site", "Site", "where it stands", "sites"),
        Field("machine", "In", "tag of the machine it is fitted in, if any", "machines"),
        Field("meter", "Meter", "hours, distance, fuel or starts; distance:mi for miles", "meter kinds", several=True),
        Field("in_service", "In service", "its first day here, year-month-day"),
        Field("start_at", "Starts at", "what the dial showed on that day, such as 0 or 1875h", several=True),
        Field("as_new", "As new", "new or overhauled: every task counts from that day and figure", is_yes_no=True),
        Field("fuel", "Fuel", "such as diesel", "fuels"),
        Field("cylinders", "Cylinders", "how many"),
        Field("firing_order", "Firing order", "such as 1-5-3-6-2-4"),
    ),
    _engine_draft,
    _add_engine,
    fixed=lambda subject, on: {},
    start=lambda facts, subject, on: {},
)
TASK = Form(
    "task",
    "Add a task to {tag}",
    (
        Field("name", "Task", "a short name, such as Oil and filter"),
        Field("every", "Every", "how often, such as 250h; 12mo", several=True),
        Field("first", "First", "the first interval, where it is another, such as 50h", several=True),
        Field(
            "ahead", "Near from", "how long before it counts as near; left empty a tenth of the interval", several=True
        ),
        Field("grace", "Grace", "what it may run over, such as 10h", several=True),
        Field("last_done", "Last done", "the day, the dial figure, or both, such as 2026-01-15; 900h", several=True),
        Field("work", "Kind of work", "such as drain, filter, lash, inspection"),
        Field("part", "Parts", "parts it takes, such as Oil filter:1", "parts", several=True),
        Field("source", "Source", "where this interval stands"),
    ),
    _task_draft,
    _add_task,
    fixed=lambda subject, on: {},
    start=lambda facts, subject, on: {},
)
SCHEDULE = Form(
    "schedule",
    "Give {tag} the tasks of a schedule",
    (
        Field("name", "Schedule", "its name, or a file of your own", "schedules"),
        Field(
            "counts_from",
            "Count from",
            "start, unset, or when last done: 2026-02-10; 760h; of a new engine nothing",
            several=True,
        ),
    ),
    _apply_draft,
    _apply,
    fixed=lambda subject, on: {},
    start=lambda facts, subject, on: {},
)
