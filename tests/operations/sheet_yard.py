"""An engine of two cylinders whose valves are measured, and sheets of it."""

from fleetcare.context import Context
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.sheets import SheetIn
from fleetcare.drafts.work import LogDraft
from fleetcare.errors import Refused
from fleetcare.exchange.sheet_in import sheet_of
from fleetcare.operations.due import due_rows
from fleetcare.operations.find import find_item
from fleetcare.operations.log import Logged, record_work
from fleetcare.operations.measure import Measured, measure
from fleetcare.operations.rows import fetch
from fleetcare.operations.sheets_judge import JudgedSheet, last_sheet
from fleetcare.operations.upkeep import check
from tests.operations.importing import TODAY, engine, reading, task

HEADER = "quantity,point,phase,value,unit"
FOUND_IN = ("lash,1I,found,0.25,", "lash,1E,found,0.45,", "lash,2I,found,0.25,", "lash,2E,found,0.45,")
"""Every point in its range: nothing to set."""

ONE_OUT = (*FOUND_IN[:3], "lash,2E,found,0.36,")
"""The exhaust of cylinder 2 is closing, and was not set."""

LASH = {
    "lash_intake": "0.20-0.30",
    "lash_exhaust": "0.40-0.50",
    "lash_set_intake": "0.25",
    "lash_set_exhaust": "0.45",
    "lash_when": "cold",
}


def sheet(*rows: str) -> SheetIn:
    """A sheet file of some rows."""
    return sheet_of("\n".join([HEADER, *rows]).encode())


def yard_with_valves(ctx: Context, **plate: object) -> Context:
    """P-01 of two cylinders at 1500 h, whose valve lash closes only with its sheet and is part of a bigger service."""
    engine(
        ctx,
        "P-01",
        meter=["hours"],
        **{"cylinders": 2, "valves_per_cylinder": 2, "firing_order": "1-2", **LASH, **plate},
    )
    reading(ctx, "P-01", "2026-05-01", "1500")
    task(ctx, "P-01", "Oil", every=["250h"])
    task(ctx, "P-01", "Lash", every=["1000h"], needs_sheet="lash")
    task(ctx, "P-01", "Big service", every=["2000h"], covers=["Oil", "Lash"])
    return ctx


def take(ctx: Context, *rows: str, on: str = "2026-05-01", **values: object) -> Measured:
    """Measure P-01."""
    with ctx.write() as session:
        draft = read_draft(LogDraft, {"tag": "P-01", "on": on, "sheet": sheet(*rows), **values})
        return measure(session, draft, TODAY)


def lash_of(measured: Measured) -> JudgedSheet:
    """The lash sheet that was measured."""
    assert measured.report.lash is not None
    return measured.report.lash


def do(ctx: Context, *names: str, rows: tuple[str, ...] = FOUND_IN, on: str = "2026-05-01", **values: object) -> Logged:
    """Log work on P-01 with a sheet of some rows."""
    with ctx.write() as session:
        draft = read_draft(LogDraft, {"tag": "P-01", "task": list(names), "on": on, "sheet": sheet(*rows), **values})
        return record_work(session, draft, TODAY)


def newest(ctx: Context) -> JudgedSheet | None:
    """The lash sheet of P-01 that counts now."""
    with ctx.read() as connection:
        return last_sheet(connection, find_item(connection, "P-01"), TODAY)


def verdicts(judged: JudgedSheet | None) -> list[str]:
    """Point and verdict of each value of a sheet, left ones with an asterisk."""
    assert judged is not None
    return [f"{row.point}{'*' if row.phase == 'left' else ''} {row.verdict}" for row in judged.rows]


def open_points(ctx: Context) -> dict[str, str]:
    """The dial figure each task of P-01 is next due at."""
    with ctx.read() as connection:
        return {row.task: str(row.next_due_at) for row in due_rows(connection, TODAY)}


def stored_values(ctx: Context) -> list[tuple[object, ...]]:
    """Every value as the file holds it."""
    with ctx.read() as connection:
        sql = "select point, phase, value, low, high, unit, qualifier from sheet_value order by id"
        return [tuple(row) for row in fetch(connection, sql)]


def refused(ctx: Context, act: object, *args: object, **values: object) -> list[str]:
    """The lines an act is refused with; nothing of it may be stored."""
    before = check(ctx)
    try:
        act(ctx, *args, **values)  # type: ignore[operator]
    except Refused as error:
        assert check(ctx) == before
        return error.lines()
    raise AssertionError("it was not refused")
