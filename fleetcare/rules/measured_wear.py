"""Compression and oil of an engine as what wears: each cylinder and element with the values that make its line, and limits.

Limits are those of the rules in force for the engine, as levels of the value (`judging/levels`), rounded inwards to one
decimal more than is measured. A cylinder moves to its nearest one, oil pulls by its alarms. Hours on the oil are brought
to hours of life by the newest sample of the fill: at life L with h on the oil it was filled at L - h. What a leak lets in
does not come hour by hour and is left out. So is what a value of the newest sample cannot be fitted of, and a fill that is
not the one of the newest sample.
"""

from collections.abc import Iterable, Iterator, Mapping, Sequence
from decimal import ROUND_CEILING, ROUND_FLOOR, Decimal

from fleetcare.domain.measured import COMPRESSION, OIL, MeasuredEngine, MeasuredSheet
from fleetcare.domain.quantities import Kind
from fleetcare.domain.rule_book import Rule, Severity
from fleetcare.domain.trends import End, Point, Segment
from fleetcare.domain.wear import MeasuredWears, Wear
from fleetcare.rules.explain_measured_past import PLACES, name_of
from fleetcare.rules.judge_engine import Background, facts_of
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import judge
from fleetcare.rules.judging.levels import Level, levels_of
from fleetcare.rules.measured_ahead import next_limits
from fleetcare.rules.measured_past import MeasuredPast, compression_pasts, oil_pasts
from fleetcare.rules.oil_fills import fills_of

_BY_LEAKS = frozenset({"water", "fuel", "glycol", "flash_point"})

_Told = tuple[MeasuredPast, tuple[Level, ...]]


def measured_wears(
    sheets: Sequence[MeasuredSheet], engine: MeasuredEngine, rules: Sequence[Rule], background: Background
) -> MeasuredWears:
    """Give what an engine's sheets, oldest first, show over its hours of life, by the rules for it."""
    tests = [sheet for sheet in sheets if sheet.kind == COMPRESSION]
    cylinders = _with_levels(
        compression_pasts(tests, engine.banks, counts_hours=True), tests, engine, rules, background
    )
    samples = [sheet for sheet in sheets if sheet.kind == OIL]
    in_oil = list(_with_levels(_of_this_fill(samples, engine, background), samples, engine, rules, background))
    nearest = tuple(wear for past, levels in in_oil for wear in _wears(past, levels))
    is_sound = nearest and not judge(rules, facts_of(samples, engine, background))
    return MeasuredWears(
        pulling=(
            *(wear for past, levels in cylinders for wear in _wears(past, levels)),
            *(wear for past, levels in in_oil for wear in _wears(past, _alarms(levels))),
        ),
        sound_oil=nearest if is_sound else (),
    )


def _of_this_fill(
    samples: Sequence[MeasuredSheet], engine: MeasuredEngine, background: Background
) -> Iterator[MeasuredPast]:
    """Give what comes hour by hour, of whatever was reported of the oil that is in the engine by the newest sample."""
    fills = fills_of(samples)
    this = fills.get(samples[-1].entry) if samples else None
    for past in oil_pasts(samples, engine.sump, background.fresh):
        if past.quantity not in _BY_LEAKS and this is not None and fills.get(past.last.sheet.entry) == this:
            yield past


def _with_levels(
    pasts: Iterable[MeasuredPast],
    sheets: Sequence[MeasuredSheet],
    engine: MeasuredEngine,
    rules: Sequence[Rule],
    background: Background,
) -> Iterator[_Told]:
    """Give each past whose newest value is fitted, with the levels of that value on its own sheet."""
    known: dict[int, MeasuredFacts] = {}  # most stand on one sheet
    for past in pasts:
        sheet = past.last.sheet
        if past.last.x is not None:
            if sheet.entry not in known:
                known[sheet.entry] = facts_of(sheets[: sheets.index(sheet) + 1], engine, background)
            yield past, levels_of(rules, past.last.measured, known[sheet.entry])


def _alarms(levels: Iterable[Level]) -> tuple[Level, ...]:
    return tuple(level for level in levels if level.severity is Severity.ALARM)


def _wears(past: MeasuredPast, levels: Iterable[Level]) -> Iterator[Wear]:
    """Give a past over the hours of life, where those and a limit are known."""
    last, limits = past.last, next_limits(past.last.figure, levels)
    if limits and last.x is not None and last.sheet.engine_hours is not None:
        filled_at = last.sheet.engine_hours - last.x
        yield Wear(
            work=last.sheet.kind,
            subject=f"cylinder {past.point}" if past.point else name_of(past),
            kind=Kind.HOURS,
            unit=past.unit,
            segments=tuple(_later(segment, filled_at) for segment in past.segments),
            limits=_inwards(limits, PLACES.get(past.unit, 0) + 1),
            measured_on=last.sheet.on,
            received_on=last.sheet.received_on,
            is_topped_up_by_log=any(one.x is not None and one.sheet.logged_top_up is not None for one in past.values),
        )


def _later(segment: Segment, by: Decimal) -> Segment:
    return Segment(tuple(Point(point.x + by, point.y) for point in segment.points))


def _inwards(limits: Mapping[End, Decimal], places: int) -> dict[End, Decimal]:
    step = Decimal(1).scaleb(-places)
    rounding = {End.LOW: ROUND_CEILING, End.HIGH: ROUND_FLOOR}
    return {end: limit.quantize(step, rounding=rounding[end]).normalize() for end, limit in limits.items()}
