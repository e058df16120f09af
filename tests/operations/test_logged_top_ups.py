"""What the log has as topped up stands in where an oil sample does not state it, and never where it has nothing."""

from decimal import Decimal

from fleetcare.context import Context
from fleetcare.domain.trends import Point
from fleetcare.operations.find import find_item
from fleetcare.operations.kept_wears import kept_wears
from fleetcare.operations.measured import load_engine_sheets
from fleetcare.operations.rows import fetch
from tests.operations.importing import TODAY, correct, log
from tests.operations.measure_yard import take
from tests.operations.test_judged import assert_holds, touched_since_kept
from tests.operations.test_judged import files as files  # the fixture
from tests.operations.test_measured_wears import drained, row, samples, working, yard


def silent(ctx: Context, *topped_up: tuple[str, str, str]) -> Context:
    """P-01 whose samples state no top-up, and whose log has some: day, dial figure and amount of each."""
    drained(samples(yard(ctx), "40 80 121 160", topped_up=""), "1000h")
    for on, figure, litres in topped_up:
        log(ctx, on, at=[figure], top_up=litres)
    return ctx


def test_where_samples_state_no_top_up_that_of_the_log_since_the_oil_change_stands_in_and_is_said(ctx: Context) -> None:
    """By hand: 0.8 L of 8 L is x = 0.1, a factor of 1.0508: 42.0, 84.1, 127.2 and 168.1 ppm instead of what was read."""
    assert row(silent(ctx), "Oil").next_due_at == 2200
    log(ctx, "2026-01-01", at=["1200h"], top_up="9L")  # with the oil change itself
    log(ctx, "2026-01-02", at=["1203h"], top_up="0.8L")
    found = row(ctx, "Oil")
    assert found.reason.startswith("pulled forward: Fe iron reaches 200 ppm by ")
    assert "topped up by the log); to be checked" in working(ctx, "Oil")["pulled forward"]
    assert [f"{point.y:.1f}" for point in iron(ctx)] == ["42.0", "84.1", "127.2", "168.1"]


def test_a_sample_since_whose_oil_change_the_log_has_no_top_up_yet_is_left_out_and_not_taken_for_none(
    ctx: Context,
) -> None:
    silent(ctx, ("2026-03-15", "1450h", "0.5L"))
    assert [int(point.x) for point in iron(ctx)] == [1500, 1600]


def test_a_top_up_counts_in_its_unit_as_corrected_and_not_once_it_is_taken_back(ctx: Context) -> None:
    entry = log(silent(ctx), "2026-01-02", at=["1203h"], top_up="8L")
    assert logged(ctx) == 8
    correct(ctx, entry, top_up="0.1galus")
    assert logged(ctx) == Decimal("0.3785411784")
    correct(ctx, newest(ctx), void=True, why="another engine")
    assert logged(ctx) is None


def iron(ctx: Context) -> tuple[Point, ...]:
    """What is fitted of the iron of P-01."""
    with ctx.read() as connection:
        item = find_item(connection, "P-01").id
        wears = kept_wears(connection, TODAY, [item])[item].pulling
    (found,) = (wear for wear in wears if wear.subject == "Fe iron")
    return found.segments[-1].points


def logged(ctx: Context) -> Decimal | None:
    """The litres the log has on the newest sample of P-01."""
    with ctx.read() as connection:
        (found,) = load_engine_sheets(connection, TODAY, [find_item(connection, "P-01").id])
    return found.sheets[-1].logged_top_up


def newest(ctx: Context) -> int:
    """The number of the newest entry of the log."""
    with ctx.read() as connection:
        return int(fetch(connection, "select max(id) from log_entry")[0][0])


def test_a_top_up_touches_its_engine_only_where_its_oil_was_sampled_since(ctx: Context) -> None:
    take(yard(ctx), "oil", "hours_on_oil,,,100,h", "Fe,,,60,ppm", on="2026-03-02")
    assert_holds(ctx)
    log(ctx, "2026-03-03", top_up="1L")
    assert touched_since_kept(ctx) == []
    log(ctx, "2026-03-02", top_up="1L")
    assert touched_since_kept(ctx) == ["P-01"]
    assert_holds(ctx)
