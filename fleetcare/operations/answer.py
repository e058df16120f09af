"""Answer a finding: accept it with a reason, or raise a follow-up, which the due list then shows."""

from datetime import date
from difflib import get_close_matches
from typing import TYPE_CHECKING

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import FindingAnswer, TaskCall
from fleetcare.domain.rule_book import Severity
from fleetcare.drafts.findings import AnswerDraft
from fleetcare.drafts.work import LogDraft
from fleetcare.errors import Refused
from fleetcare.operations.due import watch_moves
from fleetcare.operations.entering import Entered
from fleetcare.operations.finding_rows import FoundFinding, found_findings
from fleetcare.operations.log import Logged, record_work
from fleetcare.operations.names import person_id
from fleetcare.operations.stored_words import moved_words
from fleetcare.rules.explain_finding import say_subject
from fleetcare.rules.finding_life import AnswerKind, FindingState

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

_OVER = (FindingState.CLEARED, FindingState.JOINED)


def enter_answer(session: "Session", draft: AnswerDraft, today: date) -> Entered:
    """Store what somebody decides about a finding, and say what came of it.

    Refuses an unknown finding, one that is over, and a second follow-up while one waits.
    """
    found = _find(session, draft.finding, today)
    lived = found.lived
    if lived.state in _OVER:
        raise Refused(f"finding {lived.life.id} is {lived.because}", "there is nothing left to answer")
    if draft.accept:
        _store(session, draft, found, AnswerKind.ACCEPT)
        said = f"Finding {lived.life.id} of {found.tag} accepted as {lived.row.severity} by {draft.by}: {draft.why}"
        return Entered([said], notes=[f"It opens again should a later sheet find it graver than {lived.row.severity}."])
    if lived.state is FindingState.FOLLOW_UP:
        raise Refused(f"finding {lived.life.id} has a follow-up: {lived.because}", "do that, or accept the finding")
    with watch_moves(session, found.tag, today) as moves:
        logged = _raise(session, draft, found, today)
    raised = f"Follow-up of finding {lived.life.id} of {found.tag} raised: {', '.join(logged.raised)}."
    return Entered([raised], [*moved_words(moves.moved)], _deadline(found, today))


def _find(session: "Session", name: str, on: date) -> FoundFinding:
    known = {one.lived.life.id: one for one in found_findings(session.connection(), on)}
    if name not in known:
        near = get_close_matches(name, known, n=3)
        remedy = f"did you mean {' or '.join(near)}?" if near else "see fleetcare findings for their ids"
        raise Refused(f"there is no finding {name!r}", remedy)
    return known[name]


def _raise(session: "Session", draft: AnswerDraft, found: FoundFinding, today: date) -> Logged:
    """Write the finding down as a defect with a follow-up, due on the last day its rule sets, and answer it with that."""
    life, due_by = found.lived.life, found.lived.row.due_by
    title = f"{life.cause}, {say_subject(life.subject)}" if life.subject else life.cause
    defect = LogDraft(
        tag=found.tag,
        on=today,
        by=draft.by,
        note=f"finding {life.id}: {draft.why}",
        defect=f"{title[0].upper()}{title[1:]}",
        follow_up=True,
        until=max(due_by, today) if due_by else None,
    )
    logged = record_work(session, defect, today)
    entries = [number for number, _ in logged.entries]
    call = session.scalars(select(TaskCall).where(col(TaskCall.entry_id).in_(entries))).one()
    _store(session, draft, found, AnswerKind.FOLLOW_UP, call.id)
    return logged


def _store(
    session: "Session", draft: AnswerDraft, found: FoundFinding, kind: AnswerKind, call_id: int | None = None
) -> None:
    session.add(
        FindingAnswer(
            item_id=found.item_id,
            finding=found.lived.life.id,
            cause=found.lived.life.cause,
            subject=found.lived.life.subject,
            severity=Severity(found.lived.row.severity),
            kind=kind,
            why=draft.why,
            person_id=person_id(session, draft.by) or 0,
            on=draft.on,
            call_id=call_id,
        )
    )
    session.flush()


def _deadline(found: FoundFinding, today: date) -> list[str]:
    due_by = found.lived.row.due_by
    if due_by is None:
        return []
    passed = ", which has passed" if due_by < today else ""
    return [f"Its rule sets {due_by} as the last day{passed}."]
