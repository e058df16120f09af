"""The same sheets in other units, where a figure is a finite decimal in both; the factors stand here once more.

Mile, inch, pound, gallons and the units of pressure and power are exact by definition: NIST SP 811 (2008), Appendix B.8.
"""

from collections.abc import Mapping
from dataclasses import replace
from decimal import Context, Decimal
from fractions import Fraction
from random import Random

from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.sheets import LashSpec, SheetValue
from tests.property.case import Case

_POUND_FORCE = Fraction("4.4482216152605")
_SAME: tuple[Mapping[str, Fraction], ...] = (
    {
        "kPa": Fraction(1000), "Pa": Fraction(1), "mbar": Fraction(100), "bar": Fraction(100_000),
        "MPa": Fraction(1_000_000), "psi": _POUND_FORCE / Fraction("0.0254") ** 2, "kgf/cm2": Fraction("98066.5"),
    },
    {"mm": Fraction(1), "in": Fraction("25.4")},
    {"ppm": Fraction(1), "mg/kg": Fraction(1), "%": Fraction(10_000)},
    {"mm2/s": Fraction(1), "cSt": Fraction(1)},
    {"h": Fraction(60), "min": Fraction(1)},
    {"kW": Fraction(1000), "hp": 550 * Fraction("0.3048") * _POUND_FORCE, "PS": 75 * Fraction("9.80665")},
    {"L": Fraction(1), "galus": Fraction("3.785411784"), "galimp": Fraction("4.54609")},
)  # fmt: skip
_EXACT = Context(prec=60)
_MOST_DIGITS = 24


def convert(figure: Fraction, unit: str, into: str) -> Fraction | None:
    """Convert a figure, None where the units do not measure the same."""
    if unit == into:
        return figure
    if {unit, into} == {"°C", "°F"}:
        return figure * Fraction(9, 5) + 32 if into == "°F" else (figure - 32) * Fraction(5, 9)
    for factors in _SAME:
        if unit in factors and into in factors:
            return figure * factors[unit] / factors[into]
    return None


def in_other_units(case: Case, random: Random) -> Case:
    """The same case, each figure in any unit it may be entered in; a load may be percent of the nameplate or power."""
    rated = case.engine.rated_kw
    return replace(
        case,
        sheets=tuple(_sheet(sheet, rated, random) for sheet in case.sheets),
        fresh=tuple(_rewritten(value, rated, random) for value in case.fresh),
        spec=_spec(case.spec, random),
    )


def _sheet(sheet: MeasuredSheet, rated: Decimal | None, random: Random) -> MeasuredSheet:
    return replace(sheet, values=tuple(_rewritten(value, rated, random) for value in sheet.values))


def _rewritten(value: SheetValue, rated: Decimal | None, random: Random) -> SheetValue:
    if value.quantity == "load" and value.unit == "%" and rated and value.value is not None and random.random() < 0.5:
        return replace(value, value=value.value * rated / 100, unit="kW")
    unit = random.choice(_units_for(value.unit))
    ends = [value.value, value.low, value.high]
    there = [None if end is None else _finite(end, value.unit, unit) for end in ends]
    if any((end is None) is not (other is None) for end, other in zip(ends, there, strict=True)):
        return value
    return replace(value, value=there[0], low=there[1], high=there[2], unit=unit)


def _spec(spec: LashSpec | None, random: Random) -> LashSpec | None:
    if spec is None:
        return None
    unit = random.choice(["mm", "in"])
    ranges = {}
    for side, (least, most) in spec.ranges.items():
        low, high = _finite(least, spec.unit, unit), _finite(most, spec.unit, unit)
        if low is None or high is None:
            return spec
        ranges[side] = (low, high)
    return replace(spec, unit=unit, ranges=ranges)


def _units_for(unit: str) -> list[str]:
    if unit in {"°C", "°F"}:
        return ["°C", "°F"]
    return next((sorted(factors) for factors in _SAME if unit in factors), [unit])


def _finite(figure: Decimal, unit: str, into: str) -> Decimal | None:
    """Convert a figure exactly, None where it does not end, or ends later than anybody would type."""
    there = convert(Fraction(figure), unit, into)
    if there is None:
        return None
    found = _EXACT.divide(Decimal(there.numerator), Decimal(there.denominator))
    return found if Fraction(found) == there and len(found.as_tuple().digits) <= _MOST_DIGITS else None
