"""What the due rules are given: everything about one item, loaded once."""

from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.engines import Item
from fleetcare.domain.log import Done
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Task
from fleetcare.rules.meters import CounterHistory

if TYPE_CHECKING:
    from fleetcare.domain.wear import Wear


@dataclass(frozen=True, slots=True)
class ItemFacts:
    """One item with its tasks, work done per task id (current entries only), and counters, seen up to a day.

    `start_life` are the life totals at the start point, `stale_days` the setting that replaces
    the engine's own reading rhythm, None for the rhythm. `wears` is what was measured that can pull a check forward,
    `sound_oil` what an oil that flags nothing shows (`MeasuredWears`).
    """

    item: Item
    tasks: tuple[Task, ...]
    done: dict[int, tuple[Done, ...]]
    counters: dict[Kind, CounterHistory]
    start_life: dict[Kind, Decimal] = field(default_factory=dict)
    stale_days: int | None = None
    on: date = date.min
    wears: "tuple[Wear, ...]" = ()
    sound_oil: "tuple[Wear, ...]" = ()
