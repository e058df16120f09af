"""Forms on what is there already: a nameplate, a task, the name of a site or a person."""

from collections.abc import Callable, Mapping
from datetime import date
from typing import TYPE_CHECKING, Any

from fleetcare.tui.forms.base import ON, Field, Form, Said, Subject
from fleetcare.tui.forms.fields_item import EDITED, START
from fleetcare.tui.forms.fields_task import RARER, USUAL

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session

    from fleetcare.drafts.items import ItemChanges, RenameDraft
    from fleetcare.drafts.reading_in import Draft
    from fleetcare.drafts.tasks import TaskChanges, TaskEnd
    from fleetcare.operations.entering import Entered
    from fleetcare.operations.form_facts import FormFacts


def _item_draft() -> "type[Draft]":
    from fleetcare.drafts.items import ItemChanges

    return ItemChanges


def _item_typed(connection: "Connection", subject: Subject, on: date) -> Mapping[str, str]:
    from fleetcare.operations.stored_items import item_as_typed

    return item_as_typed(connection, subject.tag)


def _edit_item(session: "Session", subject: Subject, draft: "ItemChanges", today: date, said: Said) -> "Entered":
    from fleetcare.operations.editing import enter_item_edit
    from fleetcare.operations.find import find_item

    changes = {name: getattr(draft, name) for name in draft.model_fields_set - {"tag"}}
    return enter_item_edit(session, find_item(session.connection(), subject.tag), changes, today)


def _task_draft() -> "type[Draft]":
    from fleetcare.drafts.tasks import TaskChanges

    return TaskChanges


def _task_typed(connection: "Connection", subject: Subject, on: date) -> Mapping[str, str]:
    from fleetcare.operations.stored_tasks import task_as_typed

    return task_as_typed(connection, subject.tag, subject.task, on)


def _edit_task(session: "Session", subject: Subject, draft: "TaskChanges", today: date, said: Said) -> "Entered":
    from fleetcare.operations.editing import enter_task_changes

    return enter_task_changes(session, subject.tag, draft, today)


def _end_draft() -> "type[Draft]":
    from fleetcare.drafts.tasks import TaskEnd

    return TaskEnd


def _end_task(session: "Session", subject: Subject, draft: "TaskEnd", today: date, said: Said) -> "Entered":
    from fleetcare.operations.editing import enter_task_end

    return enter_task_end(session, subject.tag, draft, today)


def _name_draft() -> "type[Draft]":
    from fleetcare.drafts.items import RenameDraft

    return RenameDraft


def _names(what: str) -> "Callable[[Session, Subject, RenameDraft, date, Said], Entered]":
    def store(session: "Session", subject: Subject, draft: "RenameDraft", today: date, said: Said) -> "Entered":
        from fleetcare.operations.editing import enter_person_name, enter_site_name

        return (enter_site_name if what == "site" else enter_person_name)(session, draft)

    return store


def _as_it_is(facts: "FormFacts", subject: Subject, on: date) -> Mapping[str, str]:
    return facts.typed


def _task_as_it_is(facts: "FormFacts", subject: Subject, on: date) -> Mapping[str, str]:
    return {**facts.typed, "on": on.isoformat()}


def _of_task(subject: Subject, on: date) -> dict[str, Any]:
    return {"name": subject.task, "on": on}


EDIT = Form(
    "edit",
    "Edit {tag}",
    EDITED,
    _item_draft,
    _edit_item,
    start=_as_it_is,
    typed=_item_typed,
    is_edit=True,
    together=frozenset(field.name for field in START),
)
TASK_EDIT = Form(
    "task-edit",
    "Change {task} of {tag}",
    (
        Field("on", "From", "first day of the change; what was done before is judged as it was"),
        *USUAL,
        *RARER,
    ),
    _task_draft,
    _edit_task,
    fixed=_of_task,
    start=_task_as_it_is,
    typed=_task_typed,
    is_on_task=True,
    is_edit=True,
    clears=frozenset(field.name for field in (*USUAL, *RARER)) - {"last_done"},
)
TASK_END = Form(
    "task-end",
    "End {task} of {tag}: its history stays",
    (ON,),
    _end_draft,
    _end_task,
    fixed=lambda subject, on: {"name": subject.task},
    is_on_task=True,
)
SITE_NAME = Form(
    "site-name",
    "Another name for a site",
    (
        Field("known", "Site", "the site as it is called now", "sites"),
        Field("name", "New name", "what it is called from now on, wherever it stands"),
    ),
    _name_draft,
    _names("site"),
    fixed=lambda subject, on: {},
    start=lambda facts, subject, on: {},
)
PERSON_NAME = Form(
    "person-name",
    "Another name for a person",
    (
        Field("known", "Person", "as they are called now", "people"),
        Field("name", "New name", "what they are called from now on, on all they ever wrote down"),
    ),
    _name_draft,
    _names("person"),
    fixed=lambda subject, on: {},
    start=lambda facts, subject, on: {},
)
