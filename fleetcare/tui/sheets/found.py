"""What the rules find on a sheet while it is typed, in the words every kind of sheet says it in."""

from collections.abc import Sequence
from typing import TYPE_CHECKING

from fleetcare.domain.sheets import Verdict

if TYPE_CHECKING:
    from fleetcare.operations.findings import EngineFinding

TONES = {Verdict.IN: "clear", Verdict.ALERT: "due", Verdict.ALARM: "overdue", Verdict.NOT_JUDGED: "quiet"}
"""The tone of a verdict."""


def say_found(findings: "Sequence[EngineFinding]") -> tuple[str, str]:
    """Name findings in a line, gravest first, with its tone."""
    if not findings:
        return ("nothing found so far", "quiet")
    words = [
        f"{one.row.severity} {one.row.cause}{f' at {one.row.subject}' * bool(one.finding.subject)}" for one in findings
    ]
    return (f"found: {'; '.join(words)}", TONES[Verdict(findings[0].row.severity)])


def tell_found(findings: "Sequence[EngineFinding]") -> Sequence[str]:
    """Tell findings whole, gravest first, each with what to do next; an empty line ends them."""
    told = [f"{one.row.severity.upper()} {one.row.explanation}. Next: {one.row.next_step}." for one in findings]
    return (*told, *([""] if told else []))
