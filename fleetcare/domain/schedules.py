"""Tasks, their triggers, and what moves them."""

from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal
from enum import StrEnum

from fleetcare.domain.quantities import Kind, Span


class Anchor(StrEnum):
    """What the next point is counted from."""

    FROM_DONE = "from-done"
    FROM_DUE = "from-due"
    ON_GRID = "on-grid"


class Combine(StrEnum):
    """Whether a line falls due by its first trigger or only by its last."""

    FIRST = "first"
    LAST = "last"


class Period(StrEnum):
    """A calendar period in which a once-each task is done once."""

    WEEK = "week"
    MONTH = "month"
    QUARTER = "quarter"
    YEAR = "year"


@dataclass(frozen=True, slots=True)
class CountedTrigger:
    """An interval counted by a meter; all figures in the base unit of `kind`. `ahead` None means the default."""

    kind: Kind
    interval: Decimal
    first: Decimal | None = None
    ahead: Decimal | None = None
    grace: Decimal = Decimal(0)
    grid_origin: Decimal | None = None


@dataclass(frozen=True, slots=True)
class CalendarTrigger:
    """An interval in calendar time; `ahead` and `grace` in days, `ahead` None means the default.

    `once_each` makes the interval a calendar period; `window_days` a window either side of the
    nominal day; at most one of the two. `month_end` extends a point to the last day of its month.
    """

    interval: Span
    first: Span | None = None
    ahead: int | None = None
    grace: int = 0
    grid_origin: date | None = None
    once_each: Period | None = None
    window_days: int | None = None
    month_end: bool = False

    @property
    def kind(self) -> Kind:
        """Always the calendar."""
        return Kind.CALENDAR


Trigger = CountedTrigger | CalendarTrigger

DRAIN = "drain"
"""The kind of work that changes the oil of the engine; gear oil, coolant and whatever else is let out are other kinds."""


@dataclass(frozen=True, slots=True)
class TaskVersion:
    """A task as it stands from `from_on` on; the first version holds on every earlier day too.

    `anchor` None means `from done`. `covers` are ids of tasks of the same item.
    """

    from_on: date
    triggers: tuple[Trigger, ...]
    combine: Combine = Combine.FIRST
    anchor: Anchor | None = None
    not_later_than: Span | None = None
    covers: tuple[int, ...] = ()
    needs_sheet: str = ""
    once: bool = False
    on_condition: bool = False
    pause_while_laid_up: bool = False
    law: bool = False
    insurer: bool = False
    deferrable: bool = True
    work: str = ""
    labour_hours: Decimal | None = None
    parts: tuple[tuple[str, Decimal], ...] = ()
    caution: str = ""
    source: str = ""

    @property
    def effective_anchor(self) -> Anchor:
        """The anchor in force."""
        return self.anchor or Anchor.FROM_DONE

    @property
    def calendar(self) -> CalendarTrigger | None:
        """The calendar trigger, if the task has one."""
        return next((t for t in self.triggers if isinstance(t, CalendarTrigger)), None)

    @property
    def counted(self) -> tuple[CountedTrigger, ...]:
        """The triggers counted by a meter, in option order."""
        return tuple(t for t in self.triggers if isinstance(t, CountedTrigger))


@dataclass(frozen=True, slots=True)
class Origin:
    """Where a task's counting begins when no entry does: new, or last done before the log began.

    `life` are life totals in base units. An origin `as_new` owes F (or I) from it; otherwise it is
    work done, of which the day or a figure may be unknown.
    """

    as_new: bool
    on: date | None
    life: dict[Kind, Decimal] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class Call:
    """A follow-up, or an on-condition task called for: due on `due_on`, raised on `on`."""

    id: int
    on: date
    due_on: date
    why: str


@dataclass(frozen=True, slots=True)
class Deferral:
    """One due point moved by somebody.

    `counts_from` names the point by the entry it counts from (the first id of a corrected entry),
    None for the origin. `caps` are life totals fixed on the day of deferral for a counted trigger
    that was deferred by date.
    """

    id: int
    on: date
    counts_from: int | None
    why: str
    by: str
    until_on: date | None = None
    until_life: dict[Kind, Decimal] = field(default_factory=dict)
    caps: dict[Kind, Decimal] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class Task:
    """One piece of work on an item, with its versions in date order, and what it counts from."""

    id: int
    name: str
    versions: tuple[TaskVersion, ...]
    removed_on: date | None = None
    origin: Origin | None = None
    calls: tuple[Call, ...] = ()
    deferrals: tuple[Deferral, ...] = ()

    def is_removed(self, day: date) -> bool:
        """Whether it was removed by a day."""
        return self.removed_on is not None and self.removed_on <= day

    def version_on(self, day: date) -> TaskVersion:
        """Give the version in force on a day; the first holds on every earlier day too."""
        current = self.versions[0]
        for version in self.versions[1:]:
            if version.from_on <= day:
                current = version
        return current
