"""What a shop may change of a shipped rule: its limits, or that it counts at all, and for which engines a preset is on."""

from dataclasses import replace
from typing import Annotated, Self

from pydantic import BeforeValidator, Field, model_validator

from fleetcare.domain.rule_book import End, Limits, Rule, SwitchedOff
from fleetcare.rulebook.rule_in import check_limits
from fleetcare.rulebook.rule_pieces import Form, LimitsIn, Slug, Text, as_list


class Override(Form):
    """A change to a shipped rule: limits, each side as far as given, or `off` with the reason in `why`."""

    id: Slug
    low: LimitsIn | None = None
    high: LimitsIn | None = None
    off: bool = False
    why: str = ""

    @model_validator(mode="after")
    def _check(self) -> Self:
        if self.off and not self.why.strip():
            raise ValueError('a rule is switched off without a reason|say in why = "..." why it does not fit')
        if self.off is (self.low is not None or self.high is not None):
            raise ValueError("it changes nothing, or too much|give limits in low or high, or off = true with why")
        return self

    @property
    def switched_off(self) -> SwitchedOff:
        """The rule that is off, and why."""
        return SwitchedOff(self.id, self.why.strip())


class Chosen(Form):
    """The engines a preset is on for, by tag."""

    name: Slug
    engines: Annotated[tuple[Text, ...], BeforeValidator(as_list), Field(min_length=1)]


def override(rule: Rule, change: Override) -> Rule:
    """Give a rule with the limits a shop sets; its source then says that they are the shop's.

    Raises ValueError, text and remedy joined by a bar, where the rule has no limits on that side or they cross.
    """
    if change.off:
        return rule
    if rule.is_law:
        raise ValueError("its limits are law|leave it, or write a rule of your own beside it")
    reason = f" ({change.why.strip()})" if change.why.strip() else ""
    return replace(
        rule,
        low=_changed(rule, End.LOW, rule.low, change.low),
        high=_changed(rule, End.HIGH, rule.high, change.high),
        source=f"limits set by the shop{reason}; the rule: {rule.source}",
    )


def _changed(rule: Rule, end: End, shipped: Limits, given: LimitsIn | None) -> Limits:
    if given is None:
        return shipped
    if not shipped:
        raise ValueError(f"it has no {end} limits|change the side it has, or write a rule of your own")
    limits = Limits(given.fact.alert or shipped.alert, given.fact.alarm or shipped.alarm)
    check_limits(rule.shape, limits, end)
    return limits
