"""What one entry does to the tasks it names and to those they cover: which close, which stay open, and why.

What is stored and what is read back before storing are worked out here alike.
"""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace

from fleetcare.domain.lines import PastWork
from fleetcare.domain.log import Done
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Task
from fleetcare.rules.due.covering import closure
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.replay import replay


@dataclass(frozen=True, slots=True)
class Closing:
    """What an entry does to one task, named by itself or done along with a bigger one.

    `work` is what the replay makes of it: the period it serves, or why it counts for nothing. `lacks` is the kind of
    figure it cannot do without and has not got; nothing is then known of it. `wants` says why it closes only with a sheet.
    """

    task: Task
    along_with: Task | None
    work: PastWork
    lacks: Kind | None = None
    wants: str = ""

    @property
    def closes(self) -> bool:
        """Whether the task is done by it."""
        return self.work.counted and not self.wants and self.lacks is None


def close(
    facts: ItemFacts,
    task_ids: Sequence[int],
    done: Done,
    why_open: Callable[[Task], str],
    elsewhere: Sequence[int] = (),
) -> list[Closing]:
    """Give what an entry does to each task it names, in order, each followed by those done along with it.

    `done` is the entry with its life totals, `why_open` says what of a sheet keeps a task open, empty for nothing. A task
    named, done `elsewhere` by another entry of the same day, removed or on condition is not done along with another.
    """
    tasks = {task.id: task for task in facts.tasks}
    covers = {task.id: task.version_on(done.on).covers for task in facts.tasks}
    taken = [*task_ids, *elsewhere]
    found: list[Closing] = []
    for big in (tasks[task_id] for task_id in dict.fromkeys(task_ids)):
        found.append(_closing(facts, big, None, done, why_open))
        for small in _along(tasks, closure(covers, big.id), done):
            if small.id not in taken:
                one = _closing(facts, small, big, done, why_open)
                found.append(one)
                taken += [small.id] if one.closes else []
    return found


def with_done(facts: ItemFacts, task_ids: Sequence[int], done: Done) -> ItemFacts:
    """Add an entry to the work done on some tasks."""
    more = {task_id: (*facts.done.get(task_id, ()), done) for task_id in task_ids}
    return replace(facts, done={**facts.done, **more})


def _along(tasks: dict[int, Task], covered: Sequence[int], done: Done) -> Iterator[Task]:
    """Give the tasks in use among those covered that are done whenever a bigger one is."""
    for task in (tasks[task_id] for task_id in covered if task_id in tasks):
        if task.removed_on is None and not task.version_on(done.on).on_condition:
            yield task


def _closing(
    facts: ItemFacts, task: Task, along_with: Task | None, done: Done, why_open: Callable[[Task], str]
) -> Closing:
    kinds = [trigger.kind for trigger in task.version_on(done.on).counted]
    lacks = next((kind for kind in kinds if kind in facts.counters and kind not in done.life), None)
    work = PastWork(done.entry_id, done.number, done.on)
    calendar = task.version_on(done.on).calendar
    if calendar is not None and (calendar.once_each is not None or calendar.window_days is not None) and lacks is None:
        past = replay(
            with_done(facts, [task.id], done), task
        ).past  # nothing else leaves a task open, or serves a period
        work = next(one for one in past if one.number == done.number)
    return Closing(task, along_with, work, lacks, why_open(task))
