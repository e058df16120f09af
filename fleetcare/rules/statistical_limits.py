"""Alarm limits told from earlier samples: of the same kind of engine and oil, taken while all was well.

ASTM D7720 describes two techniques: control limits mean + k s for values that are in control and near normal, and points
of the cumulative distribution otherwise. Its figures are paid for, so k, the percentage and the fewest samples are the
caller's, and so is the method. Common practice: k = 2 alerts and 3 alarms; 90, 95 and 98 %; under 30 samples the
robust form, which one outlier does not move; a maker's limit that is tighter wins.
"""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal, localcontext
from enum import StrEnum
from itertools import pairwise
from statistics import mean, median, stdev
from typing import Literal, NamedTuple

from fleetcare.domain.quantities import plain
from fleetcare.domain.rule_book import Method
from fleetcare.domain.trends import Hindrance, Obstacle
from fleetcare.errors import Refused

ROBUST_BELOW = 30  # common practice

# A normal sigma is 1.4826 times the median distance from the median: 1 / (normal 75 % point, 0.67449).
SIGMAS_PER_MAD = Decimal("1.4826")
# Mean range of two normal values in sigmas, 2 / sqrt(pi): NIST/SEMATECH e-Handbook 6.3.2.2.
RANGE_PER_SIGMA = Decimal("1.128")

_DIGITS = 56  # twice the usual: half of twice a figure is the figure, so that equal values have no spread


BySpread = Literal[Method.MEAN, Method.ROBUST]


class Positions(StrEnum):
    """Where in the sorted samples a percentage lies: the rank, counted from 1, of the share p of n samples.

    N_PLUS_1: NIST/SEMATECH e-Handbook 7.2.6.2, `weibull` elsewhere. LINEAR: what spreadsheets and numpy give.
    """

    N_PLUS_1 = "rank p (n + 1)"
    LINEAR = "rank 1 + p (n - 1)"


@dataclass(frozen=True, slots=True)
class StatisticalLimit:
    """A limit, and all that is needed to say how it was made: `formula` is how, in words.

    `multiple` is the k of the formula, or p in percent. Of logs `centre` and `spread` are logs too; a percentile has
    neither.
    """

    value: Decimal
    method: Method
    formula: str
    multiple: Decimal
    count: int
    of_logs: bool = False
    centre: Decimal | None = None
    spread: Decimal | None = None


def usual_method(count: int, *, is_near_normal: bool) -> Method:
    """Give the method usual for so many samples; whether they are near normal is for the caller to say."""
    if count < ROBUST_BELOW:
        return Method.ROBUST
    return Method.MEAN if is_near_normal else Method.PERCENTILE


def spread_limit(
    values: Sequence[Decimal], method: BySpread, multiple: Decimal, *, fewest: int, of_logs: bool = False
) -> StatisticalLimit | Hindrance:
    """Give centre + `multiple` times spread of the samples; a multiple below 0 gives a lower limit.

    `of_logs` is for skewed values: all is done on their logs. With fewer samples than `fewest` (or than 2), a value that
    has no log, or no spread there is no limit: without a spread any value but one would break it.
    """
    return _limit(values, method, _BY_SPREAD[method], multiple, fewest, of_logs)


def chart_limit(values: Sequence[Decimal], multiple: Decimal, *, fewest: int) -> StatisticalLimit | Hindrance:
    """Give the limit of a chart of individuals: `spread_limit` with the spread from one sample to the next.

    `values` stand in order of time. A drift of the level widens this limit less than it does mean + k s.
    """
    return _limit(values, Method.MEAN, _CHART, multiple, fewest, of_logs=False)


def percentile_limit(
    values: Sequence[Decimal], percent: Decimal, *, fewest: int, positions: Positions = Positions.N_PLUS_1
) -> StatisticalLimit | Hindrance:
    """Give the value below which `percent` of the samples lie, between neighbours in proportion.

    A rank before the first sample, or past the last, takes that sample. Raises Refused for no percentage.
    """
    if not 0 <= percent <= 100:
        raise Refused(f"{plain(percent)} % of the samples cannot be right", "give a percentage from 0 to 100")
    needed = max(fewest, 1)
    if len(values) < needed:
        return Hindrance(Obstacle.TOO_FEW, Decimal(len(values)), Decimal(needed))
    count = len(values)
    share = percent / 100
    rank = share * (count + 1) if positions is Positions.N_PLUS_1 else 1 + share * (count - 1)
    rank = min(max(rank, Decimal(1)), Decimal(count))
    ordered = sorted(values)
    below = ordered[int(rank) - 1]
    above = ordered[min(int(rank), count - 1)]
    value = below + (rank - int(rank)) * (above - below)
    return StatisticalLimit(value, Method.PERCENTILE, positions, percent, count)


class _Spreading(NamedTuple):
    formula: str
    centre_and_spread: Callable[[Sequence[Decimal]], tuple[Decimal, Decimal]]


def _limit(
    values: Sequence[Decimal], method: Method, spreading: _Spreading, multiple: Decimal, fewest: int, of_logs: bool
) -> StatisticalLimit | Hindrance:
    needed = max(fewest, 2)
    if len(values) < needed:
        return Hindrance(Obstacle.TOO_FEW, Decimal(len(values)), Decimal(needed))
    if of_logs and min(values) <= 0:
        return Hindrance(Obstacle.NOT_POSITIVE, min(values), Decimal(0))
    figures = [value.ln() for value in values] if of_logs else values
    with localcontext(prec=_DIGITS):
        centre, spread = spreading.centre_and_spread(figures)
    if not spread:
        return Hindrance(Obstacle.NO_SPREAD, centre.exp() if of_logs else centre)
    limit = centre + multiple * spread
    value = limit.exp() if of_logs else limit
    return StatisticalLimit(value, method, spreading.formula, multiple, len(values), of_logs, +centre, +spread)


def _mean_and_deviation(values: Sequence[Decimal]) -> tuple[Decimal, Decimal]:
    return mean(values), stdev(values)


def _median_and_distance(values: Sequence[Decimal]) -> tuple[Decimal, Decimal]:
    middle = median(values)
    return middle, SIGMAS_PER_MAD * median([abs(value - middle) for value in values])


def _mean_and_moving_range(values: Sequence[Decimal]) -> tuple[Decimal, Decimal]:
    return mean(values), mean([abs(later - earlier) for earlier, later in pairwise(values)]) / RANGE_PER_SIGMA


_BY_SPREAD: Mapping[BySpread, _Spreading] = {
    Method.MEAN: _Spreading("mean + k s", _mean_and_deviation),
    Method.ROBUST: _Spreading("median + k × 1.4826 × median distance from the median", _median_and_distance),
}
_CHART = _Spreading("mean + k × mean moving range / 1.128", _mean_and_moving_range)
