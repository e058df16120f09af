"""The past of a lash point in words and figures: what it showed last, how it changed since it was set, what to draw."""

from collections.abc import Mapping, Sequence
from decimal import Decimal

from fleetcare.domain.quantities import plain
from fleetcare.domain.sheets import LashSpec, Place, Unjudged
from fleetcare.domain.trends import Projection, Segment
from fleetcare.rules.explain import say_amount
from fleetcare.rules.explain_lash import say_judgement, say_off
from fleetcare.rules.explain_projection import say_ahead
from fleetcare.rules.lash import MM_PER
from fleetcare.rules.lash_past import Aside, PastValue, PointPast
from fleetcare.rules.trend_row import Ahead, Dot, TrendRow
from fleetcare.rules.trends import cut_at_adjustments

PLACES: Mapping[str, int] = {"mm": 3, "in": 4}
"""How many decimals stand at the side of a plot: one more than a gauge has, as its marks fall between blades."""

_BRIDGE = 2
_FEW = 2
_ROUNDED = 4
_NAMED = 2


def trend_row(
    past: PointPast,
    spec: LashSpec | None,
    tag: str,
    *,
    counts_hours: bool,
    projection: Projection | None = None,
    why_not: str = "",
) -> TrendRow:
    """Flatten the past of a point of the engine `tag`; `spec` is the one in force now.

    `projection` is in the unit of the spec; without one `why_not` says why no point has one.
    """
    unit = spec.unit if spec is not None else "mm"
    segments = cut_at_adjustments(past.checks)
    last = past.last
    limits = spec.ranges.get(past.side) if spec is not None else None
    setting = spec.settings.get(past.side) if spec is not None else None
    said = [f"{_headline(past, counts_hours)}.", *_more(past, spec, segments, tag, counts_hours)]
    if projection is not None or (why_not and past.checks):
        said.insert(1, f"{_first_up(say_ahead(projection, unit, 'h') if projection is not None else why_not)}.")
    drawn = tuple(_drawn(segment, MM_PER[unit]) for segment in segments if segment.points)
    return TrendRow(
        name=past.name,
        last=_say_value(last) if last else "",
        stands=_stands(last) if last else "never measured",
        verdict=last.judged.verdict if last else "",
        on=last.on.isoformat() if last else "",
        change=_change(past, segments, unit, counts_hours),
        said=" ".join(said),
        segments=drawn,
        limits=tuple(
            (float(end), f"{word} {end:f}") for end, word in zip(limits or (), ("least", "most"), strict=False)
        ),
        setting=(float(setting), f"set {setting:f}") if setting is not None else None,
        left_out=len(past.aside),
        ahead=_ahead(projection, drawn),
    )


def _ahead(projection: Projection | None, drawn: Sequence[Sequence[Dot]]) -> Ahead | None:
    """Give what is drawn beyond the last value, from the line there."""
    if projection is None or projection.trend is None or projection.likely is None:
        return None
    assert projection.early is not None
    assert projection.late is not None
    x = drawn[-1][-1].x
    return Ahead(
        start=Dot(x, float(projection.trend.value_at(Decimal(x)))),
        limit=float(projection.limit),
        early=float(projection.early),
        likely=float(projection.likely),
        late=float(projection.late),
    )


def _first_up(text: str) -> str:
    return text[:1].upper() + text[1:]


def _drawn(segment: Segment, unit_mm: Decimal) -> tuple[Dot, ...]:
    """Give the values of a segment in the unit of the limits."""
    begins_left = segment.opened is not None and segment.has_left_value
    return tuple(
        Dot(float(point.x), float(point.y / unit_mm), begins_left and number == 0)
        for number, point in enumerate(segment.points)
    )


def _say_value(value: PastValue) -> str:
    return f"{value.entered} {value.entered.unit}"


def _stands(value: PastValue) -> str:
    judged = value.judged
    if judged.limits is None:
        return "not judged"
    if judged.place not in {Place.BELOW, Place.ABOVE}:
        return str(judged.place)
    assert judged.margin is not None
    return f"{say_off(judged.off_least, -judged.margin)} {judged.place}"


def _change(past: PointPast, segments: tuple[Segment, ...], unit: str, counts_hours: bool) -> str:
    """Say how much a gap moved since it was set, or first measured, and over how long."""
    if past.last is None or past.last.aside is not None:
        return ""
    points = segments[-1].points
    if len(points) < _FEW:
        return "set then" if past.last.is_left else ""
    moved = (points[-1].y - points[0].y) / MM_PER[unit]
    return f"{_signed(moved)} over {_say_span(points[-1].x - points[0].x, counts_hours)}"


def _headline(past: PointPast, counts_hours: bool) -> str:
    valves = f"bridge over two {past.side} valves" if past.valves == _BRIDGE else f"{past.side} valve"
    if past.last is None:
        return f"{past.name}, {valves}: never measured"
    told = say_judgement(past.last.judged, past.last.spec)
    return f"{past.name}, {valves}: {_say_taken(past.last, counts_hours)}, {told}"


def _more(
    past: PointPast, spec: LashSpec | None, segments: tuple[Segment, ...], tag: str, counts_hours: bool
) -> list[str]:
    said = []
    if not past.valves:
        said.append("By its nameplate the engine has no such point.")
    if past.last is None:
        said.append(f"Measure it: x and v on this page, or fleetcare measure lash {tag} FILE.")
    left = [value for value in past.values if value.is_left]
    change = _change(past, segments, spec.unit if spec is not None else "mm", counts_hours)
    if left and left[-1] is not past.last:
        said.append(f"Last set: {_say_taken(left[-1], counts_hours)}{f', since then {change}' if change else ''}.")
    elif change and not left:
        said.append(f"Never set on record; since first measured {change}.")
    if past.checks and all(len(segment.points) < _FEW for segment in segments):
        said.append("Nothing to draw a line between yet: the next sheet makes one.")
    if past.aside:
        said.append(f"Not drawn: {_say_aside(past.aside)}.")
    if past.last is not None and (spec is None or past.side not in spec.ranges):
        said.append(f"Give the check range of the maker's manual with fleetcare engine edit {tag} --lash-{past.side}.")
    return said


def _say_taken(value: PastValue, counts_hours: bool) -> str:
    at = f" at {say_amount(value.at, 'h')}" if counts_hours and value.at is not None else ""
    return f"{value.entered.phase} {_say_value(value)} on {value.on.isoformat()}{at}"


def _say_aside(values: Sequence[PastValue]) -> str:
    """Name the newest few values no line has, and why."""
    few = [f"{value.on.isoformat()} {_say_value(value)}, {_why_aside(value)}" for value in values[: -_NAMED - 1 : -1]]
    return "; ".join([*few, *([f"and {len(values) - _NAMED} older"] if len(values) > _NAMED else [])])


def _why_aside(value: PastValue) -> str:
    if value.aside is Aside.NO_HOURS:
        return "before the first reading of the hours"
    if value.judged.unjudged in {Unjudged.NO_SPEC, Unjudged.NO_RANGE}:
        return "no check range was known"
    return f"taken {value.taken}" if value.taken else "the limits of its day were for another condition"


def _say_span(span: Decimal, counts_hours: bool) -> str:
    return say_amount(span, "h") if counts_hours else f"{plain(span)} d"


def _signed(figure: Decimal) -> str:
    rounded = round(figure, _ROUNDED)
    return f"{'+' if rounded > 0 else ''}{plain(rounded)}"
