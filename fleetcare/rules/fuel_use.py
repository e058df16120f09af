"""Fuel use on the road, in litres per 100 km and miles per gallon of either size."""

from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum

from fleetcare.domain.quantities import UNITS
from fleetcare.rules.bounds import check_within

# Limit of sense: a crawling tracked machine stays below it, and so does a trial car on a drop of fuel.
MOST = 20_000


class Scale(StrEnum):
    """The scales fuel use is quoted in."""

    LITRES_PER_100KM = "L/100 km"
    MPG_US = "mpg (US)"
    MPG_IMP = "mpg (imperial)"


_GALLON = {Scale.MPG_US: UNITS["galus"], Scale.MPG_IMP: UNITS["galimp"]}


@dataclass(frozen=True, slots=True)
class FuelUse:
    """One fuel use on all three scales."""

    litres_per_100km: Decimal
    mpg_us: Decimal
    mpg_imp: Decimal


def reciprocal_constant(scale: Scale) -> Decimal:
    """Give c in `L/100 km = c / mpg` for a gallon: 235.2146 for the US one, 282.4809 for the imperial.

    100 * litres per gallon / km per mile, from the exact factors of NIST SP 811 (2008), Appendix B.
    """
    return 100 * _GALLON[scale].to_base / UNITS["mi"].to_base


def fuel_use(value: Decimal, scale: Scale) -> FuelUse:
    """Give a fuel use on every scale; the figure that came in comes out unchanged.

    The scales are reciprocal, so average over distance and volume, never over mpg.
    Raises Refused for a figure that cannot be right.
    """
    check_within("fuel use", value, MOST, scale)
    litres = value if scale is Scale.LITRES_PER_100KM else reciprocal_constant(scale) / value
    miles = {gallon: value if scale is gallon else reciprocal_constant(gallon) / litres for gallon in _GALLON}
    return FuelUse(litres, miles[Scale.MPG_US], miles[Scale.MPG_IMP])
