"""A trend and its projection to a limit in words: how fast, when it comes there, or why that is not told."""

from collections.abc import Sequence
from decimal import ROUND_CEILING, ROUND_FLOOR, ROUND_HALF_EVEN, Decimal

from fleetcare.domain.quantities import plain
from fleetcare.domain.trends import Hindrance, Obstacle, Projection, Trend

_THOUSAND = 1000
_DIGITS = 2
_LOUD = (Obstacle.PAST_LIMIT, Obstacle.NO_LEFT_VALUE, Obstacle.TOO_FEW, Obstacle.SHORT_SPAN, Obstacle.OLD_VALUE)


def say_slope(trend: Trend, unit: str, over: str) -> str:
    """Say which way a measure goes and how fast, to two digits: "falls 0.049 mm in 1000 h"."""
    gain = trend.slope * _THOUSAND
    if not gain:
        return "does not change"
    rounded = round(gain, _DIGITS - 1 - gain.adjusted())
    amount = f"{plain(abs(rounded))} {unit}".rstrip()
    return f"{'falls' if gain < 0 else 'rises'} {amount} in {_THOUSAND} {over}"


def say_reached(projection: Projection, unit: str, over: str, of: str = "") -> str:
    """Say between which figures a limit is reached, rounded outwards to whole ones: "reaches 0.40 mm by 6947 to 7193 h".

    `of` stands after figures that are not those of the dial: " of life".
    """
    assert projection.early is not None
    assert projection.late is not None
    return f"reaches {_limit(projection, unit)} by {_whole(projection.early)} to {_whole(projection.late, ROUND_CEILING)} {over}{of}"


def say_likely_so_far(projection: Projection, unit: str, over: str, of: str = "") -> str:
    """Say when a limit is likely reached where it was watched too shortly to plan by that: "0.12 mm by 503 h"."""
    assert projection.likely_so_far is not None
    at = _whole(projection.likely_so_far, ROUND_HALF_EVEN)
    return f"{_limit(projection, unit)} by {at} {over}{of}"


def say_ahead(projection: Projection, unit: str, over: str, of: str = "") -> str:
    """Say all a projection tells: slope, range and likely figure, or the slope where one is seen, and why no more."""
    trend, hindrances = projection.trend, projection.hindrances
    if projection.likely is not None and trend is not None:
        reached = say_reached(projection, unit, over, of)
        return f"{say_slope(trend, unit, over)}: {reached}, likely {_whole(projection.likely, ROUND_HALF_EVEN)} {over}"
    loud = [hindrance for hindrance in hindrances if hindrance.obstacle in _LOUD] or list(hindrances)
    why = "; ".join(_say_hindrance(hindrance, projection, unit, over) for hindrance in loud)
    is_seen = trend is not None and not {one.obstacle for one in hindrances} & {Obstacle.NO_SLOPE, Obstacle.TOO_FEW}
    return f"{say_slope(trend, unit, over)}; {why}" if is_seen and trend is not None else why


def say_obstacles(projections: Sequence[tuple[str, Projection]]) -> str:
    """Say which subjects are not projected, those with the same first reason together: "slope not ...: 1I, 3I"."""
    names: dict[str, list[str]] = {}
    for name, projection in projections:
        if projection.hindrances:
            names.setdefault(projection.hindrances[0].obstacle, []).append(name)
    return "; ".join(f"{obstacle}: {', '.join(found)}" for obstacle, found in names.items())


def _say_hindrance(hindrance: Hindrance, projection: Projection, unit: str, over: str) -> str:
    """Say one obstacle with its figures; those a projection of wear cannot meet by their name alone."""
    figure, bound = hindrance.figure or Decimal(0), hindrance.bound or Decimal(0)
    limit = _limit(projection, unit)
    match hindrance.obstacle:
        case Obstacle.TOO_FAR:
            return f"{limit} not before about {_about(projection.not_before or figure)} {over}"
        case Obstacle.TOO_FEW:
            return f"no slope yet: {plain(bound - figure)} more {'value' if bound - figure == 1 else 'values'} needed"
        case Obstacle.SHORT_SPAN:
            watched, interval = f"{_whole(figure)} {over}", f"{plain(bound)} {over}"
            too_short = f"watched for {watched}, less than one inspection interval of {interval}"
            if projection.likely_so_far is None:
                return f"not projected: {too_short}"
            return f"likely {say_likely_so_far(projection, unit, over)}, but moves no check: {too_short}"
        case Obstacle.OLD_VALUE:
            return f"not projected: {_whole(figure)} {over} since the last value, more than two intervals"
        case Obstacle.NO_LEFT_VALUE:
            return f"not projected: not known what the adjustment at {_whole(figure)} {over} left"
        case Obstacle.PAST_LIMIT:
            return f"already past {limit}"
        case Obstacle.NO_SLOPE if hindrance.figure is None:
            return "does not change, nothing to project"
        case other:
            return f"not projected: {other}"


def _limit(projection: Projection, unit: str) -> str:
    return f"{projection.limit:f} {unit}".rstrip()


def _whole(figure: Decimal, rounding: str = ROUND_FLOOR) -> str:
    return plain(figure.quantize(Decimal(1), rounding=rounding))


def _about(figure: Decimal) -> str:
    """Round down to two digits, or to whole hundreds where that is finer: a figure not to be leant on."""
    step = min(figure.adjusted() - 1, _DIGITS)
    return plain((figure.scaleb(-step)).quantize(Decimal(1), rounding=ROUND_FLOOR).scaleb(step))
