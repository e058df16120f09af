"""A measure that wears: its values between adjustments, the slope through them, and when it comes to a limit.

x is what wear is counted in (hours, km or days), y the measure in its own unit.
"""

from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum


class End(StrEnum):
    """On which side a limit lies."""

    LOW = "low"
    HIGH = "high"


@dataclass(frozen=True, slots=True)
class Point:
    """A value y measured at x."""

    x: Decimal
    y: Decimal


@dataclass(frozen=True, slots=True)
class Check:
    """One look at a measure at x: the value found, the value left where it was adjusted, None where nobody wrote it.

    `is_adjusted` says that it was adjusted, or a part changed, although no left value tells so.
    """

    x: Decimal
    found: Decimal | None = None
    left: Decimal | None = None
    is_adjusted: bool = False


@dataclass(frozen=True, slots=True)
class Segment:
    """Values between two adjustments, in order of x; `opened` is the x of the one before them, None at the beginning.

    The value left by an adjustment is the first of its segment, the one found at the next adjustment its last.
    """

    points: tuple[Point, ...]
    opened: Decimal | None = None

    @property
    def has_left_value(self) -> bool:
        """Whether it is known what the adjustment before these values left; true where there was none."""
        return self.opened is None or any(point.x == self.opened for point in self.points)


@dataclass(frozen=True, slots=True)
class Trend:
    """A slope common to all segments, y per x, and the line through the last one.

    `scatter` is the residual standard deviation (y), `df` its degrees of freedom; `count`, `mean_x` and `mean_y` are of
    the last segment, `sxx` is summed over all; `span` is the x watched: from first to last value of each segment.
    """

    slope: Decimal
    scatter: Decimal
    df: int
    count: int
    mean_x: Decimal
    mean_y: Decimal
    sxx: Decimal
    span: Decimal

    @property
    def slope_error(self) -> Decimal:
        """The standard error of the slope."""
        return self.scatter / self.sxx.sqrt()

    def value_at(self, x: Decimal) -> Decimal:
        """The line of the last segment at x."""
        return self.mean_y + self.slope * (x - self.mean_x)

    def error_at(self, x: Decimal) -> Decimal:
        """The standard error of a single value at x: that of the line there and the scatter of one value."""
        return self.scatter * (1 + Decimal(1) / self.count + (x - self.mean_x) ** 2 / self.sxx).sqrt()


class Obstacle(StrEnum):
    """Why a figure is not told: a projection, then also a rate between two oil samples, then also a limit from samples."""

    PAST_LIMIT = "already past the limit"
    NOT_NORMALISED = "oil not brought to hours on the oil and top-up"
    NO_LEFT_VALUE = "not known what the last adjustment left"
    TOO_FEW = "too few values"
    SHORT_SPAN = "watched for less than one inspection interval"
    OLD_VALUE = "last value older than two inspection intervals"
    NO_SLOPE = "slope not told apart from none"
    AWAY = "moving away from the limit"
    TOO_FAR = "further ahead than was watched"

    OTHER_FILL = "oil changed in between"
    TOO_CLOSE = "too few hours in between"
    LARGE_TOP_UP = "large top-up in between"
    NO_SUMP = "topped up in between, litres of the sump not known"

    NOT_POSITIVE = "logs need values above 0"
    NO_SPREAD = "values too alike to tell their spread"


@dataclass(frozen=True, slots=True)
class Hindrance:
    """An obstacle with the figure behind it, and the one it is held against; None where there is no such figure.

    PAST_LIMIT: last value, limit. NO_LEFT_VALUE: x of the adjustment. TOO_FEW: values (of a trend degrees of freedom),
    those needed. SHORT_SPAN: span watched, interval. OLD_VALUE: x run since, what is allowed. NO_SLOPE: gq (None for no
    slope at all), 1. AWAY: slope, 0. TOO_FAR: likely x, last x told. OTHER_FILL: when filled for the later sample, for
    the earlier. TOO_CLOSE: hours, those needed. LARGE_TOP_UP: share of the sump, most allowed. NO_SUMP: litres added.
    NOT_POSITIVE: the least value, 0. NO_SPREAD: the value they gather at.
    """

    obstacle: Obstacle
    figure: Decimal | None = None
    bound: Decimal | None = None


@dataclass(frozen=True, slots=True)
class Projection:
    """The x between which a measure comes to its limit, with the stated coverage, and the likely one; plan by `early`.

    `end` says on which side the limit lies; a value that touches it is not past it.
    Without them `hindrances` say why; with TOO_FAR alone `not_before` is the x up to which the limit is not expected,
    with SHORT_SPAN alone `likely_so_far` the likely x all the same: enough to look out for, too little to plan by.
    """

    limit: Decimal
    end: End
    coverage: Decimal
    trend: Trend | None
    early: Decimal | None = None
    likely: Decimal | None = None
    late: Decimal | None = None
    hindrances: tuple[Hindrance, ...] = ()
    not_before: Decimal | None = None
    likely_so_far: Decimal | None = None
