"""One thing somebody entered on one day, as data: what the history is a list of."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import date
from enum import StrEnum


class Verb(StrEnum):
    """What was entered. On one day things happen in this order."""

    SETTING = "setting"
    MACHINE = "machine"
    ENGINE = "engine"
    TASK = "task"
    FIT = "fit"
    STATUS = "status"
    FACTOR = "factor"
    READING = "reading"
    LOG = "log"
    CORRECT = "correct"
    DEFER = "defer"
    VOID_READING = "void-reading"


@dataclass(frozen=True, slots=True)
class Step:
    """An entry of a day: about `tag`, with `values` as a person would type them.

    `name` lets a later step of the same history point at what this one stored; `about` is such a name.
    """

    on: date
    verb: Verb
    tag: str = ""
    values: Mapping[str, object] = field(default_factory=dict)
    name: str = ""
    about: str = ""


_ORDER = {verb: place for place, verb in enumerate(Verb)}


def in_order(steps: list[Step]) -> list[Step]:
    """Sort steps as they happen: by day, then by kind, then as listed."""
    return sorted(steps, key=lambda step: (step.on, _ORDER[step.verb]))
