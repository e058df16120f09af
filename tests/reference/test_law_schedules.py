"""Schedules that a law or code stands behind, held to its text.

Work practices: 40 CFR 63 subpart ZZZZ, Tables 2c and 2d, 2015 annual edition; items 2c-8 and 2d-6 are two-stroke and
have no place here, the items left out of both lists are emission limits or catalyst rules. Exercise: NFPA 110, 8.4, as
reported of the 2010 and later editions. Rescue boat: 46 CFR 185.720.
"""

import csv
from pathlib import Path

import pytest

from fleetcare.domain.quantities import Span
from fleetcare.domain.schedules import Combine, Period
from fleetcare.drafts.schedules import read_tasks
from fleetcare.drafts.tasks import TaskDraft
from fleetcare.rulebook.schedules import find_schedule, shipped_schedules

TABLE = Path(__file__).with_name("work_practices.csv").read_text(encoding="utf-8")
PRACTICES = list(csv.DictReader(TABLE.splitlines()))

SET = {draft.name: draft for draft in read_tasks(find_schedule("emergency-exercise"))}
BOAT = {draft.name: draft for draft in read_tasks(find_schedule("rescue-boat-weekly"))}


@pytest.mark.parametrize("row", PRACTICES, ids=lambda row: row["schedule"])
def test_each_work_practice_has_the_hours_of_its_table_item_or_a_year_whichever_is_first(row: dict[str, str]) -> None:
    third = {"compression": "Air cleaner (ZZZZ)", "spark": "Spark plugs (ZZZZ)"}[row["ignition"]]
    shipped = {draft.name: [str(i) for i in draft.every] for draft in read_tasks(find_schedule(row["schedule"]))}
    assert shipped == {
        "Oil and filter (ZZZZ)": [f"{row['oil_h']} h", "12 mo"],
        third: [f"{row['air_or_plugs_h']} h", "12 mo"],
        "Hoses and belts (ZZZZ)": [f"{row['hoses_h']} h", "12 mo"],
    }


@pytest.mark.parametrize("row", PRACTICES, ids=lambda row: row["schedule"])
def test_each_work_practice_names_its_table_item_and_the_edition_read_and_is_no_legal_advice(
    row: dict[str, str],
) -> None:
    schedule = find_schedule(row["schedule"])
    _, table, item = row["schedule"].split("-")
    source = f"40 CFR 63 subpart ZZZZ, Table {table} item {item} (2015 annual edition read)"
    assert {draft.source for draft in read_tasks(schedule)} == {schedule.source} == {source}
    assert schedule.note.startswith("Not legal advice: re-check the current text")


@pytest.mark.parametrize("row", PRACTICES, ids=lambda row: row["schedule"])
def test_work_required_by_law_is_due_by_its_first_interval_without_grace_and_never_deferrable(
    row: dict[str, str],
) -> None:
    assert all(is_strict(draft) for draft in read_tasks(find_schedule(row["schedule"])))


def is_strict(draft: TaskDraft) -> bool:
    """Whether a task leaves no room beyond its interval."""
    return draft.law and not draft.is_deferrable and not draft.grace and draft.combine is Combine.FIRST


def test_every_table_item_that_can_concern_a_four_stroke_engine_is_shipped_and_no_other() -> None:
    shipped = {schedule.id for schedule in shipped_schedules() if "ZZZZ" in schedule.source}
    assert shipped == {row["schedule"] for row in PRACTICES}


@pytest.mark.parametrize("item", ["zzzz-2d-8", "zzzz-2d-10", "zzzz-2d-13"])
def test_items_whose_oil_analysis_the_paragraph_does_not_list_say_so(item: str) -> None:
    """63.6625(j) as printed lists Table 2d items 5, 6, 7, 9 and 11 only."""
    assert "63.6625(j) does not list this item" in find_schedule(item).note


def test_an_emergency_set_is_exercised_once_each_calendar_month_and_proves_it_with_a_run_sheet() -> None:
    monthly = SET["Monthly exercise"]
    assert (monthly.once_each, monthly.needs_sheet, monthly.is_deferrable) == (Period.MONTH, "run", False)
    assert "at least 30 min" in monthly.source
    assert "30 % of the nameplate kW" in monthly.source


def test_the_long_run_of_an_emergency_set_comes_every_36_months_and_cannot_be_deferred() -> None:
    run = SET["36-month run"]
    assert (run.every, run.needs_sheet, run.is_deferrable) == ((Span(36, "mo"),), "run", False)


def test_the_supplemental_load_run_is_due_only_when_called_for() -> None:
    assert SET["Supplemental load run"].on_condition


@pytest.mark.parametrize("name", ["Weekly run", "Starting battery charge"])
def test_a_rescue_boat_is_run_and_its_battery_charged_every_week_by_law(name: str) -> None:
    assert BOAT[name].every == (Span(1, "w"),)
    assert is_strict(BOAT[name])
    assert "46 CFR 185.720" in BOAT[name].source
