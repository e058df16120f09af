"""What judging a sheet takes, and what a shape of rule hands back to be held against limits."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import date

from fleetcare.domain.findings import Evidence, Signal, Step
from fleetcare.domain.measured import NO_POOLS, MeasuredEngine, MeasuredSheet, Pools
from fleetcare.domain.rule_book import Limits
from fleetcare.domain.sheets import Judgement, SheetValue
from fleetcare.rules.judging.spans import Span


@dataclass(frozen=True, slots=True)
class MeasuredFacts:
    """One sheet of an engine to be judged, and what is known beside it.

    `earlier` are the sheets of its kind before it, oldest first; `fresh` the values of new oil of its grade; `others` the
    newest sheet of each other kind, and `standing` what the rules say of those; `lash` the judgements of lash sheets by
    entry, this one's and earlier ones'. On `holidays` nobody works.
    """

    engine: MeasuredEngine
    sheet: MeasuredSheet
    earlier: tuple[MeasuredSheet, ...] = ()
    fresh: tuple[SheetValue, ...] = ()
    pools: Pools = NO_POOLS
    others: tuple[MeasuredSheet, ...] = ()
    standing: tuple[Signal, ...] = ()
    lash: Mapping[int, tuple[Judgement, ...]] = field(default_factory=dict)
    holidays: frozenset[date] = frozenset()


@dataclass(frozen=True, slots=True)
class Figure:
    """What a shape worked out of one value, in the unit of the rule, with the limits it is to be held against.

    `flagged` is the value itself, `used` what else went into it.
    """

    subject: str
    span: Span
    flagged: Evidence
    low: Limits
    high: Limits
    used: tuple[Evidence, ...] = ()
    steps: tuple[Step, ...] = ()


class CannotTell(Exception):
    """Why a figure cannot be worked out; a shape raises it, judging notes it down. It is no error of a person."""

    def __init__(self, why: str, subject: str = "") -> None:
        super().__init__(why)
        self.why = why
        self.subject = subject
