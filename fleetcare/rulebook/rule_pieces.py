"""The pieces a measurement rule is written in, each held to its form; a fault says what is wrong and, behind a bar, how to mend it."""

import re
from decimal import Decimal
from itertools import pairwise
from typing import Annotated, Literal, Self

from pydantic import BaseModel, BeforeValidator, ConfigDict, Field, StringConstraints, model_validator
from pydantic.functional_validators import AfterValidator

from fleetcare.domain.measured import SHEET_KINDS
from fleetcare.domain.measures import QUANTITIES, UNITS, dimension
from fleetcare.domain.rule_book import (
    Asks,
    Basis,
    Best,
    By,
    Condition,
    End,
    Limit,
    Limits,
    Method,
    Pool,
    Severity,
    Since,
    Where,
)

DERIVED = ("wet_gain",)
_FEWEST_ROWS = 2


def as_list(value: object) -> object:
    """Let one text stand for a list of it."""
    return [value] if isinstance(value, str) else value


def known(value: str) -> str:
    """Refuse what is measured on no sheet."""
    if value not in QUANTITIES and value not in DERIVED:
        raise ValueError(f"{value!r} is measured on no sheet|use one of {', '.join((*QUANTITIES, *DERIVED))}")
    return value


def _kind(value: str) -> str:
    if value not in SHEET_KINDS:
        raise ValueError(f"{value!r} is no kind of sheet|use one of {', '.join(SHEET_KINDS)}")
    return value


def _unit(value: str) -> str:
    if value and value not in UNITS:
        raise ValueError(f"{value!r} is no unit known here|use one of {', '.join(UNITS)}")
    return value


def _slug(value: str) -> str:
    if re.fullmatch(r"[a-z0-9]+(-[a-z0-9]+)*", value) is None:
        raise ValueError(f"{value!r} is no name for it|write small letters and digits, with dashes between")
    return value


def _fits(quantity: str, unit: str) -> bool:
    return dimension(unit) == dimension("%" if quantity in DERIVED else QUANTITIES[quantity].unit)


Kind = Annotated[str, AfterValidator(_kind)]
Text = Annotated[str, StringConstraints(strip_whitespace=True, min_length=1)]
Slug = Annotated[str, AfterValidator(_slug)]
Texts = Annotated[tuple[Text, ...], BeforeValidator(as_list)]
Words = dict[Text, Annotated[tuple[str, ...], BeforeValidator(as_list)]]
Known = Annotated[Text, AfterValidator(known)]
KnownUnit = Annotated[str, AfterValidator(_unit)]


class Form(BaseModel):
    """A piece of a rule file: nothing but its own fields, each read as its kind."""

    model_config = ConfigDict(extra="forbid", frozen=True)


class LimitIn(Form):
    """One limit: the figure that is flagged once it is passed (`beyond`), or once it is reached (`reach`)."""

    beyond: Decimal | None = None
    reach: Decimal | None = None

    @model_validator(mode="after")
    def _check(self) -> Self:
        if (self.beyond is None) is (self.reach is None):
            raise ValueError("it needs one figure|write { beyond = 25 }, or { reach = 25 } where 25 itself is flagged")
        return self

    @property
    def fact(self) -> Limit:
        """The limit as the rules see it."""
        return Limit(self.beyond) if self.beyond is not None else Limit(self.reach or Decimal(0), reach=True)


def _fact(limit: LimitIn | None) -> Limit | None:
    return limit.fact if limit else None


class LimitsIn(Form):
    """The limits on one side."""

    alert: LimitIn | None = None
    alarm: LimitIn | None = None

    @property
    def fact(self) -> Limits:
        """The limits as the rules see them."""
        return Limits(_fact(self.alert), _fact(self.alarm))


class BoundsIn(Form):
    """The shape `bounds`."""

    basis: Basis = Basis.AS_MEASURED
    end: End | None = None
    is_set: bool = False

    @model_validator(mode="after")
    def _check(self) -> Self:
        if (self.end is not None) + self.is_set != (self.basis is Basis.SPEC):
            raise ValueError('end or is_set goes with basis "spec"|give one of them there, and neither elsewhere')
        return self


class AgainstSheetIn(Form):
    """The shape `against_sheet`."""

    reference: Best
    by: By


class ChangeIn(Form):
    """The shape `change`."""

    since: Since
    by: By


class RateIn(Form):
    """The shape `rate`."""

    since: Literal[Since.BEFORE, Since.NEW]
    per: Literal[10, 100, 1000]
    is_corrected: bool = False
    least_hours: Annotated[Decimal, Field(ge=0)] = Decimal(0)


class StatisticalIn(Form):
    """The shape `statistical`."""

    pool: Pool
    method: Method
    least_samples: Annotated[int, Field(ge=3, le=10_000)]


class ByAltitudeIn(Form):
    """The shape `by_altitude`."""

    unit: Literal["ft", "m"]
    least: tuple[tuple[Decimal, Decimal], ...]

    @model_validator(mode="after")
    def _check(self) -> Self:
        if len(self.least) < _FEWEST_ROWS or not all(one < other for (one, _), (other, _) in pairwise(self.least)):
            raise ValueError("altitudes do not rise|write pairs of altitude and least, [[500, 515], [2500, 480]]")
        return self


class ApproachIn(Form):
    """The shape `approach`."""

    end: End
    least_change: Annotated[Decimal, Field(ge=0, le=1)] = Decimal(0)


class ConditionIn(Form):
    """One condition of a pattern."""

    quantities: Texts
    asks: Asks
    low: LimitIn | None = None
    high: LimitIn | None = None
    unit: KnownUnit = ""
    over: Annotated[str, AfterValidator(lambda value: known(value) if value else value)] = ""
    less_new: bool = False
    of_before: bool = False
    calls_out: bool = False
    side: Literal["", "intake", "exhaust"] = ""
    words: Annotated[tuple[Text, ...], BeforeValidator(as_list)] = ()
    is_optional: bool = False

    @model_validator(mode="after")
    def _check(self) -> Self:
        if self.asks is Asks.SAID and not self.words:
            raise ValueError("words are missing|give those of which one must be said")
        if self.asks is not Asks.SAID:
            for quantity in self.quantities:
                known(quantity)
        if (self.asks is Asks.WITHIN) is not (self.low is not None or self.high is not None):
            raise ValueError('low and high go with asks "within"|give one of them there, and nowhere else')
        if self.asks is Asks.WITHIN and not self.over and not all(_fits(one, self.unit) for one in self.quantities):
            raise ValueError(f"unit {self.unit!r} does not fit {', '.join(self.quantities)}|write one that does")
        if self.of_before and (self.asks is not Asks.WITHIN or self.unit != "%" or self.over or self.less_new):
            raise ValueError('of_before goes with asks "within" and unit "%"|leave it, over and less_new out elsewhere')
        if self.calls_out and self.asks is not Asks.WITHIN:
            raise ValueError('calls_out goes with asks "within"|leave it out')
        return self

    @property
    def flags(self) -> bool:
        """Whether values are flagged by it."""
        return self.calls_out or self.asks in {Asks.FLAGGED_HIGH, Asks.FLAGGED_LOW}

    @property
    def fact(self) -> Condition:
        """The condition as the rules see it."""
        given = {name: getattr(self, name) for name in type(self).model_fields if name not in {"low", "high"}}
        return Condition(**given, low=_fact(self.low), high=_fact(self.high))


class PatternIn(Form):
    """The shape `pattern`; its conditions stand under [[rule.condition]]."""

    at: Where = Where.ENGINE
    severity: Severity = Severity.ALERT
    absorbs: Annotated[tuple[Known, ...], BeforeValidator(as_list)] = ()
    table: str = ""
    row: int = 0


class AppliesIn(Form):
    """Which engines a rule is for."""

    fuels: Texts = ()
    not_fuels: Texts = ()
    cylinders_least: int | None = None
    cylinders_most: int | None = None
    adjusters: Texts = ()
    duties: Texts = ()
    engines: Texts = ()
    grades: Texts = ()
    is_marine: bool | None = None
