"""The bench sum on compression: what a cylinder should show while cranking."""

import argparse
from decimal import Decimal

from fleetcare.cli.calc.answers import Answer, add_sum, all_or_none, shown
from fleetcare.cli.parser import Commands, number
from fleetcare.domain.quantities import plain

_CLOSING = ("intake-closes", "stroke", "rod")


def add_sums(sums: Commands) -> None:
    """Add `cranking-pressure`."""
    cranking = add_sum(sums, "cranking-pressure", "what a compression gauge should about show", _cranking_pressure)
    cranking.add_argument("--compression-ratio", type=number, required=True, metavar="CR", help="such as 9.5")
    cranking.add_argument("--altitude", type=number, default=Decimal(0), metavar="M", help="of the site, m (0)")
    cranking.add_argument("--exponent", type=number, metavar="N", help="polytropic (1.3)")
    cranking.add_argument("--intake-closes", type=number, metavar="DEG", help="degrees after bottom dead centre")
    cranking.add_argument("--stroke", type=number, metavar="MM", help="stroke in mm")
    cranking.add_argument("--rod", type=number, metavar="MM", help="length of the rod between centres in mm")


def _cranking_pressure(given: argparse.Namespace) -> Answer:
    from fleetcare.rules.compression import USUAL_EXPONENT, USUAL_EXPONENTS, IntakeClosing, cranking_pressure

    known = all_or_none(given, *_CLOSING)
    closing = IntakeClosing(given.intake_closes, given.stroke, given.rod) if known else None
    chosen = USUAL_EXPONENT if given.exponent is None else given.exponent
    expected, low, high = (
        cranking_pressure(given.compression_ratio, altitude=given.altitude, exponent=exponent, closing=closing)
        for exponent in (chosen, *USUAL_EXPONENTS)
    )
    counted = (
        f"of the ratio {plain(given.compression_ratio)} the closed intake leaves {shown(expected.effective_ratio)}"
        if closing
        else "at most, as when the intake closes is not given"
    )
    return Answer(
        f"About {_tenth(expected.gauge)} kPa on the gauge ({_tenth(expected.gauge_psi)} psi, "
        f"{shown(round(expected.gauge_bar, 2))} bar): {shown(expected.ambient)} kPa at {plain(given.altitude)} m × "
        f"({shown(expected.effective_ratio)}^{plain(chosen)} − 1); {counted}. "
        f"Exponents of {plain(USUAL_EXPONENTS[0])} to {plain(USUAL_EXPONENTS[1])}, as usual in cranking, give "
        f"{_tenth(low.gauge)} to {_tenth(high.gauge)} kPa: a guide, never a limit.",
        {
            "ambient_kpa": expected.ambient,
            "absolute_kpa": expected.absolute,
            "gauge_kpa": expected.gauge,
            "gauge_psi": expected.gauge_psi,
            "gauge_bar": expected.gauge_bar,
            "effective_compression_ratio": expected.effective_ratio,
            "usual_gauge_kpa": [low.gauge, high.gauge],
        },
    )


def _tenth(value: Decimal) -> str:
    return plain(round(value, 1))
