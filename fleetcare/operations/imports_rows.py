"""What the kinds of import share: rows as drafts, what is wrong with them, and figures held against the past."""

import re
from collections.abc import Callable, Sequence
from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal
from functools import cached_property
from itertools import chain
from typing import TYPE_CHECKING, Generic, TypeVar

from fleetcare.domain.quantities import Figure, Kind, plain
from fleetcare.drafts.reading_in import Draft, read_draft
from fleetcare.errors import FleetError, Refusals, Refused
from fleetcare.exchange.csv_in import CsvRow, RowRefused
from fleetcare.operations.against_past import NewReading, dial_of, hold_against_past, refuse_unlike_dial, say_collision
from fleetcare.operations.due import Moved
from fleetcare.operations.find import FoundFit, FoundItem, FoundMeter, find_fits, find_item, pick_meter
from fleetcare.operations.rows import fetch
from fleetcare.rules.meters import CounterHistory

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session

DraftT = TypeVar("DraftT", bound=Draft)
Found = TypeVar("Found")
_MOST_VALUES = 500  # in one query; SQLite bounds how many values a statement may bind
_OPTION = re.compile("--([a-z]+(?:-[a-z]+)*)")


@dataclass(frozen=True, slots=True)
class Row(Generic[DraftT]):
    """A row of a file, read; `number` is the line of the file it begins on."""

    number: int
    draft: DraftT


@dataclass(slots=True)
class Imported:
    """What an import stored, one text for each thing; how much was there already; what is worth saying; what moved."""

    stored: list[str] = field(default_factory=list)
    known: int = 0
    notes: list[str] = field(default_factory=list)
    moved: list[Moved] = field(default_factory=list)


@dataclass(frozen=True)
class PlacedFigure:
    """A figure of a row, with the meter it was read off on its day."""

    number: int
    item: FoundItem
    meter: FoundMeter
    on: date
    figure: Figure

    @cached_property
    def dial(self) -> Decimal:
        """The figure in the meter's own unit."""
        return dial_of(self.figure, self.meter)

    @property
    def key(self) -> str:
        """What makes it the same figure whenever it comes again."""
        return figure_key(self.meter, self.figure)

    def __str__(self) -> str:
        return f"{plain(self.figure.value)} {self.figure.unit or self.meter.unit}"


def figure_key(meter: FoundMeter, figure: Figure) -> str:
    """Give what makes a figure the same whenever it comes again, though the meter was replaced meanwhile."""
    return f"{meter.owner_id} {meter.kind} {plain(dial_of(figure, meter))}"


class Finder:
    """Items and meters as the rows of one file name them, each looked up once."""

    def __init__(self, connection: "Connection") -> None:
        self._connection = connection
        self._items: dict[str, FoundItem] = {}
        self._fits: dict[int, list[FoundFit]] = {}

    def item(self, tag: str) -> FoundItem:
        """Find an engine or machine in use. Raises Refused."""
        if tag not in self._items:
            self._items[tag] = find_item(self._connection, tag)
        return self._items[tag]

    def meters(self, item_id: int, on: date) -> list[FoundMeter]:
        """Give the meters counting for an item on a day."""
        if item_id not in self._fits:
            self._fits[item_id] = find_fits(self._connection, item_id)
        return [fit.meter for fit in self._fits[item_id] if fit.counts_on(on)]

    def place(self, number: int, item: FoundItem, on: date, figure: Figure, kind: Kind | None = None) -> PlacedFigure:
        """Find the meter a figure was read off. Raises Refused where that is none, or more than one."""
        meter = pick_meter(self.meters(item.id, on), figure, item.tag, kind)
        if meter.id not in {owned.id for owned in self.meters(meter.owner_id, on)}:
            raise Refused(f"the {meter.kind} meter of {item.tag} did not count on {on}", "check the day")
        return PlacedFigure(number, item, meter, on, figure)


def read_row(row: CsvRow, kind: type[DraftT], faults: list[RowRefused]) -> Row[DraftT] | None:
    """Read a row as a draft; what is wrong with it goes to `faults`, each cell by itself."""
    try:
        return Row(row.number, read_draft(kind, row.cells, lambda name: f"--{name.replace('_', '-')}"))
    except FleetError as error:
        for one in error.errors if isinstance(error, Refusals) else (error,):
            faults.append(in_columns(row.number, one, kind))
        return None


def try_cell(faults: list[RowRefused], number: int, column: str, read: Callable[[], Found]) -> Found | None:
    """Give what a cell means; None where that is refused, which goes to `faults`, and the next cell can be tried."""
    try:
        return read()
    except FleetError as error:
        faults.append(RowRefused(number, column, error.detail, error.remedy))
        return None


def in_columns(number: int, error: FleetError, kind: type[Draft], otherwise: str = "") -> RowRefused:
    """Say of a row what the command line would say of its options, in the words of the file.

    The option named first, or the field a sentence begins with, is the column at fault; where there is none it
    is the column `otherwise`. It is not named again where the sentence begins with its option.
    """

    def is_column(option: str) -> bool:
        return option.replace("-", "_") in kind.model_fields

    def as_column(found: re.Match[str]) -> str:
        return f"column {found[1].replace('-', '_')}" if is_column(found[1]) else found[0]

    begins = (
        name.replace("_", "-") for name in kind.model_fields if error.detail.startswith(f"{name.replace('_', ' ')} ")
    )
    named = next(chain(filter(is_column, _OPTION.findall(f"{error.detail} {error.remedy}")), begins), "")
    detail = re.sub(f"^--{named}(: | (?=[^a-z])| )", _without_option, error.detail) if named else error.detail
    # A command to type keeps its options.
    said = [text if "fleetcare " in text else _OPTION.sub(as_column, text) for text in (detail, error.remedy)]
    return RowRefused(number, named.replace("-", "_") or otherwise, *said)


def _without_option(found: re.Match[str]) -> str:
    """Leave out the option a sentence begins with: "--on: no day" is "no day", "--on is missing" is "it is missing"."""
    return "it " if found[1] == " " and found.string[found.end() : found.end() + 1].islower() else ""


def day_come(on: date, today: date) -> date:
    """Give a day back; refuse one after the day the program works on."""
    if on > today:
        raise Refused(f"{on} has not come yet, today counts as {today}", "correct it, or give a later --as-of")
    return on


def hold_together(session: "Session", figures: Sequence[PlacedFigure], column: str) -> list[RowRefused]:
    """Hold the figures of a file against the past and each other, and refuse each that cannot be true."""
    by_meter: dict[int, dict[tuple[date, Decimal], list[PlacedFigure]]] = {}
    for figure in figures:
        by_meter.setdefault(figure.meter.id, {}).setdefault((figure.on, figure.dial), []).append(figure)
    faults = []
    for same in by_meter.values():
        together = list(same.values())
        item, meter = together[0][0].item, together[0][0].meter
        new = [NewReading(ones[0].on, ones[0].figure) for ones in together]
        trial, collisions = hold_against_past(session.connection(), item, meter, new)
        wrong = {place: error for place, one in enumerate(new) if (error := _unlike_dial(item, meter, one, trial))}
        for collision in collisions:
            neighbour = -1 - collision.neighbour.reading.id
            other = f"row {together[neighbour][0].number}" if neighbour >= 0 else ""
            detail = say_collision(item, meter, new[collision.place], collision, other)
            wrong.setdefault(collision.place, Refused(detail, _remedy(together[collision.place][0], other)))
        faults += [
            RowRefused(one.number, column, error.detail, error.remedy)
            for place, error in wrong.items()
            for one in together[place]
        ]
    return faults


def _unlike_dial(item: FoundItem, meter: FoundMeter, new: NewReading, trial: CounterHistory) -> Refused | None:
    try:
        refuse_unlike_dial(item, meter, new, trial)
    except Refused as error:
        return error
    return None


def _remedy(figure: PlacedFigure, other: str) -> str:
    if other:
        return "correct one of them"
    shown = f"{plain(figure.dial)}{figure.meter.unit}"
    return (
        f"check it; if it is right, first give fleetcare reading {figure.item.tag} {shown} --on {figure.on}"
        " with --sure, --rolled-over or --replaced OLD_LAST NEW_FIRST"
    )


def keys_stored(connection: "Connection", table: str, keys: Sequence[str]) -> set[str]:
    """Give those of some import keys that a table of readings or entries holds already."""
    statement = f"select import_key from {table} where import_key in :keys"
    chunks = (list(keys[start : start + _MOST_VALUES]) for start in range(0, len(keys), _MOST_VALUES))
    return {row[0] for chunk in chunks for row in fetch(connection, statement, keys=chunk)}
