"""What rules make of measurements: signals, each one rule's verdict, and findings, each one cause on one engine.

Neither holds a sentence: words are made of them late, in rules/explain_finding.py.
"""

from dataclasses import dataclass
from datetime import date
from decimal import Decimal

from fleetcare.domain.rule_book import End, Rule, Severity, worst
from fleetcare.domain.sheets import Phase


@dataclass(frozen=True, slots=True, order=True)
class Evidence:
    """A value something rests on: the sheet it stands on by its entry, what and where it is, and as it was entered."""

    on: date
    sheet: int
    quantity: str
    point: str
    phase: Phase
    value: str
    unit: str


@dataclass(frozen=True, slots=True)
class Step:
    """A number of the working, with its label and unit."""

    label: str
    value: Decimal
    unit: str = ""


@dataclass(frozen=True, slots=True)
class Signal:
    """One rule's verdict on one value, or on a set of them.

    `subject` is the point, empty for the whole engine. `measured` and `limit` are in `unit`, the rule's; `margin` is how
    far inside the limit the figure lies, so below 0, or 0 where reaching it is enough; all three are None for a pattern.
    `flagged` are the values called out, `used` all the others it was worked from. `on` is the day of the sheet judged,
    `due_by` the last day of the next step where the rule sets one.
    """

    rule: Rule
    severity: Severity
    subject: str
    on: date
    flagged: tuple[Evidence, ...]
    used: tuple[Evidence, ...] = ()
    end: End | None = None
    measured: Decimal | None = None
    limit: Decimal | None = None
    margin: Decimal | None = None
    unit: str = ""
    steps: tuple[Step, ...] = ()
    since: date | None = None
    due_by: date | None = None


@dataclass(frozen=True, slots=True)
class NotJudged:
    """Why a rule that applies says nothing of a value or a sheet."""

    rule: Rule
    subject: str
    why: str


@dataclass(frozen=True, slots=True)
class Finding:
    """One cause on one engine. The first signal leads: it names the cause; all are evidence.

    A finding is the same one from sheet to sheet while engine, cause and subject are the same and a point it rests on is.
    """

    engine: str
    subject: str
    signals: tuple[Signal, ...]

    @property
    def lead(self) -> Signal:
        """The signal that names the cause."""
        return self.signals[0]

    @property
    def rule(self) -> str:
        """The id of the rule that names the cause."""
        return self.lead.rule.id

    @property
    def cause(self) -> str:
        """The cause, in words."""
        return self.lead.rule.cause

    @property
    def severity(self) -> Severity:
        """The gravest of its evidence."""
        return worst(signal.severity for signal in self.signals)

    @property
    def since(self) -> date:
        """The first day any of its evidence was seen, without a break since."""
        return min(signal.since or signal.on for signal in self.signals)

    @property
    def figure(self) -> Signal:
        """The gravest signal that has a figure and a limit, else the lead."""
        figures = [signal for signal in self.signals if signal.measured is not None]
        return min(figures, key=lambda signal: signal.severity is not Severity.ALARM) if figures else self.lead

    @property
    def due_by(self) -> date | None:
        """The earliest day one of its rules sets for the next step."""
        return min((signal.due_by for signal in self.signals if signal.due_by), default=None)

    @property
    def evidence(self) -> tuple[Evidence, ...]:
        """The flagged values, oldest first; each is evidence of no other finding."""
        return tuple(sorted({value for signal in self.signals for value in signal.flagged}))
