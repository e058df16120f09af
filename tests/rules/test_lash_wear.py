"""Lash points as what wears: in the unit of the spec, held to its check range, those of use alone."""

from dataclasses import replace
from decimal import Decimal

from fleetcare.domain.engines import Side, ValveTrain
from fleetcare.domain.measured import MeasuredEngine, MeasuredSheet
from fleetcare.domain.quantities import Kind
from fleetcare.domain.sheets import LashSpec, Sheet, SheetValue
from fleetcare.domain.trends import End
from fleetcare.domain.wear import Wear
from fleetcare.rules.lash_points import lash_points
from fleetcare.rules.lash_wear import lash_shown, lash_wears
from tests.builders import day
from tests.rules.test_lash_past import a_sheet, found, left, past_of

MM = LashSpec(day("2024-01-01"), "mm", "cold", {Side.EXHAUST: (Decimal("0.40"), Decimal("0.50"))})
INCH = LashSpec(day("2024-01-01"), "in", "cold", {Side.EXHAUST: (Decimal("0.016"), Decimal("0.020"))})


def wears(*sheets: Sheet, spec: LashSpec | None = MM, point: str = "1E") -> list[Wear]:
    past = past_of(*sheets, point=point, specs=(spec,) if spec else ())
    return list(lash_wears([past], spec))


def a_value_in(text: str) -> SheetValue:
    """A gap found in inches."""
    return replace(found(text), unit="in")


def test_a_point_wears_over_hours_in_segments_held_to_its_check_range() -> None:
    (wear,) = wears(
        a_sheet("2025-01-01", found("0.45"), entry=1),
        a_sheet("2025-06-01", found("0.39"), left("0.46"), entry=2),
    )
    assert (wear.work, wear.subject, wear.kind, wear.unit) == ("lash", "1E", Kind.HOURS, "mm")
    assert wear.limits == {End.LOW: Decimal("0.40"), End.HIGH: Decimal("0.50")}
    assert [[float(point.y) for point in segment.points] for segment in wear.segments] == [[0.45, 0.39], [0.46]]
    assert wear.measured_on == day("2025-06-01")


def test_figures_typed_in_the_unit_of_the_spec_come_out_as_typed() -> None:
    (wear,) = wears(a_sheet("2025-01-01", a_value_in("0.017")), spec=INCH)
    assert wear.segments[0].points[0].y == Decimal("0.017")


def test_the_day_is_that_of_the_newest_value_on_the_line() -> None:
    (wear,) = wears(
        a_sheet("2025-01-01", found("0.45"), entry=1), a_sheet("2025-06-01", found("0.44"), entry=2, condition="hot")
    )
    assert wear.measured_on == day("2025-01-01")


def test_nothing_wears_without_limits_without_a_range_of_its_side_or_without_a_value_on_its_line() -> None:
    sheet = a_sheet("2025-01-01", found("0.45"))
    assert wears(sheet, spec=None) == []
    assert wears(a_sheet("2025-01-01", found("0.25", "1I")), point="1I") == []
    assert wears(a_sheet("2025-01-01", found("0.45"), condition="hot")) == []
    assert wears() == []


def test_a_point_the_engine_is_no_longer_said_to_have_does_not_wear() -> None:
    assert wears(a_sheet("2025-01-01", found("0.45", "9E")), point="9E") == []


def test_sheets_of_an_engine_show_its_lash_where_their_hours_are_known_and_adjusters_leave_a_gap() -> None:
    engine, points = MeasuredEngine("P-01", cylinders=1), lash_points(ValveTrain(1, 2))
    lash = MeasuredSheet(1, "lash", day("2025-01-01"), (found("0.45"),), engine_hours=Decimal(100), condition="cold")
    unknown = replace(lash, entry=2, on=day("2025-06-01"), engine_hours=None)
    oil = MeasuredSheet(3, "oil", day("2025-06-01"), ())
    on = day("2026-05-01")
    (wear,) = lash_shown((lash, unknown, oil), engine, points, (MM,), on)
    assert [(point.x, point.y) for point in wear.segments[0].points] == [(Decimal(100), Decimal("0.45"))]
    hydraulic = replace(engine, adjuster="hydraulic")
    assert [*lash_shown((lash,), hydraulic, points, (MM,), on), *lash_shown((oil,), engine, points, (MM,), on)] == []
