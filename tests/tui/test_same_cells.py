"""Screen, table, CSV and JSON show the same cells: all are drawn from one flat row."""

import csv
import json
from decimal import Decimal
from pathlib import Path

from fleetcare.tui.due_columns import COLUMNS
from fleetcare.tui.screens.due import DueScreen
from tests.tui.conftest import Opened, seen, type_in

# Columns of the screen whose cells stand in the CSV and JSON as they are.
SAME = {"ENGINE": "engine", "TASK": "task", "BY DAY": "next_due_on", "LIKELY": "likely_date", "SITE": "site"}


def signed(left: str) -> tuple[Decimal, str]:
    """Read "12 h over" as -12 and h."""
    number, unit, way = left.split()
    return Decimal(number) * (-1 if way == "over" else 1), unit


async def test_the_due_list_csv_json_table_and_the_screen_agree_cell_for_cell(opened: Opened, db: Path) -> None:
    for form in ("csv", "json", "table"):
        type_in(db, "due", "--format", form, "--out", str(db.with_suffix(f".{form}")))
    with db.with_suffix(".csv").open(encoding="utf-8", newline="") as file:
        rows = {(row["engine"], row["task"]): row for row in csv.DictReader(file)}
    objects = {(row["engine"], row["task"]): row for row in json.loads(db.with_suffix(".json").read_text())}
    table = db.with_suffix(".table").read_text().splitlines()
    async with opened(size=(250, 60)) as pilot:
        assert isinstance(pilot.app.screen, DueScreen)
        screen = [{column.title: column.text_of(line) for column in COLUMNS} for line in pilot.app.screen.shown]
        lines = seen(pilot)
    assert len(screen) == len(rows) == len(objects) == 11
    for cells in screen:
        key = cells["ENGINE"], cells["TASK"]
        row, value = rows[key], objects[key]
        assert [line for line in lines if all(cell in line for cell in cells.values())], f"{key} is cut"
        for title, name in SAME.items():
            assert cells[title] == row[name] == (value[name] or ""), (key, title)
        assert cells["   STATE"].split()[1] == (row["estimated"] if cells["   STATE"][0] == "~" else row["state"])
        if row["next_due_dial"]:
            assert cells["DIAL"].split()[0] == f"{round(Decimal(row['next_due_dial']), 1).normalize():f}", key
            assert cells["DIAL"].split()[1] == row["meter_unit"]
        if row["remaining"]:
            assert signed(cells["LEFT"]) == (round(Decimal(row["remaining"]), 1), row["unit"]), key
        (printed,) = [line for line in table if line.startswith(f"{key[0]} ") and f"  {key[1]}  " in line]
        assert all(cells[title] in printed for title in ("SITE", "BY DAY", "LEFT", "LIKELY")), key
        assert cells["DIAL"] in printed
