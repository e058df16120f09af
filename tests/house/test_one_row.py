"""The due list as table, CSV and JSON is the same list: the demo fleet, cell for cell."""

import csv
import io
import json
from decimal import Decimal

import pytest

from tests.cli.conftest import Runner
from tests.house.conftest import ROOT

DAYS = ("2026-05-01", "2026-12-01")


def _due(fleetcare: Runner, on: str, form: str) -> str:
    ran = fleetcare("--db", str(ROOT / "demo_fleet.db"), "--as-of", on, "due", "--format", form)
    assert (ran.status, ran.err) == (0, "")
    return ran.out


@pytest.mark.parametrize("on", DAYS)
def test_csv_and_json_agree_cell_for_cell(fleetcare: Runner, on: str) -> None:
    table = list(csv.DictReader(io.StringIO(_due(fleetcare, on, "csv"), newline="")))
    objects = json.loads(_due(fleetcare, on, "json"))
    assert len(table) == len(objects) > 0
    for cells, values in zip(table, objects, strict=True):
        assert list(cells) == list(values)
        for name, value in values.items():
            # A number in JSON is a binary one of 16 digits, which is what a program makes of the CSV's too.
            same = float(cells[name]) == value if isinstance(value, int | float) else cells[name] == (value or "")
            assert same, f"{cells['engine']} {cells['task']}, {name}: {cells[name]!r} and {value!r}"


@pytest.mark.parametrize("on", DAYS)
def test_the_table_shows_every_line_of_the_csv_once_with_its_day_and_what_remains(fleetcare: Runner, on: str) -> None:
    table = list(csv.DictReader(io.StringIO(_due(fleetcare, on, "csv"), newline="")))
    lines = _due(fleetcare, on, "table").splitlines()
    for cells in table:
        (line,) = [line for line in lines if line.startswith(f"{cells['engine']} ") and f"  {cells['task']}  " in line]
        assert cells["next_due_on"] in line
        assert cells["likely_date"] in line
        assert cells["deferred_until"] in line
        if cells["remaining"]:
            assert f"{abs(round(Decimal(cells['remaining']), 1)).normalize():f} {cells['unit']}" in line
    assert len([line for line in lines if "  " in line and not line.startswith(("engine ", "---"))]) == len(table)
