"""Enter the history of the demo fleet into a database of its own."""

from collections.abc import Iterable
from datetime import UTC, date, datetime, time
from itertools import count, groupby
from pathlib import Path
from tempfile import TemporaryDirectory
from typing import TYPE_CHECKING

from fleetcare.db.reading import copy
from fleetcare.db.session import writing
from fleetcare.demo.enter import enter, sheet_draft
from fleetcare.demo.history import history
from fleetcare.demo.steps import Step, Verb
from fleetcare.demo.yard_of import yard_of
from fleetcare.exchange.csv_out import csv_text, write_new
from fleetcare.operations.imports import read_import, store_import
from fleetcare.operations.judged import refresh
from fleetcare.operations.measure import measure_many
from fleetcare.operations.upkeep import refuse_taken

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

_EVENING = time(16, 30, tzinfo=UTC)
_CARDS = {
    Verb.CARD_READING: ("readings", ("engine", "on", "value")),
    Verb.CARD_WORK: ("log", ("engine", "on", "task", "at", "by", "note")),
}
"""What the card index comes in as: the kind of file, and its columns."""


class Stamps:
    """Moments and uids for the rows of a build: each entry of the evening of its day, uids counted from 1.

    With them the same history always makes the same rows.
    """

    def __init__(self) -> None:
        self.day = date.min
        self._numbers = count(1)

    def moment(self) -> datetime:
        """Give the evening of the day now being entered."""
        return datetime.combine(self.day, _EVENING)

    def uid(self) -> str:
        """Give the next uid."""
        return f"{next(self._numbers):032x}"


def build(out: Path, anchor: date, engines: int | None = None) -> None:
    """Write the demo fleet as it stands on the anchor day to the new file `out`; the same day gives the same rows.

    With `engines` it is a generated yard of so many. It is built in a place of its own and copied when whole, so that no half of one ever carries the name. Raises
    Refused where `out` is there already or the day leaves no room for a history, NoDatabase where it cannot be written.
    """
    refuse_taken(out)
    steps, stamps = history(anchor) if engines is None else history(anchor, yard_of(engines), changeover=0), Stamps()
    with TemporaryDirectory() as folder:
        path = Path(folder, "demo.db")
        with writing(path, stamps.moment, stamps.uid) as session:
            _enter(session, steps, stamps, Path(folder))
            session.flush()
            refresh(session.connection())  # whoever opens it first should not have to wait for its findings
        copy(path, out)


def _enter(session: "Session", steps: Iterable[Step], stamps: Stamps, folder: Path) -> None:
    stored: dict[str, int] = {}
    for (day, verb), same in groupby(steps, key=lambda step: (step.entered, step.verb)):
        stamps.day = day
        if verb in _CARDS:
            _import(session, verb, same, day, folder)
            continue
        if verb is Verb.SHEET:
            measure_many(session, [sheet_draft(step) for step in same], day)
            continue
        for step in same:
            number = enter(session, step, stored)
            if step.name and number is not None:
                stored[step.name] = number


def _import(session: "Session", verb: Verb, cards: Iterable[Step], day: date, folder: Path) -> None:
    kind, columns = _CARDS[verb]
    rows = [[_cell(card, column) for column in columns] for card in cards]
    file = read_import(kind, write_new(folder, f"{kind}.csv", csv_text(columns, rows)))
    store_import(session, kind, file, day)


def _cell(card: Step, column: str) -> object:
    if column == "engine":
        return card.tag
    if column == "on":
        return card.on
    value = card.values[column]
    return ";".join(map(str, value)) if isinstance(value, list) else value
