"""An engine of four cylinders on which everything is measured, and sheets of every kind for it."""

from collections.abc import Mapping

from fleetcare.context import Context
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.work import LogDraft
from fleetcare.operations.find import find_item
from fleetcare.operations.log import Logged, record_work
from fleetcare.operations.measure import Measured, measure
from fleetcare.operations.measured import EngineSheets, load_engine_sheets
from tests.operations.importing import TODAY, engine, reading, task
from tests.operations.sheet_yard import sheet

PRESSURES = tuple(f"pressure,{cylinder},dry,27.{cylinder},bar" for cylinder in range(1, 5))
LEAKS = tuple(f"leak,{cylinder},,{cylinder + 4},%" for cylinder in range(1, 5))
OIL = ("hours_on_oil,,,240,h", "grade,,,15W-40,", "Fe,,,45,ppm", "tbn,,,7.5,", "glycol,,,ND,", "water,,,<0.05,%")
RUN = ("minutes,,,40,", "load,,,45,kW", "purpose,,,test,")
SPOT = ("oil_pressure,,,2.5,bar", "coolant,,,85,")

SHEETS: Mapping[str, tuple[str, ...]] = {
    "compression": PRESSURES,
    "leakdown": LEAKS,
    "run": RUN,
    "spot": SPOT,
    "oil": OIL,
}
"""A complete sheet of each kind."""


def yard_of_four(ctx: Context, **plate: object) -> Context:
    """P-01 of four cylinders, at 1000 h on 1 April and 1300 h on 1 May 2026."""
    engine(
        ctx,
        "P-01",
        meter=["hours"],
        **{"cylinders": 4, "fuel": "diesel", "rated_kw": "90", "sump": "8", "oil_grade": "15W-40", **plate},
    )
    reading(ctx, "P-01", "2026-04-01", "1000")
    reading(ctx, "P-01", "2026-05-01", "1300")
    return ctx


def with_tasks(ctx: Context, *kinds: str) -> Context:
    """P-01 with a task that needs a sheet, for some kinds of it."""
    for kind in kinds:
        task(ctx, "P-01", kind.title(), every=["1000h"], needs_sheet=kind)
    return ctx


def take(ctx: Context, kind: str, *rows: str, tag: str = "P-01", on: str = "2026-05-01", **values: object) -> Measured:
    """Measure an engine."""
    told = {"tag": tag, "on": on, "kind": kind, "sheet": sheet(*(rows or SHEETS[kind])), **values}
    with ctx.write() as session:
        return measure(session, read_draft(LogDraft, told), TODAY)


def do(ctx: Context, *names: str, rows: tuple[str, ...], on: str = "2026-05-01", **values: object) -> Logged:
    """Log work on P-01 with a sheet of some rows, whose kind nobody states."""
    told = {"tag": "P-01", "task": list(names), "on": on, "sheet": sheet(*rows), **values}
    with ctx.write() as session:
        return record_work(session, read_draft(LogDraft, told), TODAY)


def loaded(ctx: Context, tag: str = "P-01") -> EngineSheets:
    """The sheets of an engine as the rules see them."""
    with ctx.read() as connection:
        (found,) = load_engine_sheets(connection, TODAY, [find_item(connection, tag).id])
    return found
