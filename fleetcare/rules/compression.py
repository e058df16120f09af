"""What a cylinder should show on a compression gauge while cranking: an estimate to read beside the gauge, never a limit.

Ambient pressure is that of the standard atmosphere (ISO 2533, U.S. Standard Atmosphere 1976) at the altitude of the
site; from there the charge is compressed polytropically: absolute = ambient * CRe^n, gauge = ambient * (CRe^n - 1).
CRe counts only the stroke that is left when the intake closes.
"""

from dataclasses import dataclass
from decimal import Decimal
from math import cos, radians, sin, sqrt

from fleetcare.domain.quantities import plain
from fleetcare.errors import Refused
from fleetcare.rules.bounds import check_between, check_within
from fleetcare.rules.geometry import MOST_MM

# ISO 2533 / U.S. Standard Atmosphere 1976: sea level, the lapse of the lowest layer, and g0 M / (R* L).
SEA_LEVEL_KPA = Decimal("101.325")
SEA_LEVEL_K = Decimal("288.15")
LAPSE_K_PER_M = Decimal("0.0065")
PRESSURE_EXPONENT = Decimal("5.255876")

# Exact: bar by definition; psi from the pound of 0.45359237 kg, 9.80665 m/s2 and the inch of 25.4 mm (NIST SP 811, B.8).
KPA_PER_BAR = Decimal(100)
KPA_PER_PSI = Decimal("0.45359237") * Decimal("9.80665") / Decimal("0.0254") ** 2 / 1000

# What cranking tests come out at, between isothermal (1) and adiabatic (1.4): common practice.
USUAL_EXPONENT = Decimal("1.3")
USUAL_EXPONENTS = (Decimal("1.2"), Decimal("1.35"))

# Limits of sense: from the lowest shore to the highest summit, and engines that fire by spark or by compression.
_LOWEST_M, _HIGHEST_M = -500, 9000
_LEAST_RATIO, _MOST_RATIO = 2, 50
_ISOTHERMAL, _ADIABATIC = 1, Decimal("1.4")
_FURTHEST_CLOSING = 120


@dataclass(frozen=True, slots=True)
class IntakeClosing:
    """When the intake closes, in degrees after BDC (negative before), and the stroke and rod length in mm."""

    degrees: Decimal
    stroke: Decimal
    rod: Decimal


@dataclass(frozen=True, slots=True)
class CrankingPressure:
    """The ambient pressure, the ratio compression counts with, and the pressure it ends at; kPa."""

    ambient: Decimal
    effective_ratio: Decimal
    absolute: Decimal

    @property
    def gauge(self) -> Decimal:
        """What a gauge shows, in kPa above ambient."""
        return self.absolute - self.ambient

    @property
    def gauge_psi(self) -> Decimal:
        """What a gauge shows, in psi."""
        return self.gauge / KPA_PER_PSI

    @property
    def gauge_bar(self) -> Decimal:
        """What a gauge shows, in bar."""
        return self.gauge / KPA_PER_BAR


def pressure_ratio(altitude: Decimal) -> Decimal:
    """Give the standard pressure at an altitude in m over that at sea level.

    (1 - L H / T0)^5.255876 for geopotential metres H, which are less than metres by 2.5 m in 4 km.
    Raises Refused for an altitude no engine works at.
    """
    check_between("altitude", altitude, _LOWEST_M, _HIGHEST_M, "m")
    return (1 - LAPSE_K_PER_M * altitude / SEA_LEVEL_K) ** PRESSURE_EXPONENT


def stroke_left(closing: IntakeClosing) -> Decimal:
    """Give the share of the stroke that is left for compression when the intake closes, x / S.

    Slider-crank with the pin in line with the crank: x = a + l - (a cos t + sqrt(l^2 - a^2 sin^2 t)), a = S / 2,
    t = 180 degrees less the closing angle; the bore cancels. Raises Refused for a figure that cannot be right.
    """
    check_between("intake closing", closing.degrees, -_FURTHEST_CLOSING, _FURTHEST_CLOSING, "degrees")
    check_within("stroke", closing.stroke, MOST_MM, "mm")
    check_within("rod", closing.rod, 2 * MOST_MM, "mm")
    if closing.rod <= closing.stroke / 2:
        raise Refused(
            f"a rod of {plain(closing.rod)} mm cannot turn a crank with {plain(closing.stroke)} mm of stroke",
            "give its length between centres, which is more than half the stroke",
        )
    crank, rod, angle = float(closing.stroke) / 2, float(closing.rod), radians(180 - float(closing.degrees))
    left = crank + rod - (crank * cos(angle) + sqrt(rod**2 - (crank * sin(angle)) ** 2))
    return Decimal(left / float(closing.stroke))


def cranking_pressure(
    compression_ratio: Decimal,
    *,
    altitude: Decimal = Decimal(0),
    exponent: Decimal = USUAL_EXPONENT,
    closing: IntakeClosing | None = None,
) -> CrankingPressure:
    """Give what a cylinder should show while cranking, from its compression ratio and the altitude of the site in m.

    Without `closing` the whole stroke counts, which is the most it could show: CRe = 1 + (CR - 1) x / S with it.
    Raises Refused for a figure that cannot be right.
    """
    check_between("compression ratio", compression_ratio, _LEAST_RATIO, _MOST_RATIO)
    check_between("exponent", exponent, _ISOTHERMAL, _ADIABATIC)
    share = stroke_left(closing) if closing else Decimal(1)
    effective = 1 + (compression_ratio - 1) * share
    ambient = SEA_LEVEL_KPA * pressure_ratio(altitude)
    return CrankingPressure(ambient, effective, ambient * effective**exponent)
