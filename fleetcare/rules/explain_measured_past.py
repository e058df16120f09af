"""The past of a cylinder, an element or a property of the oil in words and figures, and what to draw of it."""

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import replace
from decimal import Decimal

from fleetcare.domain.measured import COMPRESSION
from fleetcare.domain.measures import ELEMENTS
from fleetcare.domain.quantities import plain
from fleetcare.domain.sheets import Verdict
from fleetcare.domain.trends import End, Projection
from fleetcare.rules.explain import say_amount
from fleetcare.rules.explain_measured import MeasuredRow
from fleetcare.rules.explain_projection import say_ahead
from fleetcare.rules.judging.levels import Level
from fleetcare.rules.judging.values import title
from fleetcare.rules.measured_ahead import PastRate
from fleetcare.rules.measured_past import (
    Aside,
    Break,
    MeasuredPast,
    PastMeasure,
    is_oil,
    new_oil,
)
from fleetcare.rules.oil_fills import Along, hours_on_oil
from fleetcare.rules.trend_row import Ahead, Dot, TrendRow

PLACES: Mapping[str, int] = {
    "bar": 1,
    "kgf/cm2": 1,
    "MPa": 2,
    "%": 2,
    "mm2/s": 1,
    "cSt": 1,
    "mg KOH/g": 1,
    "A/cm": 1,
    "": 1,
}
"""How many decimals stand at the side of a plot, by unit; none for the others."""

_FEW_STEPS = 10
_SHORT = {
    "kv40": "visc. 40 °C",
    "kv100": "visc. 100 °C",
    "tbn": "base number",
    "tan": "acid number",
    "ph": "pH",
    "fuel": "fuel",
}
_WHY_NOT = {
    Aside.BOUND: "the last value is only a bound",
    Aside.NO_HOURS: "the hours of life it was taken at are not known",
    Aside.NO_HOURS_ON_OIL: "the sheet does not state the hours on the oil",
    Aside.NO_TOP_UP: "neither sheet nor log say what was topped up; write 0 on the sheet where nothing was",
    Aside.NO_SUMP: "oil was topped up, and the nameplate does not say what the sump holds",
    Aside.NO_FRESH: "oil was topped up, and what new oil has of it is not known",
    Aside.TOPPED_UP: "oil was topped up, which cannot be corrected for",
}
_BROKEN = {
    Break.FIRST: "",
    Break.OTHER_GAUGE: "another gauge",
    Break.OTHER_FILL: "another fill",
    Break.NO_HOURS_ON_OIL: "fill not known",
}


def measured_row(
    past: MeasuredPast,
    judged: MeasuredRow | None,
    levels: Sequence[Level],
    projection: Projection | None,
    rate: PastRate | None = None,
    *,
    counts_hours: bool,
) -> TrendRow:
    """Flatten a past; `judged` is its newest value as judged on its sheet, None where that is not known."""
    last = past.last
    verdict = judged.verdict if judged is not None else Verdict.NOT_JUDGED
    drawn = [tuple(_dots(one for one in line if not one.is_bound)) for line in past.lines]
    levels = sorted(levels, key=lambda level: level.value)
    return TrendRow(
        name=name_of(past),
        last=_say(last),
        stands=_stands(judged),
        verdict=verdict,
        on=last.sheet.on.isoformat(),
        change=_change(past, counts_hours),
        said=" ".join(_said(past, judged, levels, projection, rate, counts_hours)),
        segments=tuple(dots for dots in drawn if dots),
        limits=tuple((float(one.value), f"{one.severity} {_shown(one.value, past.unit)}") for one in levels),
        left_out=sum(one.at is None for one in past.values),
        ahead=_ahead(past, projection),
        bounds=tuple(_dots(one for one in past.values if one.is_bound)),
        fresh=tuple(Dot(float(at), float(new)) for at, new in new_oil(past).items()),
        rate=_signed(rate.per_100h, past.unit) if rate is not None else "",
        unit=past.unit,
        places=_places_beside(past, levels),
    )


def name_of(past: MeasuredPast) -> str:
    """Give the name a list has room for: 3, Fe iron, visc. 100 °C."""
    if past.point:
        return past.point
    element = ELEMENTS.get(past.quantity)
    return f"{past.quantity} {element}" if element else _SHORT.get(past.quantity, title(past.quantity))


def _dots(values: Iterable[PastMeasure]) -> Iterable[Dot]:
    return (Dot(float(one.at), float(one.figure)) for one in values if one.at is not None)


def _say(one: PastMeasure) -> str:
    return f"{one.measured.evidence.value} {one.measured.unit}".strip()


def _stands(judged: MeasuredRow | None) -> str:
    """Say verdict and side; a figure on its very limit has none."""
    if judged is None:
        return Verdict.NOT_JUDGED
    if judged.measured is None or judged.limit is None or judged.measured == judged.limit:
        return judged.verdict
    return f"{judged.verdict}, {'low' if judged.measured < judged.limit else 'high'}"


def _change(past: MeasuredPast, counts_hours: bool) -> str:
    """Say how a value changed since the one before on its line, and over how long, or why none can be compared."""
    then, last = past.before, past.last
    if isinstance(then, Break):
        return _BROKEN[then]
    if then.is_bound or last.is_bound:
        return "a bound"
    moved = _signed(last.figure - then.figure, past.unit)
    now_at, then_at = (one.sheet.engine_hours for one in (last, then))
    if counts_hours and now_at is not None and then_at is not None:
        return f"{moved} in {say_amount(now_at - then_at, 'h')}"
    return f"{moved} in {(last.sheet.on - then.sheet.on).days} d"


def _said(
    past: MeasuredPast,
    judged: MeasuredRow | None,
    levels: Sequence[Level],
    projection: Projection | None,
    rate: PastRate | None,
    counts_hours: bool,
) -> list[str]:
    """Say all that is worth saying, what matters most first."""
    said = [f"{_headline(past, judged, counts_hours)}.", f"{_first_up(_say_ahead(past, levels, projection))}."]
    if rate is not None:
        by_log = past.last.sheet.logged_top_up
        counted = "top-up" if by_log is None else f"the {plain(by_log)} L topped up by the log"
        how = f"{counted} counted in" if rate.is_corrected else "as read, top-up not counted in"
        said.append(f"Since the oil change {_signed(rate.per_100h, past.unit)} {past.unit} per 100 h, {how}.")
    gauges = list(dict.fromkeys(one.sheet.gauge or "none named" for one in past.values))
    if len(gauges) > 1:
        kind = "laboratories" if is_oil(past) else "gauges"
        said.append(f"Of {len(gauges)} {kind}, each a line of its own ({', '.join(gauges)}): another is not a trend.")
    if levels:
        said.append(f"Limits: {_say_levels(levels, past.unit)}.")
    bounds = sum(one.is_bound for one in past.values)
    if bounds:
        said.append(f"{bounds} below what could be detected, drawn at that and not fitted.")
    if any(one.at is None for one in past.values):
        said.append("Not drawn: sheets before the first reading of the hours.")
    return said


def _headline(past: MeasuredPast, judged: MeasuredRow | None, counts_hours: bool) -> str:
    last = past.last
    subject = f"Cylinder {past.point}" if past.last.sheet.kind == COMPRESSION else _first_up(title(past.quantity))
    hours, on_oil = last.sheet.engine_hours, hours_on_oil(last.sheet)
    at = f" at {say_amount(hours, 'h')}" if counts_hours and hours is not None else ""
    at += f", {say_amount(on_oil, 'h')} on the oil" if is_oil(past) and on_oil is not None else ""
    why = f": {judged.verdict}, {judged.why}" if judged is not None else f": {Verdict.NOT_JUDGED}"
    return f"{subject}, {_say(last)} on {last.sheet.on.isoformat()}{at}{why}"


def _say_ahead(past: MeasuredPast, levels: Sequence[Level], projection: Projection | None) -> str:
    if projection is not None:
        shown = replace(projection, limit=Decimal(_shown(projection.limit, past.unit)))
        said = say_ahead(shown, past.unit, "h")
        is_told = projection.likely is not None or projection.not_before is not None
        return f"{said} on the oil" if is_oil(past) and is_told else said
    aside = past.last.aside
    return f"not projected: {_WHY_NOT[aside] if aside is not None else 'no rule has a limit for it'}"


def _say_levels(levels: Sequence[Level], unit: str) -> str:
    ends = {End.LOW: "low", End.HIGH: "high"}
    named = [f"{ends[one.end]} {one.severity} {_shown(one.value, unit)} {unit}".strip() for one in levels]
    rules = ", ".join(dict.fromkeys(one.rule.id for one in levels))
    return f"{', '.join(named)} ({rules})"


def _ahead(past: MeasuredPast, projection: Projection | None) -> Ahead | None:
    """Give what is drawn beyond the newest value, from the line there, over what it is drawn along."""
    last = past.last
    if projection is None or projection.likely is None or past.along is Along.DAYS or last.at is None:
        return None
    assert projection.trend is not None
    assert projection.early is not None
    assert projection.late is not None
    assert last.x is not None
    further = last.at - last.x
    return Ahead(
        start=Dot(float(last.at), float(projection.trend.value_at(last.x))),
        limit=float(projection.limit),
        early=float(projection.early + further),
        likely=float(projection.likely + further),
        late=float(projection.late + further),
    )


def _shown(value: Decimal, unit: str) -> str:
    """Write a figure as it is, or one that was worked out to one decimal more than is measured."""
    places = PLACES.get(unit, 0) + 1
    return plain(round(value, places))


def _places_beside(past: MeasuredPast, levels: Sequence[Level]) -> int:
    """Give the decimals at the side of a plot: one more where so little lies in sight that figures would be alike."""
    figures = [one.figure for one in past.values] + [level.value for level in levels]
    places = PLACES.get(past.unit, 0)
    return places + (max(figures) - min(figures) < _FEW_STEPS * Decimal(10) ** -places)


def _signed(figure: Decimal, unit: str) -> str:
    shown = _shown(figure, unit)
    return f"+{shown}" if not shown.startswith("-") and shown != "0" else shown


def _first_up(text: str) -> str:
    return text[:1].upper() + text[1:]
