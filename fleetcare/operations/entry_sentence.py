"""An entry line read back: what was understood, and what storing it would do, as one sentence."""

from collections.abc import Iterable, Iterator
from datetime import date
from decimal import Decimal

from fleetcare.domain.lines import DueLine, State, TriggerLine
from fleetcare.domain.quantities import Kind, from_base, plain, tenth
from fleetcare.domain.schedules import Combine, Task
from fleetcare.drafts.entry_understood import Understood
from fleetcare.operations.entry_trial import Outcome
from fleetcare.rules.due.due_list import in_order
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.row import unit_of

_MONTHS = ("Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec")
_WEEKDAYS = ("Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun")
_MOST_NAMED = 3
_WORTH_A_WORD = (State.OVERDUE, State.DUE, State.NEAR)


def say_understood(line: Understood, on: date) -> str:
    """Say what is clear of a line; the day only where it is another than the one worked on."""
    words = [
        line.tag,
        *(f"{in_sentence(task)}{' in part' if line.is_part_done else ''}" for task in line.tasks),
        f'repair "{line.repair}"' if line.repair else "",
        f'defect "{line.defect}"' if line.defect else "",
        *(f"{figure} on the dial" for figure in line.figures),
        f"{line.filled}" if line.filled else "",
        f"{line.top_up} topped up" if line.top_up else "",
        f'note "{line.note}"' if line.note else "",
        f"on {_WEEKDAYS[line.on.weekday()]} {say_day(line.on)}" if line.on != on else "",
        f"{line.by}{' (a new name)' if line.is_new_name else ''}" if line.by else "",
    ]
    return ", ".join(word for word in words if word)


def say_done(line: Understood, outcome: Outcome, lines: Iterable[DueLine]) -> str:
    """Say a line with what storing it would do; `lines` are those of its item afterwards."""
    effects = [*_say_next(line, outcome, list(lines)), *_say_effects(line, outcome)]
    return "; ".join([say_understood(line, outcome.facts.on), *effects])


def _say_next(line: Understood, outcome: Outcome, lines: list[DueLine]) -> Iterator[str]:
    """Say the next point of each task done; of a plain reading what its item needs first."""
    by_task = {one.task.id: one for one in lines}
    if not line.is_work:
        first = next((one for one in in_order(lines) if one.state is not State.UNSET), None)
        if first is not None:
            yield f"next {in_sentence(first.task.name)} {say_points(first, outcome.facts)}"
        return
    said = [
        (task.name, say_points(by_task[task.id], outcome.facts) if task.id in by_task else _say_no_line(task, line.on))
        for task in outcome.closed
    ]
    if len(said) == 1:
        yield f"next {said[0][1]}"
    elif said:
        yield "next " + ", ".join(f"{in_sentence(name)} {points}" for name, points in said)


def _say_no_line(task: Task, on: date) -> str:
    return "only when called for" if task.version_on(on).on_condition else "never, it is done once"


def _say_effects(line: Understood, outcome: Outcome) -> Iterator[str]:
    if outcome.covered:
        yield f"covers {', '.join(in_sentence(small.name) for small, _ in outcome.covered)}"
    for task, period in outcome.periods:
        yield f"{in_sentence(task.name)}: {period}"
    for task, why in outcome.open:
        yield f"{in_sentence(task.name)} stays open: {why}"
    for kind, life in outcome.assumed.items():
        yield f"counted from {_say_life(life.value, kind, outcome.facts, is_sure=False)}, as no figure is given"
    if line.filled is not None:
        yield f"{line.filled} filled in goes into the note"
    if outcome.suspects:
        yield f"set aside as suspect: {_readings(outcome.suspects)}"
    if outcome.known:
        yield f"said already by {_readings(outcome.known)}"


def _readings(numbers: tuple[int, ...]) -> str:
    """Name a few readings by their numbers, count many."""
    if len(numbers) > _MOST_NAMED:
        return f"{len(numbers)} readings"
    return ", ".join(f"reading {number}" for number in numbers)


def say_points(line: DueLine, facts: ItemFacts) -> str:
    """Say when a line is due, as the dial shows it: "1484 h or 20 Apr 2027"; and its state unless it is clear."""
    points = [_say_point(trigger, facts) for trigger in line.triggers]
    if line.version.combine is Combine.LAST:
        said = " and ".join(points)
    else:
        said = " or ".join([", ".join(points[:-1]), points[-1]] if len(points) > 1 else points)
    if line.not_later_than is not None:
        said += f", at the latest {say_day(line.not_later_than)}"
    return f"{said}, {line.state}" if line.state in _WORTH_A_WORD else said


def _say_point(trigger: TriggerLine, facts: ItemFacts) -> str:
    if trigger.point is None:
        return f"by {trigger.kind} not known"
    if isinstance(trigger.point, date):
        return say_day(trigger.point)
    return _say_life(trigger.point, trigger.kind, facts, is_sure=not trigger.approximate)


def _say_life(life: Decimal, kind: Kind, facts: ItemFacts, *, is_sure: bool) -> str:
    """Say a life total as the dial shows it, ~ before one that rests on no reading."""
    counter, unit = facts.counters.get(kind), unit_of(facts, kind)
    dial = counter.dial_of(life) if counter is not None else None
    shown = (
        f"{plain(tenth(from_base(life, unit) if dial is None else dial))} {unit}{' of life' if dial is None else ''}"
    )
    return shown if is_sure else f"~{shown}"


def say_day(day: date) -> str:
    """Say a day in short, whatever the computer's language: 20 Apr 2027."""
    return f"{day.day} {_MONTHS[day.month - 1]} {day.year}"


def in_sentence(name: str) -> str:
    """Give a task's name as it stands inside a sentence; one that begins with an abbreviation stays as it is."""
    return name[:1].lower() + name[1:] if name[1:2].islower() else name
