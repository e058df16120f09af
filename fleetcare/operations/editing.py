"""What is there already and changes, stored and said: a nameplate, a task, the name of a site or a person."""

from collections.abc import Callable, Mapping, Sequence
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.quantities import Kind
from fleetcare.drafts.items import EngineDraft, MachineDraft, RenameDraft
from fleetcare.drafts.reading_in import as_option, read_draft
from fleetcare.drafts.tasks import TaskChanges, TaskEnd
from fleetcare.errors import Refused
from fleetcare.operations.due import watch_moves
from fleetcare.operations.entering import Entered
from fleetcare.operations.find import FoundItem, find_item
from fleetcare.operations.items import edit_item, stored_draft
from fleetcare.operations.listing import pausing_tasks
from fleetcare.operations.names import rename_person, rename_site
from fleetcare.operations.stored_words import moved_words, pausing_words
from fleetcare.operations.tasks import edit_task, remove_task, restate_task

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


def enter_item_edit(session: "Session", item: FoundItem, changes: Mapping[str, object], today: date) -> Entered:
    """Change what is given of an engine or machine, by the names of its draft; what is not given stays.

    Refuses to change nothing, and what cannot stand beside what stays.
    """
    if not changes:
        raise Refused("nothing to edit", "give what should change")
    whole = {**stored_draft(session, item), **changes, "tag": item.tag}
    draft = read_draft(EngineDraft if item.is_engine else MachineDraft, whole, as_option)
    with watch_moves(session, item.tag, today) as moves:
        edit_item(session, item, draft, today)
    return Entered([f"{item.tag} edited."], [*moved_words(moves.moved)])


def enter_task_edit(
    session: "Session",
    tag: str,
    name: str,
    changes: Mapping[str, object],
    without: Sequence[Kind],
    on: date,
    today: date,
) -> Entered:
    """Change what is given of a task from a day on, an interval in the place of the one of its kind."""
    item = find_item(session.connection(), tag)
    return _changed(
        session, item, changes, on, today, lambda: edit_task(session, item, name, changes, without, on, today)
    )


def enter_task_changes(session: "Session", tag: str, draft: TaskChanges, today: date) -> Entered:
    """Let what a draft gives stand in a task from a day on, lists whole, and take away what it clears."""
    item = find_item(session.connection(), tag)
    given = draft.model_fields_set - {"name", "on", "cleared"}
    values = {**{field: getattr(draft, field) for field in given}, **dict.fromkeys(draft.cleared)}
    return _changed(
        session, item, values, draft.on, today, lambda: restate_task(session, item, draft.name, values, draft.on, today)
    )


def _changed(
    session: "Session",
    item: FoundItem,
    values: Mapping[str, object],
    on: date,
    today: date,
    change: Callable[[], str],
) -> Entered:
    """Change a task, and say from when; of one that now pauses while laid up, what does not."""
    with watch_moves(session, item.tag, today) as moves:
        name = change()
    from_on = "" if values.keys() == {"last_done"} else f" from {on}"
    pauses = values.get("pause_while_laid_up") and name in pausing_tasks(session.connection(), item.tag, today)
    said = [f"{name} of {item.tag} changed{from_on}.", *([pausing_words(name)] if pauses else [])]
    return Entered(said, [*moved_words(moves.moved)])


def enter_task_end(session: "Session", tag: str, draft: TaskEnd, today: date) -> Entered:
    """End a task from a day on."""
    item = find_item(session.connection(), tag)
    with watch_moves(session, item.tag, today) as moves:
        name = remove_task(session, item, draft.name, draft.on, today)
    return Entered([f"{name} of {item.tag} ended on {draft.on}; its history stays."], [*moved_words(moves.moved)])


def enter_site_name(session: "Session", draft: RenameDraft) -> Entered:
    """Give a site another name, wherever it stands."""
    return Entered([f"{rename_site(session, draft.known, draft.name)} is called {draft.name} now."])


def enter_person_name(session: "Session", draft: RenameDraft) -> Entered:
    """Give a person another name, on all that person ever wrote down."""
    return Entered([f"{rename_person(session, draft.known, draft.name)} is called {draft.name} now."])
