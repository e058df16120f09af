"""How the valve lash of the demo fleet wears, and the sheets its mechanics write: invented, seeded, sheet by sheet.

Seats wear and let the valve rise, so most gaps close, those of the exhaust faster; a few open as the rocker wears
(TM 5-3895-382-24 lash section). The rates are invented.
"""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from decimal import Decimal
from random import Random

from fleetcare.demo.plates import Plate
from fleetcare.domain.engines import Bridged, Layout, Side, ValveTrain
from fleetcare.domain.sheets import LASH, SHIM, LashPoint
from fleetcare.drafts.sheets import SheetIn, SheetRow
from fleetcare.rules.lash_points import lash_points

_RATES = {Side.INTAKE: (-2, 10), Side.EXHAUST: (8, 20)}
"""Least and most a gap closes by in 1000 h, in thousandths of a mm; below 0 it opens."""

_HUNDREDTH = Decimal("0.01")
_NEAR_AN_END = 5  # a job sets what lies in this part of the range, next to an end
_OPENS_HOT = Decimal("0.02")
_SHIMS = ("2.40", "2.45", "2.50", "2.55", "2.60")
_SHIM_STEP = Decimal("0.05")
_NEAREST_SHIM = 3  # hundredths the lash is off its setting at the most, by shims so far apart


@dataclass(frozen=True, slots=True)
class Gauged:
    """How the lash of an engine was gauged: with each job of `task`, and on every so many rounds, the newest `skipped`.

    `closing` gives points a rate of their own (thousandths of a mm in 1000 h), `badly_set` what the newest job left
    points at. `pace` speeds all wear up. The round `hot`, counted back from the newest gauged, was gauged hot. With
    `blades` it is gauged by pairs of blades so far apart.
    """

    task: str = ""
    every: int = 3
    skipped: int = 0
    closing: Mapping[str, int] = field(default_factory=dict)
    badly_set: Mapping[str, str] = field(default_factory=dict)
    pace: int = 1
    hot: int | None = None
    blades: Decimal | None = None


@dataclass(frozen=True, slots=True)
class Occasion:
    """A time an engine was gauged: at so many hours, with a job or in passing."""

    hours: Decimal
    is_job: bool
    is_newest_job: bool = False
    is_hot: bool = False


def sheets(tag: str, plate: Plate, gauged: Gauged, occasions: Sequence[Occasion]) -> Iterator[SheetIn]:
    """Give the sheet of each occasion, oldest first. A gap past an end of its range is set, in a job one near it too."""
    train = ValveTrain(
        cylinders=int(plate["cylinders"]),
        valves_per_cylinder=int(plate["valves_per_cylinder"]),
        bridged=Bridged(plate.get("bridged", Bridged.NONE)),
        layout=Layout(plate["layout"]),
    )
    worn = [_Worn(tag, point, plate, gauged) for point in lash_points(train)]
    for occasion in occasions:
        rows = [cells for one in worn for cells in one.gauge(occasion)]
        yield SheetIn(tuple(SheetRow(number, cells) for number, cells in enumerate(rows, start=2)))


class _Worn:
    """One point as it wears, from one sheet to the next."""

    def __init__(self, tag: str, point: LashPoint, plate: Plate, gauged: Gauged) -> None:
        self.point, self._gauged = point, gauged
        self._random = Random(f"{tag} {point.name}")
        least, most = plate[f"lash_{point.side}"].split("-")
        self._least, self._most = Decimal(least), Decimal(most)
        self._setting = Decimal(plate.get(f"lash_set_{point.side}", (self._least + self._most) / 2))
        rate = gauged.closing.get(point.name, self._random.randint(*_RATES[point.side]))
        self._rate = Decimal(rate * gauged.pace) / 1_000_000
        self._shim = Decimal(self._random.choice(_SHIMS)) if plate["adjuster"] == SHIM else None
        near = _NEAREST_SHIM if self._shim is not None else 1
        self._gap = self._setting + _HUNDREDTH * self._random.randint(-near, near)
        self._hours: Decimal | None = None

    def gauge(self, occasion: Occasion) -> Iterator[dict[str, str]]:
        """Give the rows of a sheet: what was found, and where it was set what was left."""
        if self._hours is not None:
            self._gap -= self._rate * (occasion.hours - self._hours)
        self._hours = occasion.hours
        hot = _OPENS_HOT if occasion.is_hot else 0
        feel = Decimal(self._random.randint(-4, 4)) / 1000
        found = (self._gap + hot + feel).quantize(_HUNDREDTH)
        yield self._row(LASH, "found", self._between_blades(found))
        badly = self._gauged.badly_set.get(self.point.name) if occasion.is_newest_job else None
        slack = (self._most - self._least) / _NEAR_AN_END if occasion.is_job else 0
        if badly is not None:
            self._gap = Decimal(badly)
            yield self._row(LASH, "left", badly)
        elif not occasion.is_hot and not self._least + slack <= found <= self._most - slack:
            yield from self._set(found)

    def _set(self, found: Decimal) -> Iterator[dict[str, str]]:
        left = self._setting + _HUNDREDTH * self._random.randint(-1, 1)
        if self._shim is not None:
            before, steps = self._shim, round((self._setting - found) / _SHIM_STEP)
            self._shim -= steps * _SHIM_STEP
            left = found + steps * _SHIM_STEP
            yield self._row(SHIM, "found", f"{before:f}")
            yield self._row(SHIM, "left", f"{self._shim:f}")
        self._gap = left
        yield self._row(LASH, "left", self._between_blades(left))

    def _between_blades(self, gap: Decimal) -> str:
        """Write a gap, or the blade that goes and the next that does not, counted from the least of the range."""
        blades = self._gauged.blades
        if blades is None:
            return f"{gap:f}"
        goes = self._least + (gap - self._least) // blades * blades
        return f"{goes:f}..{goes + blades:f}"

    def _row(self, quantity: str, phase: str, value: str) -> dict[str, str]:
        return {"quantity": quantity, "point": self.point.name, "phase": phase, "value": value, "unit": "mm"}
