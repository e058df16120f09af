"""What was done, as far as due work needs to know it."""

from dataclasses import dataclass, field
from datetime import date

from fleetcare.domain.meters import LifeFigure
from fleetcare.domain.quantities import Kind


@dataclass(frozen=True, slots=True)
class Done:
    """One task done once: a current (not superseded, not voided) entry that closes the task.

    `entry_id` is the first id of the entry, kept through corrections; `number` the entry number shown.
    `life` are life totals in base units on that day; a kind that could not be known is missing.
    """

    entry_id: int
    number: int
    on: date
    life: dict[Kind, LifeFigure] = field(default_factory=dict)
    by: str = ""
    covered_by: str = ""
