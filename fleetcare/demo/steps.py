"""One thing somebody entered on one day, as data: what the history is a list of."""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from datetime import date
from enum import StrEnum


class Verb(StrEnum):
    """What was entered. On one day things happen in this order."""

    SETTING = "setting"
    RULES = "rules"
    MACHINE = "machine"
    ENGINE = "engine"
    SCHEDULE = "schedule"
    TASK = "task"
    CARD_READING = "card reading"
    CARD_WORK = "card work"
    ROUND = "round"
    SHEET = "sheet"
    READING = "reading"
    FIT = "fit"
    STATUS = "status"
    FACTOR = "factor"
    EDIT = "edit"
    LOG = "log"
    CORRECT = "correct"
    DEFER = "defer"
    VOID_READING = "void-reading"
    ANSWER = "answer"


@dataclass(frozen=True, slots=True)
class Step:
    """An entry about `tag` for the day `on`, typed on the day `entered`, with `values` as a person would type them.

    The card index, kept before the tool was, comes in as a file of its readings and one of its work. `name` lets a
    later step of the same history point at what this one stored; `about` is such a name.
    """

    on: date
    entered: date
    verb: Verb
    tag: str = ""
    values: Mapping[str, object] = field(default_factory=dict)
    name: str = ""
    about: str = ""


_ORDER = {verb: place for place, verb in enumerate(Verb)}
_FIRST = {verb for verb in Verb if _ORDER[verb] <= _ORDER[Verb.SHEET]}


def in_order(steps: Iterable[Step]) -> list[Step]:
    """Sort steps as they were entered: by day; within it what is new and rounds first; then by the day they are about."""
    return sorted(steps, key=_place)


def _place(step: Step) -> tuple[date, bool, int, date, int]:
    order = _ORDER[step.verb]
    is_first = step.verb in _FIRST
    return step.entered, not is_first, order if is_first else 0, step.on, order
