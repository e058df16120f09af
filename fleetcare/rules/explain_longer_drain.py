"""The advice that an oil could stay in longer, in words: in short for a list, in full for the working."""

from datetime import date
from decimal import Decimal

from fleetcare.domain.lines import DueLine, apart
from fleetcare.domain.quantities import Kind, plain
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.explain_projection import say_ahead
from fleetcare.rules.longer_drain import Bar, LongerDrain, NoAdvice, longer_drain


def say_longer(line: DueLine, facts: ItemFacts) -> str:
    """Say it in short: "oil sound until 4720 h: a supervisor can put it off"; empty where there is no advice."""
    advice = longer_drain(line, facts)
    if not isinstance(advice, LongerDrain):
        return ""
    return f"oil sound until {say_dial(advice.until, facts)}: a supervisor can put it off to there"


def say_no_advice(advice: NoAdvice, facts: ItemFacts) -> str:
    """Say why nothing is advised."""
    if advice.of is None:
        return advice.bar
    subject = advice.of.wear.subject
    match advice.bar:
        case Bar.NOT_PROJECTED:
            return f"{advice.bar}: {subject}: {say_ahead(advice.of.projection, advice.of.wear.unit, 'h')}"
        case Bar.NOT_BEYOND if advice.until is not None:
            return f"{subject} is only known to keep inside its limits until {say_dial(advice.until, facts)}"
        case _:
            return f"{advice.bar}: {subject}"


def bounds_of(line: DueLine) -> list[date]:
    """Give the days a line is due on all the same, whatever its hours are put off to."""
    days = [trigger.own for trigger in line.triggers if isinstance(trigger.own, date)]
    return sorted([*days, *([line.not_later_than] if line.not_later_than is not None else [])])


def explain_longer(line: DueLine, facts: ItemFacts) -> list[tuple[str, str]]:
    """Give the advice with what it rests on and where it ends; nothing where there is none."""
    advice = longer_drain(line, facts)
    if not isinstance(advice, LongerDrain):
        return []
    own = line.deciding.own
    assert own is not None
    beyond = plain(round(apart(advice.until, own), 1))
    days = bounds_of(line)
    by_log = ", topped up by the log" if any(wear.is_topped_up_by_log for wear in facts.sound_oil) else ""
    never = f", and never beyond {min(days)}" if days else ""
    return [
        (
            "longer drain",
            f"the newest sample flags nothing, and all that can be projected keeps inside its limits until"
            f" {say_dial(advice.until, facts)}, {beyond} h beyond its own point (four times in five; looked at:"
            f" {', '.join(advice.subjects)}; beyond that {advice.subject} may not{by_log}). Advice only: the line stays"
            f" where it is until a supervisor takes it, with a reason, to no later than there{never}. Ask the engine's"
            " manual first",
        )
    ]


def say_dial(life: Decimal, facts: ItemFacts) -> str:
    """Say hours of life as the dial shows them, as they are where no dial comes to them."""
    dial = facts.counters[Kind.HOURS].dial_of(life)
    return f"{plain(life)} h of life" if dial is None else f"{plain(round(dial, 1))} h on the dial"
