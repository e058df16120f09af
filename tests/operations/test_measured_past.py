"""Compression and oil of an engine over its life, as its page shows them: from sheets, readings, tasks and rules as stored."""

from datetime import date

from fleetcare.context import Context
from fleetcare.operations.measured_past import MeasuredTrends
from fleetcare.operations.page import full_page
from fleetcare.rules.trend_row import TrendRow
from tests.operations.importing import TODAY, correct, engine, machine, task
from tests.operations.measure_yard import PRESSURES, take, yard_of_four

HOURS = ("2026-04-01", "2026-04-11", "2026-04-21", "2026-05-01")


def trends(ctx: Context, tag: str = "P-01", on: date = TODAY) -> MeasuredTrends:
    with ctx.read() as connection:
        return full_page(connection, tag, on).measured


def iron(ctx: Context, on: date = TODAY) -> TrendRow:
    return next(row for row in trends(ctx, on=on).oil.rows if row.name == "Fe iron")


def sampled(ctx: Context, *figures: str) -> Context:
    """P-01, sampled every 100 h of one fill, the first at 50 h on the oil."""
    yard_of_four(ctx)
    for place, (on, text) in enumerate(zip(HOURS, figures, strict=False)):
        rows = (f"hours_on_oil,,,{100 * place + 50},h", "top_up,,,0,L", f"Fe,,,{text},ppm")
        take(ctx, "oil", *rows, on=on)
    return ctx


def test_cylinders_stand_over_the_hours_of_life_with_the_rule_that_judges_them(ctx: Context) -> None:
    yard_of_four(ctx)
    take(ctx, "compression", on="2026-04-01")
    take(ctx, "compression", *PRESSURES[:3], "pressure,4,dry,20.6,bar")
    found = trends(ctx).compression
    assert [row.name for row in found.rows] == ["1", "2", "3", "4"]
    assert (found.counts_hours, found.until, found.is_adjusted) == (True, 1300, False)
    assert [[(dot.x, dot.y) for dot in segment] for segment in found.rows[3].segments] == [[(1000, 27.4), (1300, 20.6)]]
    assert [row.stands for row in found.rows] == ["in", "in", "in", "alert, low"]
    assert found.rows[3].limits == ((20.475, "alarm 20.48"),)  # 75 % of 27.3 bar


def test_oil_stands_over_its_own_hours_up_to_what_the_engine_ran_since(ctx: Context) -> None:
    sampled(ctx, "12", "19", "30")
    found = trends(ctx).oil
    assert (found.counts_hours, found.until, found.begins) == (True, 350, (0,))
    assert [dot.x for dot in iron(ctx).segments[0]] == [50, 150, 250]


def test_where_a_sample_does_not_state_its_hours_oil_stands_over_those_of_life(ctx: Context) -> None:
    sampled(ctx, "12", "19")
    take(ctx, "oil", "Fe,,,30,ppm", on="2026-04-21")
    found = trends(ctx).oil
    assert (found.counts_hours, found.until, found.begins) == (True, 1300, ())
    assert [[dot.x for dot in segment] for segment in iron(ctx).segments] == [[1000, 1100], [1200]]


def test_without_a_meter_oil_stands_over_days_where_a_sample_does_not_state_its_hours(ctx: Context) -> None:
    engine(ctx, "P-01", cylinders=2)
    take(ctx, "oil", "Fe,,,30,ppm", on="2026-04-21")
    found = trends(ctx).oil
    assert (found.counts_hours, found.until) == (False, TODAY.toordinal())
    assert [dot.x for dot in iron(ctx).segments[0]] == [date(2026, 4, 21).toordinal()]


def test_as_of_an_earlier_day_later_sheets_are_not_there_and_voided_ones_never(ctx: Context) -> None:
    sampled(ctx, "12", "19", "30")
    assert iron(ctx, date(2026, 4, 12)).last == "19 ppm"
    correct(ctx, 2, void=True, why="other engine")
    assert [dot.x for dot in iron(ctx).segments[0]] == [50, 250]


def test_the_task_that_measures_it_again_says_the_interval(ctx: Context) -> None:
    sampled(ctx, "12", "31", "49", "70")
    assert "reaches 100 ppm" in iron(ctx).said
    task(ctx, "P-01", "Sample", every=["500h"], needs_sheet="oil", last_done=["2026-04-01", "1000h"])
    assert "watched for 300 h, less than one inspection interval of 500 h" in iron(ctx).said


def test_what_was_last_reported_on_an_older_sheet_is_judged_by_that(ctx: Context) -> None:
    sampled(ctx, "250", "19")
    rows = ("hours_on_oil,,,250,h", "top_up,,,0,L", "Cu,,,5,ppm")
    take(ctx, "oil", *rows, on="2026-04-21")
    told = iron(ctx)
    assert (told.on, told.stands) == ("2026-04-11", "in")
    assert [row.name for row in trends(ctx).oil.rows] == ["Fe iron", "Cu copper"]


def test_what_was_never_measured_says_how_and_a_machine_where(ctx: Context) -> None:
    yard_of_four(ctx)
    none = trends(ctx)
    assert none.compression.why_none.startswith("No compression was measured yet.")
    assert none.oil.why_none.endswith("fleetcare measure oil P-01 FILE.")
    take(ctx, "compression")
    assert trends(ctx).oil.why_none == none.oil.why_none
    machine(ctx, "M-1", site="Board Yard")
    assert "M-1 is a machine" in trends(ctx, "M-1").oil.why_none
