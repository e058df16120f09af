"""Sheets of every kind, of engines of any make-up, for the laws of judging.

Figures stand on limits, just beside them or anywhere, in the units a person may enter them in; most are such that they are
finite decimals in other units too. What is drawn says nothing of what is right: it only makes that rules have something to say.
"""

from collections.abc import Mapping
from dataclasses import replace
from decimal import Decimal
from functools import lru_cache
from typing import TypeVar

from hypothesis import strategies as st

from fleetcare.domain.engines import Layout, ValveTrain
from fleetcare.domain.measured import MeasuredEngine, MeasuredSheet, SheetWord
from fleetcare.domain.sheets import Phase, SheetValue
from fleetcare.rules.lash_points import banks
from tests.rules.measured import ON

T = TypeVar("T")

# A pound of force on 0.025 x 0.0254 inches squared: a step that is a finite decimal in psi, kPa and kgf/cm2.
_PSI_STEP = Decimal("0.016129")
_LITRES = Decimal("3.785411784")

# What may stand on an oil sheet: the unit it is drawn in, and figures on limits and beside them.
OIL: Mapping[str, tuple[str, str]] = {
    "Fe": ("ppm", "0 60 100 100.01 124 200 201 216 250"), "Al": ("ppm", "3 15 20 21 30 50 51 80"),
    "Cu": ("ppm", "0 10 20 21 25 50 51 60"), "Pb": ("ppm", "0 5 10 11 30 31 40"), "Sn": ("ppm", "0 10 11 12 20"),
    "Cr": ("ppm", "0 10 11 12 23 45"), "Si": ("ppm", "0 5 10 20 24 25 30 50 56 60 90"), "Ag": ("ppm", "0 7 11"),
    "Na": ("ppm", "4 5 30 50 51 60 100 101 120"), "K": ("ppm", "0 50 51 100 101 150 151 200"),
    "B": ("ppm", "0 20 21 40"), "Zn": ("ppm", "900 1200"), "glycol": ("ppm", "0 1 99 100 150"),
    "water": ("%", "0 0.1 0.11 0.2 0.5 0.51"), "fuel": ("%", "0 2.5 2.6 5 5.1 8"), "soot": ("%", "0 2.9 3 3.1 4.5 5"),
    "kv100": ("mm2/s", "10.5 11.6 12.0 12.49 12.5 14.5 16.3 16.6 17.4 17.5"),
    "kv40": ("mm2/s", "75 80 110 137 140 180 200"), "tbn": ("mg KOH/g", "1.9 2 2.9 3 4.9 5 8 10"),
    "tan": ("mg KOH/g", "1 3.1 4 4.1 6 8"), "flash_point": ("°C", "139 140 150 190 220"), "ph": ("", "4.4 4.5 7"),
    "oxidation": ("A/cm", "10 20 21"), "nitration": ("A/cm", "10 20 21"), "insolubles": ("%", "0.5 1 1.1 1.5 2.5 3"),
}  # fmt: skip
NOT_BOUNDS = frozenset({"kv40", "kv100", "flash_point", "ph"})
"""What a laboratory always finds some of."""

_TROUBLES = (
    "Na Cu water",
    "Si Al Fe",
    "fuel kv100",
    "Pb Sn Cu",
    "Al K Na",
    "Fe Cr Al",
    "soot kv100",
    "Si Al",
    "Na K B",
)
_SPOTS: Mapping[str, tuple[str, str]] = {
    "oil_pressure": ("kPa", "50 69 70 99 100 300"), "coolant": ("°C", "80 100 101 110 111"),
    "oil_temperature": ("°C", "90 130"), "crankcase": ("kPa", "0.5 0.75 0.76 1 1.01 1.5"),
    "cranking_volts": ("V", "9.5 9.6 12 19.1 19.2 24"), "cranking_speed": ("rpm", "150 250"),
}  # fmt: skip


@lru_cache(maxsize=None, typed=True)
def one_of(*choices: T) -> st.SearchStrategy[T]:
    """Any of some, made once, as there are many draws for one case."""
    return st.sampled_from(choices)


def figure(quantity: str, text: Decimal, unit: str, point: str = "", phase: Phase = Phase.NONE) -> SheetValue:
    """A plain value."""
    return SheetValue(quantity, point, phase, text, None, None, unit)


_SOME_OF_OIL = st.lists(one_of(*sorted(OIL)), unique=True, max_size=6)
_SOME_SPOTS = st.lists(one_of(*sorted(_SPOTS)), unique=True, max_size=4)


@st.composite
def figures(draw: st.DrawFn, placed: str) -> Decimal:
    """One of some figures, or now and then any other up to beyond the largest, with two decimals."""
    known = placed.split()
    if draw(st.integers(0, 3)):
        return Decimal(draw(one_of(*known)))
    return Decimal(draw(st.integers(0, int(130 * Decimal(known[-1]))))) / 100


@st.composite
def oil_sheets(draw: st.DrawFn, engine: MeasuredEngine, sick: str) -> MeasuredSheet:
    """An oil sample with some of what a laboratory reports, plain, as a bound or not detected; often of one trouble."""
    trouble = draw(one_of(*_TROUBLES, "Fe Pb", "Fe Pb Al", "")).split()
    values = []
    for quantity in dict.fromkeys([*trouble, *draw(_SOME_OF_OIL)]):
        unit, placed = OIL[quantity]
        qualifier = "" if quantity in NOT_BOUNDS else draw(one_of("", "", "", "", "", "<", "ND"))
        value = None if qualifier == "ND" else draw(figures(placed))
        values.append(SheetValue(quantity, "", Phase.NONE, value, None, None, unit, qualifier))
    if draw(st.integers(0, 3)):
        values.append(figure("hours_on_oil", Decimal(draw(one_of(0, 5, 10, 40, 50, 60, 60, 60, 60, 150, 250))), "h"))
        values.append(figure("top_up", draw(st.integers(0, 3)) * _LITRES / 4, "L"))
    if draw(st.integers(0, 3)) == 0:
        values.append(figure("Si", Decimal(draw(one_of(3, 20))), "ppm", phase=Phase.NEW))
    words = draw(one_of((), (), ("repair", "sealant"), ("tbn_method", "hydrochloric"), ("grade", "30")))
    sheet = sheet_of("oil", values, *([SheetWord(*words)] if words else []))
    return replace(sheet, logged_top_up=draw(one_of(None, None, _LITRES)))


_SHARES = one_of(100, 100, 100, 98, 90, 85, 80, 75, 74, 70, 60, 50, 0, -1)
_SICK_SHARES = one_of(50, 60)


@st.composite
def compression_sheets(draw: st.DrawFn, engine: MeasuredEngine, sick: str) -> MeasuredSheet:
    """A compression test in any gauge unit: cylinders at some percent of a sound one, some tested wet as well."""
    unit, step = draw(one_of(("kPa", Decimal(20)), ("bar", Decimal("0.2")), ("psi", _PSI_STEP * 200)))
    values = []
    for point in points_of(engine):
        share = draw(_SICK_SHARES if point == sick else _SHARES)
        if share < 0:
            continue
        dry = step * draw(one_of(100, 100, 130)) * share / 100
        values.append(figure("pressure", dry, unit, point, draw(one_of(Phase.DRY, Phase.NONE))))
        gain = draw(one_of(0, 5, 9) if point == sick else one_of(None, None, 0, 10, 11, 30))
        if gain is not None:
            values.append(figure("pressure", dry * (100 + gain) / 100, unit, point, Phase.WET))
    values.append(figure("cranking_speed", Decimal(draw(one_of(180, 250))), "rpm"))
    return sheet_of("compression", values)


@st.composite
def leak_sheets(draw: st.DrawFn, engine: MeasuredEngine, sick: str) -> MeasuredSheet:
    """A leak-down test in percent or as pairs of pressures, with where air is heard."""
    values, words = [], []
    unit, supply = draw(one_of(("psi", Decimal(80)), ("psi", _PSI_STEP * 5000), ("bar", Decimal("5.5"))))
    is_shared = draw(st.booleans())
    if is_shared:
        values.append(figure("supply", supply, unit))
    for point in points_of(engine):
        leak = draw(one_of(20, 26, 40) if point == sick else one_of(-1, 0, 5, 9, 10, 11, 20, 21, 25, 26, 40, 100))
        if leak < 0:
            continue
        if draw(st.booleans()):
            values.append(figure("leak", Decimal(leak), "%", point))
        else:
            values += [] if is_shared else [figure("supply", supply, unit, point)]
            values.append(figure("held", supply * (100 - leak) / 100, unit, point))
        words.append(SheetWord("heard", draw(one_of("exhaust", "intake", "coolant", "next", "", "")), point))
    return sheet_of("leakdown", values, *words)


@st.composite
def run_sheets(draw: st.DrawFn, engine: MeasuredEngine, sick: str) -> MeasuredSheet:
    """A test run of one stage or two, its load in percent or in power, with some readings."""
    values = []
    for point in draw(one_of(("",), ("",), ("1", "2"))):
        minutes = draw(one_of(3, 27, 30, 57, 60, 180, 240, 2400, 3000))
        values.append(figure("minutes", Decimal(minutes), "min", point))
        load = Decimal(draw(one_of(10, 28, 29, 30, 50, 74, 75, 100)))
        unit, scale = draw(one_of(("%", 1), ("kW", 5), ("hp", 6), ("PS", 7)))
        values.append(figure("load", load * scale, unit, point))
    purpose = draw(one_of("test", "test", "test", "supplemental", "36-month", "test", "other", "emergency", ""))
    held = draw(one_of("", "", "yes", "no"))
    words = [SheetWord("purpose", purpose), SheetWord("exhaust_temperature_held", held)]
    return sheet_of("run", [*values, *draw(readings(engine))], *(word for word in words if word.text))


@st.composite
def spot_sheets(draw: st.DrawFn, engine: MeasuredEngine, sick: str) -> MeasuredSheet:
    """Spot readings, some of them."""
    return sheet_of("spot", draw(readings(engine)))


@st.composite
def readings(draw: st.DrawFn, engine: MeasuredEngine) -> list[SheetValue]:
    """Pressures and temperatures of a running engine, exhaust cylinder by cylinder now and then."""
    values = [
        figure(quantity, draw(figures(_SPOTS[quantity][1])), _SPOTS[quantity][0]) for quantity in draw(_SOME_SPOTS)
    ]
    if draw(st.integers(0, 2)) == 0:
        off = one_of(0, 0, 0, 50, 51, 60, -50, -75, -130, 120)
        values += [figure("exhaust", Decimal(400 + draw(off)), "°C", one) for one in points_of(engine)]
    return values


@st.composite
def lash_sheets(draw: st.DrawFn, engine: MeasuredEngine, sick: str) -> MeasuredSheet:
    """A lash sheet in thousandths of an inch, or the same in mm: found, left, between two blades, or not at all."""
    values = []
    unit, step = draw(one_of(("mm", Decimal("0.0254")), ("in", Decimal("0.001"))))
    for point in [f"{cylinder}{side}" for cylinder in points_of(engine) for side in "IE"]:
        for phase in (Phase.FOUND, Phase.LEFT):
            gap = draw(one_of(0, 8, 9) if point == f"{sick}E" else one_of(-1, 0, 9, 10, 11, 12, 12, 14, 15, 16))
            if gap >= 0:
                blades = draw(one_of(None, None, None, 1, 3))
                low, high = (step * gap, step * (gap + blades)) if blades and gap else (None, None)
                values.append(SheetValue("lash", point, phase, None if low else step * gap, low, high, unit))
    return sheet_of("lash", values)


OF_CYLINDERS = (compression_sheets, lash_sheets, leak_sheets)
KINDS = (run_sheets, oil_sheets, spot_sheets, compression_sheets, run_sheets, leak_sheets, lash_sheets)


@st.composite
def engines(draw: st.DrawFn) -> tuple[MeasuredEngine, ValveTrain | None]:
    """An engine, and its valves where its nameplate says how many cylinders it has."""
    cylinders = draw(one_of(0, 1, 2, 3, 4, 4, 6, 8))
    layout = Layout.V if cylinders == 8 else None
    train = ValveTrain(cylinders, 2, layout=layout) if cylinders else None
    return MeasuredEngine(
        tag="P-01",
        fuel=draw(one_of("diesel", "diesel", "gas", "biogas", "")),
        cylinders=cylinders,
        banks=banks(train) if train else (),
        duty=draw(one_of("standby", "emergency", "standby", "")),
        oil_grade=draw(one_of("15W-40", "SAE 30", "")),
        sump=draw(one_of(Decimal(8), Decimal(8), None)),
        rated_kw=draw(one_of(None, Decimal(500), Decimal(500))),
        is_marine=draw(one_of(None, True, False)),
        altitude=draw(one_of(None, Decimal(300), Decimal("1524"), Decimal(4000))),
    ), train


def sheet_of(kind: str, values: list[SheetValue], *words: SheetWord) -> MeasuredSheet:
    """A sheet of some values, not dated yet."""
    return MeasuredSheet(0, kind, ON, tuple(values), tuple(words))


def points_of(engine: MeasuredEngine) -> list[str]:
    """Its cylinders, three where the nameplate does not say."""
    return [str(number) for number in range(1, (engine.cylinders or 3) + 1)]
