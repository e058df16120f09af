"""Measured figures that are more likely a slip: a decimal point in the wrong place, another unit of the same kind.

A figure outside what is usual for any engine is doubted, and one that cannot be is refused whatever anybody says. What
was likely meant is the same figures in another unit, or ten or a hundred times smaller or larger, where that is usual.
A figure below what is usual is doubted only where something else was likely meant: cylinders do die, and 0 is never a
slip. The ranges are wide on purpose and no opinion on engines: common practice.
"""

from collections.abc import Iterator, Mapping, Set
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction

from fleetcare.domain.measured import MeasuredEngine
from fleetcare.domain.measures import ELEMENTS, QUANTITIES, dimension, exactly
from fleetcare.domain.quantities import plain
from fleetcare.domain.sheets import SheetValue
from fleetcare.rules.j300 import grade_key, is_grade


@dataclass(frozen=True, slots=True)
class Sense:
    """What is usual of a quantity and what is possible at all, in `unit`, ends counted."""

    usual: tuple[Decimal, Decimal]
    possible: tuple[Decimal, Decimal]
    unit: str


@dataclass(frozen=True, slots=True)
class MeasureDoubt:
    """Why a figure is doubted, what was likely meant (figure and unit, the likeliest first), and whether it can be."""

    why: str
    meant: tuple[tuple[Decimal, str], ...]
    is_possible: bool


def _sense(quantity: str, usual: tuple[str, str], possible: tuple[str, str]) -> tuple[str, Sense]:
    low, high, least, most = (Decimal(end) for end in (*usual, *possible))
    return quantity, Sense((low, high), (least, most), QUANTITIES[quantity].unit)


_ADDITIVES = ("B", "Ba", "Ca", "K", "Mg", "Mo", "Na", "P", "S", "Si", "Zn")
_ALL_PPM = ("0", "1000000")  # by definition

SENSE: Mapping[str, Sense] = dict(
    (
        _sense("pressure", ("300", "6000"), ("0", "20000")),
        _sense("leak", ("0", "100"), ("0", "100")),
        _sense("supply", ("200", "1100"), ("10", "2000")),
        _sense("held", ("0", "1100"), ("0", "2000")),
        _sense("minutes", ("1", "1440"), ("0.1", "44640")),
        _sense("load", ("0", "110"), ("0", "150")),
        _sense("oil_pressure", ("50", "1000"), ("0", "2000")),
        _sense("coolant", ("-30", "125"), ("-60", "250")),
        _sense("oil_temperature", ("-30", "160"), ("-60", "300")),
        _sense("exhaust", ("-30", "850"), ("-60", "1200")),
        _sense("crankcase", ("-5", "8"), ("-50", "100")),
        _sense("cranking_volts", ("4", "35"), ("0", "80")),
        _sense("cranking_speed", ("60", "600"), ("0", "2000")),
        _sense("hours_on_oil", ("0", "5000"), ("0", "100000")),
        _sense("top_up", ("0", "500"), ("0", "10000")),
        _sense("kv40", ("15", "500"), ("1", "3000")),
        _sense("kv100", ("3", "40"), ("1", "300")),
        _sense("tbn", ("0", "80"), ("0", "150")),
        _sense("tan", ("0", "15"), ("0", "100")),
        _sense("ph", ("2", "12"), ("0", "14")),
        _sense("water", ("0", "10"), ("0", "100")),
        _sense("fuel", ("0", "20"), ("0", "100")),
        _sense("soot", ("0", "12"), ("0", "100")),
        _sense("glycol", ("0", "50000"), _ALL_PPM),
        _sense("insolubles", ("0", "15"), ("0", "100")),
        _sense("oxidation", ("0", "150"), ("0", "1000")),
        _sense("nitration", ("0", "150"), ("0", "1000")),
        _sense("flash_point", ("60", "300"), ("0", "400")),
        *(_sense(symbol, ("0", "30000" if symbol in _ADDITIVES else "1500"), _ALL_PPM) for symbol in ELEMENTS),
    )
)

# In these a figure is typed at the wrong unit; the others of a dimension are too rare to be meant.
_TYPED = {
    "pressure": ("bar", "psi", "kPa", "mbar"),
    "temperature": ("°C", "°F"),
    "fraction": ("%", "ppm"),
    "time": ("min", "h"),
    "power": ("kW", "hp"),
    "volume": ("L", "galus"),
}
_SHARES = frozenset({"leak", "load"})  # nobody gives these in ppm
_SLIPS = (Fraction(1, 10), Fraction(10), Fraction(1, 100), Fraction(100))
_MOST_KW = Decimal(5000)


def doubt_measure(value: SheetValue, engine: MeasuredEngine) -> MeasureDoubt | None:
    """Give the doubt about a figure or a bound, None where there is none or nothing was detected."""
    if value.value is None:
        return None
    sense = _sense_of(value, engine)
    figure = exactly(value.value, value.unit, sense.unit)
    if _lies(figure, sense.usual) or (figure == 0 and _lies(figure, sense.possible)):
        return None
    is_possible = _lies(figure, sense.possible)
    meant = tuple(dict.fromkeys(_meant(value, sense)))
    if is_possible and figure < sense.usual[0] and not meant:
        return None
    return MeasureDoubt(_why(sense, figure, is_possible=is_possible), meant, is_possible)


def doubt_grade(value: SheetValue, known: Set[str]) -> MeasureDoubt | None:
    """Give the doubt about a grade of oil that is none of SAE J300 and none of those known, as `j300.grade_key` has them."""
    if is_grade(value.qualifier) or grade_key(value.qualifier) in known:
        return None
    return MeasureDoubt("it is no grade of SAE J300 such as 15W-40, nor one known here", (), is_possible=True)


def say_measure_doubt(value: SheetValue, doubt: MeasureDoubt) -> str:
    """Say why a figure is doubted and what was likely meant."""
    meant = " or ".join(f"{plain(figure)} {unit}".strip() for figure, unit in doubt.meant)
    told = " ".join(part for part in (value.quantity, str(value), value.unit) if part)
    where = f" at {value.point}" if value.point else ""
    return f"{told}{where}: {doubt.why}{f'; {meant} is likely meant' if meant else ''}"


def _sense_of(value: SheetValue, engine: MeasuredEngine) -> Sense:
    """Give what makes sense of a value; a load in kW is held against the nameplate, or what any engine has."""
    sense = SENSE[value.quantity]
    if dimension(value.unit) == dimension(sense.unit):
        return sense
    rated = engine.rated_kw or _MOST_KW
    usual, possible = ((low * rated / 100, high * rated / 100) for low, high in (sense.usual, sense.possible))
    return Sense(usual, possible, "kW")


def _why(sense: Sense, figure: Fraction, *, is_possible: bool) -> str:
    low, high = sense.usual if is_possible else sense.possible
    is_low = figure < low
    end = f"{plain(low if is_low else high)} {sense.unit}".strip()
    side = "less" if is_low else "more"
    return f"{side} than {end} is {'not usual on any engine' if is_possible else 'not possible'}"


def _meant(value: SheetValue, sense: Sense) -> Iterator[tuple[Decimal, str]]:
    """Give what the same figures could be: in another unit, or with the point elsewhere."""
    assert value.value is not None
    is_share = value.quantity in _SHARES and value.unit == "%"
    for unit in () if is_share else _TYPED.get(dimension(value.unit), ()):
        if unit != value.unit and _lies(exactly(value.value, unit, sense.unit), sense.usual):
            yield value.value, unit
    for slip in _SLIPS:
        other = Fraction(value.value) * slip
        if other and _lies(exactly(other, value.unit, sense.unit), sense.usual):
            yield Decimal(other.numerator) / other.denominator, value.unit
            return


def _lies(figure: Fraction, ends: tuple[Decimal, Decimal]) -> bool:
    return ends[0] <= figure <= ends[1]
