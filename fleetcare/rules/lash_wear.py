"""The lash points of an engine as what wears: each with the values that make its line and the check range it is to stay in."""

from collections.abc import Iterable, Iterator, Sequence
from datetime import date

from fleetcare.domain.measured import MeasuredEngine, MeasuredSheet
from fleetcare.domain.quantities import Kind
from fleetcare.domain.sheets import LASH, LashPoint, LashSpec, spec_on
from fleetcare.domain.trends import End, Point, Segment
from fleetcare.domain.wear import Wear
from fleetcare.rules.lash import MM_PER
from fleetcare.rules.lash_past import PointPast, lash_past
from fleetcare.rules.trends import cut_at_adjustments


def lash_shown(
    sheets: Sequence[MeasuredSheet],
    engine: MeasuredEngine,
    points: Sequence[LashPoint],
    specs: tuple[LashSpec, ...],
    on: date,
) -> Iterator[Wear]:
    """Give what an engine's sheets, oldest first, show of its lash up to a day; nothing where adjusters leave no gap."""
    taken = [sheet for sheet in sheets if sheet.kind == LASH]
    if taken and engine.adjuster != "hydraulic":
        at = {sheet.entry: sheet.engine_hours for sheet in taken if sheet.engine_hours is not None}
        yield from lash_wears(lash_past(points, taken, specs, at, on), spec_on(specs, on))


def lash_wears(pasts: Iterable[PointPast], spec: LashSpec | None) -> Iterator[Wear]:
    """Give the points that can be projected, over hours of life, in the unit of the spec in force.

    Left out is a point the engine has no more, one without a check range, and one without a value on its line.
    """
    if spec is None:
        return
    for past in pasts:
        segments = cut_at_adjustments(past.checks)
        if past.valves and past.side in spec.ranges and any(segment.points for segment in segments):
            low, high = spec.ranges[past.side]
            yield Wear(
                work=LASH,
                subject=past.name,
                kind=Kind.HOURS,
                unit=spec.unit,
                segments=tuple(_in_unit(segment, spec.unit) for segment in segments),
                limits={End.LOW: low, End.HIGH: high},
                measured_on=max(value.on for value in past.values if value.aside is None),
            )


def _in_unit(segment: Segment, unit: str) -> Segment:
    """Give a segment in mm in a unit; a figure typed in that unit comes out as it was typed."""
    points = tuple(Point(point.x, point.y / MM_PER[unit]) for point in segment.points)
    return Segment(points, segment.opened)
