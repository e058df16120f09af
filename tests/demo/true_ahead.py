"""What is really on its way in the demo fleet though its limit is not reached yet: stated here and not read off the program."""

from datetime import date
from decimal import Decimal
from pathlib import Path
from typing import NamedTuple

from fleetcare.context import Context
from fleetcare.domain.lines import DueLine, TriggerLine
from fleetcare.domain.measured import LASH
from fleetcare.domain.wear import Pull
from fleetcare.operations.due import Filters, due_lines
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.longer_drain import LongerDrain, longer_drain

Line = tuple[str, str]
"""The engine and the task of a line of the due list."""


class Ahead(NamedTuple):
    """What moves, by how much in 1000 h, and how many hours after its last work the limit is truly reached.

    `kind` is the sheet it stands on.
    """

    subject: str
    per_1000h: Decimal
    reached_after: Decimal
    kind: str


PULLED: dict[Line, Ahead] = {
    # Gas oil with much sulphur: of 10.5 mg KOH/g, 4.0 are used up in 100 h; 30 % of it, 3.15, is the alarm.
    ("WB-1P", "Oil and filter"): Ahead(
        "base number", Decimal(-40), (Decimal("10.5") - Decimal("3.15")) / 4 * 100, "oil"
    ),
    # A seat of cylinder 4: from 2220 kPa at the last test it falls 360 kPa in 1000 h; 75 % of the best, 2840, is the alarm.
    ("LE-1", "Compression test"): Ahead("cylinder 4", Decimal(-360), Decimal(2220 - 2130) / 360 * 1000, "compression"),
}

SOUND: Line = ("TR-3", "Oil and filter")
"""A tractor whose oil is changed at 250 h, though its base number, 1.2 lost in 100 h, is not at half of 10.5 before 437 h."""
SOUND_UNTIL = (Decimal("10.5") - Decimal("5.25")) / Decimal("1.2") * 100


def lines_of(path: Path, day: date, engine: str | None = None) -> dict[Line, tuple[DueLine, ItemFacts]]:
    """The lines of a file on a day, each with its facts."""
    with Context(str(path), day).read() as connection:
        found = due_lines(connection, day, Filters(engine=engine))
    return {(line.item.tag, line.task.name): (line, facts) for line, facts in found}


def pull_on(line: DueLine) -> tuple[TriggerLine, Pull] | None:
    """What pulls a line forward, with the trigger it pulls; of sheets other than those of the lash."""
    pulls = ((one, one.pull) for one in line.triggers if one.pull is not None and one.pull.wear.work != LASH)
    return next(pulls, None)


def called_early(path: Path, day: date) -> dict[Line, str]:
    """Which lines of a file are pulled forward by oil or compression on a day, and by what of it."""
    pulls = {name: pull_on(line) for name, (line, _) in lines_of(path, day).items()}
    return {name: found[1].wear.subject for name, found in pulls.items() if found is not None}


def advised_longer(path: Path, day: date) -> dict[Line, LongerDrain]:
    """Which drains of a file could wait on a day, and until when."""
    advice = {name: longer_drain(line, facts) for name, (line, facts) in lines_of(path, day).items()}
    return {name: found for name, found in advice.items() if isinstance(found, LongerDrain)}
