"""Answers to findings, as stored: what was decided, and what became of the follow-ups raised."""

from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.severity import Severity
from fleetcare.operations.entries import first_entries, first_of
from fleetcare.operations.rows import day, fetch, known_day
from fleetcare.rules.finding_life import Answer, AnswerKind, At

if TYPE_CHECKING:
    from sqlalchemy import Connection

_ANSWERS = (
    'select answer.item_id, answer.id, finding, cause, subject, severity, answer.kind, answer.why, person.name, answer."on",'
    ' call_id, call.task_id, call."on", call.entry_id, task.removed_on from finding_answer answer'
    " join person on person.id = answer.person_id left join task_call call on call.id = call_id"
    " left join task on task.id = call.task_id order by answer.id"
)
_DONE = (
    'select task_id, entry."on", entry.id from log_task join log_entry entry on entry.id = log_task.entry_id'
    " where task_id in :tasks and not part_done and not entry.is_void"
    " and not exists (select 1 from log_entry later where later.supersedes_id = entry.id)"
)


def load_answers(connection: "Connection") -> dict[int, list[Answer]]:
    """Load every answer, by engine. One whose follow-up was taken back with the entry that raised it counts no more."""
    rows = fetch(connection, _ANSWERS)
    if not rows:
        return {}
    firsts = first_entries(connection)
    voided = {first_of(firsts, row[0]) for row in fetch(connection, "select id from log_entry where is_void")}
    done: dict[int, list[At]] = {}
    for task, on, entry in fetch(connection, _DONE, tasks=[row[11] for row in rows if row[11] is not None]):
        done.setdefault(task, []).append(At(known_day(on), first_of(firsts, entry)))
    answers: dict[int, list[Answer]] = {}
    for item, number, finding, cause, subject, severity, kind, why, by, on, call, task, raised, entry, removed in rows:
        if call is not None and first_of(firsts, entry) in voided:
            continue
        answer = Answer(
            number=number,
            finding=finding,
            cause=cause,
            subject=subject,
            severity=Severity(severity),
            kind=AnswerKind(kind),
            why=why,
            by=by,
            on=known_day(on),
            done=_first_since(done.get(task, ()), day(raised)),
            removed_on=day(removed),
        )
        answers.setdefault(item, []).append(answer)
    return answers


def _first_since(done: "list[At] | tuple[()]", raised: date | None) -> At | None:
    """Give when a task was done first since a day, as the due list takes a call to be answered."""
    return min((at for at in done if raised is not None and at.on >= raised), default=None)
