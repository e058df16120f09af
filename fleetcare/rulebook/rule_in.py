"""A measurement rule as a file states it, held to its form and read into the fact the rules work with.

Whatever is not in form is told together, each with the field and how to mend it; a file of rules is data, and what the
shapes do not say cannot be said.
"""

from typing import Annotated, Any, Literal, Self

from pydantic import AfterValidator, BeforeValidator, Field, model_validator

from fleetcare.domain.measured import LASH
from fleetcare.domain.measures import QUANTITIES, dimension
from fleetcare.domain.rule_book import (
    AgainstSheet,
    AppliesTo,
    Approach,
    Basis,
    Bounds,
    By,
    ByAltitude,
    Change,
    End,
    Limits,
    Method,
    Pattern,
    Rate,
    Rule,
    Shape,
    Since,
    Statistical,
)
from fleetcare.domain.sheets import Phase
from fleetcare.rulebook.rule_pieces import (
    AgainstSheetIn,
    AppliesIn,
    ApproachIn,
    BoundsIn,
    ByAltitudeIn,
    ChangeIn,
    ConditionIn,
    Form,
    Kind,
    KnownUnit,
    LimitsIn,
    PatternIn,
    RateIn,
    Slug,
    StatisticalIn,
    Text,
    Texts,
    Words,
    as_list,
)

SHAPES: dict[str, type[Any]] = {
    "bounds": Bounds,
    "against_sheet": AgainstSheet,
    "change": Change,
    "rate": Rate,
    "statistical": Statistical,
    "by_altitude": ByAltitude,
    "approach": Approach,
    "pattern": Pattern,
}


def _measured(value: str) -> str:
    if value and value not in QUANTITIES:
        raise ValueError(f"{value!r} is measured on no sheet|use one of {', '.join(QUANTITIES)}")
    return value


class RuleIn(Form):
    """A whole rule."""

    id: Slug
    kinds: Annotated[tuple[Kind, ...], BeforeValidator(as_list), Field(min_length=1)]
    quantity: Annotated[str, AfterValidator(_measured)] = ""
    unit: KnownUnit = ""
    bounds: BoundsIn | None = None
    against_sheet: AgainstSheetIn | None = None
    change: ChangeIn | None = None
    rate: RateIn | None = None
    statistical: StatisticalIn | None = None
    by_altitude: ByAltitudeIn | None = None
    approach: ApproachIn | None = None
    pattern: PatternIn | None = None
    condition: tuple[ConditionIn, ...] = ()
    low: LimitsIn = LimitsIn()
    high: LimitsIn = LimitsIn()
    phases: Annotated[tuple[Phase, ...], BeforeValidator(as_list)] = ()
    points: Texts = ()
    words: Words = Field(default_factory=dict)
    unless: Words = Field(default_factory=dict)
    applies: AppliesIn = AppliesIn()
    preset: Literal[""] | Slug = ""
    choice: str = ""
    cause: Text
    of_engine: bool = False
    message: Text
    source: Text
    next_step: Text
    caution: str = ""
    business_days: Annotated[int, Field(ge=1, le=250)] | None = None
    is_law: bool = False

    @model_validator(mode="after")
    def _check(self) -> Self:
        shapes = [name for name in SHAPES if getattr(self, name) is not None]
        if len(shapes) != 1:
            raise ValueError(f"a rule has one shape, this has {len(shapes)}|give one of {', '.join(SHAPES)}")
        if self.pattern is not None:
            self._check_pattern()
        else:
            self._check_figures()
        return self

    def _check_pattern(self) -> None:
        if self.quantity or self.low.fact or self.high.fact:
            raise ValueError("quantity and limits of a pattern stand in its conditions|move them there")
        if self.of_engine:
            raise ValueError("of_engine is not for a pattern|say where it holds with at")
        if not any(condition.flags for condition in self.condition):
            raise ValueError("no condition flags a value|ask one to be flagged, or let one call out its value")

    def _check_figures(self) -> None:
        if self.condition:
            raise ValueError("conditions belong to a pattern|leave them out")
        if not self.quantity:
            raise ValueError("quantity is missing|say what is measured")
        if self.approach is not None and (self.quantity != LASH or self.unit != "h" or self.high.fact):
            raise ValueError('approach tells hours of lash|give quantity = "lash", unit = "h", and limits in low alone')
        is_spec = self.bounds is not None and self.bounds.basis is Basis.SPEC
        if is_spec is bool(self.low.fact or self.high.fact):
            raise ValueError("limits: one is needed, but none with the check range of the engine|give low or high")
        if self.change is not None and self.change.since is Since.OWN_BEST and self.low.fact and self.high.fact:
            raise ValueError(
                "what is best is told by the side a limit is on|give low or high, the other in another rule"
            )
        for end, limits in ((End.LOW, self.low.fact), (End.HIGH, self.high.fact)):
            check_limits(self._shape(), limits, end)
        if not is_spec and not self._unit_fits():
            raise ValueError(f"unit {self.unit!r} does not fit {self.quantity}|write one that does, % for a share")
        if self._is_percent and dimension(QUANTITIES[self.quantity].unit) == "temperature":
            raise ValueError('a percentage of a temperature is another in °F|compare by = "difference"')

    @property
    def _is_percent(self) -> bool:
        compared = self.against_sheet or self.change
        return compared is not None and compared.by is not By.DIFFERENCE

    def _unit_fits(self) -> bool:
        """Whether the limits are in a unit of what the shape works out: of a comparison percent, else of the quantity."""
        is_share = self.bounds is not None and self.bounds.basis is Basis.NAMEPLATE
        if self._is_percent or is_share:
            return self.unit == "%"
        if self.approach is not None:
            return True  # its unit is hours
        return dimension(self.unit) == dimension(QUANTITIES[self.quantity].unit)

    @property
    def fact(self) -> Rule:
        """The rule as the rules see it."""
        plain = ("id", "kinds", "quantity", "unit", "phases", "points", "words", "unless", "preset", "choice")
        texts = ("cause", "of_engine", "message", "source", "next_step", "caution", "business_days", "is_law")
        return Rule(
            **{name: getattr(self, name) for name in (*plain, *texts)},
            shape=self._shape(),
            low=self.low.fact,
            high=self.high.fact,
            applies=AppliesTo(**dict(self.applies)),
        )

    def _shape(self) -> Shape:
        name = next(name for name in SHAPES if getattr(self, name) is not None)
        fields = dict(getattr(self, name))
        if name == "pattern":
            fields["conditions"] = tuple(condition.fact for condition in self.condition)
        shape: Shape = SHAPES[name](**fields)
        return shape


def check_limits(shape: Shape, limits: Limits, end: End) -> None:
    """Refuse limits on one side that cannot be meant: an alarm before its alert, or no multiple, or no percentage.

    A figure out at an alarm must be out at the alert. Multiples of a spread count outwards on both sides.
    """
    alert, alarm = limits.alert, limits.alarm
    counts_up = isinstance(shape, Statistical) and shape.method is not Method.PERCENTILE
    if alert is not None and alarm is not None:
        further = alarm.value - alert.value if end is End.HIGH or counts_up else alert.value - alarm.value
        if further < 0 or (further == 0 and alarm.reach and not alert.reach):
            raise ValueError(f"{end}: the alarm comes before the alert|put the alarm further out")
    if isinstance(shape, Statistical):
        figures = [limit.value for limit in (alert, alarm) if limit is not None]
        if counts_up and not all(figure > 0 for figure in figures):
            raise ValueError(f"{end}: a limit is no multiple of the spread|give figures above 0, on both sides")
        if not counts_up and not all(0 < figure < 100 for figure in figures):
            raise ValueError(f"{end}: a limit is no percentage of the samples|give figures between 0 and 100")
