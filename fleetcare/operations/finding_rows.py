"""The findings of the shop on a day, each with its id, its state and its whole working, as flat rows."""

from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.exchange.csv_out import csv_text
from fleetcare.operations.find import engines_in_use, find_item
from fleetcare.operations.finding_answers import load_answers
from fleetcare.operations.judged import Lives, Progress, finding_lives_on
from fleetcare.rules.explain_finding import say_figure
from fleetcare.rules.finding_life import Answer, FindingState, Lived, live, withdrawn
from fleetcare.rules.finding_record import (
    FINDING_COLUMNS,
    FindingRecord,
    finding_record,
    say_figures,
    urgency,
    withdrawn_record,
)

if TYPE_CHECKING:
    from collections.abc import Iterable

    from sqlalchemy import Connection

__all__ = [
    "FINDING_COLUMNS",
    "FindingRecord",
    "FoundFinding",
    "finding_rows",
    "findings_csv",
    "found_findings",
    "rows_of",
    "say_figure",
    "say_figures",
]


@dataclass(frozen=True, slots=True)
class FoundFinding:
    """A finding with whose it is."""

    item_id: int
    tag: str
    lived: Lived


def finding_rows(
    connection: "Connection",
    on: date,
    *,
    engine: str | None = None,
    only_open: bool = False,
    progress: Progress | None = None,
) -> list[FindingRecord]:
    """Give the findings of a day, those that want an answer first; refuses an unknown engine.

    Those of engines withdrawn by then are left out.
    """
    tag = find_item(connection, engine, on=on).tag if engine is not None else None
    rows = rows_of(connection, finding_lives_on(connection, on, progress), on)
    return [
        row for row in rows if (tag is None or row.engine == tag) and (not only_open or row.state == FindingState.OPEN)
    ]


def rows_of(connection: "Connection", lives: Lives, on: date) -> list[FindingRecord]:
    """Give the findings of a day from their lives, those that want an answer first."""
    tags, answers = engines_in_use(connection, on), load_answers(connection)
    rows = [finding_record(one.lived) for one in _found(tags, lives, answers, on)]
    rows += [
        withdrawn_record(answer, tag)
        for item, tag in tags.items()
        for answer in withdrawn(lives.get(item, ()), answers.get(item, ()), on)
    ]
    return sorted(rows, key=urgency)


def found_findings(connection: "Connection", on: date) -> list[FoundFinding]:
    """Give the findings of a day as rules know them, of all engines in use."""
    return _found(engines_in_use(connection, on), finding_lives_on(connection, on), load_answers(connection), on)


def findings_csv(rows: "Iterable[FindingRecord]") -> str:
    """Give rows as CSV, in their order, every column."""
    return csv_text(FINDING_COLUMNS, [[getattr(row, name) for name in FINDING_COLUMNS] for row in rows])


def _found(tags: dict[int, str], lives: Lives, answers: dict[int, list[Answer]], on: date) -> list[FoundFinding]:
    return [
        FoundFinding(item, tag, lived)
        for item, tag in tags.items()
        for lived in live(lives.get(item, ()), answers.get(item, ()), on)
    ]
