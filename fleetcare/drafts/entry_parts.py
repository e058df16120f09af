"""The parts of an entry line, and pieces of a line taken as one of them."""

import re
from dataclasses import dataclass
from datetime import date
from enum import StrEnum

from fleetcare.domain.quantities import Figure, Kind, plain
from fleetcare.drafts.entry_words import JOIN, name_parts


class Part(StrEnum):
    """What words of a line can be."""

    TAG = "engine or machine"
    TASK = "task"
    FIGURE = "on the dial"
    LITRES = "volume"
    FILLED = "filled in"
    TOP_UP = "topped up"
    DAY = "day"
    PERSON = "done by"
    NOTE = "note"
    DEFECT = "defect"
    REPAIR = "repair"
    SURE = "sure"
    ROLLED_OVER = "rolled over"
    PART_DONE = "part-done"
    JOIN = "and"
    UNKNOWN = "not understood"


WHAT = frozenset({Part.TASK, Part.DEFECT, Part.REPAIR, Part.NOTE, Part.FIGURE, Part.LITRES, Part.FILLED, Part.TOP_UP})
"""Parts of which a line needs one to say anything."""
TEXTS = {part.value: part for part in (Part.NOTE, Part.DEFECT, Part.REPAIR)}
FLAGS = {"sure": Part.SURE, "rolled-over": Part.ROLLED_OVER, "part-done": Part.PART_DONE}
VOLUMES = {"top-up": Part.TOP_UP, "topup": Part.TOP_UP, "fill": Part.FILLED, "filled": Part.FILLED}
TAGGED = ("engine", "machine")
GALLON = "gal"  # nobody knows whose

_ONE_WORD = re.compile(r"\w[\w'/-]*")


@dataclass(frozen=True, slots=True)
class Piece:
    """Some words of a line, from the one numbered `first` until before `end`, taken as one part of it.

    `name` is a tag, a task, a person or a text; `kind` what a figure counts, None where it can be of several. It
    `is_firm` where a word before it, quotes or a name of several words given in full say what it is; what may also be
    something else is not.
    """

    first: int
    end: int
    part: Part
    name: str = ""
    figure: Figure | None = None
    kind: Kind | None = None
    day: date | None = None
    is_firm: bool = False
    is_new: bool = False

    @property
    def size(self) -> int:
        """How many words it is."""
        return self.end - self.first

    @property
    def slot(self) -> str:
        """What a line has only one of."""
        if self.part is Part.FIGURE:
            return f"{self.part} {self.kind}"
        return Part.LITRES if self.part is Part.FILLED else self.part

    @property
    def said(self) -> str:
        """The piece in words."""
        match self.part:
            case Part.TAG | Part.TASK:
                return self.name
            case Part.FIGURE | Part.FILLED | Part.TOP_UP:
                return f"{self.figure} {self.part}"
            case Part.LITRES:
                return str(self.figure)
            case Part.DAY:
                return f"on {self.day}"
            case Part.PERSON:
                return f"{self.part} {self.name}"
            case Part.NOTE | Part.DEFECT | Part.REPAIR:
                return f'{self.part} "{self.name}"'
        return self.part

    @property
    def typed(self) -> str:
        """The piece as it can be typed so that it is nothing else."""
        match self.part:
            case Part.TAG | Part.PERSON:
                return f"{'engine' if self.part is Part.TAG else 'by'} {_one_word(self.name)}"
            case Part.TASK:
                words = name_parts(self.name)
                return " ".join(words) if len(words) > 1 else f"task {_one_word(self.name)}"
            case Part.FIGURE | Part.LITRES:
                return f"at {typed_figure(self.figure)}"
            case Part.FILLED | Part.TOP_UP:
                return f"{'fill' if self.part is Part.FILLED else 'top-up'} {typed_figure(self.figure)}"
            case Part.DAY:
                return f"on {self.day}"
            case Part.NOTE | Part.DEFECT | Part.REPAIR:
                return f"{self.part} {_quoted(self.name)}"
        return JOIN if self.part is Part.JOIN else self.part


def _quoted(text: str) -> str:
    """Put a text in quotes; quotes in it become single ones."""
    return '"' + text.replace('"', "'") + '"'


def _one_word(name: str) -> str:
    """Give a name as it is where it is one word of a line, else in quotes."""
    return name if _ONE_WORD.fullmatch(name) else _quoted(name)


def typed_figure(figure: Figure | None) -> str:
    """Give a figure as it is typed: 1234h."""
    assert figure is not None
    return f"{plain(figure.value)}{figure.unit or ''}"
