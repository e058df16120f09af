"""The bench sum on compression: what a cylinder should show while cranking."""

from decimal import Decimal

from fleetcare.domain.quantities import plain
from fleetcare.sums.base import Answer, Given, Option, Sum, all_or_none, shown

_CLOSING = ("intake-closes", "stroke", "rod")


def _cranking_pressure(given: Given) -> Answer:
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


SUMS = (
    Sum(
        "cranking-pressure",
        "what a compression gauge should about show",
        (
            Option("compression-ratio", "such as 9.5", "CR", is_required=True, plate="compression_ratio"),
            Option("altitude", "of the site, m (0)", "M", default=Decimal(0), plate="altitude_m"),
            Option("exponent", "polytropic (1.3)", "N"),
            Option("intake-closes", "degrees after bottom dead centre", "DEG", plate="intake_closes_deg"),
            Option("stroke", "stroke in mm", "MM", plate="stroke_mm"),
            Option("rod", "length of the rod between centres in mm", "MM", plate="rod_mm"),
        ),
        _cranking_pressure,
    ),
)
