"""The values of sheets as rules look them up: by quantity, point and phase, whatever the order they were entered in.

Two quantities are worked out where they were not entered: the leak of a pair of pressures, leak % = 100 (supply - held) /
supply across a fixed orifice (FAA AC 43.13-1B, 8-14), and `wet_gain`, 100 (wet - dry) / dry of a compression test.
"""

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import lru_cache

from fleetcare.domain.findings import Evidence, Step
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.measures import QUANTITIES, can_convert, exactly
from fleetcare.domain.sheets import Phase, SheetValue
from fleetcare.rules.judging.facts import CannotTell
from fleetcare.rules.judging.spans import Span, decimal

LEAK, SUPPLY, HELD = "leak", "supply", "held"
PRESSURE, WET_GAIN = "pressure", "wet_gain"
HOURS_ON_OIL, TOP_UP = "hours_on_oil", "top_up"

_NUMBERS = re.compile(r"[0-9]+|[^0-9]+", re.ASCII)
_ASIDE = (Phase.WET, Phase.NEW)


@dataclass(frozen=True, slots=True)
class Measured:
    """A value of a quantity at a point: its span in `unit`, the value as entered, and what it was worked out from."""

    quantity: str
    point: str
    phase: Phase
    span: Span
    unit: str
    evidence: Evidence
    used: tuple[Evidence, ...] = ()
    steps: tuple[Step, ...] = ()

    def within(self, unit: str) -> Span:
        """Give the span in another unit. Raises CannotTell where the two do not measure the same."""
        if not can_convert(self.unit, unit):
            raise CannotTell(
                f"{self.unit or 'a bare figure'} cannot be compared in {unit or 'bare figures'}", self.point
            )
        return Span(exactly(self.span.low, self.unit, unit), exactly(self.span.high, self.unit, unit))


def cylinder_of(point: str) -> int | None:
    """Give the cylinder a point belongs to, None for one that names none: "3", "3E", "3I2" are of cylinder 3."""
    found = re.match(r"[0-9]+", point, re.ASCII)
    return int(found.group()) if found else None


@lru_cache(maxsize=1024)
def by_number(point: str) -> tuple[tuple[int, str], ...]:
    """Order points as the engine stands: 2 before 10, 3E before 3I."""
    return tuple((int(part), "") if part.isdigit() else (-1, part) for part in _NUMBERS.findall(point))


def evidence_of(sheet: MeasuredSheet, value: SheetValue) -> Evidence:
    """Name a value of a sheet, as entered."""
    return Evidence(sheet.on, sheet.entry, value.quantity, value.point, value.phase, str(value), value.unit)


def read(sheet: MeasuredSheet, value: SheetValue) -> Measured:
    """Give a value of a sheet as an exact span in its own unit."""
    low, high = value.ends
    span = Span(Fraction(low), Fraction(high))
    return Measured(value.quantity, value.point, value.phase, span, value.unit, evidence_of(sheet, value))


def values_of(sheet: MeasuredSheet, quantity: str) -> tuple[Measured, ...]:
    """Give the values of a quantity, as the engine stands; a point with contradictory ones is left out."""
    key = ("values", quantity)
    if key not in sheet.memo:
        sheet.memo[key] = _worked_out(sheet, quantity)
    values: tuple[Measured, ...] = sheet.memo[key]
    return values


def _worked_out(sheet: MeasuredSheet, quantity: str) -> tuple[Measured, ...]:
    if quantity == WET_GAIN:
        return _in_order(_wet_gains(sheet))
    entered = _entered(sheet, quantity)
    if quantity == LEAK:
        return _in_order([*entered, *_leaks(sheet, {one.point for one in entered})])
    return _in_order(entered) if entered else ()


def contradictions(sheet: MeasuredSheet, quantity: str, phases: Sequence[Phase]) -> tuple[str, ...]:
    """Give the points at which a quantity was entered twice with different values, in the phases that are judged."""
    grouped = _grouped(sheet, quantity)
    return tuple(sorted({p for (p, phase), ones in grouped.items() if len(ones) > 1 and _is_judged(phase, phases)}))


def judged_phases(values: Iterable[Measured], phases: Sequence[Phase], points: Sequence[str]) -> list[Measured]:
    """Pick the values of some phases and points; of any but a wet test and fresh oil, and of all, where none are named."""
    return [one for one in values if _is_judged(one.phase, phases) and (not points or one.point in points)]


def single(sheet: MeasuredSheet, quantity: str) -> Measured | None:
    """Give the one value of a quantity that is not of a wet test or fresh oil, None where there is none or several."""
    values = judged_phases(values_of(sheet, quantity), (), ())
    return values[0] if len(values) == 1 else None


def same_place(values: Iterable[Measured], one: Measured) -> Measured | None:
    """Find the value at the point and in the phase of another; a dry value and one without a phase are alike."""
    for other in values:
        if other.point == one.point and alike(other.phase) is alike(one.phase):
            return other
    return None


def alike(phase: Phase) -> Phase:
    """Give the phase as it compares: a dry value and one without a phase are alike."""
    return Phase.NONE if phase is Phase.DRY else phase


def fresh_of(sheet: MeasuredSheet, fresh: Sequence[SheetValue], quantity: str) -> Measured | None:
    """Give what new oil has of a quantity: what the sheet itself says of it, else the reference of its grade."""
    own = [one for one in values_of(sheet, quantity) if one.phase is Phase.NEW]
    if own:
        return own[0]
    for value in fresh:
        if value.quantity == quantity:
            return read(sheet, value)
    return None


def title(quantity: str) -> str:
    """Give what a person calls a quantity."""
    return QUANTITIES[quantity].title if quantity in QUANTITIES else quantity.replace("_", " ")


def step(label: str, span: Span, unit: str) -> Step:
    """Give a number of the working; of a span its high end, labelled so."""
    return Step(label if span.is_known else f"{label}, at most", decimal(span.high), unit)


def _is_judged(phase: Phase, phases: Sequence[Phase]) -> bool:
    return phase in phases if phases else phase not in _ASIDE


def _in_order(values: Iterable[Measured]) -> tuple[Measured, ...]:
    return tuple(sorted(values, key=lambda one: (by_number(one.point), one.phase)))


def _grouped(sheet: MeasuredSheet, quantity: str) -> dict[tuple[str, Phase], list[SheetValue]]:
    """Give the different values of each point and phase; one that was entered twice counts once."""
    key = ("entered", "")
    if key not in sheet.memo:
        sheet.memo[key] = _by_quantity(sheet)
    grouped: dict[tuple[str, Phase], list[SheetValue]] = sheet.memo[key].get(quantity, {})
    return grouped


def _by_quantity(sheet: MeasuredSheet) -> dict[str, dict[tuple[str, Phase], list[SheetValue]]]:
    found: dict[str, dict[tuple[str, Phase], list[SheetValue]]] = {}
    for value in sheet.values:
        values = found.setdefault(value.quantity, {}).setdefault((value.point, value.phase), [])
        if value not in values:
            values.append(value)
    return found


def _entered(sheet: MeasuredSheet, quantity: str) -> list[Measured]:
    grouped = _grouped(sheet, quantity)
    return [read(sheet, grouped[place][0]) for place in sorted(grouped) if len(grouped[place]) == 1]


def _leaks(sheet: MeasuredSheet, known_points: set[str]) -> list[Measured]:
    leaks = []
    supplies = _entered(sheet, SUPPLY)
    for held in _entered(sheet, HELD):
        # A supply without a point is that of every cylinder.
        supply = same_place(supplies, held) or same_place(supplies, replace(held, point=""))
        if supply is None or held.point in known_points or not can_convert(held.unit, supply.unit):
            continue
        given, kept = supply.span, held.within(supply.unit)
        if given.low <= 0:
            continue
        leak = (given - kept).over(given).times(100)
        steps = (step("supply", given, supply.unit), step("held", kept, supply.unit))
        leaks.append(
            Measured(LEAK, held.point, held.phase, leak, "%", held.evidence, (*held.used, supply.evidence), steps)
        )
    return leaks


def _wet_gains(sheet: MeasuredSheet) -> list[Measured]:
    pressures = _entered(sheet, PRESSURE)
    dry_ones = judged_phases(pressures, (), ())
    gains = []
    for wet in judged_phases(pressures, (Phase.WET,), ()):
        dry = next((one for one in dry_ones if one.point == wet.point and can_convert(one.unit, wet.unit)), None)
        if dry is None or dry.span.low <= 0:
            continue
        base = dry.within(wet.unit)
        gain = (wet.span - base).over(base).times(100)
        steps = (step("dry", base, wet.unit), step("wet", wet.span, wet.unit))
        gains.append(Measured(WET_GAIN, wet.point, Phase.NONE, gain, "%", wet.evidence, (dry.evidence,), steps))
    return gains
