"""When a wearing measure comes to its limit, with an honest range, or every reason why that is not told.

With the pooled trend of `trends` and d = limit - ybar: the likely x is xbar + d/b. The range is all x at which the limit
lies within the range of a single value there: the roots u of (d - b u)^2 = t^2 s^2 (1 + 1/n + u^2 / Sxx), x = xbar + u
(Fieller's form). They are finite, and have the likely x between them, where gq = t^2 s^2 / (b^2 Sxx) < 1.
"""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from decimal import Decimal

from fleetcare.domain.trends import End, Hindrance, Obstacle, Point, Projection, Segment, Trend
from fleetcare.rules.student import t_quantile
from fleetcare.rules.trends import degrees_of_freedom, fit_trend, watched

FOUR_IN_FIVE = Decimal("0.80")
FEWEST_DF = 2
OLDEST_IN_INTERVALS = 2


def project(
    segments: Sequence[Segment],
    limit: Decimal,
    end: End,
    *,
    now: Decimal,
    interval: Decimal,
    coverage: Decimal = FOUR_IN_FIVE,
    is_normalised: bool = True,
) -> Projection:
    """Tell the x at which a measure comes to a limit, from segments in order of time.

    `end` says whether the limit is the low or the high end of what is allowed; a value that touches it is not past it.
    `now` is today's x, `interval` that between inspections, `coverage` the share of cases the range is to hold.
    `is_normalised` is False for oil whose values are not brought to hours on the oil and top-up. Raises Refused for a
    coverage that is not between 0 and 1, and for nothing else.
    """
    return _told(Projection(limit, end, coverage, fit_trend(segments)), segments, now, interval, is_normalised)


def project_on(
    segments: Sequence[Segment], limits: Mapping[End, Decimal], *, now: Decimal, interval: Decimal
) -> Projection:
    """Project as `project` does, to the one of one or two limits that is passed, else moved to, else nearer."""
    trend = fit_trend(segments)
    end = _end_ahead(segments, trend, limits)
    return _told(Projection(limits[end], end, FOUR_IN_FIVE, trend), segments, now, interval, is_normalised=True)


def _end_ahead(segments: Sequence[Segment], trend: Trend | None, limits: Mapping[End, Decimal]) -> End:
    if len(limits) == 1:
        return next(iter(limits))
    below, above = _last(segments).y - limits[End.LOW], limits[End.HIGH] - _last(segments).y
    if trend is None or not trend.slope or min(below, above) < 0:
        return End.LOW if below <= above else End.HIGH
    return End.LOW if trend.slope < 0 else End.HIGH


def _told(
    told: Projection, segments: Sequence[Segment], now: Decimal, interval: Decimal, is_normalised: bool
) -> Projection:
    """Fill in a projection of which limit and trend are known."""
    trend, limit, end = told.trend, told.limit, told.end
    t = Decimal(
        t_quantile(float(told.coverage), trend.df if trend else 1)
    )  # without a trend only the coverage is checked
    hindrances = (
        *_in_values(segments, limit, end, is_normalised),
        *_in_watching(segments, now, interval),
        *_in_slope(segments, trend, end, t),
    )
    if {one.obstacle for one in hindrances} - {Obstacle.SHORT_SPAN} or trend is None:
        return replace(told, hindrances=hindrances)
    early, likely, late = _reached(trend, limit, t)
    furthest = _last(segments).x + trend.span
    if hindrances:
        return replace(told, hindrances=hindrances, likely_so_far=likely if likely <= furthest else None)
    if likely > furthest:
        too_far = Hindrance(Obstacle.TOO_FAR, likely, furthest)
        return replace(told, hindrances=(too_far,), not_before=min(early, furthest))
    return replace(told, early=early, likely=likely, late=late)


def _reached(trend: Trend, limit: Decimal, t: Decimal) -> tuple[Decimal, Decimal, Decimal]:
    """The early, likely and late x of the limit, for a slope told apart from none."""
    way, ts = limit - trend.mean_y, t * trend.scatter
    a = trend.slope**2 - ts**2 / trend.sxx
    half = ts * (a * (1 + Decimal(1) / trend.count) + way**2 / trend.sxx).sqrt()
    middle = trend.slope * way
    return trend.mean_x + (middle - half) / a, trend.mean_x + way / trend.slope, trend.mean_x + (middle + half) / a


def _last(segments: Sequence[Segment]) -> Point:
    """The last value of the last segment that has any."""
    return max([segment.points for segment in segments if segment.points][-1], key=lambda point: point.x)


def _in_values(segments: Sequence[Segment], limit: Decimal, end: End, is_normalised: bool) -> Iterator[Hindrance]:
    """What is wrong with the values as they now stand; a limit passed before the last adjustment is none of it."""
    now_standing = segments[-1] if segments else Segment(())
    if now_standing.points:
        last = _last(segments).y
        past = last < limit if end is End.LOW else last > limit
        if past:
            yield Hindrance(Obstacle.PAST_LIMIT, last, limit)
    if not is_normalised:
        yield Hindrance(Obstacle.NOT_NORMALISED)
    if not now_standing.has_left_value:
        yield Hindrance(Obstacle.NO_LEFT_VALUE, now_standing.opened)


def _in_watching(segments: Sequence[Segment], now: Decimal, interval: Decimal) -> Iterator[Hindrance]:
    """What is wrong with how often, how long and how lately the measure was taken."""
    df = degrees_of_freedom(segments)
    if df < FEWEST_DF:
        yield Hindrance(Obstacle.TOO_FEW, Decimal(df), Decimal(FEWEST_DF))
    span = watched(segments)
    if span < interval:
        yield Hindrance(Obstacle.SHORT_SPAN, span, interval)
    if any(segment.points for segment in segments):
        age = now - _last(segments).x
        if age > OLDEST_IN_INTERVALS * interval:
            yield Hindrance(Obstacle.OLD_VALUE, age, OLDEST_IN_INTERVALS * interval)


def _in_slope(segments: Sequence[Segment], trend: Trend | None, end: End, t: Decimal) -> Iterator[Hindrance]:
    """What is wrong with the slope, where there are values enough to speak of one."""
    if degrees_of_freedom(segments) < FEWEST_DF:
        return
    if trend is None or not trend.slope:
        yield Hindrance(Obstacle.NO_SLOPE, None, Decimal(1))
        return
    gq = (t * trend.scatter / trend.slope) ** 2 / trend.sxx
    if gq >= 1:
        yield Hindrance(Obstacle.NO_SLOPE, gq, Decimal(1))
    elif (trend.slope > 0) is (end is End.LOW):
        yield Hindrance(Obstacle.AWAY, trend.slope, Decimal(0))
