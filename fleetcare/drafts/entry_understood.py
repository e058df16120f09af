"""What an entry line says, as far as it is clear, and what of it goes into the log or among the readings."""

from dataclasses import dataclass
from datetime import date

from fleetcare.domain.quantities import Figure
from fleetcare.drafts.entry_figures import DialFigure
from fleetcare.drafts.entry_parts import Part
from fleetcare.drafts.entry_questions import Question


@dataclass(frozen=True, slots=True)
class Taken:
    """What some of the line was taken as, and from where to where in it."""

    start: int
    end: int
    part: Part
    said: str


@dataclass(frozen=True, slots=True)
class Understood:
    """What a line says as far as it is clear; it can be stored once no question is open.

    `filled` is a volume that went in with the work. An empty text or None stands for what the line does not say.
    """

    text: str
    on: date
    taken: tuple[Taken, ...] = ()
    questions: tuple[Question, ...] = ()
    tag: str = ""
    tasks: tuple[str, ...] = ()
    dials: tuple[DialFigure, ...] = ()
    filled: Figure | None = None
    top_up: Figure | None = None
    by: str = ""
    is_new_name: bool = False
    note: str = ""
    defect: str = ""
    repair: str = ""
    is_sure: bool = False
    has_rolled_over: bool = False
    is_part_done: bool = False

    @property
    def figures(self) -> tuple[Figure, ...]:
        """The figures on a dial, with units."""
        return tuple(dial.figure for dial in self.dials)

    @property
    def is_work(self) -> bool:
        """Whether it goes into the log; otherwise it is a plain reading."""
        done = self.tasks or self.defect or self.repair or self.top_up or self.filled
        return bool(done or (self.note and not self.dials))

    def readings(self) -> list[dict[str, object]]:
        """Give the fields of the readings it asks for: all its figures, with work only those it explains."""
        explained = {"sure": self.is_sure, "rolled_over": self.has_rolled_over}
        if self.is_work and not any(explained.values()):
            return []
        shared = {"tag": self.tag, "on": self.on, "by": self.by, "note": "" if self.is_work else self.note}
        return [{**shared, **explained, "value": figure} for figure in self.figures]

    def work(self) -> dict[str, object]:
        """Give the fields of the log entry it asks for; a volume filled in stands in the note, which the log keeps."""
        filled = f"{self.filled} filled in" if self.filled else ""
        return {
            "tag": self.tag,
            "on": self.on,
            "task": self.tasks,
            "at": self.figures,
            "by": self.by,
            "note": "; ".join(text for text in (filled, self.note) if text),
            "top_up": str(self.top_up) if self.top_up else "",
            "repair": self.repair,
            "defect": self.defect,
            "part_done": self.is_part_done,
        }
