"""What the sheet screen knows of a kind of sheet: how it is drawn, judged as typed, asked about and handed on."""

from abc import ABC, abstractmethod
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.sheets import CellKey
from fleetcare.errors import FleetError
from fleetcare.tui.forms.base import Answer
from fleetcare.tui.sheets.layout import Blocks, Shown

if TYPE_CHECKING:
    from sqlalchemy import Connection

    from fleetcare.domain.quantities import Amount, Figure

Texts = Mapping[CellKey, str]
"""What stands in the cells, as typed."""


@dataclass(frozen=True, slots=True)
class SheetFor:
    """What a sheet is taken for: an engine on a day, and the task it is to close, empty where it is only measured.

    With an entry it is the sheet of that entry, to be mended; else `figures` are what the dial showed, and `explained`
    what was answered about those that break with their meter's past, `topped_up` the oil that goes with it, and
    `import_key` what its entry is told again by.
    """

    tag: str
    on: date
    task: str = ""
    whose: str = ""
    entry: int | None = None
    figures: "Sequence[Figure]" = ()
    explained: Mapping[str, bool] = field(default_factory=dict)
    topped_up: "Amount | None" = None
    import_key: str = ""


@dataclass(frozen=True, slots=True)
class Ask:
    """Something asked before a sheet is stored, by a name, with its answers; what they say goes into the entry."""

    name: str
    words: str
    answers: tuple[Answer, ...]


@dataclass(frozen=True, slots=True)
class Slip:
    """Why a value is likely a slip, what was likely meant, as typed, and whether it can be right as it stands."""

    words: str
    meant: tuple[str, ...]
    can_be_right: bool


class ReadSheet(ABC):
    """What is typed so far, read and judged."""

    @abstractmethod
    def shown(self) -> Mapping[CellKey, Shown]:
        """Give what the cells show."""

    @abstractmethod
    def about(self, key: CellKey) -> Sequence[tuple[str, str]]:
        """Give lines of (words, tone) about a cell."""

    @abstractmethod
    def below(self) -> Sequence[str]:
        """Give what is to be read below the cells: what it says of the engine, and the cautions of the job."""

    @abstractmethod
    def here(self, key: CellKey) -> frozenset[CellKey]:
        """Give the cells that are filled in together with one."""

    @abstractmethod
    def wrong(self) -> Mapping[CellKey, str]:
        """Give the cells that are no values, and why."""

    @abstractmethod
    def slips(self) -> Mapping[CellKey, Slip]:
        """Give the cells whose values are likely slips, those nobody is sure of."""

    @abstractmethod
    def next(self, key: CellKey, step: int) -> CellKey | None:
        """Give the cell to fill in after one, or before it; None where there is none."""

    @abstractmethod
    def asks(self, about: SheetFor) -> Sequence[Ask]:
        """Give what is to be asked before it is stored for what it was taken for."""

    @abstractmethod
    def came(self, said: Mapping[str, bool]) -> Mapping[str, object]:
        """Give it as fields of the entry it comes along with, those among them that were answered."""


class OpenSheet(ABC):
    """A sheet of one engine on one day, as it is before anything is typed: `start` are the texts it opens with."""

    start: Texts
    blocks: Blocks
    order: Sequence[CellKey]
    lasts: Mapping[CellKey, str]
    limits: Sequence[str]

    @abstractmethod
    def read(self, texts: Texts, sure: frozenset[CellKey]) -> ReadSheet:
        """Read and judge what is typed; somebody is `sure` of some odd values."""


@dataclass(frozen=True, slots=True)
class SheetKind:
    """A kind of sheet: its name, its title on the screen, and what loads an empty one, seen on a day."""

    name: str
    title: str
    open: "Callable[[Connection, SheetFor, date], OpenSheet]"


def say_of_cell(error: FleetError) -> str:
    """Say what is wrong with a cell without its place in a file, which it has none of on a screen."""
    detail = error.detail.partition(": ")[2] if hasattr(error, "number") else error.detail
    return f"{detail}; {error.remedy}"
