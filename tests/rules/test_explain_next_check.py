"""What pulls a line forward, in words: the working of the line, its row, and its note."""

from dataclasses import replace
from decimal import Decimal

from fleetcare.domain.lines import DueLine
from fleetcare.domain.meters import Counter, Meter, MeterFit, Reading
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Task
from fleetcare.domain.wear import Wear
from fleetcare.operations.due_words import notes
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.row import DueRow, due_row
from fleetcare.rules.explain import explain
from fleetcare.rules.meters import counter_history
from tests.builders import a_deferral, a_task, day, every, facts, last_done
from tests.rules.test_due_pulls import lash
from tests.rules.wearing import a_wear

LEVEL = a_wear(("1000 2000 3000 4000", ".40 .40 .40 .40", None), subject="1E")


def looked_at(task: Task | None = None, hours: float = 4000, *wears: Wear) -> tuple[DueLine, ItemFacts]:
    known = facts(task or lash(), on="2026-05-01", hours=hours, wears=wears or (a_wear(),))
    return item_lines(known, recorded_only=True)[0], known


def working(task: Task | None = None, hours: float = 4000, *wears: Wear) -> dict[str, str]:
    return dict(explain(*looked_at(task, hours, *wears)))


def row(task: Task | None = None, hours: float = 4000, *wears: Wear) -> DueRow:
    return due_row(*looked_at(task, hours, *wears))


def test_the_working_says_which_point_how_fast_when_and_how_much_earlier() -> None:
    assert working()["pulled forward"] == (
        "3E falls 0.049 mm in 1000 h: reaches 0.25 mm by 5975 to 6238 h, likely 6102 h (four times in five;"
        " 11 values, the last of 2026-04-20); to be checked at the early end, 5975.1 h:"
        " 524.9 h before its own point"
    )


def test_what_only_the_log_says_was_topped_up_is_said_to_be_so() -> None:
    by_log = replace(a_wear(), is_topped_up_by_log=True)
    assert (
        "11 values, the last of 2026-04-20, topped up by the log); to" in working(None, 4000, by_log)["pulled forward"]
    )


def test_after_a_new_meter_figures_are_said_to_be_of_life_and_what_the_dial_shows_there() -> None:
    old, new = Meter(1, Kind.HOURS, "h"), Meter(2, Kind.HOURS, "h")
    swap = day("2026-04-21")
    fits = (MeterFit(old, None, Decimal(0), swap, Decimal(4000)), MeterFit(new, swap, Decimal(0)))
    readings = (Reading(1, 1, day("2026-04-20"), Decimal(4000)), Reading(2, 2, day("2026-05-01"), Decimal(10)))
    counter = counter_history(Counter(Kind.HOURS, Decimal(0), fits, readings), day("2026-05-01"))
    known = replace(facts(lash(), on="2026-05-01", wears=(a_wear(),)), counters={Kind.HOURS: counter})
    found = item_lines(known, recorded_only=True)[0]
    assert due_row(found, known).reason == "pulled forward: 3E reaches 0.25 mm by 5975 to 6238 h of life"
    assert "early end, 5975.1 h, 1975.1 h on the dial: 524.9 h before" in dict(explain(found, known))["pulled forward"]


def test_an_early_end_behind_it_says_it_is_due_from_its_last_value() -> None:
    past = a_wear(("2000 2500 3000 3500 4000", ".40 .38 .35 .33 .312", None), low="0.31")
    said = working(lash("2000h"), 4000, past)["pulled forward"]
    assert said.endswith("the early end is behind it: due from its last value at 4000 h: 2000 h before its own point")
    assert row(lash("2000h"), 4000, past).reason.endswith(", due now")


def test_the_working_names_what_else_is_reached_and_what_is_not_projected() -> None:
    said = working(None, 4000, a_wear(), a_wear(subject="2E", low="0.24"), LEVEL)
    assert said["also reached"].startswith("2E reaches 0.24 mm by 6")
    assert said["not projected"] == "slope not told apart from none: 1E"


def test_where_nothing_pulls_the_working_still_says_when_limits_are_reached() -> None:
    said = working(lash("1000h"))
    assert "pulled forward" not in said
    assert said["also reached"] == "3E reaches 0.25 mm by 5975 to 6238 h"


def test_the_row_has_the_pulled_point_its_own_and_the_reason_in_short() -> None:
    found = row()
    assert (found.next_due_at, found.own_due_at, found.next_due_dial) == (
        Decimal("5975.1"),
        Decimal(6500),
        Decimal("5975.1"),
    )
    assert found.reason == "pulled forward: 3E reaches 0.25 mm by 5975 to 6238 h"
    assert notes(found) == [found.reason]


def test_a_line_pulled_in_one_kind_and_deferred_in_another_says_both() -> None:
    task = lash("2500h", every("12mo"), deferrals=(a_deferral("2027-06-01", on="2026-04-25"),))
    assert row(task).reason == "pulled forward: 3E reaches 0.25 mm by 5975 to 6238 h; parts on order"


def test_lines_that_measure_nothing_say_nothing_of_it() -> None:
    said = working(a_task(every("250h"), origin=last_done("2026-04-20", hours=4000)))
    assert not {"pulled forward", "also reached", "not projected"} & set(said)


def test_an_unset_line_says_what_to_enter_and_nothing_of_a_pull() -> None:
    found = row(lash(origin=None))
    assert found.state == "unset"
    assert "pulled" not in found.reason
    assert "pulled forward" not in working(lash(origin=None))


def test_a_pulled_line_shows_no_grace_after_its_point() -> None:
    said = explain(*looked_at(lash(grace=10)))
    assert any("0 h grace: clear" in text for _, text in said)


def test_what_was_watched_too_shortly_to_pull_says_its_likely_figure_and_that_no_check_moves() -> None:
    short = a_wear(("3000 3200 3400 3600", ".30 .29 .28 .27", None), subject="1E")
    told = working(None, 3600, short)
    assert told["likely so far"] == "1E 0.25 mm by 4000 h: moves no check yet"
    assert told["not projected"] == "watched for less than one inspection interval: 1E"
    assert "pulled forward" not in told
