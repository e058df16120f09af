"""The form a lash sheet is filled in by: points, stops of the crank, limits, and each cell judged as typed."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.context import Context
from fleetcare.domain.engines import Bridged, Layout, Side
from fleetcare.domain.sheets import CellKey, Phase
from fleetcare.operations.find import find_item
from fleetcare.operations.sheets_judge import JudgedRow
from fleetcare.operations.sheets_load import LashForm, open_form
from fleetcare.operations.sheets_typed import read_typed
from tests.operations.importing import engine
from tests.operations.sheet_yard import FOUND_IN, LASH, take, yard_with_valves

SIX = {"cylinders": 6, "firing_order": "1-5-3-6-2-4", "valves_per_cylinder": 4, "bridged": "exhaust", **LASH}


def form(ctx: Context) -> LashForm:
    """The form of P-01 today."""
    with ctx.read() as connection:
        return open_form(connection, find_item(connection, "P-01"), date(2026, 5, 1))


def test_a_form_holds_the_engine_as_it_stands_and_the_stops_of_the_crank(ctx: Context) -> None:
    engine(
        ctx,
        "P-01",
        layout="v",
        numbering="alternating",
        adjuster="screw",
        screw_pitch="1.25",
        rocker_ratio="1.4",
        **SIX,
    )
    found = form(ctx)
    assert (found.tag, found.train.bridged, found.train.layout) == ("P-01", Bridged.EXHAUST, Layout.V)
    assert (found.train.adjuster.screw_pitch, found.train.adjuster.rocker_ratio) == (Decimal("1.25"), Decimal("1.4"))
    assert found.banks == ((1, 3, 5), (2, 4, 6))
    assert [point.name for point in found.points[:3]] == ["1I1", "1I2", "1E"]
    assert [len(stop.points) for stop in found.stops] == [9, 9]
    assert found.spec is not None
    assert found.spec.ranges[Side.EXHAUST] == (Decimal("0.40"), Decimal("0.50"))
    assert found.spec.settings[Side.INTAKE] == Decimal("0.25")
    assert (found.last, found.shims, found.notes) == ({}, {}, ())


def test_an_engine_with_nothing_but_cylinders_has_a_form_without_limits_and_order(ctx: Context) -> None:
    engine(ctx, "P-01", cylinders=3)
    found = form(ctx)
    assert (found.spec, found.stops[0].position, found.banks) == (None, None, ((1, 2, 3),))
    assert found.notes == ("P-01 is taken to have 2 valves per cylinder, as nobody stated how many",)


def found(ctx: Context, point: str, text: str) -> JudgedRow:
    """Give the row of a gap found at a point, as judged while it is typed."""
    key = CellKey("lash", point, Phase.FOUND)
    row = read_typed(form(ctx), {key: text}).row(key)
    assert row is not None
    return row


@pytest.mark.parametrize(
    ("point", "phase", "text", "verdict", "note", "last"),
    [
        ("2E", Phase.FOUND, "36", "alert", "0.04 mm below 0.40 to 0.50 mm", "0.45 mm on 2026-04-01"),
        ("2E", Phase.LEFT, "36", "alarm", "0.04 mm below 0.40 to 0.50 mm", ""),
        ("1I", Phase.FOUND, "0,25..0,30", "in", "in 0.20 to 0.30 mm", "0.25 mm on 2026-04-01"),
    ],
)
def test_a_cell_is_judged_as_it_is_typed(
    ctx: Context, point: str, phase: Phase, text: str, verdict: str, note: str, last: str
) -> None:
    yard_with_valves(ctx)
    take(ctx, *FOUND_IN, on="2026-04-01")
    typed = read_typed(form(ctx), {CellKey("lash", point, phase): text}, "cold")
    row = typed.row(CellKey("lash", point, phase))
    assert row is not None
    assert (row.verdict, row.note, row.last, typed.doubts) == (verdict, note, last, {})


def test_a_cell_says_what_mends_it(ctx: Context) -> None:
    yard_with_valves(ctx, adjuster="screw", screw_pitch="1")
    assert found(ctx, "2E", "0.35").mending == "turn the screw 36° looser"


def test_a_cell_knows_the_shim_that_was_fitted(ctx: Context) -> None:
    yard_with_valves(ctx, adjuster="shim", shim_step="0.05")
    take(ctx, "shim,2E,left,2.75,", on="2026-04-01")
    assert found(ctx, "2E", "0.36").mending == "fit a 2.65 mm shim, which leaves 0.46 mm"


def test_a_doubted_cell_says_so_and_is_judged_all_the_same(ctx: Context) -> None:
    yard_with_valves(ctx)
    key = CellKey("lash", "1I", Phase.FOUND)
    typed = read_typed(form(ctx), {key: "3.0"})
    doubt = typed.doubts[key]
    assert doubt.text.startswith("3.0 mm at 1I: it is 3 times the 0.3 mm where its check range ends")
    assert (doubt.is_possible, doubt.meant) == (True, ("0.3",))
    assert found(ctx, "1I", "3.0").verdict == "alert"


def test_what_is_no_gap_is_said_in_words_for_the_cell(ctx: Context) -> None:
    yard_with_valves(ctx)
    key = CellKey("lash", "1I", Phase.FOUND)
    typed = read_typed(form(ctx), {key: "wide", CellKey("lash", "1E", Phase.FOUND): "45"})
    assert str(typed.wrong[key]).startswith("'wide' is not a gap; write it like 0.25")
    assert [row.point for row in typed.judged.rows] == ["1E"]
