"""How many findings want an answer: what a morning begins with, beside what is due."""

from dataclasses import dataclass
from typing import TYPE_CHECKING

from fleetcare.errors import Refused
from fleetcare.operations.rows import fetch

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class OpenFindings:
    """The findings of a day nobody has answered, by how grave they are, and the engines that have an alarm among them."""

    alarms: int
    alerts: int
    alarmed: frozenset[str] = frozenset()


def is_measured(connection: "Connection") -> bool:
    """Tell whether anything was ever measured, so that there may be findings."""
    return bool(fetch(connection, "select 1 from sheet limit 1"))


def open_findings(connection: "Connection", on: "date") -> OpenFindings | None:
    """Count the findings of a day that want an answer; None where the shop's rules do not let them be told.

    What does the judging is loaded only where something was measured.
    """
    if not is_measured(connection):
        return OpenFindings(0, 0)
    from fleetcare.domain.rule_book import Severity
    from fleetcare.operations.finding_rows import found_findings
    from fleetcare.rules.finding_life import FindingState

    try:
        found = [one for one in found_findings(connection, on) if one.lived.state is FindingState.OPEN]
    except Refused:
        return None
    alarmed = [one.tag for one in found if one.lived.row.severity == Severity.ALARM]
    return OpenFindings(len(alarmed), len(found) - len(alarmed), frozenset(alarmed))


def say_open(found: OpenFindings | None) -> str:
    """Say how many want an answer: "3 findings want an answer: 1 alarm, 2 alerts"; empty where none does."""
    if found is None:
        return "Which findings want an answer cannot be told"
    count = found.alarms + found.alerts
    told = [f"{number} {word}{'s' * (number > 1)}" for number, word in _by_gravity(found) if number]
    return f"{count} finding{' wants' if count == 1 else 's want'} an answer: {', '.join(told)}" if told else ""


def _by_gravity(found: OpenFindings) -> tuple[tuple[int, str], ...]:
    return (found.alarms, "alarm"), (found.alerts, "alert")
