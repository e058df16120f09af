"""The advice that a sound oil could stay in longer: told of a line, taken by a supervisor alone, held against a deferral."""

from dataclasses import dataclass
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.lines import DueLine
from fleetcare.domain.measured import OIL
from fleetcare.domain.quantities import Figure, Kind
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem, find_item, find_task
from fleetcare.operations.load import item_facts
from fleetcare.operations.settings import supervisors
from fleetcare.operations.sheet_report import last_report
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.explain_longer_drain import bounds_of, say_dial, say_no_advice
from fleetcare.rules.longer_drain import Bar, LongerDrain, longer_drain, sound_beyond

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class Advised:
    """The dial figure until which an oil is advised to stay in, and what is said of it."""

    until: Figure
    said: str


def find_advice(connection: "Connection", tag: str, task: str, on: "date") -> Advised | None:
    """Give the advice for a task of an item on a day; None where there is none, or no such line."""
    item = find_item(connection, tag)
    task_id = find_task(connection, item, task)
    facts = item_facts(connection, on, [item.id])[0]
    line = next((line for line in item_lines(facts) if line.task.id == task_id), None)
    advice = longer_drain(line, facts) if line is not None else None
    if line is None or not isinstance(advice, LongerDrain):
        return None
    return Advised(_figure(advice, facts), _say(advice, line, facts))


def take_advice(connection: "Connection", item: FoundItem, line: DueLine, facts: ItemFacts, by: str) -> Figure:
    """Give the dial figure an advised line is put off to by somebody.

    Refuses a line without an advice, saying why, and whoever is no supervisor of the shop.
    """
    advice = longer_drain(line, facts)
    if not isinstance(advice, LongerDrain):
        why = say_no_advice(advice, facts)
        told = _of_sample(connection, item, facts) if advice.bar is Bar.NO_SAMPLE else why
        raise Refused(
            f"nothing is advised for {line.task.name} of {item.tag}: {told}",
            "see its working, or put it off without the advice",
        )
    _check_supervisor(connection, by)
    return _figure(advice, facts)


def say_beyond(line: DueLine, facts: ItemFacts, after: ItemFacts) -> str:
    """Say until when the oil is known to be sound where a line is now put off further; empty where it is not.

    `facts` are those before it was put off, `after` those with it.
    """
    advice = sound_beyond(line, facts)
    now = next((one for one in item_lines(after) if one.task.id == line.task.id), None)
    if now is None or now.deferral is None or not isinstance(advice, LongerDrain):
        return ""
    hours = next(trigger for trigger in now.triggers if trigger.kind is Kind.HOURS)
    is_open = Kind.HOURS not in {*now.deferral.until_life, *now.deferral.caps}
    is_beyond = isinstance(hours.point, Decimal) and hours.point > advice.until
    if not (hours.deferred and (is_open or is_beyond)):
        return ""
    return (
        f"the oil is only known to be sound until {say_dial(advice.until, facts)}; nothing sampled speaks for it beyond"
    )


def _say(advice: LongerDrain, line: DueLine, facts: ItemFacts) -> str:
    """Say an advice as a form shows it: until where, by what, and what ends it all the same."""
    looked = ", ".join(advice.subjects)
    days = bounds_of(line)
    bound = f"; it stays due by {days[0].isoformat()} whatever its hours" if days else ""
    sound = f"oil sound until {say_dial(advice.until, facts)} (looked at: {looked}){bound}"
    return f"{sound}; ask the engine's manual first"


def _check_supervisor(connection: "Connection", by: str) -> None:
    known = supervisors(connection)
    if not known:
        raise Refused(
            "nobody is named as a supervisor, and only a supervisor may let an oil stay in longer",
            f"name them: fleetcare setting supervisors {by!r}, several with commas between",
        )
    if by.casefold() not in {name.casefold() for name in known}:
        raise Refused(
            f"{by} is not among the supervisors ({', '.join(known)})",
            "let one of them take it, or name another: fleetcare setting supervisors NAMES",
        )


def _figure(advice: LongerDrain, facts: ItemFacts) -> Figure:
    """Give the advised hours of life as what the dial shows there, in the meter's unit."""
    counter = facts.counters[Kind.HOURS]
    dial = counter.dial_of(advice.until)
    assert dial is not None  # the meter now counting shows less, and the advice lies beyond
    assert counter.unit is not None
    return Figure(dial, counter.unit)


def _of_sample(connection: "Connection", item: FoundItem, facts: ItemFacts) -> str:
    """Say of the newest oil sample why its oil is not known to be sound."""
    report = last_report(connection, item, facts.on, OIL)
    if report is None:
        return "no oil sample of it is there"
    found = ", ".join(dict.fromkeys(one.row.cause for one in report.findings))
    day = report.sheet.on.isoformat()
    if found:
        return f"its sample of {day} flags {found}"
    return f"its sample of {day} flags nothing, but nothing in it can be followed over the hours on the oil yet"
