"""Metal gained between two samples of one fill: as read, and with the top-up in between corrected for.

As read it is (C2 - C1) / (h2 - h1); per 10 h that is the trend of JOAP, ppm increase in 10 h. It is not told across an oil
change or a large top-up, nor for samples less than 5 h apart, where an instrument tolerance of 1 ppm is spread over too
short a time (TM 38-301-3). Corrected it is the mass balance of `oil` begun at C1: with x = top-up / sump and fresh oil
of c_f the wear sheds ((C2 - c_f) - (C1 - c_f) e^-x) x / (1 - e^-x).
"""

from dataclasses import dataclass
from decimal import Decimal

from fleetcare.domain.trends import Hindrance, Obstacle
from fleetcare.rules.bounds import check_between, check_within
from fleetcare.rules.oil import MOST_LITRES, make_up_factor

FEWEST_HOURS = Decimal(5)  # TM 38-301-3, page of the TF30
TOLERANCE_PPM = Decimal(1)  # of the instrument, same page


@dataclass(frozen=True, slots=True)
class OilSample:
    """Metal in the oil at a life total, ppm: `filled_at` is the life total at the oil change before.

    `topped_up` is the litres added since that change.
    """

    filled_at: Decimal
    at: Decimal
    ppm: Decimal
    topped_up: Decimal = Decimal(0)


@dataclass(frozen=True, slots=True)
class OilRate:
    """Metal gained per so many hours, ppm; `error` is the standard error that reading two samples leaves in it.

    `hours` lie between the samples, `make_up` is the top-up in between as a share of the sump.
    """

    as_read: Decimal
    corrected: Decimal
    error: Decimal
    per_hours: int
    hours: Decimal
    make_up: Decimal


def rate_between(
    first: OilSample,
    second: OilSample,
    *,
    per_hours: int,
    most_make_up: Decimal,
    sump: Decimal | None = None,
    fresh: Decimal = Decimal(0),
) -> OilRate | Hindrance:
    """Give the rate between two samples, in either order, or why there is none.

    `per_hours` is 10, 100, 1000; `most_make_up` the share of the sump above which a top-up is large, `fresh` the metal in
    fresh oil. Raises Refused where less had been added by the later sample than by the earlier, or for an odd sump.
    """
    first, second = sorted((first, second), key=lambda sample: sample.at)
    hours, added = second.at - first.at, second.topped_up - first.topped_up
    if first.filled_at != second.filled_at:
        return Hindrance(Obstacle.OTHER_FILL, second.filled_at, first.filled_at)
    if hours < FEWEST_HOURS:
        return Hindrance(Obstacle.TOO_CLOSE, hours, FEWEST_HOURS)
    check_between("top-up", added, 0, MOST_LITRES, "L")
    if added and sump is None:
        return Hindrance(Obstacle.NO_SUMP, added)
    make_up = added / check_within("sump", sump, MOST_LITRES, "L") if sump is not None else Decimal(0)
    if make_up > most_make_up:
        return Hindrance(Obstacle.LARGE_TOP_UP, make_up, most_make_up)
    shed = ((second.ppm - fresh) - (first.ppm - fresh) * (-make_up).exp()) * make_up_factor(make_up)
    return OilRate(
        as_read=per_hours * (second.ppm - first.ppm) / hours,
        corrected=per_hours * shed / hours,
        error=per_hours * Decimal(2).sqrt() * TOLERANCE_PPM / hours,
        per_hours=per_hours,
        hours=hours,
        make_up=make_up,
    )
