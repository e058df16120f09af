"""What pulls a line's next check forward, in words: in short for a list, in full for the working."""

from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.lines import DueLine, TriggerLine
from fleetcare.domain.quantities import BASE_UNIT, Kind, plain
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.pulls import foreseen_for
from fleetcare.rules.explain_projection import say_ahead, say_likely_so_far, say_obstacles, say_reached

if TYPE_CHECKING:
    from fleetcare.domain.wear import Pull


def say_pull(pull: "Pull", facts: ItemFacts) -> str:
    """Say in short what pulls: "pulled forward: 3E reaches 0.40 mm by 4310 to 4620 h"."""
    kind = pull.wear.kind
    reached = say_reached(pull.projection, pull.wear.unit, BASE_UNIT[kind], _of_life(facts, kind))
    return f"pulled forward: {pull.wear.subject} {reached}{', due now' if pull.is_reached else ''}"


def explain_next_check(line: DueLine, trigger: TriggerLine, facts: ItemFacts) -> list[tuple[str, str]]:
    """Give the pull of a trigger with its sum, and what every other subject of its task says; nothing without sheets."""
    foreseen = foreseen_for(facts, line, trigger)
    if not foreseen:
        return []
    over, of = BASE_UNIT[trigger.kind], _of_life(facts, trigger.kind)
    pulling = trigger.pull.wear.subject if trigger.pull is not None else ""
    later = [
        f"{one.wear.subject} {say_reached(one.projection, one.wear.unit, over, of)}"
        for one in foreseen
        if one.projection.early is not None and one.wear.subject != pulling
    ]
    so_far = [
        f"{one.wear.subject} {say_likely_so_far(one.projection, one.wear.unit, over, of)}"
        for one in foreseen
        if one.projection.likely_so_far is not None
    ]
    labels = [
        ("pulled forward", _say_sum(trigger.pull, trigger, facts) if trigger.pull is not None else ""),
        ("also reached", ", ".join(later)),
        ("likely so far", f"{', '.join(so_far)}: moves no check yet" if so_far else ""),
        ("not projected", say_obstacles([(one.wear.subject, one.projection) for one in foreseen])),
    ]
    return [(label, text) for label, text in labels if text]


def _say_sum(pull: "Pull", trigger: TriggerLine, facts: ItemFacts) -> str:
    """Say which subject, how fast, when at its limit, and how much earlier than the own point that is."""
    over, of, wear = BASE_UNIT[pull.wear.kind], _of_life(facts, pull.wear.kind), pull.wear
    assert isinstance(trigger.own, Decimal)
    dial = facts.counters[wear.kind].dial_of(pull.at) if of else None
    at = f"{_tenth(pull.at)} {over}{f', {_tenth(dial)} {over} on the dial' if dial is not None else ''}"
    when = (
        f"the early end is behind it: due from its last value at {at}"
        if pull.is_reached
        else f"to be checked at the early end, {at}"
    )
    count = sum(len(segment.points) for segment in wear.segments)
    by_log = ", topped up by the log" if wear.is_topped_up_by_log else ""
    return (
        f"{wear.subject} {say_ahead(pull.projection, wear.unit, over, of)} (four times in five; {count} values, the last of"
        f" {wear.measured_on.isoformat()}{by_log}); {when}: {_tenth(trigger.own - pull.at)} {over} before its own point"
    )


def _of_life(facts: ItemFacts, kind: Kind) -> str:
    """Give what is said after life totals the dial does not show."""
    counter = facts.counters[kind]
    assert counter.latest is not None
    life = counter.latest.life
    return "" if counter.dial_of(life) == life else " of life"


def _tenth(figure: Decimal) -> str:
    return plain(round(figure, 1))
