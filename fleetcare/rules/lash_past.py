"""What the lash of each point did over time: every value in order, and those that can be drawn and fitted as one line.

Inputs are the sheets of an engine, oldest first, its specs, and where each sheet lies: at hours of life, or on a day
where nothing counts hours. Each value is judged by the spec of its day. It belongs to a line only if it was judged, was
taken cold or hot as the newest spec asks, and it is known where it lies; else it stands aside, and why. A blade that
straddles a limit was judged: its middle is drawn.

A line is given as checks, which `rules/trends` cuts at every adjustment. A left value that equals the found one is no
adjustment; one that stands aside is, but nothing comparable says what that valve was left at.
"""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from enum import StrEnum
from itertools import groupby

from fleetcare.domain.engines import Side
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.sheets import LASH, Judgement, LashPoint, LashSpec, Phase, Sheet, SheetValue, spec_on
from fleetcare.domain.trends import Check
from fleetcare.rules.judge_lash import judge_value, why_unjudged
from fleetcare.rules.lash import ANY, compare, ends_in_mm
from fleetcare.rules.lash_points import side_of
from fleetcare.rules.meters import CounterHistory


class Aside(StrEnum):
    """Why a value belongs to no line."""

    NOT_JUDGED = "not judged"
    OTHER_CONDITION = "other condition"
    NO_HOURS = "no hours"


@dataclass(frozen=True, slots=True)
class PastValue:
    """One value of a point, with the entry and day of its sheet, and `taken` cold, hot or empty where nobody said.

    `spec` is the one it was judged by, that of its day. `at` is the life total in hours, or the number of the day (`date.toordinal`); None where no reading tells.
    """

    entry: int
    on: date
    at: Decimal | None
    taken: str
    spec: LashSpec | None
    entered: SheetValue
    aside: Aside | None

    @property
    def judged(self) -> Judgement:
        """What the spec says of it, worked out anew each time: a trend of many values asks for none."""
        return judge_value(self.entered, side_of(self.entered.point), self.spec, self.taken)

    @property
    def is_left(self) -> bool:
        """Whether the valve was set and left at it."""
        return self.entered.phase is Phase.LEFT

    @property
    def ends(self) -> tuple[Decimal, Decimal]:
        """The least and the most it can be, mm."""
        return ends_in_mm(self.entered)

    @property
    def gap(self) -> Decimal:
        """The best estimate, mm: the middle of an interval."""
        goes, stops = self.ends
        return (goes + stops) / 2


@dataclass(frozen=True, slots=True)
class PointPast:
    """All values of a point, oldest first, and the checks (mm) its line is made of. `valves` 0: no longer a point."""

    name: str
    side: Side
    valves: int
    values: tuple[PastValue, ...] = ()
    checks: tuple[Check, ...] = ()

    @property
    def last(self) -> PastValue | None:
        """The newest value, None where it was never measured."""
        return self.values[-1] if self.values else None

    @property
    def aside(self) -> tuple[PastValue, ...]:
        """The values that belong to no line."""
        return tuple(value for value in self.values if value.aside is not None)


def places_of(sheets: Sequence[Sheet], hours: CounterHistory | None) -> dict[int, Decimal]:
    """Say for each entry with a sheet at which life total (h) it lies, by its own reading, else by those around it.

    One before the first reading has none. Without `hours` it is the number of its day.
    """
    if hours is None:
        return {sheet.entry: Decimal(sheet.on.toordinal()) for sheet in sheets}
    own = {reading.reading.entry_id: reading.life for reading in hours.readings}
    figures = {sheet.entry: hours.figure_on(sheet.on) for sheet in sheets}
    between = {entry: figure.value for entry, figure in figures.items() if figure is not None}
    return between | {entry: own[entry] for entry in figures if entry in own}


def lash_past(
    points: Sequence[LashPoint],
    sheets: Sequence[Sheet | MeasuredSheet],
    specs: tuple[LashSpec, ...],
    at: Mapping[int, Decimal],
    on: date,
) -> tuple[PointPast, ...]:
    """Give the past of each point up to a day, in the order of the points; those only sheets know of come last."""
    newest = spec_on(specs, on)
    values: dict[str, list[PastValue]] = {point.name: [] for point in points}
    for sheet in sheets:
        for value in _read(sheet, spec_on(specs, sheet.on), newest, at.get(sheet.entry)):
            past = values.setdefault(value.entered.point, [])
            if not (value.is_left and past and _is_same(past[-1], value)):
                past.append(value)
    valves = {point.name: point.valves for point in points}
    return tuple(
        PointPast(name, side_of(name), valves.get(name, 0), tuple(past), tuple(_checks(past)))
        for name, past in values.items()
    )


def _checks(values: Sequence[PastValue]) -> Iterator[Check]:
    for _, same in groupby(values, key=lambda value: value.entry):
        sheet = tuple(same)
        gaps = {value.entered.phase: value.gap for value in sheet if value.aside is None}
        at, is_set = sheet[0].at, sheet[-1].is_left
        if at is not None and (gaps or is_set):
            yield Check(at, gaps.get(Phase.FOUND), gaps.get(Phase.LEFT), is_set)


def _read(
    sheet: Sheet | MeasuredSheet, spec: LashSpec | None, newest: LashSpec | None, at: Decimal | None
) -> list[PastValue]:
    """Give the gaps of a sheet, those found first."""
    values = []
    taken = sheet.condition or (spec.condition if spec is not None else ANY)
    asked = newest.condition if newest is not None else ANY
    for value in sorted(sheet.values, key=lambda one: one.phase is Phase.LEFT):
        if value.quantity == LASH:
            why = why_unjudged(side_of(value.point), spec, sheet.condition)
            aside = Aside.NOT_JUDGED if why is not None else _why_aside(taken, asked, at)
            values.append(PastValue(sheet.entry, sheet.on, at, sheet.condition, spec, value, aside))
    return values


def _why_aside(taken: str, asked: str, at: Decimal | None) -> Aside | None:
    if not compare(taken, asked):
        return Aside.OTHER_CONDITION
    return Aside.NO_HOURS if at is None else None


def _is_same(found: PastValue, left: PastValue) -> bool:
    return found.entry == left.entry and found.ends == left.ends
