"""A finding with its id and state as the one flat row that table, CSV, JSON and screen show."""

from dataclasses import dataclass, fields
from datetime import date
from decimal import Decimal

from fleetcare.rules.explain_finding import say_figure, say_subject
from fleetcare.rules.finding_life import Answer, FindingState, Lived

_STATES = list(FindingState)


@dataclass(frozen=True, slots=True)
class FindingRecord:
    """A finding on a day, flat. Figures are in `unit`, and None where only a pattern speaks.

    `because` says what the state rests on; `working` and `evidence` have a part for each number and value.
    """

    id: str
    engine: str
    rule: str
    severity: str
    subject: str
    measured: Decimal | None
    unit: str
    limit: Decimal | None
    margin: Decimal | None
    since: date
    source: str
    explanation: str
    next_step: str
    state: str
    because: str
    cause: str
    working: str
    evidence: str
    caution: str
    due_by: date | None


FINDING_COLUMNS = tuple(field.name for field in fields(FindingRecord))
"""The columns of the list of findings, in order; scripts rely on it."""


def finding_record(lived: Lived) -> FindingRecord:
    """Flatten a finding on a day."""
    row = lived.row
    return FindingRecord(
        id=lived.life.id,
        engine=row.engine,
        rule=row.rule,
        severity=row.severity,
        subject=row.subject,
        measured=row.measured,
        unit=row.unit,
        limit=row.limit,
        margin=row.margin,
        since=row.since,
        source=row.source,
        explanation=row.explanation,
        next_step=row.next_step,
        state=lived.state,
        because=lived.because,
        cause=row.cause,
        working="; ".join(row.working),
        evidence="; ".join(row.evidence),
        caution=row.caution,
        due_by=row.due_by,
    )


def withdrawn_record(answer: Answer, engine: str) -> FindingRecord:
    """Flatten a finding that was answered and that rules no longer make: all that is left of it is the answer."""
    subject = say_subject(answer.subject)
    return FindingRecord(
        id=answer.finding,
        engine=engine,
        rule="",
        severity=answer.severity,
        subject=subject,
        measured=None,
        unit="",
        limit=None,
        margin=None,
        since=answer.on,
        source="",
        explanation=f"{answer.cause} at {subject}: the rules, or a corrected sheet, no longer make it a finding",
        next_step="",
        state=FindingState.WITHDRAWN,
        because=f"it was answered by {answer.by} on {answer.on}: {answer.why}",
        cause=answer.cause,
        working="",
        evidence="",
        caution="",
        due_by=None,
    )


def say_figures(record: FindingRecord) -> str:
    """Say the figure, its limit and by how much it passed that: "70.4 %, limit 75 %, margin -4.6 %"; empty for a pattern."""
    if record.measured is None or record.limit is None or record.margin is None:
        return ""
    measured, limit, margin = (say_figure(one, record.unit) for one in (record.measured, record.limit, record.margin))
    return f"{measured}, limit {limit}, margin {margin}"


def urgency(record: FindingRecord) -> tuple[object, ...]:
    """Order findings: those that want an answer first, graver before milder, then by engine, day and id."""
    state = _STATES.index(FindingState(record.state))
    return state, record.severity != "alarm", record.engine.casefold(), record.since, record.id
