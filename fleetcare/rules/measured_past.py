"""What compression and oil did over time: per cylinder, element or property every value in order, and its lines.

Inputs are the sheets of one kind, oldest first. Figures are converted exactly into the unit of the newest one. Compression
lies over the hours of life, drawn over days where nothing counts hours. Oil lies over the hours on the oil, begun anew at
each oil change, as laboratories count, drawn fill after fill; where any sample does not state them, it is drawn over the
hours of life too.

Values of one gauge or laboratory, and of one fill of oil, make a line with a level of its own; another gauge is no trend.
The slope is common to the lines (`rules/trends`). Not fitted is a bound ("<1", ND), a value of which it is not known where
it lies, and oil that is not brought to what it would show without top-up: by the mass balance of `rules/oil`, which holds
for what adds up in the oil or is used up in it; viscosity, pH and flash point do not mix so. Where fresh oil is not known
metals and dirt count from 0, as the sources print absolute figures.
"""

from collections.abc import Hashable, Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from decimal import Decimal
from enum import StrEnum

from fleetcare.domain.measured import OIL, MeasuredSheet
from fleetcare.domain.measures import can_convert
from fleetcare.domain.sheets import NOT_DETECTED, SheetValue
from fleetcare.domain.trends import Point, Segment
from fleetcare.rules.judging.spans import decimal
from fleetcare.rules.judging.values import Measured, fresh_of, judged_phases, values_of
from fleetcare.rules.oil import TRUSTED_MAKE_UP, make_up_factor
from fleetcare.rules.oil_fills import Along, Fill, along_of, fills_of, hours_on_oil, places_of, top_up
from fleetcare.rules.trends import usual_gap

CONTAMINANTS = ("water", "fuel", "glycol", "soot", "insolubles", "Si", "Na", "K")
PROPERTIES = ("kv100", "kv40", "tbn", "tan", "ph", "oxidation", "nitration", "flash_point")
METALS = ("Fe", "Cr", "Al", "Cu", "Pb", "Sn", "Ni", "Ag", "V", "Ti", "Mn")
ADDITIVES = ("B", "Mo", "Mg", "Ca", "Zn", "P", "Ba", "S")
OIL_ORDER = (*CONTAMINANTS, *PROPERTIES, *METALS, *ADDITIVES)
"""All a laboratory reports, in the order it is shown in."""

_FROM_NOTHING = frozenset({*CONTAMINANTS, *METALS})
_MIX_OTHERWISE = frozenset({"kv100", "kv40", "ph", "flash_point"})


class Aside(StrEnum):
    """Why a value is not fitted."""

    BOUND = "a bound"
    NO_HOURS = "no hours"
    NO_HOURS_ON_OIL = "no hours on the oil"
    NO_TOP_UP = "top-up not stated"
    NO_SUMP = "sump not known"
    NO_FRESH = "new oil not known"
    TOPPED_UP = "topped up"


class Break(StrEnum):
    """Why a value has none before it on its line."""

    FIRST = "first"
    OTHER_GAUGE = "other gauge"
    OTHER_FILL = "other fill"
    NO_HOURS_ON_OIL = "no hours on the oil"


@dataclass(frozen=True, slots=True)
class PastMeasure:
    """A value with its sheet. `at` is where it is drawn, None where that is not known; `figure` is in the unit of the past.

    A bound stands at its high end. `x` and `y` are where it is fitted and as what, None where `aside` says why it is not.
    Values of one `line` can be compared: those of a gauge, or of a laboratory and a fill.
    `fresh` is what new oil had of it by the sheet, else by its grade, None where not known.
    """

    sheet: MeasuredSheet
    measured: Measured
    at: Decimal | None
    figure: Decimal
    line: tuple[Hashable, ...]
    x: Decimal | None = None
    y: Decimal | None = None
    aside: Aside | None = None
    fresh: Decimal | None = None

    @property
    def is_bound(self) -> bool:
        """Whether it is only known to lie at its figure at most."""
        return not self.measured.span.is_known or self.measured.evidence.value == NOT_DETECTED


@dataclass(frozen=True, slots=True)
class MeasuredPast:
    """All values of a quantity at a point, oldest first, at least one, drawn `along` one thing."""

    quantity: str
    point: str
    unit: str
    along: Along
    values: tuple[PastMeasure, ...]

    @property
    def last(self) -> PastMeasure:
        """The newest value."""
        return self.values[-1]

    @property
    def lines(self) -> tuple[tuple[PastMeasure, ...], ...]:
        """The values line by line, that of the newest last."""
        lines: dict[tuple[Hashable, ...], list[PastMeasure]] = {}
        for value in self.values:
            lines[value.line] = [*lines.pop(value.line, []), value]
        return tuple(tuple(line) for line in lines.values())

    @property
    def segments(self) -> tuple[Segment, ...]:
        """What is fitted, line by line, that of the newest value last."""
        return tuple(
            Segment(tuple(Point(one.x, one.y) for one in line if one.x is not None and one.y is not None))
            for line in self.lines
        )

    @property
    def before(self) -> PastMeasure | Break:
        """The value before the newest on its line, or why there is none."""
        *_, line = self.lines
        if len(line) > 1:
            return line[-2]
        if len(self.values) == 1:
            return Break.FIRST
        if self.values[-2].sheet.gauge != self.last.sheet.gauge:
            return Break.OTHER_GAUGE
        return Break.OTHER_FILL if hours_on_oil(self.last.sheet) is not None else Break.NO_HOURS_ON_OIL

    @property
    def usual_gap(self) -> Decimal | None:
        """The median x between two values of a line, None where no line has two."""
        return usual_gap(self.segments)


def compression_pasts(
    sheets: Sequence[MeasuredSheet], banks: Iterable[Iterable[int]], *, counts_hours: bool
) -> list[MeasuredPast]:
    """Give the past of each cylinder that was measured dry, as the engine stands; those not on the nameplate come last."""
    known = [str(cylinder) for bank in banks for cylinder in bank]
    seen = dict.fromkeys(one.point for sheet in sheets for one in values_of(sheet, "pressure"))
    along = Along.LIFE if counts_hours else Along.DAYS
    pasts = [_past(sheets, "pressure", point, along) for point in dict.fromkeys([*known, *seen])]
    return [replace(past, values=tuple(map(_over_life, past.values))) for past in pasts if past is not None]


def oil_pasts(
    sheets: Sequence[MeasuredSheet],
    sump: Decimal | None,
    fresh: Sequence[SheetValue],
    *,
    counts_hours: bool = True,
) -> list[MeasuredPast]:
    """Give the past of each thing a laboratory ever reported; `sump` is in L, `fresh` what new oil of the grade has."""
    fills = fills_of(sheets)
    along = along_of(sheets, counts_hours=counts_hours)
    pasts = [past for quantity in OIL_ORDER if (past := _past(sheets, quantity, "", along)) is not None]
    return [
        replace(past, values=tuple(_over_fill(_with_fresh(one, past, fresh), past, fills, sump) for one in past.values))
        for past in pasts
    ]


def start_of(one: PastMeasure) -> Decimal | None:
    """Give what the oil began with: as new oil has it, else none of what only comes in use; None where not known."""
    return Decimal(0) if one.fresh is None and one.measured.quantity in _FROM_NOTHING else one.fresh


def new_oil(past: MeasuredPast) -> dict[Decimal, Decimal]:
    """Give where each fill begins, as it is drawn, with what new oil had then, as far as both are known."""
    marks: dict[Hashable, tuple[Decimal, Decimal]] = {}
    for one in past.values if past.along is not Along.DAYS else ():
        hours = hours_on_oil(one.sheet)
        if one.at is not None and hours is not None and one.fresh is not None:
            *_, fill = one.line
            marks.setdefault(fill, (one.at - hours, one.fresh))
    return dict(marks.values())


def _past(sheets: Sequence[MeasuredSheet], quantity: str, point: str, along: Along) -> MeasuredPast | None:
    """Give every value of a quantity at a point; those in a unit of another kind than the newest are left out."""
    found = [
        (sheet, one)
        for sheet in sheets
        for one in judged_phases(values_of(sheet, quantity), (), ())
        if one.point == point
    ]
    if not found:
        return None
    unit, at = found[-1][1].unit, places_of(sheets, along)
    values = [
        PastMeasure(sheet, one, at.get(sheet.entry), _figure(one, unit), (sheet.gauge,))
        for sheet, one in found
        if can_convert(one.unit, unit)
    ]
    return MeasuredPast(quantity, point, unit, along, tuple(values))


def _figure(one: Measured, unit: str) -> Decimal:
    return decimal(one.within(unit).high)


def _over_life(one: PastMeasure) -> PastMeasure:
    hours = one.sheet.engine_hours
    aside = Aside.BOUND if one.is_bound else Aside.NO_HOURS if hours is None else None
    return replace(one, aside=aside) if aside else replace(one, x=hours, y=one.figure)


def _with_fresh(one: PastMeasure, past: MeasuredPast, fresh: Sequence[SheetValue]) -> PastMeasure:
    new = fresh_of(one.sheet, fresh, past.quantity)
    is_known = new is not None and new.span.is_known and can_convert(new.unit, past.unit)
    return replace(one, fresh=_figure(new, past.unit)) if new is not None and is_known else one


def _over_fill(one: PastMeasure, past: MeasuredPast, fills: Mapping[int, Fill], sump: Decimal | None) -> PastMeasure:
    fill, hours, read = fills.get(one.sheet.entry), hours_on_oil(one.sheet), one.figure
    one = replace(one, line=(one.sheet.gauge, fill.first if fill else ("alone", one.sheet.entry)))
    if one.is_bound or hours is None:
        return replace(one, aside=Aside.BOUND if one.is_bound else Aside.NO_HOURS_ON_OIL)
    added, start = top_up(one.sheet), start_of(one)
    if added is None:
        return replace(one, aside=Aside.NO_TOP_UP)
    if added and past.quantity in _MIX_OTHERWISE:
        return replace(one, aside=Aside.TOPPED_UP)
    if added and not sump:
        return replace(one, aside=Aside.NO_SUMP)
    if added and start is None:
        return replace(one, aside=Aside.NO_FRESH)
    if added and start is not None and sump:
        if added > TRUSTED_MAKE_UP * sump:
            return replace(one, aside=Aside.TOPPED_UP)
        read = start + (read - start) * make_up_factor(added / sump)
    return replace(one, x=hours, y=read)


def is_oil(past: MeasuredPast) -> bool:
    """Whether it was found in the oil."""
    return past.last.sheet.kind == OIL
