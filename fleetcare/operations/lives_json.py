"""Findings with their lives as JSON text and back, figures and days exact."""

import hashlib
import json
from dataclasses import astuple, fields
from datetime import date
from decimal import Decimal
from typing import Any

from fleetcare.operations.wears_json import WEARS_FORM
from fleetcare.rules.finding_life import At, End, FindingLife, Stand
from fleetcare.rules.finding_row import FindingRow

FORM = ",".join(field.name for field in fields(FindingRow))
"""What a row is made of: text of another form is of another program."""


def kept_under(book: str) -> str:
    """Give what tells rows that hold by the rules of a digest from any others: those rules, and the form rows have."""
    return hashlib.sha256("\0".join((FORM, WEARS_FORM, book)).encode()).hexdigest()


def lives_text(lives: tuple[FindingLife, ...]) -> str:
    """Write lives as JSON."""
    return json.dumps([_life(life) for life in lives], ensure_ascii=False, separators=(",", ":"), default=_plain)


def lives_of(text: str) -> tuple[FindingLife, ...]:
    """Read lives from what `lives_text` wrote."""
    return tuple(_read_life(*life) for life in json.loads(text, object_hook=_exact))


def _life(life: FindingLife) -> list[Any]:
    stands = [[stand.at.on, stand.at.entry, stand.is_seen, astuple(stand.row)] for stand in life.stands]
    end = [life.end.at.on, life.end.at.entry, life.end.joined] if life.end else None
    return [life.id, life.cause, life.subject, stands, end]


def _read_life(name: str, cause: str, subject: str, stands: list[Any], end: list[Any] | None) -> FindingLife:
    return FindingLife(
        name,
        cause,
        subject,
        tuple(Stand(At(on, entry), _read_row(row), is_seen) for on, entry, is_seen, row in stands),
        End(At(end[0], end[1]), end[2]) if end else None,
    )


def _read_row(values: list[Any]) -> FindingRow:
    cells: list[Any] = [tuple(value) if isinstance(value, list) else value for value in values]
    return FindingRow(*cells)


def _plain(value: object) -> dict[str, str]:
    if isinstance(value, date):
        return {"day": value.isoformat()}
    assert isinstance(value, Decimal)
    return {"figure": str(value)}


def _exact(value: dict[str, str]) -> date | Decimal:
    return date.fromisoformat(value["day"]) if "day" in value else Decimal(value["figure"])
