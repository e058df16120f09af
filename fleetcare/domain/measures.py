"""What is measured on sheets, in which units, and how those convert: exactly, as fractions.

A figure is compared in the unit its limit is written in. Factors are fractions, so that no figure ever moves across a
limit by being converted; temperatures have an offset as well.
"""

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction

from fleetcare.errors import Misread


@dataclass(frozen=True, slots=True)
class MeasureUnit:
    """A unit of measurement: base = figure * factor + offset, in the base unit of its dimension."""

    symbol: str
    dimension: str
    factor: Fraction = Fraction(1)
    offset: Fraction = Fraction(0)


# psi: the pound of 0.45359237 kg, 9.80665 m/s2 and the inch of 25.4 mm; bar, inch, gallons and quart by definition
# (NIST SP 811, B.8). hp of 550 ft lbf/s and the metric horsepower of 75 kgf m/s: the same, exact by definition.
_PSI = Fraction("0.45359237") * Fraction("9.80665") / Fraction("0.0254") ** 2 / 1000
_HP = 550 * Fraction("0.3048") * Fraction("0.45359237") * Fraction("9.80665") / 1000
_PS = 75 * Fraction("9.80665") / 1000

UNITS: Mapping[str, MeasureUnit] = {
    unit.symbol: unit
    for unit in (
        MeasureUnit("kPa", "pressure"),
        MeasureUnit("Pa", "pressure", Fraction(1, 1000)),
        MeasureUnit("mbar", "pressure", Fraction(1, 10)),
        MeasureUnit("bar", "pressure", Fraction(100)),
        MeasureUnit("MPa", "pressure", Fraction(1000)),
        MeasureUnit("psi", "pressure", _PSI),
        MeasureUnit("kgf/cm2", "pressure", Fraction("98.0665")),
        MeasureUnit("mm", "length"),
        MeasureUnit("in", "length", Fraction("25.4")),
        MeasureUnit("ppm", "fraction"),
        MeasureUnit("mg/kg", "fraction"),
        MeasureUnit("%", "fraction", Fraction(10_000)),
        MeasureUnit("mm2/s", "viscosity"),
        MeasureUnit("cSt", "viscosity"),
        MeasureUnit("mg KOH/g", "base number"),
        MeasureUnit("A/cm", "absorbance"),
        MeasureUnit("h", "time"),
        MeasureUnit("min", "time", Fraction(1, 60)),
        MeasureUnit("°C", "temperature"),
        MeasureUnit("°F", "temperature", Fraction(5, 9), Fraction(-160, 9)),
        MeasureUnit("V", "voltage"),
        MeasureUnit("kW", "power"),
        MeasureUnit("hp", "power", _HP),
        MeasureUnit("PS", "power", _PS),
        MeasureUnit("L", "volume"),
        MeasureUnit("galus", "volume", Fraction("3.785411784")),
        MeasureUnit("galimp", "volume", Fraction("4.54609")),
        MeasureUnit("rpm", "speed"),
    )
}

_SPELLED = {
    "mm²/s": "mm2/s",
    "kg/cm2": "kgf/cm2",  # as gauges print it
    "kg/cm²": "kgf/cm2",
    "kgf/cm²": "kgf/cm2",
    "psig": "psi",
    "barg": "bar",
    "c": "°C",
    "f": "°F",
    "degc": "°C",
    "degf": "°F",
    "vol%": "%",
    "wt%": "%",
    "mgkoh/g": "mg KOH/g",
}
_BY_TEXT = {symbol.lower(): symbol for symbol in UNITS} | {text.lower(): symbol for text, symbol in _SPELLED.items()}


@dataclass(frozen=True, slots=True)
class Quantity:
    """Something measured: its name on a sheet, what a person calls it, and the unit a bare figure is taken in.

    `also` names other dimensions it may be given in, as the load of a run: kW, or percent of the nameplate.
    """

    name: str
    title: str
    unit: str
    also: tuple[str, ...] = ()


ELEMENTS: Mapping[str, str] = {
    "Fe": "iron",
    "Cr": "chromium",
    "Al": "aluminium",
    "Cu": "copper",
    "Pb": "lead",
    "Sn": "tin",
    "Ni": "nickel",
    "Ag": "silver",
    "Si": "silicon",
    "Na": "sodium",
    "K": "potassium",
    "B": "boron",
    "Mo": "molybdenum",
    "Mg": "magnesium",
    "Ca": "calcium",
    "Zn": "zinc",
    "P": "phosphorus",
    "Ba": "barium",
    "S": "sulphur",
    "V": "vanadium",
    "Ti": "titanium",
    "Mn": "manganese",
}

QUANTITIES: Mapping[str, Quantity] = {
    quantity.name: quantity
    for quantity in (
        Quantity("lash", "valve lash", "mm"),
        Quantity("shim", "shim", "mm"),
        Quantity("pressure", "compression", "kPa"),
        Quantity("leak", "leak-down", "%"),
        Quantity("supply", "supply pressure", "kPa"),
        Quantity("held", "held pressure", "kPa"),
        Quantity("minutes", "length of the run", "min"),
        Quantity("load", "load", "%", ("power",)),
        Quantity("oil_pressure", "oil pressure", "kPa"),
        Quantity("coolant", "coolant temperature", "°C"),
        Quantity("oil_temperature", "oil temperature", "°C"),
        Quantity("exhaust", "exhaust temperature", "°C"),
        Quantity("crankcase", "crankcase pressure", "kPa"),
        Quantity("cranking_volts", "battery while cranking", "V"),
        Quantity("cranking_speed", "cranking speed", "rpm"),
        Quantity("hours_on_oil", "hours on the oil", "h"),
        Quantity("top_up", "oil topped up since the change", "L"),
        Quantity("kv40", "viscosity at 40 °C", "mm2/s"),
        Quantity("kv100", "viscosity at 100 °C", "mm2/s"),
        Quantity("tbn", "base number", "mg KOH/g"),
        Quantity("tan", "acid number", "mg KOH/g"),
        Quantity("ph", "initial pH", ""),
        Quantity("water", "water", "%"),
        Quantity("fuel", "fuel in the oil", "%"),
        Quantity("soot", "soot", "%"),
        Quantity("glycol", "glycol", "ppm"),
        Quantity("insolubles", "insolubles", "%"),
        Quantity("oxidation", "oxidation", "A/cm"),
        Quantity("nitration", "nitration", "A/cm"),
        Quantity("flash_point", "flash point", "°C"),
        *(Quantity(symbol, title, "ppm") for symbol, title in ELEMENTS.items()),
    )
}


def dimension(unit: str) -> str:
    """Give what a unit measures; no unit, or one that is not known here, converts to itself alone."""
    return UNITS[unit].dimension if unit in UNITS else unit


def in_base(value: Decimal, unit: str) -> Fraction:
    """Give a figure in the base unit of what it measures; one without a unit stays as it is."""
    known = UNITS.get(unit)
    return Fraction(value) * known.factor + known.offset if known else Fraction(value)


def exactly(value: Decimal | Fraction, unit: str, into: str) -> Fraction:
    """Convert a figure exactly. Both units are of one dimension; the same unit converts to itself whatever it is."""
    if unit == into:
        return Fraction(value)
    have, want = UNITS[unit], UNITS[into]
    return (Fraction(value) * have.factor + have.offset - want.offset) / want.factor


def can_convert(unit: str, into: str) -> bool:
    """Whether figures in a unit can be compared with those in another."""
    return dimension(unit) == dimension(into)


def read_unit(quantity: str, text: str) -> str:
    """Read the unit of a figure of a quantity; empty is the quantity's own. Raises Misread for one that does not fit."""
    own = QUANTITIES[quantity]
    if not text.strip():
        return own.unit
    symbol = _BY_TEXT.get("".join(text.split()).lower()) or _BY_TEXT.get(text.strip().lower())
    fitting = {dimension(own.unit), *own.also} - {""}
    if symbol is None or dimension(symbol) not in fitting:
        units = ", ".join(unit.symbol for unit in UNITS.values() if unit.dimension in fitting) or "no unit"
        raise Misread(f"{text.strip()!r} is no unit of {quantity}", f"write {units}, or leave it empty")
    return symbol
