"""The life total of a meter as a curve, read so far and likely from now on."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date, timedelta
from decimal import Decimal

from fleetcare.domain.lines import DueLine
from fleetcare.domain.quantities import Kind, from_base
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.outlook import Outlook, outlooks
from fleetcare.rules.due.row import unit_of

_AHEAD = 0.3  # of the days read so far
_FEWEST_DAYS, _MOST_DAYS = 60, 400
_STEPS = 12

Expected = tuple[float, date, date, date | None]
"""A total, and its early, likely and late day; late None where it is open."""


@dataclass(frozen=True, slots=True)
class LifeCurve:
    """One kind's life totals in `unit`: those `read`, and those expected: the likely day and both ends of the range.

    Without a forecast `ahead` is empty, and `why_not` says why. `marks` are the next due points of the lines counted by it, with their tasks.
    """

    kind: Kind
    unit: str
    read: tuple[tuple[date, float], ...]
    ahead: tuple[Expected, ...]
    why_not: str
    marks: tuple[tuple[float, str], ...]


def life_curves(facts: ItemFacts, lines: Sequence[DueLine], *, is_future: bool = False) -> list[LifeCurve]:
    """Give the curve of each kind an item has been read in."""
    curves = []
    for kind, outlook in outlooks(facts, is_future).items():
        readings, unit = facts.counters[kind].readings, unit_of(facts, kind)
        if readings:
            read = tuple((reading.on, float(from_base(reading.life, unit))) for reading in readings)
            ahead, why_not = _ahead(outlook, facts, kind, unit)
            curves.append(LifeCurve(kind, unit, read, ahead, why_not, _marks(kind, unit, lines)))
    return curves


def _ahead(outlook: Outlook, facts: ItemFacts, kind: Kind, unit: str) -> tuple[tuple[Expected, ...], str]:
    """Give the days some totals beyond the last are expected on, or why none are."""
    readings = facts.counters[kind].readings
    last, span = readings[-1], (readings[-1].on - readings[0].on).days
    days = min(max(span * _AHEAD, _FEWEST_DAYS), _MOST_DAYS)
    horizon = max(last.on, facts.on) + timedelta(days=int(days))
    top = outlook.history.likely_value(horizon) if outlook.history is not None else None
    gain = max(top - float(last.life), 1.0) if top is not None else 1.0
    expected: list[Expected] = []
    for step in range(1, _STEPS + 1):
        total = last.life + Decimal(str(round(gain * step / _STEPS, 3)))
        forecast = outlook.reach(total)
        if forecast.early is None or forecast.likely is None:
            return (), forecast.reason or ""
        expected.append((float(from_base(total, unit)), forecast.early, forecast.likely, forecast.late))
    return tuple(expected), ""


def _marks(kind: Kind, unit: str, lines: Sequence[DueLine]) -> tuple[tuple[float, str], ...]:
    """Give the points in force that are counted by a kind, lowest first."""
    points = [
        (float(from_base(trigger.point, unit)), line.task.name)
        for line in lines
        for trigger in line.triggers
        if trigger.kind is kind and isinstance(trigger.point, Decimal)
    ]
    return tuple(sorted(points))
