"""The wear of a measure that is adjusted now and then: one slope through all it did between adjustments.

Each adjustment starts a segment with a level of its own; the slope is common to all (analysis of covariance, the form
with parallel lines). With one segment it is plain least squares. Of segment g with n_g values:

    b = sum Sxy_g / sum Sxx_g;  s^2 = (sum Syy_g - b sum Sxy_g) / (N - G - 1);  df = N - G - 1
    line of the last segment: y = ybar + b (x - xbar);  error of a value at x: s sqrt(1 + 1/n + (x - xbar)^2 / sum Sxx)

Worked in decimals of so many digits that the sums are exact: a level value has a slope of 0 and not of nearly 0, and
the order of the values never counts.
"""

from collections.abc import Iterable, Sequence
from decimal import Decimal, localcontext
from itertools import pairwise
from statistics import median
from typing import NamedTuple

from fleetcare.domain.trends import Check, Point, Segment, Trend

_DIGITS = 100  # products of any two figures with the usual 28, summed


class _Sums(NamedTuple):
    """Sums about the means of one segment, or of several added up."""

    xx: Decimal
    xy: Decimal
    yy: Decimal


def cut_at_adjustments(checks: Iterable[Check]) -> tuple[Segment, ...]:
    """Cut what was measured, in any order, into segments: a found value closes one, the value left opens the next.

    An adjustment whose left value nobody wrote still cuts. Of several checks at one x the order given counts.
    """
    segments: list[Segment] = []
    points: list[Point] = []
    opened: Decimal | None = None
    for check in sorted(checks, key=lambda check: check.x):
        if check.found is not None:
            points.append(Point(check.x, check.found))
        if check.is_adjusted or check.left is not None:
            segments.append(Segment(tuple(points), opened))
            points = [] if check.left is None else [Point(check.x, check.left)]
            opened = check.x
    return *(segment for segment in segments if segment.points), Segment(tuple(points), opened)


def degrees_of_freedom(segments: Sequence[Segment]) -> int:
    """Values less one level for each segment that has any, less one for the slope."""
    counts = [len(segment.points) for segment in segments if segment.points]
    return sum(counts) - len(counts) - 1


def watched(segments: Sequence[Segment]) -> Decimal:
    """The x watched: from the first to the last value of each segment, together."""
    filled = [[point.x for point in segment.points] for segment in segments if segment.points]
    return sum((max(xs) - min(xs) for xs in filled), Decimal(0))


def usual_gap(segments: Iterable[Segment]) -> Decimal | None:
    """The median x between two values of a segment that follow each other, None where no segment has two."""
    xs = [sorted(point.x for point in segment.points) for segment in segments]
    gaps = [after - before for line in xs for before, after in pairwise(line)]
    return median(gaps) if gaps else None


def fit_trend(segments: Sequence[Segment]) -> Trend | None:
    """Give the common slope and the line of the last segment; None with less than one degree of freedom or no span.

    Segments stand in order of time; empty ones are passed over. Points may stand in any order.
    """
    df = degrees_of_freedom(segments)
    filled = [segment.points for segment in segments if segment.points]
    with localcontext(prec=_DIGITS):
        sums = [_sums(points) for points in filled]
        sxx, sxy, syy = (sum(column, Decimal(0)) for column in zip(*sums, strict=True)) if sums else (Decimal(0),) * 3
        if df < 1 or not sxx:
            return None
        slope = sxy / sxx
        scatter = (max(Decimal(0), syy - slope * sxy) / df).sqrt()
        last = filled[-1]
        mean_x, mean_y = _mean([point.x for point in last]), _mean([point.y for point in last])
    # The sign + rounds to the usual digits.
    return Trend(+slope, +scatter, df, len(last), +mean_x, +mean_y, +sxx, watched(segments))


def _mean(values: Sequence[Decimal]) -> Decimal:
    return sum(values) / Decimal(len(values))


def _sums(points: Sequence[Point]) -> _Sums:
    """n sum(xy) - sum(x) sum(y), over n: only the division rounds."""
    n = len(points)
    x, y = sum(point.x for point in points), sum(point.y for point in points)
    xx = sum(point.x * point.x for point in points)
    xy = sum(point.x * point.y for point in points)
    yy = sum(point.y * point.y for point in points)
    return _Sums((n * xx - x * x) / Decimal(n), (n * xy - x * y) / Decimal(n), (n * yy - y * y) / Decimal(n))
