"""Forms on what is new: an engine, a machine, a task, the tasks of a schedule."""

from collections.abc import Mapping, Sequence
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.tui.forms.base import Field, Form, Said, Subject
from fleetcare.tui.forms.fields_item import CYLINDERS, FIRING_ORDER, FUEL, METER, NAME, SITE, START
from fleetcare.tui.forms.fields_task import RARER, USUAL

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session

    from fleetcare.drafts.items import ItemDraft
    from fleetcare.drafts.reading_in import Draft
    from fleetcare.drafts.schedules import ApplyDraft, ScheduleOut
    from fleetcare.drafts.tasks import TaskDraft
    from fleetcare.operations.entering import Entered
    from fleetcare.operations.form_facts import FormFacts


def _engine_draft() -> "type[Draft]":
    from fleetcare.drafts.items import EngineDraft

    return EngineDraft


def _add_item(session: "Session", subject: Subject, draft: "ItemDraft", today: date, said: Said) -> "Entered":
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


def _machine_draft() -> "type[Draft]":
    from fleetcare.drafts.items import MachineDraft

    return MachineDraft


def _preview(
    connection: "Connection", subject: Subject, values: Mapping[str, str], on: date
) -> tuple[str, Sequence[str]]:
    from fleetcare.operations.schedules import what_it_adds

    tasks, source = what_it_adds(connection, subject.tag, values["name"].strip())
    return f"WOULD ADD  {len(tasks)}", [*tasks, f"from {source}"]


def _out_draft() -> "type[Draft]":
    from fleetcare.drafts.schedules import ScheduleOut

    return ScheduleOut


def _write_out(session: "Session", subject: Subject, draft: "ScheduleOut", today: date, said: Said) -> "Entered":
    from fleetcare.operations.schedules_out import write_schedule

    return write_schedule(session.connection(), draft, today)


def _nothing(facts: "FormFacts", subject: Subject, on: date) -> Mapping[str, str]:
    return {}


TAG = Field("tag", "Tag", "the shop's tag, such as P-01")
ENGINE = Form(
    "engine",
    "Add an engine",
    (
        TAG,
        NAME,
        SITE,
        Field("machine", "In", "tag of the machine it is fitted in, if any", "machines"),
        METER,
        *START,
        FUEL,
        CYLINDERS,
        FIRING_ORDER,
    ),
    _engine_draft,
    _add_item,
    fixed=lambda subject, on: {},
    start=_nothing,
)
MACHINE = Form(
    "machine",
    "Add a machine: what engines are fitted in",
    (TAG, NAME, SITE, METER, *START),
    _machine_draft,
    _add_item,
    fixed=lambda subject, on: {},
    start=_nothing,
)
TASK = Form(
    "task",
    "Add a task to {tag}",
    (Field("name", "Task", "a short name, such as Oil and filter"), *USUAL, *RARER),
    _task_draft,
    _add_task,
    fixed=lambda subject, on: {},
    start=_nothing,
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
            option="from",
        ),
    ),
    _apply_draft,
    _apply,
    fixed=lambda subject, on: {},
    start=_nothing,
    preview=_preview,
)
SCHEDULE_OUT = Form(
    "schedule-out",
    "Write the tasks of {tag} down as a schedule of your own",
    (
        Field("name", "Name", "what it is called, such as Our sluice pumps"),
        Field("source", "Source", "where its intervals come from, such as the maker's manual and its edition"),
        Field("file", "File", "such as our-pumps.toml; one of the same name is written over"),
    ),
    _out_draft,
    _write_out,
    start=_nothing,
)
