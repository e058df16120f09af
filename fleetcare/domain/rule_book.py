"""Measurement rules as data: a handful of fixed shapes, the limits, and where each rule applies and comes from.

Every shape (domain/rule_shapes.py) works out one signed figure in the unit of the rule; the limits of the rule, low and
high, are held against that figure. There is no expression language: what the shapes cannot say is a new shape.
"""

from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal
from enum import StrEnum

from fleetcare.domain.rule_shapes import AgainstSheet as AgainstSheet
from fleetcare.domain.rule_shapes import Approach as Approach
from fleetcare.domain.rule_shapes import Basis as Basis
from fleetcare.domain.rule_shapes import Best as Best
from fleetcare.domain.rule_shapes import Bounds as Bounds
from fleetcare.domain.rule_shapes import By as By
from fleetcare.domain.rule_shapes import ByAltitude as ByAltitude
from fleetcare.domain.rule_shapes import Change as Change
from fleetcare.domain.rule_shapes import Method as Method
from fleetcare.domain.rule_shapes import Pool as Pool
from fleetcare.domain.rule_shapes import Rate as Rate
from fleetcare.domain.rule_shapes import Since as Since
from fleetcare.domain.rule_shapes import SingleShape as SingleShape
from fleetcare.domain.rule_shapes import Statistical as Statistical
from fleetcare.domain.rule_shapes import ValueShape as ValueShape
from fleetcare.domain.severity import Severity as Severity
from fleetcare.domain.severity import worst as worst
from fleetcare.domain.sheets import Phase
from fleetcare.domain.trends import End as End


@dataclass(frozen=True, slots=True)
class Limit:
    """A figure that may not be passed; `reach` says that standing on it is flagged already, else it passes."""

    value: Decimal
    reach: bool = False


@dataclass(frozen=True, slots=True)
class Limits:
    """The limits on one side, None where there is none."""

    alert: Limit | None = None
    alarm: Limit | None = None

    def __bool__(self) -> bool:
        return self.alert is not None or self.alarm is not None


class Asks(StrEnum):
    """What a condition of a pattern asks of a quantity.

    FLAGGED_HIGH and FLAGGED_LOW: another rule flags it; CLEAR: none flags it high; WITHIN: it lies within limits, both
    ends as the limits say; SAID: a word on a sheet is one of some.
    """

    FLAGGED_HIGH = "flagged high"
    FLAGGED_LOW = "flagged low"
    CLEAR = "clear"
    WITHIN = "within"
    SAID = "said"


@dataclass(frozen=True, slots=True)
class Condition:
    """One condition of a pattern, on any of `quantities`.

    WITHIN holds from `low` to `high`, a limit marked `beyond` being itself outside and one marked `reach` inside; `over`
    divides by another quantity, `less_new` takes off fresh oil first, `of_before` makes it percent of what the sample before
    had, of one fill of oil; `calls_out` flags what lies within. `side` picks the lash points of one side. `is_optional` holds
    where nothing was measured.
    """

    quantities: tuple[str, ...]
    asks: Asks
    low: Limit | None = None
    high: Limit | None = None
    unit: str = ""
    over: str = ""
    less_new: bool = False
    of_before: bool = False
    calls_out: bool = False
    side: str = ""
    words: tuple[str, ...] = ()
    is_optional: bool = False


class Where(StrEnum):
    """Where all conditions of a pattern must hold: on the engine, at one cylinder, at two neighbours, at every one."""

    ENGINE = "engine"
    CYLINDER = "cylinder"
    NEIGHBOURS = "neighbours"
    EVERY = "every cylinder"


@dataclass(frozen=True, slots=True)
class Pattern:
    """What several values say together: all conditions hold `at` a place. It then stands at least as `severity`.

    Of patterns of one `table` only the first that matches counts, `row` by row: the gravest stands first. Flagged values
    of `absorbs` belong to the same cause.
    """

    conditions: tuple[Condition, ...]
    at: Where = Where.ENGINE
    severity: Severity = Severity.ALERT
    absorbs: tuple[str, ...] = ()
    table: str = ""
    row: int = 0


Shape = SingleShape | Pattern


@dataclass(frozen=True, slots=True)
class AppliesTo:
    """Which engines a rule is for; what is empty or None asks nothing.

    `grades` are oil grades as on the nameplate, or their hot part alone (40 is also 15W-40). What an engine's nameplate
    does not say does not match what is asked.
    """

    fuels: tuple[str, ...] = ()
    not_fuels: tuple[str, ...] = ()
    cylinders_least: int | None = None
    cylinders_most: int | None = None
    adjusters: tuple[str, ...] = ()
    duties: tuple[str, ...] = ()
    engines: tuple[str, ...] = ()
    grades: tuple[str, ...] = ()
    is_marine: bool | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Rule:
    """One measurement rule.

    `kinds` are the kinds of sheet, `quantity` what is judged (empty for a pattern), `phases` and `points` which values
    (empty: any but a wet test and fresh oil), `unit` that of the limits. `words` must be said on the sheet, `unless` must
    not. A rule with a `preset` is off but for engines the shop names for that preset; where one applies, rules without a
    preset and of the same `choice` give way. `cause` groups findings, point by point, or with `of_engine` all points of
    the engine in one. `business_days` dates the next step from the day the results came.
    """

    id: str
    kinds: tuple[str, ...]
    quantity: str
    shape: Shape
    unit: str = ""
    low: Limits = Limits()
    high: Limits = Limits()
    phases: tuple[Phase, ...] = ()
    points: tuple[str, ...] = ()
    words: Mapping[str, tuple[str, ...]] = field(default_factory=dict, hash=False)
    unless: Mapping[str, tuple[str, ...]] = field(default_factory=dict, hash=False)
    applies: AppliesTo = AppliesTo()
    preset: str = ""
    choice: str = ""
    cause: str
    of_engine: bool = False
    message: str
    source: str
    next_step: str
    caution: str = ""
    business_days: int | None = None
    is_law: bool = False


@dataclass(frozen=True, slots=True)
class SwitchedOff:
    """A shipped rule the shop does without, and why."""

    id: str
    why: str


@dataclass(frozen=True, slots=True)
class RuleBook:
    """All rules, by id; the tags of the engines each preset is named for; the rules switched off; those overridden."""

    rules: tuple[Rule, ...]
    chosen: Mapping[str, tuple[str, ...]] = field(default_factory=dict)
    off: tuple[SwitchedOff, ...] = ()
    overridden: tuple[str, ...] = ()
