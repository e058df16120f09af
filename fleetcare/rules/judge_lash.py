"""A valve lash sheet held against the spec in force on its day.

Inputs are the values of a sheet, the points of the engine, the spec, and whether the engine was cold or hot. A value
in its check range, ends counted, is `in`. Found outside it is an `alert`: that is what the check is for. Left outside
is an `alarm`: the engine goes back to work with it; and so is a closing gap of which nothing is left, found or left:
a valve held off its seat loses compression and burns (TM 5-3820-245-14&P p. 169, TM 10-3930-644-14&P tappet section).
That a value left out weighs more than one found out is common practice.

Not judged, and why: no spec; no range for its side; a cold reading against hot limits or the other way round, as lash
moves either way with heat (cam-grinder table on hot and cold lash; TM 5-3805-290-23-2 WP 0155 00 step 6 has one figure
for any temperature); blades that straddle a limit, where finer ones are needed. A sheet that does not say cold or hot
is taken as the spec asks. Figures in another unit than the spec's are compared in mm.
"""

from collections.abc import Sequence
from decimal import Decimal

from fleetcare.domain.engines import Side
from fleetcare.domain.sheets import (
    LASH,
    Judgement,
    LashPoint,
    LashSpec,
    LashStand,
    Phase,
    Place,
    SheetValue,
    Unjudged,
    Verdict,
)
from fleetcare.rules.lash import ANY, MM_PER, Gap, compare, judge
from fleetcare.rules.lash_points import side_of

_PHASES = (Phase.FOUND, Phase.LEFT)


def judge_sheet(
    values: Sequence[SheetValue], points: Sequence[LashPoint], spec: LashSpec | None, condition: str
) -> tuple[Judgement, ...]:
    """Judge every value of a sheet, in the order of the points, whatever the order of the values.

    What an older sheet has of points the engine is no longer said to have comes last.
    """
    places = {point.name: place for place, point in enumerate(points)}

    def place(value: SheetValue) -> tuple[int, str, str, int]:
        return places.get(value.point, len(places)), value.point, value.quantity, _PHASES.index(value.phase)

    return tuple(judge_value(value, side_of(value.point), spec, condition) for value in sorted(values, key=place))


def judge_value(value: SheetValue, side: Side, spec: LashSpec | None, condition: str) -> Judgement:
    """Judge one value of a point on a side; `condition` is cold, hot or empty where nobody said."""
    if value.quantity != LASH:
        return Judgement(value, Verdict.NOT_JUDGED, unjudged=Unjudged.NO_LIMIT_OF_ITS_OWN)
    why = why_unjudged(side, spec, condition)
    if spec is None or why is not None:
        return Judgement(value, Verdict.NOT_JUDGED, unjudged=why)
    return _hold(value, spec, side, condition)


def why_unjudged(side: Side, spec: LashSpec | None, condition: str) -> Unjudged | None:
    """Say why no gap of a side can be judged, None where each can."""
    if spec is None:
        return Unjudged.NO_SPEC
    if side not in spec.ranges:
        return Unjudged.NO_RANGE
    if not compare(spec.condition, condition or ANY):
        return Unjudged.OTHER_CONDITION
    return None


def stand_of(judged: Sequence[Judgement], points: Sequence[LashPoint]) -> LashStand:
    """Say what the judgements of a sheet make of the whole engine."""
    at = {(one.value.point, one.value.phase): one for one in judged if one.value.quantity == LASH}
    names = [point.name for point in points]
    found = {name: at[name, Phase.FOUND] for name in names if (name, Phase.FOUND) in at}
    left = {name: at[name, Phase.LEFT] for name in names if (name, Phase.LEFT) in at}
    now = {name: one for name in names if (one := left.get(name) or found.get(name)) is not None}
    return LashStand(
        missing=tuple(name for name in names if name not in now),
        found_out=tuple(name for name, one in found.items() if one.is_out),
        unset=tuple(name for name, one in found.items() if name not in left and _needs_setting(one)),
        left_out=tuple(name for name, one in now.items() if one.is_out),
        untold=tuple(name for name, one in now.items() if one.verdict is Verdict.NOT_JUDGED),
    )


def _hold(value: SheetValue, spec: LashSpec, side: Side, condition: str) -> Judgement:
    (goes, stops), (least, most), unit = value.ends, spec.ranges[side], spec.unit
    if value.unit != unit:
        goes, stops, least, most = (
            figure * MM_PER[own]
            for figure, own in ((goes, value.unit), (stops, value.unit), (least, unit), (most, unit))
        )
        unit = "mm"
    standing = judge(Gap(goes, stops), least, most)
    over, under = goes - least, most - stops
    return Judgement(
        value=value,
        verdict=_verdict(standing.place, value.phase, goes),
        place=standing.place,
        limits=(least, most),
        limit=least if over <= under else most,
        margin=min(over, under),
        off_least=standing.off_least,
        unit=unit,
        unjudged=Unjudged.UNDECIDED if standing.place is Place.UNDECIDED else None,
        taken=condition or spec.condition,
        asked=spec.condition,
    )


def _verdict(place: Place, phase: Phase, goes: Decimal) -> Verdict:
    if place is Place.UNDECIDED:
        return Verdict.NOT_JUDGED
    if place is Place.IN:
        return Verdict.IN
    nothing_goes = goes == 0
    return Verdict.ALARM if phase is Phase.LEFT or nothing_goes else Verdict.ALERT


def _needs_setting(found: Judgement) -> bool:
    return found.is_out or found.unjudged is Unjudged.UNDECIDED
