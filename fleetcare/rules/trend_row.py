"""A measure over time as a flat row: what list, plot and words of a trend show, so that they cannot disagree."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Dot:
    """A value as it is drawn: how far along it lies, how high, and whether it was left by an adjustment."""

    x: float
    y: float
    is_left: bool = False


@dataclass(frozen=True, slots=True)
class Ahead:
    """Where a trend goes on from its last value: `start`, the limit it comes to, and where early, likely and late."""

    start: Dot
    limit: float
    early: float
    likely: float
    late: float


@dataclass(frozen=True, slots=True)
class TrendRow:
    """One subject of a trend, such as a lash point, in words and figures.

    `verdict` is that of the `last` value, empty where there is none; `said` is all that is worth saying of it.
    `segments` are the values to draw, cut at every adjustment; `limits` those in force, each with its word, and
    `setting` what it is set to, with its word. `left_out` is how many values are not drawn, `ahead` is what is projected.
    `bounds` are values only known to lie below, `fresh` what new oil had at each filling; no line leads through either.
    `rate` is per 100 h; `unit` and `places` stand in the place of those of all where a row has its own.
    """

    name: str
    last: str
    stands: str
    verdict: str
    on: str
    change: str
    said: str
    segments: tuple[tuple[Dot, ...], ...] = ()
    limits: tuple[tuple[float, str], ...] = ()
    setting: tuple[float, str] | None = None
    left_out: int = 0
    ahead: Ahead | None = None
    bounds: tuple[Dot, ...] = ()
    fresh: tuple[Dot, ...] = ()
    rate: str = ""
    unit: str = ""
    places: int = 0


@dataclass(frozen=True, slots=True)
class Trends:
    """All subjects of one kind of sheet on one engine. What is drawn is in `unit`, with so many `places`.

    Along lie hours of life where `counts_hours`, else days (`date.toordinal`), up to `until`. Without rows `why_none`
    says why, and what to do. `is_adjusted` says that it is set now and then, as lash is.
    With `begins` hours on the oil lie along, fill after fill, each from where it begins.
    """

    rows: tuple[TrendRow, ...] = ()
    unit: str = ""
    places: int = 0
    counts_hours: bool = False
    until: float = 0
    why_none: str = ""
    is_adjusted: bool = True
    begins: tuple[float, ...] = ()
