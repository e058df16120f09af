"""`due`: the list of lines, its filters, and its three formats."""

import csv
import io
import json
from collections.abc import Callable
from pathlib import Path

import pytest

from tests.cli.conftest import Runner
from tests.cli.yards import LORRY, PUMP

Opener = Callable[[str], Runner]

HEADER = (
    "engine,site,task,state,trigger,last_done_on,last_done_at,next_due_at,next_due_on,remaining,unit,"
    "estimated,early_date,likely_date,late_date,deferred_until,covered_by,reason,machine,engine_status,"
    "meter_unit,next_due_dial,own_due_at,own_due_on"
)

MORNING = """
    engine add P-01 --site "North Sluice" --meter hours --in-service 2024-01-10 --start-at 0 --as-new
    engine add P-02 --site "Ousel Outfall" --meter hours
    reading P-01 1000 --on 2026-04-01
    task add P-01 Overdue --every 900h
    task add P-01 Due --every 1000h
    task add P-01 Near --every 1050h --ahead 60h
    task add P-01 Clear --every 2000h
    task add P-02 Unset --every 250h
    task add P-02 Month --every 1mo --last-done 2026-04-20
"""


def rows(text: str) -> list[dict[str, str]]:
    """Read a CSV answer."""
    return list(csv.DictReader(io.StringIO(text, newline="")))


def tasks(text: str) -> list[str]:
    """The tasks of a CSV answer, in order."""
    return [row["task"] for row in rows(text)]


@pytest.fixture
def morning(open_yard: Opener) -> Runner:
    """A yard with a line in every state."""
    return open_yard(MORNING)


def test_the_csv_has_the_columns_of_the_contract_in_their_order(morning: Runner) -> None:
    assert morning("due", "--format", "csv").out.split("\r\n")[0] == HEADER


def test_the_csv_to_the_byte(morning: Runner) -> None:
    assert morning("due", "--format", "csv", "--engine", "P-01").out.split("\r\n")[1:] == [
        "P-01,North Sluice,Overdue,overdue,hours,,,900,,-100,h,,,,,,,,,in service,h,900,900,",
        "P-01,North Sluice,Due,due,hours,,,1000,,0,h,,,,,,,,,in service,h,1000,1000,",
        "P-01,North Sluice,Near,near,hours,,,1050,,50,h,,,,,,,,,in service,h,1050,1050,",
        "P-01,North Sluice,Clear,clear,hours,,,2000,,1000,h,,,,,,,,,in service,h,2000,2000,",
        "",
    ]


def test_the_json_has_the_same_keys_numbers_as_numbers_and_null_for_empty(morning: Runner) -> None:
    first = json.loads(morning("due", "--format", "json").out)[0]
    assert list(first) == HEADER.split(",")
    assert first == dict.fromkeys(HEADER.split(",")) | {
        "engine": "P-01",
        "site": "North Sluice",
        "task": "Overdue",
        "state": "overdue",
        "trigger": "hours",
        "next_due_at": 900,
        "remaining": -100,
        "unit": "h",
        "engine_status": "in service",
        "meter_unit": "h",
        "next_due_dial": 900,
        "own_due_at": 900,
    }


def test_the_table_to_the_byte(morning: Runner) -> None:
    assert morning("due", "--state", "due", "--state", "unset").out == (
        "DUE (1)\n"
        "engine  site          task  due at  due on  remaining  likely  note\n"
        "------  ------------  ----  ------  ------  ---------  ------  ----\n"
        "P-01    North Sluice  Due   1000 h          0 h left\n"
        "\n"
        "UNSET (1)\n"
        "engine  site           task   due at  due on  remaining  likely  note\n"
        "------  -------------  -----  ------  ------  ---------  ------  "
        "-------------------------------------------------------------\n"
        "P-02    Ousel Outfall  Unset                                     "
        "not known when it was last done; log it, or enter a last-done\n"
        "\n"
        "Limits and intervals are to be checked against the engine maker's manual, local codes and law;"
        " work on engines is for competent, where required licensed, people.\n"
    )


def test_alone_it_lists_every_line_overdue_due_near_unset_clear(morning: Runner) -> None:
    found = rows(morning("due", "--format", "csv").out)
    assert [row["state"] for row in found] == ["overdue", "due", "near", "unset", "clear", "clear"]


def test_within_a_state_the_line_with_the_smaller_share_of_its_interval_left_comes_first(morning: Runner) -> None:
    assert tasks(morning("due", "--format", "csv", "--state", "clear").out) == ["Clear", "Month"]


def test_within_leaves_out_what_is_clear_for_longer(morning: Runner) -> None:
    assert tasks(morning("due", "--within", "18", "--format", "csv").out) == ["Overdue", "Due", "Near", "Unset"]


def test_within_counts_its_last_day(morning: Runner) -> None:
    assert tasks(morning("due", "--within", "19", "--format", "csv").out)[-1] == "Month"


@pytest.mark.parametrize("days", ["-1", "36501", "999999999999999"])
def test_within_takes_up_to_a_century_of_days(morning: Runner, days: str) -> None:
    ran = morning("due", "--within", days)
    assert (ran.status, ran.err) == (1, f"within {days} days cannot be; give a number from 0 to 36500\n")


def test_a_site_is_found_whatever_its_case(morning: Runner) -> None:
    assert tasks(morning("due", "--site", " ousel OUTFALL ", "--format", "csv").out) == ["Unset", "Month"]


def test_an_unknown_site_is_refused_with_the_sites_there_are(morning: Runner) -> None:
    ran = morning("due", "--site", "Nowhere")
    assert (ran.status, ran.out) == (1, "")
    assert ran.err == "there is no site 'Nowhere'; choose one of North Sluice, Ousel Outfall\n"


def test_an_engine_is_found_whatever_its_case(morning: Runner) -> None:
    assert tasks(morning("due", "--engine", "p-02", "--format", "csv").out) == ["Unset", "Month"]


def test_an_unknown_engine_is_refused_with_the_nearest_tags(morning: Runner) -> None:
    ran = morning("due", "--engine", "P-03")
    assert (ran.status, ran.err) == (1, "no engine or machine has the tag 'P-03'; did you mean P-02 or P-01?\n")


def test_filters_narrow_each_other(morning: Runner) -> None:
    words = ("--engine", "P-02", "--state", "clear", "--site", "Ousel Outfall", "--within", "30")
    assert tasks(morning("due", *words, "--format", "csv").out) == ["Month"]


def test_no_line_left_is_said_in_the_table_and_is_a_bare_header_in_csv(morning: Runner) -> None:
    words = ("due", "--engine", "P-02", "--state", "overdue")
    assert morning(*words).out.startswith("No lines.\n")
    assert morning(*words, "--format", "csv").out == HEADER + "\r\n"
    assert morning(*words, "--format", "json").out == "[]\n"


@pytest.mark.parametrize(
    ("format_", "start"), [("table", b"OVERDUE (1)\n"), ("csv", b"engine,site,"), ("json", b"[\n  {")]
)
def test_a_file_takes_the_answer_and_the_screen_is_told_how_much(
    morning: Runner, tmp_path: Path, format_: str, start: bytes
) -> None:
    out = tmp_path / "due.out"
    ran = morning("due", "--state", "overdue", "--format", format_, "--out", str(out))
    assert ran.out == f"1 line written to {out}\n"
    assert out.read_bytes().startswith(start)
    assert out.read_bytes().decode() == morning("due", "--state", "overdue", "--format", format_).out


def test_a_file_that_cannot_be_written_is_refused(morning: Runner, tmp_path: Path) -> None:
    ran = morning("due", "--format", "csv", "--out", str(tmp_path / "missing" / "due.csv"))
    assert (ran.status, ran.out) == (1, "")
    assert "there is no folder" in ran.err


def test_a_line_with_hours_and_months_fills_both_points_and_shows_what_decides(open_yard: Opener) -> None:
    line = rows(open_yard(PUMP)("due", "--format", "csv").out)[-1]
    assert (line["task"], line["trigger"], line["remaining"], line["unit"]) == ("Oil and filter", "hours", "150", "h")
    assert (line["last_done_on"], line["last_done_at"]) == ("2026-02-01", "900")
    assert (line["next_due_at"], line["next_due_on"]) == ("1150", "2027-02-01")
    assert (line["own_due_at"], line["own_due_on"]) == ("1150", "2027-02-01")


def test_a_machines_task_stands_under_its_tag_and_an_engines_under_the_engines(open_yard: Opener) -> None:
    found = rows(open_yard(LORRY)("due", "--format", "csv").out)
    by_engine = {row["engine"]: (row["machine"], row["site"], row["engine_status"]) for row in found}
    assert by_engine == {
        "E-1": ("LR-1", "Board Yard", "in service"),
        "LR-1": ("LR-1", "Board Yard", ""),
    }


def test_the_dial_is_what_the_man_in_front_of_it_needs_and_the_point_a_life_total(open_yard: Opener) -> None:
    lorry = open_yard(LORRY)
    (line,) = rows(lorry("due", "--engine", "E-1", "--format", "csv").out)
    assert (line["next_due_dial"], line["next_due_at"], line["meter_unit"]) == ("65000", "15000", "km")
    assert "65000 km on the dial (15000 km of life)" in lorry("due", "--engine", "E-1").out
