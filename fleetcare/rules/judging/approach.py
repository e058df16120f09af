"""Hours until a gap that is inside its check range comes to one end of it, as far as its past tells.

The gap is the one left, else the one found; of two blades around it the middle counts. Its past are the sheets up to its
own, each value held against the limits of its day; what could not be judged then, or was taken hot where the limits now ask
cold or the other way round, is left out (as rules/lash_past.py has it). One slope goes through all that lies between
adjustments, over the hours of life, and the likely hours of the projection count (rules/projection.py), rounded down to a
tenth: the early end pulls checks forward, but would call out every valve that wears as it should. The interval of
inspections is the usual time between the sheets: rules know no tasks. Where a task asks for it less often, the page of the
engine tells the same likely hours, but no check moves by them until one interval of the task was watched.

Where too little is known, nothing is told; where the slope is not told apart from none, is less than gauges tell, leads
away from the limit, or to it further ahead than was watched, the limit is not near. All is worked in mm, whatever was typed.
"""

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from decimal import ROUND_FLOOR, Decimal

from fleetcare.domain.findings import Evidence, NotJudged, Signal, Step
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import Approach, End, Rule
from fleetcare.domain.sheets import Judgement, Phase, Unjudged, Verdict
from fleetcare.domain.trends import Check, Obstacle, Projection, Segment
from fleetcare.rules.judging.facts import CannotTell, Figure, MeasuredFacts
from fleetcare.rules.judging.hold import hold
from fleetcare.rules.judging.spans import known
from fleetcare.rules.judging.values import evidence_of
from fleetcare.rules.lash import MM_PER, compare, ends_in_mm
from fleetcare.rules.projection import FEWEST_DF, project
from fleetcare.rules.trends import cut_at_adjustments, usual_gap

_TENTH = Decimal("0.1")
_UNTOLD = {Obstacle.TOO_FEW, Obstacle.NO_LEFT_VALUE, Obstacle.SHORT_SPAN, Obstacle.OLD_VALUE}
_NO_GAP = {Unjudged.NO_SPEC, Unjudged.NO_RANGE, Unjudged.OTHER_CONDITION, Unjudged.NO_LIMIT_OF_ITS_OWN}
_FEWEST_SHEETS = FEWEST_DF + 2  # each adds one value more than segments at most, but the first, and the slope takes one
_LEVEL = 1e-9  # mm per h: no engine runs long enough for that to tell


@dataclass(frozen=True, slots=True)
class Seen:
    """What a sheet says of the gap of a point, and the values that say it."""

    check: Check
    values: tuple[Evidence, ...]


def approach_signals(rule: Rule, shape: Approach, facts: MeasuredFacts) -> Iterator[Signal | NotJudged | Evidence]:
    """Give a signal for each gap that is near an end of its range, the gaps that are not, and why nothing is told."""
    for now in _as_they_stand(facts):
        try:
            figure = _figure(rule, shape, now, facts)
        except CannotTell as why:
            yield NotJudged(rule, why.subject, why.why)
        else:
            yield (hold(rule, figure, facts) if figure else None) or evidence_of(facts.sheet, now.value)


def is_far(shape: Approach, facts: MeasuredFacts) -> bool:
    """Whether no gap is projected to come to the limit at all, told at a glance; False where only a closer look can tell."""
    if len(facts.earlier) + 1 < _FEWEST_SHEETS:
        return True
    return all(one.is_out or _is_far(shape, one, facts) for one in _as_they_stand(facts))


def _as_they_stand(facts: MeasuredFacts) -> Iterable[Judgement]:
    """Give what the limits say of each gap as it was left, else as it was found."""
    gaps = [one for one in facts.lash.get(facts.sheet.entry, ()) if one.unjudged not in _NO_GAP]
    gaps.sort(key=lambda one: one.value.phase is Phase.LEFT)
    return {one.value.point: one for one in gaps}.values()


def _figure(rule: Rule, shape: Approach, now: Judgement, facts: MeasuredFacts) -> Figure | None:
    """Give the hours to the limit, None where it is not near or passed. Raises CannotTell where too little is known."""
    point, at = now.value.point, facts.sheet.engine_hours
    if now.is_out:
        return None
    if at is None:
        raise CannotTell("the engine hours are not known", point)
    past = past_of(point, now.asked, facts)
    segments = cut_at_adjustments(one.check for one in past)
    limit = _limit(shape, now)
    told = project(segments, limit, shape.end, now=at, interval=usual_gap(segments) or Decimal(0))
    why_not = [one.obstacle for one in told.hindrances]
    for obstacle in why_not:
        if obstacle in _UNTOLD:
            raise CannotTell(f"no projection: {obstacle}", point)
    if {*why_not} - {Obstacle.PAST_LIMIT} or _moved(told) < shape.least_change:
        if now.verdict is Verdict.NOT_JUDGED:
            raise CannotTell(f"lash: {now.unjudged}", point)
        return None
    # Past the limit is here only the middle of two blades around it, of a gap that moves there.
    likely = at if told.likely is None else told.likely
    hours = max(likely - at, Decimal(0)).quantize(_TENTH, rounding=ROUND_FLOOR)
    flagged = evidence_of(facts.sheet, now.value)
    used = tuple(value for one in past for value in one.values if value != flagged)
    return Figure(point, known(hours), flagged, rule.low, rule.high, used, _steps(told, segments, at, now.unit))


def _moved(told: Projection) -> Decimal:
    """Give by how much a gap moved along its slope all the while it was watched, mm."""
    assert told.trend is not None
    return abs(told.trend.slope) * told.trend.span


def _steps(told: Projection, segments: Sequence[Segment], at: Decimal, unit: str) -> tuple[Step, ...]:
    """Give the numbers of a projection in the unit of the limits: the hours are from where its line is now, not from the gap."""
    assert told.trend is not None
    a_unit = MM_PER[unit]
    last = max(segments[-1].points, key=lambda point: point.x)
    steps = (
        Step("gap", last.y / a_unit, unit),
        Step("by the slope now", told.trend.value_at(at) / a_unit, unit),
        Step("limit", told.limit / a_unit, unit),
        Step("slope", 1000 * told.trend.slope / a_unit, f"{unit} per 1000 h"),
        Step("its standard error", 1000 * told.trend.slope_error / a_unit, f"{unit} per 1000 h"),
        Step("values", Decimal(sum(len(segment.points) for segment in segments))),
        Step("watched for", told.trend.span, "h"),
    )
    if told.early is None:
        return steps
    return (*steps, Step("at the earliest in", max(told.early - at, Decimal(0)).quantize(_TENTH), "h"))


def _limit(shape: Approach, now: Judgement) -> Decimal:
    """Give the end of the range in mm; of a gap that was judged there is one."""
    assert now.limits is not None
    return now.limits[0 if shape.end is End.LOW else 1] * MM_PER[now.unit]


def past_of(point: str, asked: str, facts: MeasuredFacts) -> list[Seen]:
    """Give what the sheets up to this one say of the gap of a point, oldest first, where limits ask for hot or cold."""
    told = (_told(sheet, asked, facts).get(point) for sheet in (*facts.earlier, facts.sheet))
    return [one for one in told if one is not None]


def _told(sheet: MeasuredSheet, asked: str, facts: MeasuredFacts) -> Mapping[str, Seen]:
    """Give what a sheet says of each gap, as far as that compares with what the limits now ask for: hot or cold."""
    key, judged = ("gaps", asked), facts.lash.get(sheet.entry, ())
    if key not in sheet.memo or sheet.memo[key][0] is not judged:
        by_point: dict[str, dict[Phase, Judgement]] = {}
        for one in judged:
            if one.unjudged is not Unjudged.NO_LIMIT_OF_ITS_OWN:
                by_point.setdefault(one.value.point, {})[one.value.phase] = one
        found = ((point, _seen(sheet, phases, asked)) for point, phases in by_point.items())
        sheet.memo[key] = judged, {point: seen for point, seen in found if seen is not None}
    seen: Mapping[str, Seen] = sheet.memo[key][1]
    return seen


def _seen(sheet: MeasuredSheet, phases: Mapping[Phase, Judgement], asked: str) -> Seen | None:
    """Put what was found and left together; left as found is no adjustment, and without hours it lies nowhere."""
    if sheet.engine_hours is None:
        return None
    found, left = phases.get(Phase.FOUND), phases.get(Phase.LEFT)
    if found is not None and left is not None and ends_in_mm(found.value) == ends_in_mm(left.value):
        left = None
    usable = [one for one in (found, left) if one is not None and _compares(one, asked)]
    if not usable and left is None:
        return None
    gaps = {one.value.phase: sum(ends_in_mm(one.value), Decimal(0)) / 2 for one in usable}
    check = Check(sheet.engine_hours, gaps.get(Phase.FOUND), gaps.get(Phase.LEFT), is_adjusted=left is not None)
    return Seen(check, tuple(evidence_of(sheet, one.value) for one in usable))


def _compares(one: Judgement, asked: str) -> bool:
    return one.unjudged not in _NO_GAP and compare(one.taken, asked)


def _is_far(shape: Approach, now: Judgement, facts: MeasuredFacts) -> bool:
    """Whether a gap clearly comes to the limit no sooner than it was watched, or never, by floats."""
    segments = cut_at_adjustments(one.check for one in past_of(now.value.point, now.asked, facts))
    filled = [[(float(point.x), float(point.y)) for point in segment.points] for segment in segments if segment.points]
    if not segments[-1].points or sum(map(len, filled)) - len(filled) - 1 < FEWEST_DF:
        return True
    sxx = sxy = span = 0.0
    for points in filled:
        mean_x, mean_y = (sum(column) / len(points) for column in zip(*points, strict=True))
        sxx += sum((x - mean_x) ** 2 for x, _ in points)
        sxy += sum((x - mean_x) * (y - mean_y) for x, y in points)
        span += points[-1][0] - points[0][0]
    if not sxx:
        return True
    slope, away = sxy / sxx, 1 if shape.end is End.LOW else -1
    if slope * away > _LEVEL:
        return True
    furthest = filled[-1][-1][0] + span
    at_furthest: float = mean_y + slope * (furthest - mean_x)
    return (at_furthest - float(_limit(shape, now))) * away > _LEVEL * max(1.0, furthest)
