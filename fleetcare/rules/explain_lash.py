"""A judged lash sheet in words and flat rows: what table, JSON and screen show, so that they cannot disagree."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from fractions import Fraction

from fleetcare.domain.quantities import plain
from fleetcare.domain.sheets import Judgement, LashSpec, Place, SheetValue, Unjudged
from fleetcare.rules.lash_doubts import Doubt
from fleetcare.rules.lash_mending import Mending
from fleetcare.rules.lash_points import Stop

_PLACES_SHOWN = 4


@dataclass(frozen=True, slots=True)
class LastValue:
    """What a point showed last: the value its valve was left at, or found at, and the day."""

    value: SheetValue
    on: date


@dataclass(frozen=True, slots=True)
class JudgedRow:
    """One judgement, flat. `value` is as a sheet file has it; figures of limits are in `limit_unit`.

    `note` is what the verdict rests on, `mending` what would bring the gap back, `last` what the point showed before.
    """

    quantity: str
    point: str
    phase: str
    value: str
    unit: str
    verdict: str
    place: str
    limit_low: Decimal | None
    limit_high: Decimal | None
    limit_unit: str
    margin: Decimal | None
    note: str
    mending: str = ""
    last: str = ""


def judged_row(
    judged: Judgement, spec: LashSpec | None, mending: Mending | None = None, last: LastValue | None = None
) -> JudgedRow:
    """Flatten a judgement, with what mends it and what the point showed last, where those are known."""
    low, high = judged.limits or (None, None)
    return JudgedRow(
        quantity=judged.value.quantity,
        point=judged.value.point,
        phase=judged.value.phase,
        value=str(judged.value),
        unit=judged.value.unit,
        verdict=judged.verdict,
        place=judged.place or "",
        limit_low=low,
        limit_high=high,
        limit_unit=judged.unit,
        margin=judged.margin,
        note=say_judgement(judged, spec),
        mending=say_mending(mending) if mending else "",
        last=f"{last.value} {last.value.unit} on {last.on.isoformat()}" if last else "",
    )


def say_judgement(judged: Judgement, spec: LashSpec | None) -> str:
    """Say where a value lies and by how much, or why it is not judged."""
    if judged.limits is None:
        asked = spec.condition if spec else ""
        return _WHY_NOT[judged.unjudged or Unjudged.NO_SPEC].format(asked=asked)
    assert judged.margin is not None
    assert judged.limit is not None
    limits = say_limits(judged.limits, judged.unit)
    if judged.place is Place.IN:
        return f"in {limits}"
    if judged.place is Place.UNDECIDED:
        return f"the blades straddle {_short(judged.limit)} {judged.unit}, the end of {limits}: use finer ones"
    off = say_off(judged.off_least, -judged.margin)
    nothing = ", no gap is left: the valve may not close" if judged.value.ends[0] == 0 else ""
    return f"{off} {judged.unit} {judged.place} {limits}{nothing}"


def say_limits(limits: tuple[Decimal, Decimal], unit: str) -> str:
    """Say a check range: "0.20 to 0.30 mm"."""
    return f"{limits[0]:f} to {limits[1]:f} {unit}"


def say_mending(mending: Mending) -> str:
    """Say which shim to fit, or how far to turn the screw."""
    if mending.shim is not None:
        return f"fit a {plain(mending.shim.shim)} mm shim, which leaves {plain(mending.shim.lash)} mm"
    if mending.turn is not None:
        return f"turn the screw {plain(round(abs(mending.turn.degrees), 0))}° {mending.turn.direction}"
    return mending.wanting


def say_doubt(value: SheetValue, doubt: Doubt) -> str:
    """Say why a gap is doubted and what was likely meant: "3.0 mm at 1E: it is ...; 0.3 mm is likely meant"."""
    meant = " or ".join(f"{plain(figure)} {unit}" for figure, unit in doubt.meant)
    return f"{value} {value.unit} at {value.point}: {doubt.why}{f'; {meant} is likely meant' if meant else ''}"


def say_stop(stops: Sequence[Stop], number: int) -> str:
    """Say how to turn the crank to the stop of a number, from 0, and how it stands there."""
    here = stops[number].position
    if here is None:
        return "No firing order is known: see to it yourself that each valve is closed when it is measured"
    before = stops[number - 1].position if number else None
    turn = f"turn on {plain(_degrees(here.crank - before.crank))}°: " if before is not None else ""
    standing = f"{here.tdc_compression} at TDC on compression" if here.tdc_compression else "no cylinder at TDC"
    rocking = f", {here.rocking} rocking" if here.rocking else ""
    return f"Stop {number + 1} of {len(stops)}: {turn}{standing}{rocking}"


def say_spec(spec: LashSpec | None) -> str:
    """Say the limits a sheet is held against, side by side."""
    if spec is None or not spec.ranges:
        return "no check range is known"
    ranges = ", ".join(f"{side} {say_limits(limits, spec.unit)}" for side, limits in spec.ranges.items())
    return f"{ranges}{f', {spec.condition}' if spec.condition != 'any' else ''}"


_WHY_NOT: Mapping[Unjudged, str] = {
    Unjudged.NO_SPEC: "no lash limits of this engine are known",
    Unjudged.NO_RANGE: "no check range is known for this side",
    Unjudged.OTHER_CONDITION: "the limits are for a {asked} engine",
    Unjudged.NO_LIMIT_OF_ITS_OWN: "",
}


def say_off(least: Decimal, most: Decimal) -> str:
    """Say how far out a gap is: one figure, or from and to for an interval."""
    return _short(most) if least == most else f"{_short(least)} to {_short(most)}"


def _degrees(angle: Fraction) -> Decimal:
    return round(Decimal(angle.numerator) / angle.denominator, 0)


def _short(figure: Decimal) -> str:
    return plain(round(figure, _PLACES_SHOWN))
