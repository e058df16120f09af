"""Which quantities and words, points and phases belong on which kind of sheet; the lash sheet has its own reading.

One place says it: files, forms and the storage read it from here. What a word may be stands in a list, or is free.
"""

from collections.abc import Mapping
from dataclasses import dataclass
from enum import StrEnum

from fleetcare.domain.measured import COMPRESSION, LEAKDOWN, OIL, RUN, SPOT
from fleetcare.domain.measures import ELEMENTS
from fleetcare.domain.sheets import Phase


class At(StrEnum):
    """Where on an engine something is measured; a stage is a part of a run, by its number."""

    ENGINE = "engine"
    CYLINDER = "cylinder"
    EITHER = "either"
    STAGE = "stage"


@dataclass(frozen=True, slots=True)
class Column:
    """A quantity on a kind of sheet: its name, where it is measured, and its phases, the one an empty cell means first.

    `is_lab` may be below what the laboratory can detect; `shared` may be given once for every cylinder.
    """

    quantity: str
    at: At = At.ENGINE
    phases: tuple[Phase, ...] = (Phase.NONE,)
    is_lab: bool = False
    shared: bool = False


@dataclass(frozen=True, slots=True)
class WordColumn:
    """Something a sheet says in a word: its name, what a person calls it, where, and which words; none is any text."""

    quantity: str
    title: str
    at: At = At.ENGINE
    words: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class SheetKind:
    """A kind of sheet: what a person calls it, and all that may stand on it."""

    name: str
    title: str
    columns: tuple[Column, ...]
    word_columns: tuple[WordColumn, ...] = ()

    @property
    def every_column(self) -> tuple[Column | WordColumn, ...]:
        """Everything that may stand on it."""
        return (*self.columns, *self.word_columns)

    @property
    def quantities(self) -> tuple[str, ...]:
        """Everything that may stand on it, by name."""
        return tuple(column.quantity for column in self.every_column)

    def column(self, quantity: str) -> Column | None:
        """Give the column of a quantity, None where it has none here."""
        return next((column for column in self.columns if column.quantity == quantity), None)

    def word_column(self, quantity: str) -> WordColumn | None:
        """Give the column of a word, None where it has none here."""
        return next((column for column in self.word_columns if column.quantity == quantity), None)


ISO4406 = "iso4406"
GRADE = "grade"

_DRY_WET = (Phase.DRY, Phase.WET)
_LAB = (Phase.NONE, Phase.NEW)
_LAB_QUANTITIES = (
    *("kv40", "kv100", "tbn", "tan", "ph", "water", "fuel", "soot", "glycol", "insolubles", "oxidation", "nitration"),
    "flash_point",
    *ELEMENTS,
)
_RUNNING = (
    Column("oil_pressure"),
    Column("coolant"),
    Column("oil_temperature"),
    Column("exhaust", At.EITHER),
    Column("crankcase"),
    Column("cranking_volts"),
    Column("cranking_speed"),
)

KINDS: Mapping[str, SheetKind] = {
    kind.name: kind
    for kind in (
        SheetKind(
            COMPRESSION,
            "Compression",
            (Column("pressure", At.CYLINDER, _DRY_WET), Column("cranking_speed"), Column("oil_temperature")),
            (WordColumn("throttle", "throttle", words=("open", "closed")),),
        ),
        SheetKind(
            LEAKDOWN,
            "Leak-down",
            (
                Column("leak", At.CYLINDER),
                Column("supply", At.CYLINDER, shared=True),
                Column("held", At.CYLINDER),
            ),
            (WordColumn("heard", "air heard", At.CYLINDER, ("intake", "exhaust", "crankcase", "coolant", "next")),),
        ),
        SheetKind(
            SPOT,
            "Spot readings",
            _RUNNING,
        ),
        SheetKind(
            RUN,
            "Test run",
            (Column("minutes", At.STAGE), Column("load", At.STAGE), *_RUNNING),
            (
                WordColumn("purpose", "purpose", words=("emergency", "test", "supplemental", "36-month", "other")),
                WordColumn("exhaust_temperature_held", "least exhaust temperature held", words=("yes", "no")),
            ),
        ),
        SheetKind(
            OIL,
            "Oil sample",
            (
                Column("hours_on_oil"),
                Column("top_up"),
                *(Column(quantity, phases=_LAB, is_lab=True) for quantity in _LAB_QUANTITIES),
            ),
            (
                WordColumn(GRADE, "grade"),
                WordColumn("tbn_method", "base number by", words=("perchloric", "hydrochloric")),
                WordColumn("repair", "repaired before with", words=("sealant", "other")),
                WordColumn(ISO4406, "particle code ISO 4406"),
            ),
        ),
    )
}
"""Every kind of sheet but the lash sheet, in the order in which a file is taken for one."""

NEVER_WITHOUT = frozenset({"kv40", "kv100", "flash_point", "ph"})
"""What every oil has: that nothing of it was detected can only mean that nobody looked."""

WORDS = frozenset(column.quantity for kind in KINDS.values() for column in kind.word_columns)
"""What is said in words on some sheet: stored without a value, the word as its qualifier."""
