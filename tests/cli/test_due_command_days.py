"""`due` on other days and in other conditions: as of past and future, laid up, stood down, withdrawn, estimated."""

import csv
import io
from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import PUMP

Opener = Callable[[str], Runner]

WEEKLY = """
    engine add P-01 --site "North Sluice" --meter hours --in-service 2026-01-04 --start-at 0 --as-new
    reading P-01 70 --on 2026-01-11
    reading P-01 140 --on 2026-01-18
    reading P-01 210 --on 2026-01-25
    reading P-01 280 --on 2026-02-01
    reading P-01 350 --on 2026-02-08
    task add P-01 Oil --every 500h
    task add P-01 Cert --every 12mo --law
"""
"""An engine that runs 10 h a day, read each week until 8 February."""

LAID_UP = (
    PUMP
    + """
    task add P-01 Coolant --every 3mo --last-done 2026-03-01 --pause-while-laid-up
    task add P-01 Cert --every 2mo --last-done 2026-02-15
    engine lay-up P-01 --on 2026-04-11 --why winter --by Fenn
"""
)


def lines(text: str) -> dict[str, dict[str, str]]:
    """Read a CSV answer, by task."""
    return {row["task"]: row for row in csv.DictReader(io.StringIO(text, newline=""))}


@pytest.fixture
def weekly(open_yard: Opener) -> Runner:
    """An engine whose use can be forecast."""
    return open_yard(WEEKLY)


def test_a_counted_line_says_early_likely_and_late_day(weekly: Runner) -> None:
    line = lines(weekly("due", "--as-of", "2026-02-08", "--format", "csv").out)["Oil"]
    assert line["early_date"] <= line["likely_date"] <= line["late_date"]
    assert line["likely_date"] == "2026-02-23"


def test_a_calendar_line_has_its_day_for_all_three(weekly: Runner) -> None:
    line = lines(weekly("due", "--as-of", "2026-02-08", "--format", "csv").out)["Cert"]
    assert {line["early_date"], line["likely_date"], line["late_date"], line["next_due_on"]} == {"2027-01-04"}


def test_recorded_only_leaves_estimates_and_forecasts_of_meters_out(weekly: Runner) -> None:
    found = lines(weekly("due", "--recorded-only", "--format", "csv").out)
    oil = found["Oil"]
    assert (oil["estimated"], oil["early_date"], oil["likely_date"], oil["late_date"]) == ("", "", "", "")
    assert found["Cert"]["likely_date"] == "2027-01-04"


def test_a_stale_meter_estimates_and_what_is_probably_due_is_listed_apart(weekly: Runner) -> None:
    ran = weekly("due", "--as-of", "2026-03-01")
    assert ran.out.startswith("PROBABLY DUE BY ESTIMATE (1)\n")
    assert "by estimate overdue" in ran.out
    line = lines(weekly("due", "--as-of", "2026-03-01", "--format", "csv").out)["Oil"]
    assert (line["state"], line["remaining"], line["estimated"]) == ("clear", "150", "overdue")


def test_for_a_future_day_the_calendar_moves_on_and_counted_lines_stay_by_record(weekly: Runner) -> None:
    line = lines(weekly("due", "--as-of", "2127-02-01", "--format", "csv").out)
    assert (line["Cert"]["state"], line["Cert"]["estimated"]) == ("overdue", "")
    assert (line["Oil"]["state"], line["Oil"]["estimated"]) == ("clear", "overdue")


def test_as_of_a_past_day_nothing_later_is_seen_whenever_it_was_written_down(weekly: Runner) -> None:
    weekly("log", "P-01", "Oil", "--at", "450", "--on", "2026-02-20")
    weekly("reading", "P-01", "75", "--on", "2026-01-12")
    line = lines(weekly("due", "--as-of", "2026-01-12", "--format", "csv").out)["Oil"]
    assert (line["next_due_at"], line["remaining"]) == ("500", "425")


def test_before_its_first_day_in_service_an_engine_has_no_lines_even_by_name(weekly: Runner) -> None:
    for words in (("due",), ("due", "--engine", "P-01")):
        assert lines(weekly(*words, "--as-of", "2026-01-03", "--format", "csv").out) == {}


def test_lines_of_a_laid_up_engine_stand_before_return_with_their_states(open_yard: Opener) -> None:
    ran = open_yard(LAID_UP)("due")
    assert [line for line in ran.out.splitlines() if line.isupper()] == ["BEFORE RETURN (4)"]
    assert any(line.startswith("P-01") and line.endswith("overdue") for line in ran.out.splitlines())


def test_in_csv_a_laid_up_line_keeps_its_state_and_says_so(open_yard: Opener) -> None:
    cert = lines(open_yard(LAID_UP)("due", "--format", "csv").out)["Cert"]
    assert (cert["state"], cert["engine_status"], cert["next_due_on"]) == ("overdue", "laid up", "2026-04-15")


def test_the_calendar_of_a_pausing_task_moves_a_day_for_each_day_laid_up(open_yard: Opener) -> None:
    found = open_yard(LAID_UP)
    # 11 to 30 April and 1 May: 21 days so far
    assert lines(found("due", "--format", "csv").out)["Coolant"]["next_due_on"] == "2026-06-22"
    assert lines(found("due", "--as-of", "2026-05-02", "--format", "csv").out)["Coolant"]["next_due_on"] == "2026-06-23"


def test_what_a_laid_up_engine_will_run_is_not_forecast(weekly: Runner) -> None:
    weekly("engine", "lay-up", "P-01", "--on", "2026-02-09")
    line = lines(weekly("due", "--as-of", "2026-02-10", "--format", "csv").out)["Oil"]
    assert (line["likely_date"], line["estimated"]) == ("", "")


def test_lines_of_an_engine_stood_down_stay_and_are_marked(open_yard: Opener) -> None:
    pump = open_yard(PUMP)
    pump("engine", "stand-down", "P-01", "--why", "crack")
    ran = pump("due")
    assert ran.out.startswith("DUE (1)\n")
    assert ran.out.count("stood down: not to be run") == 2
    assert lines(pump("due", "--format", "csv").out)["Valve lash"]["engine_status"] == "stood down"


def test_a_withdrawn_engine_has_no_lines_from_its_day_on_and_had_them_before(open_yard: Opener) -> None:
    pump = open_yard(PUMP)
    pump("engine", "withdraw", "P-01", "--on", "2026-04-20")
    assert pump("due").out.startswith("No lines.\n")
    assert len(lines(pump("due", "--as-of", "2026-04-19", "--format", "csv").out)) == 2
    assert len(lines(pump("due", "--as-of", "2026-04-19", "--engine", "P-01", "--format", "csv").out)) == 2
    assert pump("due", "--engine", "P-01").status == 1


def test_a_tag_used_again_names_the_engine_of_the_day_asked_about(open_yard: Opener) -> None:
    pump = open_yard(PUMP)
    pump("engine", "withdraw", "P-01", "--on", "2026-04-20")
    pump("engine", "add", "P-01", "--meter", "hours", "--in-service", "2026-04-25", "--start-at", "5", "--as-new")
    pump("task", "add", "P-01", "Bolts", "--every", "50h")
    assert set(lines(pump("due", "--engine", "P-01", "--format", "csv").out)) == {"Bolts"}
    before = pump("due", "--engine", "P-01", "--as-of", "2026-04-10", "--format", "csv").out
    assert set(lines(before)) == {"Oil and filter", "Valve lash"}
    assert "counted as new" in pump("show", "P-01").out
    assert "2024-01-10" in pump("show", "P-01", "--as-of", "2026-04-10").out


def test_a_covered_line_names_the_job_it_is_done_with_and_stays_in_the_list(open_yard: Opener) -> None:
    pump = open_yard(PUMP)
    pump("task", "add", "P-01", "Big service", "--every", "1100h", "--covers", "Oil and filter")
    found = lines(pump("due", "--format", "csv").out)
    assert found["Oil and filter"]["covered_by"] == "Big service"
    assert "with Big service" in pump("due").out


def test_a_line_past_its_point_is_not_shown_as_covered(open_yard: Opener) -> None:
    pump = open_yard(PUMP)
    pump("task", "add", "P-01", "Belt", "--every", "900h", "--last-done", "50")
    pump("task", "add", "P-01", "Big service", "--every", "1100h", "--covers", "Belt")
    found = lines(pump("due", "--format", "csv").out)
    assert (found["Belt"]["state"], found["Belt"]["covered_by"]) == ("overdue", "")
