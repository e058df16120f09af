"""When a counted figure will be reached, and what that rests on."""

from dataclasses import dataclass
from datetime import date


@dataclass(frozen=True, slots=True)
class Clue:
    """One way the engine's own past answers, and how far it is trusted.

    `label` says which past, `days` how long the amount took or would take there (one figure a year for
    "same date in 2021, 2022"), `weight` 0..1. A clue without days only says what is not known.
    """

    label: str
    days: tuple[float, ...]
    weight: float


@dataclass(frozen=True, slots=True)
class Forecast:
    """The days between which a figure is reached four times in five, and the likely day.

    `late` None with a likely day means open: no honest last day. Without a likely day `reason` says why
    there is none; with one it is None.
    """

    early: date | None
    likely: date | None
    late: date | None
    readings_used: int
    reason: str | None = None
    clues: tuple[Clue, ...] = ()
