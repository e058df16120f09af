"""A sheet while it is typed is judged as it is once it is stored: the same verdicts, the same findings, the same words."""

from collections.abc import Mapping, Sequence
from datetime import date
from decimal import Decimal
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.domain.meters import LifeFigure
from fleetcare.domain.quantities import parse_dial
from fleetcare.domain.sheets import CellKey, Phase
from fleetcare.drafts.fields import parse_litres
from fleetcare.drafts.findings import RulesDraft
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.work import MeasureDraft
from fleetcare.operations.entering import enter_measured
from fleetcare.operations.find import find_item
from fleetcare.operations.findings import EngineFinding
from fleetcare.operations.measures_typed import open_measures
from fleetcare.operations.measures_typed import read_typed as read_measures
from fleetcare.operations.sheet_ahead import EntryAhead, SheetAhead, sheet_ahead
from fleetcare.operations.sheet_report import SheetReport, report_sheet
from fleetcare.operations.sheets_load import open_form
from fleetcare.operations.sheets_typed import findings_on, read_typed
from fleetcare.operations.shop_rules import store_rules, try_rules
from tests.operations.importing import TODAY, log
from tests.operations.measure_yard import SPOT, do, take, yard_of_four
from tests.operations.sheet_yard import LASH, sheet

BEFORE = ("hours_on_oil,,,100,h", "top_up,,,0,L", "grade,,,15W-40,", "Fe,,,10,ppm", "Cu,,,4,ppm", "Fe,,new,1,ppm")
OIL = (
    *("hours_on_oil,,,110,h", "top_up,,,0,L", "grade,,,15W-40,", "Fe,,,60,ppm", "Cu,,,70,ppm", "Fe,,new,1,ppm"),
    *("kv100,,,9.1,cSt", "tbn,,,2.4,", "water,,,0.3,%", "glycol,,,ND,", "soot,,,1.1,%", "Na,,,80,ppm", "K,,,30,ppm"),
)
COMPRESSION = tuple(f"pressure,{cylinder},dry,{bar},bar" for cylinder, bar in enumerate((27, 27, 17, 26), 1))
FALLING = tuple(row.replace(",17,", ",24.5,") for row in COMPRESSION)
GAPS = tuple(
    f"lash,{cylinder}{side},found,{gap},mm"
    for cylinder, gaps in enumerate((("0.25", "0.45"), ("0.25", "0.45"), ("0.25", "0.30"), ("0.25", "0.45")), 1)
    for side, gap in zip("IE", gaps, strict=True)
)


FALL = """
[[rule]]
id = "own-fall"
kinds = "compression"
quantity = "pressure"
unit = "bar"
rate = { since = "before", per = 100 }
low = { alarm = { beyond = -1 } }
cause = "falling compression"
message = "rings or valves going"
next_step = "test again"
source = "shop rule 7"
"""


@pytest.fixture
def yard(ctx: Context, tmp_path: Path) -> Context:
    """P-01 at 1300 h on 1 May, with an oil sample, a compression and a lash sheet of April."""
    yard_of_four(ctx, firing_order="1-3-4-2", valves_per_cylinder=2, **LASH)
    take(ctx, "oil", *BEFORE, on="2026-04-10", at=["1090"])
    take(ctx, "compression", *(row.replace(",17,", ",26,") for row in COMPRESSION), on="2026-04-10")
    take(ctx, "lash", *(row.replace("0.30", "0.44") for row in GAPS), on="2026-04-10")
    own = tmp_path / "fall.toml"
    own.write_text(FALL)
    with ctx.write() as session:
        rejudged = try_rules(session.connection(), own, TODAY)
        store_rules(session, rejudged, read_draft(RulesDraft, {"why": "old engines", "by": "Quill", "on": TODAY}))
    return ctx


def cells(rows: Sequence[str]) -> dict[CellKey, str]:
    """The rows of a sheet as somebody types them."""
    parts = [row.split(",") for row in rows]
    return {CellKey(name, point, Phase(phase)): f"{value} {unit}".strip() for name, point, phase, value, unit in parts}


def ahead(ctx: Context, kind: str, on: str, *at: str, **explained: bool) -> SheetAhead:
    """What a sheet of P-01 will be judged by."""
    entry = EntryAhead(tuple(map(parse_dial, at)), explained)
    with ctx.read() as connection:
        return sheet_ahead(connection, find_item(connection, "P-01"), kind, date.fromisoformat(on), TODAY, entry)


def typed(
    ctx: Context, kind: str, rows: Sequence[str], on: str, *at: str
) -> tuple[Mapping[CellKey, tuple[str, ...]], tuple[EngineFinding, ...], LifeFigure | None]:
    """What is said of a sheet before it is stored: each value with its verdict and words, the findings, its hours."""
    day = date.fromisoformat(on)
    with ctx.read() as connection:
        item = find_item(connection, "P-01")
        if kind == "lash":
            read = read_typed(open_form(connection, item, day), {key: text[:4] for key, text in cells(rows).items()})
            found = ahead(ctx, kind, on, *at)
            told = {CellKey(r.quantity, r.point, Phase(r.phase)): (r.verdict, r.note) for r in read.judged.rows}
            return told, findings_on(found, read), found.hours
        opened = open_measures(connection, item, kind, day, TODAY, EntryAhead(tuple(map(parse_dial, at))))
    whole = read_measures(opened, cells(rows))
    return {key: (row.verdict, row.why) for key, row in whole.rows.items()}, whole.findings, opened.ahead.hours


def told_of(report: SheetReport) -> Mapping[CellKey, tuple[str, ...]]:
    """What is said of each value of a stored sheet."""
    if report.lash is not None:
        return {CellKey(r.quantity, r.point, Phase(r.phase)): (r.verdict, r.note) for r in report.lash.rows}
    return {CellKey(row.quantity, row.point, Phase(row.phase)): (row.verdict, row.why) for row in report.rows}


SHEETS = (("oil", OIL), ("compression", COMPRESSION), ("lash", GAPS))
DAYS = (("2026-04-20", ()), ("2026-04-20", ("1100",)), ("2026-05-01", ()), ("2026-05-01", ("1300.5",)))


@pytest.mark.parametrize(("on", "at"), DAYS)
@pytest.mark.parametrize(("kind", "rows"), SHEETS)
def test_what_is_said_while_typing_is_what_is_said_once_it_is_stored(
    yard: Context, kind: str, rows: tuple[str, ...], on: str, at: tuple[str, ...]
) -> None:
    told, findings, hours = typed(yard, kind, rows, on, *at)
    report = take(yard, kind, *rows, on=on, at=list(at)).report
    assert told == told_of(report)
    assert [one.row for one in findings] == [one.row for one in report.findings]
    assert hours == report.engine_hours
    assert findings


def test_a_top_up_of_the_log_stands_in_for_one_not_typed_as_it_does_once_it_is_stored(yard: Context) -> None:
    """By hand: 15 ppm of copper in 110 h, 0.8 L into a sump of 8 L: 15 x 1.0508 / 1.1 = 14.33 ppm per 100 h."""
    log(yard, "2026-04-15", top_up="0.8L")
    rows = ["hours_on_oil,,,110,h", "grade,,,15W-40,", "Cu,,,15,ppm"]
    told, findings, _ = typed(yard, "oil", rows, "2026-04-20", "1100")
    report = take(yard, "oil", *rows, on="2026-04-20", at=["1100"]).report
    assert told == told_of(report)
    assert [one.row for one in findings] == [one.row for one in report.findings]
    (copper,) = findings
    assert round(copper.row.measured or 0, 2) == Decimal("14.33")
    assert "topped up by the log 0.8 L" in copper.row.working[0]


def falls(findings: Sequence[EngineFinding]) -> list[Decimal | None]:
    """The rates, in bar per 100 h, that are called out."""
    return [one.row.measured for one in findings if one.row.cause == "falling compression"]


def test_a_rate_is_judged_by_the_figure_typed_before_anything_is_stored(yard: Context) -> None:
    _, findings, _ = typed(yard, "compression", FALLING, "2026-04-20", "1140")
    # By hand: 1140 h typed, 1090 h then; 24.5 - 26 bar in 50 h is -3 bar per 100 h.
    assert falls(findings) == [Decimal(-3)]


def test_without_a_figure_a_rate_is_judged_by_what_lies_between_readings(yard: Context) -> None:
    _, findings, hours = typed(yard, "compression", FALLING, "2026-04-20")
    # By hand: 1090 h on 10 April and 1300 h on 1 May are 10 h a day, so 1190 h on 20 April: -1.5 bar in 100 h.
    assert hours == LifeFigure(Decimal(1190), approximate=True)
    assert falls(findings) == [Decimal("-1.5")]


def test_a_figure_typed_tells_the_hours_of_sheets_before_it_too(yard: Context) -> None:
    take(yard, "spot", *SPOT, on="2026-04-15")
    told = [
        one.engine_hours
        for figures in ((), ("1110",))
        for one in ahead(yard, "oil", "2026-04-20", *figures).found.sheets
        if one.kind == "spot"
    ]
    # By hand: 1090 h on 10 April; to 1300 h on 1 May it is 10 h a day, to the 1110 h typed for 20 April 2 h a day.
    assert told == [Decimal(1140), Decimal(1100)]


def test_oil_topped_up_along_with_the_sample_counts_as_it_does_once_it_is_stored(yard: Context) -> None:
    rows = ["hours_on_oil,,,110,h", "grade,,,15W-40,", "Cu,,,15,ppm"]
    entry = EntryAhead((parse_dial("1100"),), topped_up=parse_litres("0.8L"))
    with yard.read() as connection:
        item = find_item(connection, "P-01")
        opened = open_measures(connection, item, "oil", date(2026, 4, 20), TODAY, entry)
    found = read_measures(opened, cells(rows)).findings
    logged = do(yard, rows=tuple(rows), on="2026-04-20", at=["1100"], top_up="0.8L")
    assert logged.sheet is not None
    with yard.read() as connection:
        stored = report_sheet(connection, item, logged.sheet.entry, TODAY)
    assert [one.row for one in found] == [one.row for one in stored.findings]
    assert "topped up by the log 0.8 L" in found[0].row.working[0]


def test_a_figure_that_pushes_older_ones_aside_gives_the_hours_as_storing_it_does(yard: Context) -> None:
    found = ahead(yard, "spot", "2026-04-25", "1700", sure=True)
    with yard.write() as session:
        draft = read_draft(
            MeasureDraft, {"tag": "P-01", "on": "2026-04-25", "at": ["1700"], "kind": "spot", "sheet": sheet(*SPOT)}
        )
        entered = enter_measured(session, draft, "spot", TODAY, {"sure": True})
        assert entered.logged is not None
        assert entered.logged.sheet is not None
        stored = report_sheet(session.connection(), entered.logged.item, entered.logged.sheet.entry, TODAY)
    assert found.hours == stored.engine_hours
    assert stored.engine_hours is not None
    assert stored.engine_hours.value == Decimal(1700)
