"""What pulls a line's next check forward, in words: in short for a list, in full for the working."""

from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.lines import DueLine, TriggerLine
from fleetcare.domain.quantities import BASE_UNIT, plain
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.pulls import foreseen_for
from fleetcare.rules.explain_projection import say_ahead, say_obstacles, say_reached

if TYPE_CHECKING:
    from fleetcare.domain.wear import Pull

_TENTH = Decimal("0.1")


def say_pull(pull: "Pull") -> str:
    """Say in short what pulls: "pulled forward: 3E reaches 0.40 mm by 4310 to 4620 h"."""
    reached = say_reached(pull.projection, pull.wear.unit, BASE_UNIT[pull.wear.kind])
    return f"pulled forward: {pull.wear.subject} {reached}{', due now' if pull.is_reached else ''}"


def explain_next_check(line: DueLine, trigger: TriggerLine, facts: ItemFacts) -> list[tuple[str, str]]:
    """Give the pull of a trigger with its sum, and what every other subject of its task says; nothing without sheets."""
    foreseen = foreseen_for(facts, line, trigger)
    if not foreseen:
        return []
    over = BASE_UNIT[trigger.kind]
    pulling = trigger.pull.wear.subject if trigger.pull is not None else ""
    later = [
        f"{one.wear.subject} {say_reached(one.projection, one.wear.unit, over)}"
        for one in foreseen
        if one.projection.early is not None and one.wear.subject != pulling
    ]
    labels = [
        ("pulled forward", _say_sum(trigger.pull, trigger) if trigger.pull is not None else ""),
        ("also reached", ", ".join(later)),
        ("not projected", say_obstacles([(one.wear.subject, one.projection) for one in foreseen])),
    ]
    return [(label, text) for label, text in labels if text]


def _say_sum(pull: "Pull", trigger: TriggerLine) -> str:
    """Say which subject, how fast, when at its limit, and how much earlier than the own point that is."""
    over, wear, trend = BASE_UNIT[pull.wear.kind], pull.wear, pull.projection.trend
    assert isinstance(trigger.own, Decimal)
    assert trend is not None
    when = (
        f"the early end is behind it: due from its last value at {plain(round(pull.at, 1))} {over}"
        if pull.is_reached
        else f"to be checked at the early end, {plain(round(pull.at, 1))} {over}"
    )
    values = f"{trend.df} degrees of freedom, measured last on {wear.measured_on.isoformat()}"
    earlier = plain((trigger.own - pull.at).quantize(_TENTH))
    return (
        f"{wear.subject} {say_ahead(pull.projection, wear.unit, over)} (four times in five; {values});"
        f" {when}, {earlier} {over} before its own point"
    )
