"""Due lines: one task on one item, with everything needed to check them with a pencil."""

from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal
from enum import StrEnum
from typing import TYPE_CHECKING

from fleetcare.domain.engines import Item, Status
from fleetcare.domain.forecasts import Forecast
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Deferral, Task, TaskVersion, Trigger

if TYPE_CHECKING:
    from fleetcare.domain.wear import Pull


class State(StrEnum):
    """How a line stands, worst first as the due list shows them; `rank` orders them so."""

    OVERDUE = "overdue"
    DUE = "due"
    NEAR = "near"
    UNSET = "unset"
    CLEAR = "clear"

    @property
    def rank(self) -> int:
        """Place in the due list, 0 first."""
        return _RANK[self]


_RANK = {state: place for place, state in enumerate(State)}

Point = Decimal | date
"""A due point: a life total in the base unit, or a day."""


def apart(point: Point, other: Point) -> Decimal:
    """How far a point lies after another of its kind: base units, or days; below 0 where it lies before."""
    if isinstance(point, date) and isinstance(other, date):
        return Decimal((point - other).days)
    assert isinstance(point, Decimal)
    assert isinstance(other, Decimal)
    return point - other


@dataclass(frozen=True, slots=True)
class NextPoint:
    """The next point of a trigger with the sums behind it, before deferrals.

    `interval` is the effective one; `ahead` and `grace` are in base units, or days for a calendar
    trigger. `passed` are the points stepped over because whole intervals were missed. For a
    window `nominal` is its middle and `opens` its first day; `point` is its last day.
    """

    point: Point
    interval: Decimal | Span
    ahead: Decimal
    grace: Decimal
    factor: Decimal = Decimal(1)
    is_first: bool = False
    passed: tuple[Point, ...] = ()
    nominal: date | None = None
    opens: date | None = None
    paused_days: int = 0


@dataclass(frozen=True, slots=True)
class TriggerLine:
    """One trigger of a line on the day asked about.

    `own` is the task's own point, `point` the one in force: deferred, or moved forward by `pull`; `remaining` =
    point - now, days for a calendar trigger. `share` is remaining over the interval. All None where the trigger is unset,
    and then `unset_because` says what to enter.
    """

    trigger: Trigger
    state: State
    unset_because: str = ""
    next: NextPoint | None = None
    counts_from: Point | None = None
    approximate: bool = False
    now: Point | None = None
    point: Point | None = None
    remaining: Decimal | None = None
    share: Decimal | None = None
    deferred: bool = False
    forecast: Forecast | None = None
    estimated: State | None = None
    likely_now: Decimal | None = None
    pull: "Pull | None" = None

    @property
    def kind(self) -> Kind:
        """What the trigger counts."""
        return self.trigger.kind

    @property
    def own(self) -> Point | None:
        """The task's own due point."""
        return self.next.point if self.next else None

    @property
    def grace(self) -> Decimal:
        """What may pass after the point in force: nothing after one pulled forward, as after a deferred one."""
        return self.next.grace if self.next and self.pull is None else Decimal(0)


@dataclass(frozen=True, slots=True)
class PastWork:
    """One time the task was done, against the point it had then.

    `over` holds, for each kind done past its own point, by how much (base units, days) and the grace allowed.
    `missed` holds, per kind, the points or last days of periods that went by unserved before it; `served` is the
    period a once-each entry served.
    `counted` is False for work that neither closed nor re-based the line, and `note` says why.
    """

    entry_id: int
    number: int
    on: date
    over: dict[Kind, tuple[Decimal, Decimal]] = field(default_factory=dict)
    missed: dict[Kind, tuple[Point, ...]] = field(default_factory=dict)
    served: str = ""
    counted: bool = True
    note: str = ""


@dataclass(frozen=True, slots=True)
class DueLine:
    """One task on one item on one day. `deciding` is the trigger that decides its state."""

    item: Item
    task: Task
    version: TaskVersion
    status: Status
    state: State
    triggers: tuple[TriggerLine, ...]
    deciding: TriggerLine
    last_done_on: date | None = None
    last_done_number: int | None = None
    reason: str = ""
    not_later_than: date | None = None
    called_because: str = ""
    estimated: State | None = None
    early_on: date | None = None
    likely_on: date | None = None
    late_on: date | None = None
    undated: tuple[Kind, ...] = ()
    deferral: Deferral | None = None
    deferral_ended: bool = False
    covered_by: str = ""
    past: tuple[PastWork, ...] = ()
