"""The fixed shapes of measurement rules: what figure each works out of the values of a sheet."""

from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum

from fleetcare.domain.trends import End


class Basis(StrEnum):
    """What of a value is held against bounds.

    AS_MEASURED the value; LESS_NEW what it has above fresh oil, where that is known; NAMEPLATE percent of the rated kW;
    YEAR the sum over the sheets of its calendar year; SPEC the value against the check range of the engine itself.
    """

    AS_MEASURED = "as measured"
    LESS_NEW = "less new"
    NAMEPLATE = "nameplate"
    YEAR = "year"
    SPEC = "spec"


class By(StrEnum):
    """How a figure is compared with another: percent of it, percent above it, or units above it; below is negative."""

    RATIO = "ratio"
    SHARE = "share"
    DIFFERENCE = "difference"


class Best(StrEnum):
    """What of a sheet its values are compared with: the highest, the lowest or the mean of all points."""

    HIGHEST = "highest"
    LOWEST = "lowest"
    MEAN = "mean"


class Since(StrEnum):
    """What a value is compared with: the last sheet with the same gauge, the highest of all points on that, or the new oil.

    OWN_BEST is the best the same point ever had by the same gauge: the highest where a low limit is held, the lowest where
    a high one is, so that a figure that fell and stayed there is as bad the next time. For a rate NEW is since the oil change.
    """

    BEFORE = "before"
    BEST_BEFORE = "best before"
    OWN_BEST = "own best"
    NEW = "new"


class Pool(StrEnum):
    """Whose samples say what is usual: the engine's own, or those of engines like it."""

    OWN = "own"
    FAMILY = "family"


class Method(StrEnum):
    """How samples become a limit; the limit of the rule is k or, for a percentile, the percentage.

    MEAN mean + k s; ROBUST median + k 1.4826 MAD; PERCENTILE of the cumulative distribution (ASTM D7720 has both kinds).
    """

    MEAN = "mean"
    ROBUST = "robust"
    PERCENTILE = "percentile"


@dataclass(frozen=True, slots=True)
class Bounds:
    """A value held against low and high limits; for SPEC, which has none of its own, `end` says which end of the range.

    `is_set` takes at both ends what was found out and left inside on the same sheet; a rule with an `end` leaves that out.
    """

    basis: Basis = Basis.AS_MEASURED
    end: End | None = None
    is_set: bool = False


@dataclass(frozen=True, slots=True)
class AgainstSheet:
    """Each point compared with the best or the mean of all points of its sheet."""

    reference: Best
    by: By


@dataclass(frozen=True, slots=True)
class Change:
    """A value compared with the same point before, or with new oil."""

    since: Since
    by: By


@dataclass(frozen=True, slots=True)
class Rate:
    """Change per `per` hours: between two samples of one fill, or since the oil change.

    `is_corrected` takes make-up oil into account, since the change only; fewer than `least_hours` give no rate.
    """

    since: Since
    per: int
    is_corrected: bool = False
    least_hours: Decimal = Decimal(0)


@dataclass(frozen=True, slots=True)
class Statistical:
    """A value held against what `least_samples` or more samples of a pool say is usual."""

    pool: Pool
    method: Method
    least_samples: int


@dataclass(frozen=True, slots=True)
class ByAltitude:
    """A value less the least for the altitude of the engine: of a table of altitudes in `unit`, rising, and what is least there.

    Between two of them it is linear; beyond the table nothing is told.
    """

    unit: str
    least: tuple[tuple[Decimal, Decimal], ...]


@dataclass(frozen=True, slots=True)
class Approach:
    """Hours until a gap inside the check range of the engine comes to one `end` of it, by the early end of its projection.

    What moved by less than `least_change`, mm, all the while it was watched, does not count as moving.
    """

    end: End
    least_change: Decimal = Decimal(0)


ValueShape = Bounds | AgainstSheet | Change | Rate | Statistical | ByAltitude
"""The shapes that work out a figure for each value."""

SingleShape = ValueShape | Approach
"""The shapes that need no other rule."""
