"""What an entry line would do if it were stored, worked out on facts: nothing is stored, nobody is kept waiting."""

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.lines import PastWork
from fleetcare.domain.log import Done
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
from fleetcare.operations.find import FoundItem, FoundMeter, find_item, find_meters, pick_meter
from fleetcare.operations.load import Trial, entry_lives, item_facts, own_readings
from fleetcare.rules.due.covering import closure
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.replay import replay

if TYPE_CHECKING:
    from sqlalchemy import Connection

_ENTRY = 2**62  # stands for the number the entry would get: after all there are


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
        own = replace(self.reading, rolled_over=False, entry_id=_ENTRY)
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
        if sheet:
            start, end = where[task.name].start, where[task.name].end
            choices = [Choice(f"with its {sheet} sheet", None, "sheet")]
            if len(line.tasks) == 1:
                choices.append(Choice("done in part, it stays open", f"{line.text[start:end]} part-done"))
            questions.append(Question(start, end, f"{task.name} closes only with its {sheet} sheet", tuple(choices)))
    return questions


def _do_work(outcome: Outcome, line: Understood) -> None:
    """Let the tasks of a line be done, and with them what they cover, as the log does when it is stored."""
    facts = outcome.facts
    tasks = {task.id: task for task in facts.tasks}
    covers = {task.id: task.version_on(line.on).covers for task in facts.tasks}
    done = Done(_ENTRY, _ENTRY, line.on, entry_lives(facts.counters, own_readings(facts.counters), _ENTRY, line.on))
    named = [task.id for task in _tasks_named(facts, line)]
    stored: list[int] = []
    for big in [tasks[task_id] for task_id in named]:
        work = _work_of(facts, big, done)
        stored.append(big.id)
        _note(outcome, big, work)
        if work.counted:
            outcome.closed.append(big)
        for task in [tasks[task_id] for task_id in closure(covers, big.id) if task_id in tasks]:
            version = task.version_on(line.on)
            if task.id in (*named, *stored) or task.removed_on is not None or version.on_condition:
                continue
            work = _work_of(facts, task, done)
            if version.needs_sheet:
                outcome.open.append((task, f"it closes only with its {version.needs_sheet} sheet"))
                continue
            _note(outcome, task, work)
            if work.counted:
                stored.append(task.id)
                outcome.covered.append((task, big))
    counted = {trigger.kind for task_id in stored for trigger in tasks[task_id].version_on(line.on).counted}
    outcome.assumed = {kind: life for kind, life in done.life.items() if kind in counted and life.approximate}
    outcome.facts = _with_done(facts, stored, done)


def _note(outcome: Outcome, task: Task, work: PastWork) -> None:
    """Keep what is worth saying of work on a task: the period it serves, or why it counts for none."""
    if not work.counted:
        outcome.open.append((task, work.note))
    elif work.served or work.note:
        said = f"serves {work.served}" if work.served else f"{work.note}, the next one stays open"
        outcome.periods.append((task, said))


def _work_of(facts: ItemFacts, task: Task, done: Done) -> PastWork:
    """Say what an entry does to a task. Refuses work without a figure the task needs."""
    for trigger in task.version_on(done.on).counted:
        if trigger.kind in facts.counters and trigger.kind not in done.life:
            raise Refused(
                f"{task.name} counts {trigger.kind}, and no reading of {facts.item.tag} lies on or before {done.on}",
                "say what the dial showed",
            )
    past = replay(_with_done(facts, [task.id], done), task).past
    return next(work for work in past if work.number == done.number)


def _with_done(facts: ItemFacts, task_ids: Sequence[int], done: Done) -> ItemFacts:
    """Add an entry to the work done on some tasks."""
    more = {task_id: (*facts.done.get(task_id, ()), done) for task_id in task_ids}
    return replace(facts, done={**facts.done, **more})
