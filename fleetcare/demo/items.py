"""What the engines and machines of the demo fleet are told in: plate, meters, tasks with how they were kept up, events.

Days are days before the anchor day, a negative number after it.
"""

from collections.abc import Mapping
from dataclasses import dataclass, field

from fleetcare.demo.measured import Measured
from fleetcare.demo.plans import Each, Never, Plan
from fleetcare.demo.steps import Verb
from fleetcare.demo.use import Rhythm
from fleetcare.demo.wear import Gauged

Values = Mapping[str, object]


@dataclass(frozen=True, slots=True)
class Ago:
    """In the values of an entry, the day so many days before the anchor day."""

    days: int


@dataclass(frozen=True, slots=True)
class Shown:
    """In the values of an entry, what the item's meter showed so many days ago, `more` added to the figure.

    `of` names a meter that is not the item's first.
    """

    ago: int = 0
    more: int = 0
    of: str = ""


@dataclass(frozen=True, slots=True)
class Meter:
    """A meter that came with an item: what it showed then, how it runs, and for how many days no round read it.

    Meters with one `seed` run alike. `exercise` are runs entered one by one. `idle` is a stretch without use, from and
    to so many days ago. `replaced` is how many days ago it was replaced, `turned` about how many it rolled over, and
    then it starts where that makes it so.
    """

    kind: str
    unit: str
    start: int
    rhythm: Rhythm
    unread: int = 0
    seed: str = ""
    digits: str = ""
    exercise: Each | None = None
    idle: tuple[int, int] | None = None
    replaced: int | None = None
    turned: int | None = None


@dataclass(frozen=True, slots=True)
class Kept:
    """A task, as typed or by the name it has in the item's schedule, with when it was done, and a note on the last time."""

    task: Values | str
    plan: Plan = field(default_factory=Never)
    note: str = ""

    @property
    def name(self) -> str:
        """The task's name."""
        return self.task if isinstance(self.task, str) else str(self.task["name"])


@dataclass(frozen=True, slots=True)
class Told:
    """Something else that was entered, so many days ago."""

    ago: int
    verb: Verb
    values: Values = field(default_factory=dict)
    name: str = ""
    about: str = ""


@dataclass(frozen=True, slots=True)
class Item:
    """An engine or machine: its tag, the days since the register has it, what its plate says, and its history.

    `schedule` names a shipped schedule and what its tasks count from; `gauged` is how its valve lash was gauged,
    `measured` what else was measured on it.
    """

    tag: str
    came: int
    plate: Values
    meters: tuple[Meter, ...] = ()
    tasks: tuple[Kept, ...] = ()
    told: tuple[Told, ...] = ()
    schedule: tuple[str, object] | None = None
    gauged: Gauged | None = None
    measured: Measured | None = None
    as_new: bool = False
    is_engine: bool = True

    def meter_names(self) -> tuple[str, ...]:
        """Give what each meter is called here: the tag alone for the first, with the kind behind it for others."""
        return tuple(f"{self.tag} {meter.kind}" if place else self.tag for place, meter in enumerate(self.meters))
