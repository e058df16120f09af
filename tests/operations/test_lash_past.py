"""The lash of an engine over its life, as its page shows it: from sheets, readings and limits as they were stored."""

from datetime import date

import pytest

from fleetcare.context import Context
from fleetcare.errors import Refused
from fleetcare.operations.find import find_item
from fleetcare.operations.lash_past import TrendRow, Trends, load_lash_past
from fleetcare.operations.load import item_facts
from fleetcare.operations.page import full_page
from tests.operations.importing import TODAY, correct, engine, machine, reading
from tests.operations.sheet_yard import FOUND_IN, LASH, do, take, yard_with_valves


def trends(ctx: Context, tag: str = "P-01", on: date = TODAY) -> Trends:
    with ctx.read() as connection:
        return full_page(connection, tag, on).lash


def row(ctx: Context, point: str = "2E") -> TrendRow:
    return next(row for row in trends(ctx).rows if row.name == point)


def measured(ctx: Context) -> Context:
    """P-01 gauged three times: its exhaust 2 closes, is set with the work, and closes again."""
    yard_with_valves(ctx)
    reading(ctx, "P-01", "2024-05-01", "500")
    reading(ctx, "P-01", "2025-05-01", "1000")
    take(ctx, *FOUND_IN, on="2024-05-01", when="cold")
    do(
        ctx,
        "Lash",
        rows=(*FOUND_IN[:3], "lash,2E,found,0.39,", "lash,2E,left,0.46,"),
        on="2025-05-01",
        when="cold",
    )
    take(ctx, *FOUND_IN[:3], "lash,2E,found,0.42,", when="cold")
    return ctx


def test_each_point_stands_over_the_hours_of_life_cut_where_it_was_set(ctx: Context) -> None:
    found = trends(measured(ctx))
    assert [row.name for row in found.rows] == ["1I", "1E", "2I", "2E"]
    assert (found.unit, found.places, found.counts_hours, found.until) == ("mm", 3, True, 1500)
    assert [[(dot.x, dot.y, dot.is_left) for dot in segment] for segment in row(ctx).segments] == [
        [(500, 0.45, False), (1000, 0.39, False)],
        [(1000, 0.46, True), (1500, 0.42, False)],
    ]
    assert (row(ctx).last, row(ctx).change) == ("0.42 mm", "-0.04 over 500 h")


def test_as_of_an_earlier_day_later_sheets_are_not_there(ctx: Context) -> None:
    earlier = trends(measured(ctx), on=date(2024, 12, 1))
    assert [row.on for row in earlier.rows] == ["2024-05-01"] * 4
    assert earlier.until == 500


def test_what_was_corrected_or_voided_is_out_of_the_line(ctx: Context) -> None:
    correct(measured(ctx), 2, void=True, why="other engine")
    assert [len(segment) for segment in row(ctx).segments] == [2]


def test_without_a_meter_for_hours_it_stands_over_days(ctx: Context) -> None:
    engine(ctx, "P-01", cylinders=2, **LASH)
    take(ctx, *FOUND_IN, on="2026-01-01", when="cold")
    take(ctx, *FOUND_IN, when="cold")
    found = trends(ctx)
    assert (found.counts_hours, found.until) == (False, TODAY.toordinal())
    assert [dot.x for dot in row(ctx).segments[0]] == [date(2026, 1, 1).toordinal(), TODAY.toordinal()]


def test_a_meter_never_read_counts_no_hours(ctx: Context) -> None:
    engine(ctx, "P-01", cylinders=2, meter=["hours"], **LASH)
    assert not trends(ctx).counts_hours


def test_points_stand_bank_by_bank_and_a_bridge_is_one(ctx: Context) -> None:
    engine(ctx, "P-01", cylinders=4, layout="v", numbering="alternating", valves_per_cylinder=4, bridged="both", **LASH)
    assert [row.name for row in trends(ctx).rows] == ["1I", "1E", "3I", "3E", "2I", "2E", "4I", "4E"]


def test_the_checks_of_a_point_are_what_a_trend_is_fitted_to(ctx: Context) -> None:
    measured(ctx)
    with ctx.read() as connection:
        item = find_item(connection, "P-01")
        past = load_lash_past(connection, item, item_facts(connection, TODAY, [item.id])[0])
    assert [(float(check.x), check.is_adjusted) for check in past[-1].checks] == [
        (500, False),
        (1000, True),
        (1500, False),
    ]


@pytest.mark.parametrize(
    ("plate", "why"),
    [
        ({"cylinders": 4, "adjuster": "hydraulic"}, "The hydraulic adjusters of P-01 leave no gap to measure; "),
        ({}, "The number of cylinders of P-01 is not known; give it with fleetcare engine edit P-01 --cylinders N."),
    ],
)
def test_without_points_to_measure_it_says_why_and_what_to_do(ctx: Context, plate: dict[str, object], why: str) -> None:
    engine(ctx, "P-01", **plate)
    assert trends(ctx).rows == ()
    assert trends(ctx).why_none.startswith(why)


def test_a_machine_has_no_valves(ctx: Context) -> None:
    machine(ctx, "PH-1")
    assert trends(ctx, "PH-1").why_none == "PH-1 is a machine and has no valves; name one of its engines."
    with ctx.read() as connection:
        item = find_item(connection, "PH-1")
        facts = item_facts(connection, TODAY, [item.id])[0]
        with pytest.raises(Refused):
            load_lash_past(connection, item, facts)


def test_limits_in_inches_are_drawn_in_inches_and_engines_without_any_say_so(ctx: Context) -> None:
    engine(ctx, "P-01", cylinders=2, lash_exhaust="0.016-0.020in")
    assert (trends(ctx).unit, trends(ctx).places) == ("in", 4)
    engine(ctx, "P-02", cylinders=1)
    assert trends(ctx, "P-02").unit == "mm"
    assert [row.stands for row in trends(ctx, "P-02").rows] == ["never measured"] * 2
