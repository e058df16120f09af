"""The findings of engines: the rule book held against their sheets, each finding with an id and a state, as flat rows."""

from dataclasses import dataclass
from functools import cache

from fleetcare.domain.findings import Finding
from fleetcare.domain.rule_book import RuleBook
from fleetcare.operations.measured import EngineSheets
from fleetcare.rulebook.rules import rule_book
from fleetcare.rules.explain_finding import FindingRow, finding_row
from fleetcare.rules.judge_engine import JudgedEngine, judge_engine

OPEN = "open"


@dataclass(frozen=True, slots=True)
class EngineFinding:
    """A finding of an engine: its id, which stays while its first sheet leads it, its state, the finding and its row."""

    id: str
    state: str
    finding: Finding
    row: FindingRow

    @property
    def sheets(self) -> frozenset[int]:
        """The entries of the sheets its evidence stands on."""
        return frozenset(value.sheet for value in self.finding.evidence)


@cache
def book_in_force() -> RuleBook:
    """Give the rules that hold for the shop."""
    return rule_book()


def judge_sheets(found: EngineSheets, book: RuleBook) -> JudgedEngine:
    """Judge an engine by its newest sheet of each kind."""
    return judge_engine(found.sheets, found.engine, book, found.background)


def engine_findings(judged: JudgedEngine) -> tuple[EngineFinding, ...]:
    """Give the findings of an engine, gravest first, each as it is shown."""
    return tuple(EngineFinding(_id(one), OPEN, one, finding_row(one)) for one in judged.findings)


def _id(finding: Finding) -> str:
    """Name a finding by the sheet and the rule that lead it, and its subject."""
    lead = finding.lead
    entry = max(value.sheet for value in lead.flagged or lead.used)
    return "-".join(part for part in (str(entry), finding.rule, finding.subject) if part)
