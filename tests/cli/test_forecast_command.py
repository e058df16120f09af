"""`forecast`: when a meter will show a figure, in words and as JSON."""

import json
from datetime import date, timedelta
from pathlib import Path

import pytest

from tests.cli.conftest import Ran, Runner

FIRST = date(2026, 1, 1)
KEYS = ["early_date", "likely_date", "late_date", "readings_used", "reason"]


@pytest.fixture
def yard(fleetcare: Runner, db: Path) -> Runner:
    """P-01 runs an hour a day, read every tenth day from 1 January to 1 May 2026; T-1 has two meters, never read."""

    def run(*words: str) -> Ran:
        return fleetcare("--db", str(db), "--as-of", "2026-05-01", *words)

    assert run("engine", "add", "P-01", "--meter", "hours").status == 0
    for days in range(0, 121, 10):
        on = FIRST + timedelta(days=days)
        assert run("reading", "P-01", f"{1000 + days}h", "--on", on.isoformat()).status == 0
    assert run("engine", "add", "T-1", "--meter", "hours", "--meter", "distance:mi").status == 0
    return run


def forecast(yard: Runner, *words: str) -> dict[str, object]:
    """The answer as JSON."""
    ran = yard("forecast", *words, "--json")
    assert (ran.status, ran.err) == (0, "")
    answer: dict[str, object] = json.loads(ran.out)
    assert list(answer) == KEYS
    return answer


def test_an_hour_a_day_takes_forty_days_for_forty_hours(yard: Runner) -> None:
    answer = forecast(yard, "P-01", "--to", "1160")
    assert answer["likely_date"] == "2026-06-10"  # 1 May, 1120 h, and 40 days; worked by hand
    assert str(answer["early_date"]) < "2026-06-10" < str(answer["late_date"])
    assert (answer["readings_used"], answer["reason"]) == (13, None)


def test_in_words_it_says_the_range_the_newest_reading_and_what_it_rests_on(yard: Runner) -> None:
    first, second, third = yard("forecast", "P-01", "--to", "1124h").out.splitlines()
    assert first.startswith("P-01 shows 1124 h: about 2026-05-05 (2026-05-0")
    assert second == "It showed 1120 h on 2026-05-01, the newest of 13 readings."
    assert third == "Rests on: last 13 weeks: 4 d (100 %); season not known yet."


def test_a_figure_already_reached_has_no_dates_and_says_so(yard: Runner) -> None:
    assert forecast(yard, "P-01", "--to", "1120") == {
        "early_date": None,
        "likely_date": None,
        "late_date": None,
        "readings_used": 13,
        "reason": "already reached by the reading of 2026-05-01",
    }


def test_too_little_to_go_on_is_no_failure(yard: Runner) -> None:
    answer = forecast(yard, "T-1", "--to", "100mi")
    assert (answer["likely_date"], answer["readings_used"]) == (None, 0)
    assert answer["reason"]
    ran = yard("forecast", "T-1", "--to", "100", "--meter", "hours")
    assert (ran.status, ran.out) == (0, f"T-1 shows 100 h: no date: {answer['reason']}\n")


def test_what_lies_after_the_as_of_day_is_not_known_yet(yard: Runner) -> None:
    answer = forecast(yard, "P-01", "--to", "1160", "--as-of", "2026-02-10")
    assert answer["readings_used"] == 5


def test_the_figure_is_what_the_dial_shows_though_it_was_replaced(yard: Runner) -> None:
    yard("reading", "P-01", "5", "--on", "2026-05-01", "--replaced", "1120", "0", "--unmetered", "150h")
    ran = yard("forecast", "P-01", "--to", "45")
    assert ran.out.startswith("P-01 shows 45 h (1315 h of life): about ")
    assert "It showed 5 h on 2026-05-01" in ran.out


def test_a_dial_nobody_has_read_yet_is_not_said_to_show_what_another_one_showed(yard: Runner) -> None:
    yard("machine", "add", "LR-1", "--meter", "hours")
    yard("machine", "add", "LR-2", "--meter", "hours")
    yard("engine", "add", "LE-1", "--machine", "LR-1", "--in-service", "2026-01-01")
    for days in range(0, 100, 10):
        yard("reading", "LR-1", str(500 + days), "--on", (FIRST + timedelta(days=days)).isoformat())
    yard("engine", "fit", "LE-1", "--machine", "LR-2", "--on", "2026-04-11")
    out = yard("forecast", "LE-1", "--to", "40").out
    assert out.startswith("LE-1 shows 40 h (")
    assert "It showed" not in out


def test_miles_are_asked_and_answered_in_miles(yard: Runner) -> None:
    yard("reading", "T-1", "100mi", "--on", "2026-05-01")
    assert yard("forecast", "T-1", "--to", "160.9344km").out.startswith("T-1 shows 100 mi: no date: already reached")


def test_a_laid_up_engine_has_no_date_unless_it_is_there_already(yard: Runner) -> None:
    yard("engine", "lay-up", "P-01", "--on", "2026-05-01")
    assert "laid up" in str(forecast(yard, "P-01", "--to", "1160")["reason"])
    assert "already reached" in str(forecast(yard, "P-01", "--to", "1000")["reason"])


@pytest.mark.parametrize(
    ("words", "status", "wrong"),
    [
        (("P-01",), 2, "the following arguments are required: --to"),
        (("P-01", "--to", "soon"), 2, "argument --to: 'soon' is not a figure"),
        (("P-01", "--to", "3mo"), 2, "argument --to: '3mo' is a span of time, not a dial figure"),
        (("P-01", "--to", "10", "--meter", "oil"), 2, "no meter counts 'oil'; use one of hours"),
        (("P-01", "--to", "10", "--meter", "calendar"), 1, "no meter counts the calendar; use one of hours"),
        (("P-01", "--to", "10", "--meter", "fuel"), 1, "no meter counts fuel of P-01 on that day"),
        (("P-01", "--to", "10km"), 1, "no meter counts distance of P-01 on that day"),
        (("T-1", "--to", "10"), 1, "10 could be hours and distance of T-1; write its unit behind it"),
        (("P-1", "--to", "10"), 1, "no engine or machine has the tag 'P-1'; did you mean"),
        (("[/b]", "--to", "10"), 1, "no engine or machine has the tag '[/b]'"),
    ],
)
def test_what_cannot_be_is_one_line_with_a_remedy(
    yard: Runner, words: tuple[str, ...], status: int, wrong: str
) -> None:
    ran = yard("forecast", *words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (status, "", 1)
    assert ran.err.startswith(wrong)


def test_a_figure_the_dial_has_no_digits_for_is_refused(yard: Runner) -> None:
    yard("engine", "edit", "P-01", "--meter-digits", "4.1")
    ran = yard("forecast", "P-01", "--to", "10000")
    assert (ran.status, ran.err) == (1, "10000 does not fit on the hours meter of P-01; give one below 10000\n")
