"""Laws of the past of a lash point.

Every value either belongs to the line or stands aside with a reason; nothing is lost and nothing comes twice. The order of
values within a sheet never matters. The same gaps in inches give the same line. It is cut wherever the valve was set, and
nowhere else.
"""

from dataclasses import replace
from datetime import date, timedelta
from decimal import Decimal

from hypothesis import given
from hypothesis import strategies as st

from fleetcare.domain.engines import Side, ValveTrain
from fleetcare.domain.sheets import LashSpec, Phase, Sheet, SheetValue
from fleetcare.rules.lash import MM_PER
from fleetcare.rules.lash_past import PointPast, lash_past
from fleetcare.rules.lash_points import lash_points
from fleetcare.rules.trends import cut_at_adjustments

FIRST, TODAY = date(2020, 1, 1), date(2026, 5, 1)
POINTS = lash_points(ValveTrain(1, 2))
INCH = MM_PER["in"]
SPEC = LashSpec(FIRST, "in", "cold", {Side.EXHAUST: (Decimal("0.016"), Decimal("0.020"))})

gaps = st.integers(1, 40).map(lambda n: Decimal(n) / 1000)


@st.composite
def sheets(draw: st.DrawFn) -> list[Sheet]:
    """Sheets of one exhaust, one a month, each found, left or both, cold, hot or nobody said."""
    made = []
    for entry in range(1, draw(st.integers(1, 6)) + 1):
        phases = draw(st.sampled_from([[Phase.FOUND], [Phase.LEFT], [Phase.FOUND, Phase.LEFT]]))
        values = tuple(SheetValue("lash", "1E", phase, draw(gaps), None, None, "in") for phase in phases)
        condition = draw(st.sampled_from(["cold", "hot", ""]))
        made.append(Sheet(entry, "lash", FIRST + timedelta(days=30 * entry), values, condition))
    return made


def past_of(told: list[Sheet]) -> PointPast:
    at = {sheet.entry: Decimal(100 * sheet.entry) for sheet in told}
    return lash_past(POINTS, told, (SPEC,), at, TODAY)[1]


def in_mm(sheet: Sheet) -> Sheet:
    values = tuple(replace(v, value=v.value * INCH, unit="mm") for v in sheet.values if v.value is not None)
    return replace(sheet, values=values)


@given(sheets())
def test_every_value_is_in_the_line_or_aside_and_none_is_lost(told: list[Sheet]) -> None:
    past = past_of(told)
    drawn = sorted(gap for check in past.checks for gap in (check.found, check.left) if gap is not None)
    assert drawn == sorted(value.gap for value in past.values if value.aside is None)
    same = sum(len(s.values) == 2 and s.values[0].value == s.values[1].value for s in told)
    assert len(past.values) + same == sum(len(sheet.values) for sheet in told)


@given(sheets())
def test_the_order_of_values_within_a_sheet_never_matters(told: list[Sheet]) -> None:
    assert past_of([replace(sheet, values=sheet.values[::-1]) for sheet in told]) == past_of(told)


@given(sheets())
def test_the_same_gaps_in_inches_and_millimetres_give_the_same_line(told: list[Sheet]) -> None:
    assert past_of([in_mm(sheet) for sheet in told]).checks == past_of(told).checks


@given(sheets())
def test_a_line_is_cut_wherever_the_valve_was_set_and_nowhere_else(told: list[Sheet]) -> None:
    past = past_of(told)
    points = [len(segment.points) for segment in cut_at_adjustments(past.checks)]
    assert sum(points) == sum(value.aside is None for value in past.values)
    assert sum(check.is_adjusted for check in past.checks) == sum(value.is_left for value in past.values)
