"""What wears from sheet to sheet, and the next check it pulls forward."""

from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date
from decimal import Decimal

from fleetcare.domain.quantities import Kind
from fleetcare.domain.trends import End, Point, Projection, Segment


@dataclass(frozen=True, slots=True)
class Wear:
    """What one subject, such as the lash point 3E, showed over the life totals of a kind, and its limits, in one unit.

    `work` is the kind of sheet it stands on, and so of the tasks that will measure it again. `segments` hold a value at
    least, in order of time, `limits` a limit at least; `measured_on` is the day of the newest value, `received_on` the day
    it was known, where a laboratory took until later. With `is_topped_up_by_log` only the log says what was topped up on
    the oil of some value. Without `may_pull` it pulls no check forward, however long and lately it was watched.
    """

    work: str
    subject: str
    kind: Kind
    unit: str
    segments: tuple[Segment, ...]
    limits: Mapping[End, Decimal]
    measured_on: date
    received_on: date | None = None
    is_topped_up_by_log: bool = False
    may_pull: bool = True

    @property
    def known_on(self) -> date:
        """The day somebody could know the newest value."""
        return self.received_on or self.measured_on

    @property
    def last(self) -> Point:
        """The newest value."""
        return max([one.points for one in self.segments if one.points][-1], key=lambda point: point.x)


@dataclass(frozen=True, slots=True)
class MeasuredWears:
    """What the sheets of an engine show: of lash, compression and oil.

    `pulling` is what pulls checks forward. `sound_oil` is all that was fitted of an oil whose newest sample flags nothing,
    with the nearest limits; none where it flags something.
    """

    pulling: tuple[Wear, ...] = ()
    sound_oil: tuple[Wear, ...] = ()


@dataclass(frozen=True, slots=True)
class Pull:
    """The life total at which a subject is to be checked again, ahead of its task's own point, and the projection why.

    `at` is the early end of the projection, or where it was measured last if that end lies before it.
    """

    wear: Wear
    projection: Projection
    at: Decimal

    @property
    def is_reached(self) -> bool:
        """Whether the limit may have been reached when it was measured last."""
        return self.projection.early is not None and self.projection.early < self.at
