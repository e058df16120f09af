"""What a lash point showed over time: which values make a line, which stand aside, and where it was set."""

from datetime import date
from decimal import Decimal

from fleetcare.domain.engines import Bridged, Side, ValveTrain
from fleetcare.domain.meters import Counter, Meter, MeterFit, Reading
from fleetcare.domain.quantities import Kind
from fleetcare.domain.sheets import LashSpec, Phase, Place, Sheet, SheetValue, Verdict
from fleetcare.domain.trends import Check, Point
from fleetcare.rules.lash_past import Aside, PointPast, lash_past, places_of
from fleetcare.rules.lash_points import lash_points
from fleetcare.rules.meters import counter_history
from fleetcare.rules.trends import cut_at_adjustments
from tests.builders import a_counter, day
from tests.rules.test_judge_lash import a_spec, a_value

POINTS = lash_points(ValveTrain(1, 2))
TODAY = day("2026-05-01")


def a_sheet(on: str, *values: SheetValue, entry: int = 1, condition: str = "cold") -> Sheet:
    return Sheet(entry, "lash", day(on), values, condition)


def found(text: str, point: str = "1E") -> SheetValue:
    return a_value(text, point)


def left(text: str, point: str = "1E") -> SheetValue:
    return a_value(text, point, Phase.LEFT)


def past_of(
    *sheets: Sheet,
    point: str = "1E",
    specs: tuple[LashSpec, ...] | None = None,
    at: dict[int, str] | None = None,
) -> PointPast:
    """The past of a point; each sheet lies at 1000 h times its entry unless said otherwise."""
    hours = {sheet.entry: Decimal(1000 * sheet.entry) for sheet in sheets} if at is None else {}
    hours |= {entry: Decimal(figure) for entry, figure in (at or {}).items()}
    pasts = lash_past(POINTS, sheets, (a_spec(),) if specs is None else specs, hours, TODAY)
    return next(past for past in pasts if past.name == point)


def checks(past: PointPast) -> list[tuple[int, str | None, str | None, bool]]:
    return [
        (int(c.x), f"{c.found:f}" if c.found is not None else None, f"{c.left:f}" if c.left is not None else None,
         c.is_adjusted)
        for c in past.checks
    ]  # fmt: skip


def test_found_values_alone_make_one_line() -> None:
    past = past_of(a_sheet("2025-01-01", found("0.45")), a_sheet("2026-01-01", found("0.43"), entry=2))
    assert checks(past) == [(1000, "0.45", None, False), (2000, "0.43", None, False)]
    assert len(cut_at_adjustments(past.checks)) == 1
    assert (past.side, past.valves, past.aside) == (Side.EXHAUST, 1, ())


def test_found_closes_a_segment_and_left_opens_the_next_at_the_same_hours() -> None:
    past = past_of(
        a_sheet("2024-01-01", found("0.45")),
        a_sheet("2025-01-01", left("0.45"), found("0.39"), entry=2),
        a_sheet("2026-01-01", found("0.43"), entry=3),
    )
    first, second = cut_at_adjustments(past.checks)
    assert first.points == (Point(Decimal(1000), Decimal("0.45")), Point(Decimal(2000), Decimal("0.39")))
    assert second.points == (Point(Decimal(2000), Decimal("0.45")), Point(Decimal(3000), Decimal("0.43")))
    assert second.has_left_value
    assert [value.is_left for value in past.values] == [False, False, True, False]


def test_a_left_value_that_equals_the_found_one_is_no_adjustment() -> None:
    past = past_of(a_sheet("2025-01-01", found("0.45"), left("0.450")), a_sheet("2026-01-01", found("0.43"), entry=2))
    assert checks(past) == [(1000, "0.45", None, False), (2000, "0.43", None, False)]
    assert len(past.values) == 2


def test_a_valve_set_without_a_found_value_begins_a_segment() -> None:
    past = past_of(a_sheet("2025-01-01", left("0.45")))
    assert checks(past) == [(1000, None, "0.45", True)]


def test_an_interval_is_drawn_at_its_middle_and_keeps_its_ends() -> None:
    past = past_of(a_sheet("2025-01-01", found("0.45..0.50")))
    assert past.last is not None
    assert (past.last.gap, past.last.ends) == (Decimal("0.475"), (Decimal("0.45"), Decimal("0.50")))
    assert checks(past) == [(1000, "0.475", None, False)]


def test_blades_that_straddle_a_limit_are_drawn_all_the_same() -> None:
    past = past_of(a_sheet("2025-01-01", found("0.38..0.42")))
    assert past.last is not None
    assert (past.last.judged.place, past.last.aside) == (Place.UNDECIDED, None)
    assert past.checks == (Check(Decimal(1000), Decimal("0.4")),)


def test_inches_become_millimetres() -> None:
    past = past_of(a_sheet("2025-01-01", a_value("0.018", "1E", unit="in")))
    assert past.checks == (Check(Decimal(1000), Decimal("0.4572")),)


def test_a_value_taken_hot_stands_aside_and_so_does_one_no_limits_were_known_for() -> None:
    hot = past_of(a_sheet("2025-01-01", found("0.45"), condition="hot"))
    assert [value.aside for value in hot.aside] == [Aside.NOT_JUDGED]
    assert hot.checks == ()
    unlimited = past_of(a_sheet("2025-01-01", found("0.45")), specs=())
    assert [value.aside for value in unlimited.aside] == [Aside.NOT_JUDGED]


def test_what_was_judged_by_limits_for_a_hot_engine_does_not_go_on_with_cold_values() -> None:
    specs = (a_spec(condition="hot"), a_spec(from_on=day("2025-06-01")))
    past = past_of(
        a_sheet("2025-01-01", found("0.45"), condition="hot"),
        a_sheet("2025-02-01", found("0.45"), entry=2, condition=""),
        a_sheet("2026-01-01", found("0.43"), entry=3, condition=""),
        specs=specs,
    )
    assert [value.aside for value in past.values] == [Aside.OTHER_CONDITION, Aside.OTHER_CONDITION, None]
    assert checks(past) == [(3000, "0.43", None, False)]


def test_a_spec_for_any_condition_takes_cold_and_hot_alike() -> None:
    past = past_of(
        a_sheet("2025-01-01", found("0.45"), condition="hot"),
        a_sheet("2026-01-01", found("0.43"), entry=2),
        specs=(a_spec(condition="any"),),
    )
    assert past.aside == ()


def test_a_valve_set_hot_cuts_the_line_and_nobody_knows_what_it_was_left_at_cold() -> None:
    past = past_of(
        a_sheet("2024-01-01", found("0.45")),
        a_sheet("2025-01-01", found("0.38"), left("0.47"), entry=2, condition="hot"),
        a_sheet("2026-01-01", found("0.43"), entry=3),
    )
    assert checks(past) == [(1000, "0.45", None, False), (2000, None, None, True), (3000, "0.43", None, False)]
    assert [segment.has_left_value for segment in cut_at_adjustments(past.checks)] == [True, False]


def test_a_value_nobody_knows_the_hours_of_stands_aside_and_cuts_nothing() -> None:
    past = past_of(
        a_sheet("2024-01-01", found("0.38"), left("0.45")),
        a_sheet("2026-01-01", found("0.43"), entry=2),
        at={2: "2000"},
    )
    assert [value.aside for value in past.values] == [Aside.NO_HOURS, Aside.NO_HOURS, None]
    assert checks(past) == [(2000, "0.43", None, False)]


def test_each_value_is_judged_by_the_spec_of_its_day() -> None:
    wider = {Side.EXHAUST: (Decimal("0.30"), Decimal("0.60"))}
    past = past_of(
        a_sheet("2025-01-01", found("0.38")),
        a_sheet("2026-01-01", found("0.38"), entry=2),
        specs=(a_spec(), a_spec(from_on=day("2025-06-01"), ranges=wider)),
    )
    assert [value.judged.verdict for value in past.values] == [Verdict.ALERT, Verdict.IN]


def test_points_stand_as_given_a_bridge_is_one_and_those_of_older_sheets_come_last() -> None:
    points = lash_points(ValveTrain(1, 4, Bridged.EXHAUST))
    sheet = a_sheet("2025-01-01", found("0.45", "1E1"), found("0.45", "1E"))
    pasts = lash_past(points, [sheet], (a_spec(),), {1: Decimal(10)}, TODAY)
    assert [(past.name, past.valves) for past in pasts] == [("1I1", 1), ("1I2", 1), ("1E", 2), ("1E1", 0)]
    assert pasts[0].last is None


def test_shims_are_no_gap() -> None:
    assert past_of(a_sheet("2025-01-01", a_value("2.50", "1E", quantity="shim"))).values == ()


def test_a_sheet_lies_at_its_entrys_own_reading_else_between_its_neighbours() -> None:
    meter = Meter(1, Kind.HOURS, "h")
    readings = (
        Reading(1, 1, day("2026-01-01"), Decimal(100)),
        Reading(2, 1, day("2026-01-11"), Decimal(110), entry_id=8),
        Reading(3, 1, day("2026-01-11"), Decimal(112)),
        Reading(4, 1, day("2026-01-21"), Decimal(122)),
    )
    hours = counter_history(Counter(Kind.HOURS, Decimal(0), (MeterFit(meter, None, Decimal(0)),), readings), date.max)
    sheets = [
        a_sheet("2025-12-01", entry=7),
        a_sheet("2026-01-11", entry=8),
        a_sheet("2026-01-16", entry=9),
        a_sheet("2026-02-01", entry=10),
    ]
    assert places_of(sheets, hours) == {8: Decimal(110), 9: Decimal(117), 10: Decimal(122)}


def test_without_hours_a_sheet_lies_on_its_day() -> None:
    sheets = [a_sheet("2026-01-01"), a_sheet("2026-01-31", entry=2)]
    places = places_of(sheets, None)
    assert places[2] - places[1] == 30
    assert places_of(sheets, a_counter(("2026-01-01", 50))) == {1: Decimal(50), 2: Decimal(50)}
