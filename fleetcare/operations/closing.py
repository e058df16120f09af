"""What an entry closes, from the facts of its item: stored by the log and read back by the entry line alike."""

from collections.abc import Sequence
from datetime import date

from fleetcare.domain.log import Done
from fleetcare.errors import Refused
from fleetcare.operations.load import entry_lives, own_readings
from fleetcare.operations.sheets_closing import Sheets, why_open
from fleetcare.rules.due.closing import Closing, close
from fleetcare.rules.due.facts import ItemFacts


def done_by(facts: ItemFacts, entry: int, on: date) -> Done:
    """Give an entry of a day as work done, with the life totals it counts from; its own figures are among the facts."""
    return Done(entry, entry, on, entry_lives(facts.counters, own_readings(facts.counters), entry, on))


def closings(
    facts: ItemFacts, done: Done, task_ids: Sequence[int], sheets: Sheets, remedy: str, elsewhere: Sequence[int] = ()
) -> list[Closing]:
    """Give what an entry does to each task it names, and to those done along with them.

    Refuses work without a figure its task counts from; `remedy` says how to give one.
    """
    found = close(facts, task_ids, done, lambda task: why_open(task, done.on, sheets), elsewhere)
    for one in found:
        if one.lacks is not None:
            counts = f"{one.task.name} counts {one.lacks}"
            raise Refused(f"{counts}, and no reading of {facts.item.tag} lies on or before {done.on}", remedy)
    return found


def say_open(closing: Closing) -> str:
    """Say why a task stays open all the same, empty where it is closed."""
    return "" if closing.closes else f"it {closing.wants}" if closing.wants else closing.work.note
