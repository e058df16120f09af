"""Engines with sheets of any kinds, new oil, check ranges, rule books and relatives, for the laws of judging."""

from dataclasses import replace
from datetime import date, timedelta
from decimal import Decimal

from hypothesis import strategies as st

from fleetcare.domain.engines import Side
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.sheets import LashSpec, Phase, SheetValue
from fleetcare.rules.judging.pools import NO_FAMILY, Family, Sample
from tests.property.case import Case
from tests.property.sheets import KINDS, OF_CYLINDERS, engines, figure, one_of, sheet_of
from tests.property.shop import BOOKS
from tests.rules.measured import ON

_FRESH = tuple(
    SheetValue(quantity, "", Phase.NEW, Decimal(figure), None, None, unit)
    for quantity, figure, unit in (
        ("tbn", "10", "mg KOH/g"), ("kv100", "14.5", "mm2/s"), ("kv40", "110", "mm2/s"), ("tan", "1.1", "mg KOH/g"),
        ("Si", "5", "ppm"), ("Na", "0.0003", "%"), ("Al", "1", "mg/kg"), ("flash_point", "200", "°C"),
    )
)  # fmt: skip
FAMILY = Family(
    tuple(
        Sample(7, date(2020, 1, 1) + timedelta(days=n), {name: Decimal(n) for name in ("Fe", "Pb", "Cu", "Na")})
        for n in range(1, 61)
    )
)
_SPECS = [
    LashSpec(date(2020, 1, 1), unit, condition, dict.fromkeys(sides, (step * 10, step * 15)))
    for unit, step in (("in", Decimal("0.001")), ("mm", Decimal("0.0254")))
    for condition in ("any", "cold")
    for sides in (Side, (Side.EXHAUST,))
]
_ANY_SPEC = st.sampled_from([None, _SPECS[0], _SPECS[0], *_SPECS])
_ANY_FAMILY = st.sampled_from([NO_FAMILY, FAMILY])
_ANY_BOOK = st.sampled_from(BOOKS)
_SOME_FRESH = st.lists(st.sampled_from(_FRESH), unique=True, max_size=4)


@st.composite
def oil_series(draw: st.DrawFn) -> list[MeasuredSheet]:
    """Eleven plain oil samples of iron and lead, enough to say what is usual for the engine."""
    iron = draw(st.lists(st.integers(15, 60), min_size=11, max_size=11))
    return [
        _before("oil", number, [figure("Fe", Decimal(ppm), "ppm"), figure("Pb", Decimal(ppm) / 10, "ppm")])
        for number, ppm in enumerate(iron)
    ]


@st.composite
def lash_series(draw: st.DrawFn) -> list[MeasuredSheet]:
    """Two gaps at six checks, the exhaust a little closer each time, set again now and then."""
    gap, sheets = Decimal("0.0145"), []
    for number in range(6):
        gap -= Decimal(draw(one_of(5, 6, 7))) / 10_000
        values = [
            figure("lash", gap, "in", "1E", Phase.FOUND),
            figure("lash", Decimal("0.012"), "in", "1I", Phase.FOUND),
        ]
        if draw(st.integers(0, 5)) == 0:
            gap = Decimal("0.0145")
            values.append(figure("lash", gap, "in", "1E", Phase.LEFT))
        sheets.append(_before("lash", number, values))
    return sheets


_NOTHING: st.SearchStrategy[list[MeasuredSheet]] = st.just([])
_ANY_SERIES = _NOTHING | _NOTHING | _NOTHING | oil_series() | lash_series()


@st.composite
def cases(draw: st.DrawFn) -> Case:
    """An engine with some sheets of some kinds, entered in any order.

    Now and then one cylinder is sick on all of them, or there is a series before. Of one kind no two are of one day: which
    of those is the newer, only the order of entry could say.
    """
    engine, train = draw(engines())
    sick = draw(one_of("", "", "1", "3"))
    is_of_cylinders = draw(st.integers(0, 4)) == 0
    some = OF_CYLINDERS if is_of_cylinders else draw(st.lists(one_of(*KINDS), min_size=1, max_size=3))
    undated = [draw(kind(engine, sick)) for kind in draw(st.lists(one_of(*some), min_size=1, max_size=6))]
    sheets = [*draw(_ANY_SERIES)]
    taken = {(sheet.kind, sheet.on) for sheet in sheets}
    for sheet in undated:
        on = ON - timedelta(days=draw(st.integers(0, 40)))
        while (sheet.kind, on) in taken:
            on -= timedelta(days=1)
        taken.add((sheet.kind, on))
        received = on + timedelta(days=4) if draw(st.booleans()) else None
        hours = draw(one_of(None, _hours(on)))
        gauge = draw(one_of("", "", "", "B"))
        sheets.append(replace(sheet, on=on, gauge=gauge, engine_hours=hours, received_on=received))
    entries = draw(st.permutations(range(1, len(sheets) + 1)))
    sheets = [replace(sheet, entry=entry) for sheet, entry in zip(sheets, entries, strict=True)]
    return Case(
        engine,
        train,
        draw(_ANY_BOOK),
        tuple(sorted(sheets, key=lambda sheet: (sheet.on, sheet.entry))),
        draw(_ANY_SPEC),
        {sheet.entry: draw(one_of("cold", "cold", "", "hot")) for sheet in sheets if sheet.kind == "lash"},
        tuple(draw(_SOME_FRESH)),
        draw(_ANY_FAMILY),
    )


def _before(kind: str, number: int, values: list[SheetValue]) -> MeasuredSheet:
    """A sheet of a series, each a fortnight after the one before; the last is older than all that is drawn beside it."""
    on = ON - timedelta(days=220 - 14 * number)
    return replace(sheet_of(kind, values), on=on, engine_hours=_hours(on))


def _hours(on: date) -> Decimal:
    """The hours of life on a day: ten a day."""
    return Decimal(5000 - 10 * (ON - on).days)
