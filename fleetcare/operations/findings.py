"""The findings of engines: the rule book held against their sheets, each finding with an id and a state, as flat rows."""

from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.findings import Finding
from fleetcare.domain.rule_book import RuleBook
from fleetcare.operations.entries import first_entries
from fleetcare.operations.finding_answers import load_answers
from fleetcare.operations.judged import judge_lives
from fleetcare.operations.measured import EngineSheets
from fleetcare.rules.explain_finding import finding_row
from fleetcare.rules.finding_life import FindingState, Lived, live
from fleetcare.rules.finding_row import FindingRow
from fleetcare.rules.judge_engine import JudgedEngine, judge_engine
from fleetcare.rules.judge_history import Judging

if TYPE_CHECKING:
    from sqlalchemy import Connection

Cause = tuple[str, str]
"""What a finding is known by on an engine: its cause and its subject."""


@dataclass(frozen=True, slots=True)
class EngineFinding:
    """A finding of an engine: its id, which is that of the sheet it began on, its state, the finding and its row."""

    id: str
    state: str
    finding: Finding
    row: FindingRow

    @property
    def sheets(self) -> frozenset[int]:
        """The entries of the sheets its evidence stands on."""
        return frozenset(value.sheet for value in self.finding.evidence)


def judge_sheets(found: EngineSheets, book: RuleBook) -> JudgedEngine:
    """Judge an engine by its newest sheet of each kind."""
    return judge_engine(found.sheets, found.engine, book, found.background)


def engine_findings(judged: JudgedEngine, known: Mapping[Cause, Lived] | None = None) -> tuple[EngineFinding, ...]:
    """Give the findings of an engine, gravest first, each as it is shown; those `known` by cause and subject go on."""
    return tuple(_shown(one, (known or {}).get((one.cause, one.subject))) for one in judged.findings)


def known_findings(connection: "Connection", found: EngineSheets, book: RuleBook, on: date) -> dict[Cause, Lived]:
    """Give the findings of an engine as its sheets and the answers up to a day left them, by cause and subject."""
    answers = load_answers(connection).get(found.item_id, ())
    lived = live(judge_lives(found, Judging(book), first_entries(connection)), answers, on)
    return {(one.life.cause, one.life.subject): one for one in lived if one.life.end is None}


def _shown(finding: Finding, known: Lived | None) -> EngineFinding:
    row = finding_row(finding)
    if known is None:
        return EngineFinding(_id(finding), FindingState.OPEN, finding, row)
    return EngineFinding(known.life.id, known.state, finding, row)


def _id(finding: Finding) -> str:
    """Name a finding by the newest sheet of the rule that leads it, and its subject."""
    lead = finding.lead
    entry = max(value.sheet for value in lead.flagged or lead.used)
    return "-".join(part for part in (str(entry), finding.rule, finding.subject) if part)
