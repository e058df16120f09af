"""Viscosity of oil: its index, and its value at another temperature.

Kinematic viscosities are in mm2/s (cSt), temperatures in °C. Both sums are those of the standards, for homogeneous oil:
not for one with free water or much fuel in it.
"""

from bisect import bisect_right
from dataclasses import dataclass
from decimal import ROUND_HALF_EVEN, Decimal

from fleetcare.domain.quantities import plain
from fleetcare.errors import Refused
from fleetcare.rules.bounds import check_between
from fleetcare.rules.d2270 import reference_oils

# ASTM D2270 defines no index below this viscosity at 100 °C.
LEAST_D2270 = 2

# What ASTM D341 covers: from memory.
LEAST_D341, MOST_D341 = Decimal("0.21"), 20_000_000

_KELVIN = Decimal("273.15")
_MOST_CST = 100_000  # limits of sense, as are those of temperature
_COLDEST_C, _HOTTEST_C = -60, 300


@dataclass(frozen=True, slots=True)
class ViscosityIndex:
    """A viscosity index unrounded, with what it was worked from.

    `zero` and `hundred` are the 40 °C viscosities of the oils of index 0 and 100 with the same viscosity at 100 °C
    (L and H of the standard); `power` is N of procedure B, None where procedure A was used.
    """

    unrounded: Decimal
    zero: Decimal
    hundred: Decimal
    power: Decimal | None

    @property
    def rounded(self) -> int:
        """The index as reported: to the nearest whole number, exact halves to the even one (ASTM E29, from memory)."""
        return int(self.unrounded.to_integral_value(ROUND_HALF_EVEN))


@dataclass(frozen=True, slots=True)
class Walther:
    """How an oil thins with heat, by ASTM D341: log log Z = a - b log T, logarithms to base 10 and T in kelvin."""

    a: Decimal
    b: Decimal

    def at(self, temperature: Decimal) -> Decimal:
        """Give the kinematic viscosity at a temperature in °C.

        Raises Refused for a temperature no oil is used at, and where the oil would be too thin or too thick for the
        standard.
        """
        check_between("temperature", temperature, _COLDEST_C, _HOTTEST_C, "°C")
        height = self.a - self.b * (temperature + _KELVIN).log10()
        if not _height(LEAST_D341) <= height <= _height(Decimal(MOST_D341)):
            raise Refused(
                f"at {plain(temperature)} °C this oil is not within {LEAST_D341} to {MOST_D341:_} mm²/s".replace(
                    "_", " "
                ),
                "ask for a temperature nearer to 40 and 100 °C: ASTM D341 covers no more",
            )
        return _viscosity(height)


def viscosity_index(kv40: Decimal, kv100: Decimal) -> ViscosityIndex:
    """Give the viscosity index by ASTM D2270 / ISO 2909, Table 1 interpolated, its formulas above 70 mm2/s at 100 °C.

    Procedure A, up to an index of 100: 100 (L - U) / (L - H). Procedure B, above: (10^N - 1) / 0.00715 + 100 with
    N = (log H - log U) / log Y. Raises Refused below 2 mm2/s at 100 °C, where it is not defined, and for figures that
    cannot be right.
    """
    _check_pair(kv40, kv100)
    if kv100 < LEAST_D2270:
        raise Refused(
            f"no viscosity index is defined for {plain(kv100)} mm²/s at 100 °C",
            f"ASTM D2270 begins at {LEAST_D2270} mm²/s: compare the viscosities themselves",
        )
    zero, hundred = _reference(kv100)
    if kv40 >= hundred:
        return ViscosityIndex(100 * (zero - kv40) / (zero - hundred), zero, hundred, None)
    power = (hundred / kv40).log10() / kv100.log10()
    return ViscosityIndex((10**power - 1) / Decimal("0.00715") + 100, zero, hundred, power)


def walther(kv40: Decimal, kv100: Decimal) -> Walther:
    """Give the line of ASTM D341 through the viscosities at 40 and 100 °C. Raises Refused where they cannot be right."""
    _check_pair(kv40, kv100)
    warm, hot = (40 + _KELVIN).log10(), (100 + _KELVIN).log10()
    b = (_height(kv40) - _height(kv100)) / (hot - warm)
    return Walther(_height(kv40) + b * warm, b)


def _check_pair(kv40: Decimal, kv100: Decimal) -> None:
    check_between("viscosity at 40 °C", kv40, LEAST_D341, _MOST_CST, "mm²/s")
    check_between("viscosity at 100 °C", kv100, LEAST_D341, _MOST_CST, "mm²/s")
    if kv40 <= kv100:
        raise Refused(
            f"{plain(kv40)} mm²/s at 40 °C and {plain(kv100)} at 100 °C cannot be right",
            "give the larger figure for 40 °C: oil thins as it warms",
        )


def _reference(kv100: Decimal) -> tuple[Decimal, Decimal]:
    """Give L and H for a viscosity at 100 °C."""
    table = reference_oils()
    if kv100 > table[-1][0]:
        zero = Decimal("0.8353") * kv100**2 + Decimal("14.67") * kv100 - 216
        return zero, Decimal("0.1684") * kv100**2 + Decimal("11.85") * kv100 - 97
    after = min(bisect_right(table, kv100, key=lambda row: row[0]), len(table) - 1)
    (below, zero_below, hundred_below), (above, zero_above, hundred_above) = table[after - 1], table[after]
    share = (kv100 - below) / (above - below)
    return zero_below + share * (zero_above - zero_below), hundred_below + share * (hundred_above - hundred_below)


def _height(viscosity: Decimal) -> Decimal:
    """Give log log Z of ASTM D341, Z = v + 0.7 + exp(-1.47 - 1.84 v - 0.51 v^2); the last term fades out above 2."""
    thin = (Decimal("-1.47") - Decimal("1.84") * viscosity - Decimal("0.51") * viscosity**2).exp()
    return (viscosity + Decimal("0.7") + thin).log10().log10()


def _viscosity(height: Decimal) -> Decimal:
    """Turn log log Z back into a viscosity by the inverse of ASTM D341, good to 2 parts in 10 000 below 2 mm2/s."""
    x = 10 ** (10**height) - Decimal("0.7")
    return x - (Decimal("-0.7487") - Decimal("3.295") * x + Decimal("0.6119") * x**2 - Decimal("0.3193") * x**3).exp()
