"""What an entry line would do if it were stored, worked out on facts: nothing is stored, nobody is kept waiting."""

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.meters import LifeFigure, Reading
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Task
from fleetcare.drafts.entry_figures import DialFigure
from fleetcare.drafts.entry_parts import Part, typed_figure
from fleetcare.drafts.entry_questions import Choice, Question
from fleetcare.drafts.entry_understood import Understood
from fleetcare.errors import Refused
from fleetcare.operations.against_past import (
    NewReading,
    dial_of,
    hold_against_past,
    refuse_unlike_dial,
    same_reading,
    say_collision,
    what_falls_off,
)
from fleetcare.operations.closing import closings, done_by, say_open
from fleetcare.operations.entries import NOT_YET
from fleetcare.operations.find import FoundItem, FoundMeter, find_item, find_meters, pick_meter
from fleetcare.operations.load import Trial, item_facts
from fleetcare.operations.sheets_closing import NONE_CAME, why_open
from fleetcare.rules.due.closing import Closing, with_done
from fleetcare.rules.due.facts import ItemFacts

if TYPE_CHECKING:
    from sqlalchemy import Connection


@dataclass(slots=True)
class Outcome:
    """What storing a line would do.

    `facts` are those of its item afterwards; `closed` and `covered` (each with the bigger job) are tasks done,
    `open` those that stay open all the same, with why; `periods` what a once-each task's work serves; `assumed` life
    totals taken for figures nobody gave; `suspects` readings that then count for nothing; `known` those that say the same
    already.
    """

    facts: ItemFacts
    closed: list[Task] = field(default_factory=list)
    covered: list[tuple[Task, Task]] = field(default_factory=list)
    open: list[tuple[Task, str]] = field(default_factory=list)
    periods: list[tuple[Task, str]] = field(default_factory=list)
    assumed: dict[Kind, LifeFigure] = field(default_factory=dict)
    suspects: tuple[int, ...] = ()
    known: tuple[int, ...] = ()


def try_out(connection: "Connection", line: Understood, on: date) -> Outcome | list[Question]:
    """Work out what a line without open questions would do on a day, or what has to be asked first.

    Raises Refused for what cannot be stored however it is answered.
    """
    item = find_item(connection, line.tag)
    figures = [_hold(connection, item, line, dial) for dial in line.dials]
    questions = [figure.question for figure in figures if figure.question is not None]
    if questions:
        return questions
    readings = [reading for figure in figures for reading in figure.readings(line)]
    suspects = tuple(suspect for figure in figures for suspect in figure.suspects)
    trial = Trial(tuple(replace(one, id=-1 - at) for at, one in enumerate(readings)), frozenset(suspects))
    facts = item_facts(connection, on, [item.id], trial)[0]
    known = () if line.is_work else tuple(one.known for one in figures if one.known is not None)
    outcome = Outcome(facts, suspects=suspects, known=known)
    if line.is_part_done:
        return outcome
    questions = list(_ask_for_sheets(facts, line))
    if not questions:
        _do_work(outcome, line)
    return questions or outcome


@dataclass(frozen=True, slots=True)
class _Held:
    """A figure held against the past of its meter: what is asked about it, and what falls off where it is sure."""

    reading: Reading
    question: Question | None
    suspects: tuple[int, ...]
    known: int | None

    def readings(self, line: Understood) -> list[Reading]:
        """Give what would be stored of it: with work the entry's own reading, after one that explains it."""
        told = [self.reading] if line.readings() else []
        own = replace(self.reading, rolled_over=False, entry_id=NOT_YET)
        return [*told, own] if line.is_work else told


def _hold(connection: "Connection", item: FoundItem, line: Understood, dial: DialFigure) -> _Held:
    """Hold a figure against the past. What breaks with it is asked about, unless somebody is sure."""
    meter = pick_meter(find_meters(connection, item.id, line.on), dial.figure, item.tag)
    new = NewReading(line.on, dial.figure, line.has_rolled_over)
    trial, collisions = hold_against_past(connection, item, meter, [new])
    asked, typed, choices = "", typed_figure(dial.figure), [Choice("a new meter was fitted", None, "meter")]
    try:
        refuse_unlike_dial(item, meter, new, trial)
        if collisions and not line.is_sure:
            asked = say_collision(item, meter, new, collisions[0])
            choices.insert(0, Choice("it is right; what it breaks with is set aside", f"{typed} sure"))
    except Refused as error:
        asked = str(error)
    if asked and not new.rolled_over and _fits(connection, item, meter, replace(new, rolled_over=True)):
        choices.insert(0, Choice("the dial went round to 0", f"{typed} rolled over"))
    return _Held(
        reading=Reading(-1, meter.id, line.on, dial_of(dial.figure, meter), line.has_rolled_over),
        question=Question(dial.start, dial.end, asked, tuple(choices)) if asked else None,
        suspects=what_falls_off(connection, meter, trial) if collisions and line.is_sure else (),
        known=same_reading(trial, meter, new),
    )


def _fits(connection: "Connection", item: FoundItem, meter: FoundMeter, new: NewReading) -> bool:
    """Tell whether a reading breaks with nothing."""
    trial, collisions = hold_against_past(connection, item, meter, [new])
    try:
        refuse_unlike_dial(item, meter, new, trial)
    except Refused:
        return False
    return not collisions


def _tasks_named(facts: ItemFacts, line: Understood) -> list[Task]:
    by_name = {task.name: task for task in facts.tasks if task.removed_on is None}
    return [by_name[name] for name in line.tasks]


def _ask_for_sheets(facts: ItemFacts, line: Understood) -> Sequence[Question]:
    """Ask about work that closes only with a sheet, which no line can hold."""
    where = {taken.said: taken for taken in line.taken if taken.part is Part.TASK}
    questions = []
    for task in _tasks_named(facts, line):
        sheet = task.version_on(line.on).needs_sheet
        if why := why_open(task, line.on, NONE_CAME):
            start, end = where[task.name].start, where[task.name].end
            choices = [Choice(f"with its {sheet} sheet", None, "sheet")]
            if len(line.tasks) == 1:
                choices.append(Choice("done in part, it stays open", f"{line.text[start:end]} part-done"))
            questions.append(Question(start, end, f"{task.name} {why}", tuple(choices)))
    return questions


def _do_work(outcome: Outcome, line: Understood) -> None:
    """Let the tasks of a line be done, and with them what they cover, as the log does when it is stored."""
    facts = outcome.facts
    done = done_by(facts, NOT_YET, line.on)
    named = [task.id for task in _tasks_named(facts, line)]
    stored: list[Task] = []
    for one in closings(facts, done, named, NONE_CAME, "say what the dial showed"):
        if not one.closes:
            outcome.open.append((one.task, say_open(one)))
        elif one.along_with is None:
            outcome.closed.append(one.task)
        else:
            outcome.covered.append((one.task, one.along_with))
        if one.closes and (one.work.served or one.work.note):
            outcome.periods.append((one.task, _say_period(one)))
        if one.closes or one.along_with is None:
            stored.append(one.task)
    counted = {trigger.kind for task in stored for trigger in task.version_on(line.on).counted}
    outcome.assumed = {kind: life for kind, life in done.life.items() if kind in counted and life.approximate}
    outcome.facts = with_done(facts, [task.id for task in stored], done)


def _say_period(closing: Closing) -> str:
    """Say which period work serves, or why it serves none."""
    work = closing.work
    return f"serves {work.served}" if work.served else f"{work.note}, the next one stays open"
