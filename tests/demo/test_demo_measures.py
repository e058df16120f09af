"""What was measured on the demo fleet: of each engine with a fault the rule book names that very fault, and nothing else."""

import shutil
from decimal import Decimal
from fractions import Fraction
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.demo.fleet import ITEMS
from fleetcare.demo.history import history
from fleetcare.demo.oil import Sampled, samples
from fleetcare.demo.steps import Step
from fleetcare.demo.use import is_proving
from fleetcare.domain.measured import SHEET_KINDS
from fleetcare.drafts.sheets import SheetIn
from fleetcare.operations.due import Filters, due_lines
from fleetcare.operations.families import Families
from fleetcare.operations.find import find_item
from fleetcare.operations.finding_rows import finding_rows
from fleetcare.operations.kin import Kin
from fleetcare.operations.rows import fetch
from fleetcare.rules.due.row import due_row
from tests.demo.test_demo_fleet import ANCHOR, COMMITTED
from tests.demo.true_causes import HEALTHY, TRUE, Cause, standing

FAMILIES = {"pumps": ("PS-01", "PS-02", "PS-03", "PS-06", "PS-09"), "diggers": ("EX-1", "LD-1", "TH-1")}
ENOUGH = 50
"""Samples of relatives from which on rules judge by them, see rulebook/rules/oil-statistics.toml."""


@pytest.fixture(scope="module")
def fleet(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The committed fleet, copied: asking for findings may write down what was worked out."""
    path = tmp_path_factory.mktemp("fleet") / "demo.db"
    shutil.copy(COMMITTED, path)
    return path


@pytest.fixture(scope="module")
def found(fleet: Path) -> dict[str, list[Cause]]:
    return standing(fleet, ANCHOR)


@pytest.mark.parametrize("tag", TRUE)
def test_the_one_finding_on_an_engine_with_a_fault_is_its_true_cause(tag: str, found: dict[str, list[Cause]]) -> None:
    assert found[tag] == [TRUE[tag]]


@pytest.mark.parametrize("tag", HEALTHY)
def test_nothing_is_found_on_a_healthy_engine(tag: str, found: dict[str, list[Cause]], fleet: Path) -> None:
    with Context(str(fleet), ANCHOR).read() as connection:
        item = find_item(connection, tag)
        assert fetch(connection, "select 1 from sheet where item_id = :item and kind <> 'lash'", item=item.id)
    assert tag not in found


def test_most_engines_are_healthy(found: dict[str, list[Cause]]) -> None:
    engines = sum(item.is_engine for item in ITEMS)
    assert found.keys() == TRUE.keys()
    assert len(found) < engines / 2


def test_sheets_of_every_kind_were_taken_and_oil_over_years(fleet: Path) -> None:
    with Context(str(fleet), ANCHOR).read() as connection:
        kinds = {row[0] for row in fetch(connection, "select distinct kind from sheet")}
        spans = fetch(
            connection,
            "select julianday(max(taken_on)) - julianday(min(taken_on)) from sheet where kind = 'oil' group by item_id",
        )
    assert kinds == {*SHEET_KINDS}
    assert sum(row[0] > 540 for row in spans) >= 12


@pytest.mark.parametrize("tags", FAMILIES.values(), ids=FAMILIES)
def test_two_families_are_large_enough_to_speak(tags: tuple[str, ...], fleet: Path) -> None:
    with Context(str(fleet), ANCHOR).read() as connection:
        ids = [find_item(connection, tag).id for tag in tags]
        kin, families = Kin(connection), Families(connection, ANCHOR)
        assert {*ids} <= {*kin.of(ids[0])}
        for item in ids:
            newest = fetch(
                connection, "select max(taken_on) from sheet where item_id = :item and kind = 'oil'", item=item
            )
            on = ANCHOR.fromisoformat(newest[0][0])
            assert len(families.of(item, on).before(on)["Fe"]) >= ENOUGH


def test_the_dust_in_the_oil_has_silicon_and_aluminium_as_dust_has_them() -> None:
    """3 to 7 of silicon for one of aluminium, what new oil has taken off (reference: oxides of ISO 12103-1 test dust)."""
    newest = oil_sheets("EX-1")[-1]
    assert 3 <= Fraction(newest["Si"] - 4) / Fraction(newest["Al"] - 1) <= 7
    assert newest["Cr"] <= 5


def test_coolant_lead_and_liner_metals_rise_with_what_belongs_to_them() -> None:
    for tag, rising, quiet in (
        ("PS-09", ("Na", "K", "Cu", "water"), ("Pb", "Sn")),
        ("PS-07", ("Pb", "Sn", "Cu"), ("Na", "K")),
        ("LD-1", ("Fe", "Cr", "Al"), ("Si", "Pb")),
    ):
        first, *_, last = (sheet for sheet in oil_sheets(tag) if rising[-1] in sheet)
        assert all(last[name] > 2 * first[name] for name in rising), tag
        assert all(last[name] < 2 * first[name] + 6 for name in quiet), tag


def test_the_set_near_its_yearly_hours_has_run_more_than_nine_tenths_of_them_and_not_all() -> None:
    """Nine Thursdays of ten hours and the monthly runs; 40 CFR 63.6640(f) gives 100 h of a calendar year."""
    minutes = [
        Decimal(row.cells["value"])
        for step in sheet_steps("SB-04", "run")
        if step.on.year == ANCHOR.year
        for row in sheet_of(step).rows
        if row.cells["quantity"] == "minutes"
    ]
    assert 90 * 60 <= sum(minutes) < 100 * 60
    first = ANCHOR.replace(month=1, day=1)
    days = [first.fromordinal(first.toordinal() + number) for number in range(365)]
    assert sum(map(is_proving, days)) == 9


def test_one_finding_is_accepted_with_its_reason_and_one_waits_as_a_line_of_the_due_list(fleet: Path) -> None:
    with Context(str(fleet), ANCHOR).read() as connection:
        rows = {(row.engine, row.state): row for row in finding_rows(connection, ANCHOR)}
        lines = [due_row(*pair) for pair in due_lines(connection, ANCHOR, Filters(engine="LE-4"))]
    assert "load bank" in rows["SB-01", "accepted"].because
    assert rows["LE-4", "follow-up raised"]
    assert any(line.task == "Head gasket between two cylinders, cylinders 3 and 4" for line in lines)


def test_a_sound_engine_takes_every_step_of_a_figure_once_in_five_samples() -> None:
    reports = list(samples("P-01", Sampled(), [None] * 10))
    for begin in (0, 5):
        assert sorted(figures(sheet)["Fe"] for sheet in reports[begin : begin + 5]) == [20, 23, 26, 29, 32]


def test_the_same_day_tells_the_same_sheets() -> None:
    assert oil_sheets("EX-1") == oil_sheets("EX-1")


def sheet_steps(tag: str, kind: str) -> list[Step]:
    items = [item for item in ITEMS if item.tag == tag]
    return [step for step in history(ANCHOR, items) if step.values.get("kind") == kind]


def sheet_of(step: Step) -> SheetIn:
    sheet = step.values["sheet"]
    assert isinstance(sheet, SheetIn)
    return sheet


def oil_sheets(tag: str) -> list[dict[str, Decimal]]:
    """The figures of the oil samples of an engine, oldest first."""
    return [figures(sheet_of(step)) for step in sorted(sheet_steps(tag, "oil"), key=lambda step: step.on)]


def figures(sheet: SheetIn) -> dict[str, Decimal]:
    """The figures of a sheet, a bound as its figure, by quantity."""
    cells = [row.cells for row in sheet.rows if row.cells.get("phase") != "new" and row.cells["value"][-1].isdigit()]
    return {cell["quantity"]: Decimal(cell["value"].lstrip("<")) for cell in cells}
