"""How many findings want an answer: what a morning begins with, beside what is due."""

from collections.abc import Collection, Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.errors import Refused
from fleetcare.operations.find import engines_in_use
from fleetcare.operations.rows import fetch

if TYPE_CHECKING:
    from sqlalchemy import Connection

    from fleetcare.operations.judged import Progress
    from fleetcare.rules.finding_life import FindingLife


@dataclass(frozen=True, slots=True)
class OpenFindings:
    """The findings of a day nobody has answered, by how grave they are, and the engines that have an alarm among them."""

    alarms: int
    alerts: int
    alarmed: frozenset[str] = frozenset()


def is_measured(connection: "Connection") -> bool:
    """Tell whether anything was ever measured, so that there may be findings."""
    return bool(fetch(connection, "select 1 from sheet limit 1"))


def open_findings(
    connection: "Connection", on: date, progress: "Progress | None" = None, tags: Collection[str] | None = None
) -> OpenFindings | None:
    """Count the findings of a day that want an answer; None where the shop's rules do not let them be told.

    With `tags` those of these engines alone. Where engines have to be judged anew `progress` is told. What reads and judges findings is loaded only as far as there
    is something to read, or to judge anew.
    """
    if not is_measured(connection):
        return OpenFindings(0, 0)
    from fleetcare.domain.severity import Severity
    from fleetcare.operations.finding_answers import load_answers
    from fleetcare.rules.finding_life import FindingState, live

    try:
        lives = _lives(connection, on, progress)
    except Refused:
        return None
    answers = load_answers(connection)
    found = [
        (tag, lived.row.severity)
        for item, tag in engines_in_use(connection, on).items()
        for lived in live(lives.get(item, ()), answers.get(item, ()), on)
        if lived.state is FindingState.OPEN and (tags is None or tag in tags)
    ]
    alarmed = [tag for tag, severity in found if severity == Severity.ALARM]
    return OpenFindings(len(alarmed), len(found) - len(alarmed), frozenset(alarmed))


def _lives(connection: "Connection", on: date, progress: "Progress | None") -> "Mapping[int, Sequence[FindingLife]]":
    """Give the findings of all engines: what is kept where that holds, else judged anew."""
    from fleetcare.operations.kept_lives import kept_lives

    kept = kept_lives(connection, on)
    if kept is not None:
        return kept
    from fleetcare.operations.judged import finding_lives_on  # takes longer to load than the due list

    return finding_lives_on(connection, on, progress)


def say_open(found: OpenFindings | None) -> str:
    """Say how many want an answer: "3 findings want an answer: 1 alarm, 2 alerts"; empty where none does."""
    if found is None:
        return "Which findings want an answer cannot be told"
    count = found.alarms + found.alerts
    told = [f"{number} {word}{'s' * (number > 1)}" for number, word in _by_gravity(found) if number]
    return f"{count} finding{' wants' if count == 1 else 's want'} an answer: {', '.join(told)}" if told else ""


def _by_gravity(found: OpenFindings) -> tuple[tuple[int, str], ...]:
    return (found.alarms, "alarm"), (found.alerts, "alert")
