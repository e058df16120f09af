"""A finding as a flat row; apart from what writes its words, so that kept ones are read without loading that."""

from dataclasses import dataclass
from datetime import date
from decimal import Decimal


@dataclass(frozen=True, slots=True)
class FindingRow:
    """A finding, flat. Figures are those of its gravest signal, in `unit`, and None where only a pattern speaks.

    `explanation` says it in a sentence or two, `working` number by number, `evidence` value by value.
    """

    engine: str
    rule: str
    severity: str
    cause: str
    subject: str
    measured: Decimal | None
    unit: str
    limit: Decimal | None
    margin: Decimal | None
    since: date
    source: str
    explanation: str
    working: tuple[str, ...]
    evidence: tuple[str, ...]
    next_step: str
    caution: str
    due_by: date | None
