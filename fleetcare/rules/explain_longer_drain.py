"""The advice that an oil could stay in longer, in words: in short for a list, in full for the working."""

from fleetcare.domain.lines import DueLine, apart
from fleetcare.domain.quantities import Kind, plain
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.longer_drain import LongerDrain, longer_drain


def say_longer(line: DueLine, facts: ItemFacts) -> str:
    """Say it in short: "oil sound until 4720 h: a supervisor can put it off"; empty where there is no advice."""
    advice = longer_drain(line, facts)
    return f"oil sound until {_dial(advice, facts)}: a supervisor can put it off to there" if advice is not None else ""


def explain_longer(line: DueLine, facts: ItemFacts) -> list[tuple[str, str]]:
    """Give the advice with what it rests on and where it ends; nothing where there is none."""
    advice = longer_drain(line, facts)
    if advice is None:
        return []
    own = line.deciding.own
    assert own is not None
    beyond = plain(round(apart(advice.until, own), 1))
    days = [str(t.own) for t in line.triggers if t.kind is Kind.CALENDAR and t.own is not None]
    if line.not_later_than is not None:
        days.append(line.not_later_than.isoformat())
    by_log = ", topped up by the log" if any(wear.is_topped_up_by_log for wear in facts.sound_oil) else ""
    never = f", and never beyond {min(days)}" if days else ""
    return [
        (
            "longer drain",
            f"the newest sample flags nothing, and all that can be projected keeps inside its limits until"
            f" {_dial(advice, facts)}, {beyond} h beyond its own point (four times in five; looked at:"
            f" {', '.join(advice.subjects)}; {advice.subject} may not beyond that{by_log}). Advice only: the line stays where it is until a"
            f" supervisor puts it off, with a reason, to no later than there{never}. Ask the engine's manual first",
        )
    ]


def _dial(advice: LongerDrain, facts: ItemFacts) -> str:
    """Give the figure of the dial there, that of life where no dial comes to it."""
    dial = facts.counters[Kind.HOURS].dial_of(advice.until)
    return f"{plain(advice.until)} h of life" if dial is None else f"{plain(round(dial, 1))} h on the dial"
