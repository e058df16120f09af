"""What one entry closes: the tasks it names, those done along with them, and what stays open and why."""

from collections.abc import Callable

import pytest

from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Period, Task
from fleetcare.rules.due.closing import Closing, close, with_done
from tests.builders import a_task, day, done, every, facts, last_done

OIL = a_task(every("250h"), number=1, name="Oil")
FILTER = a_task(every("500h"), number=2, name="Filter", covers=(1,))
SERVICE = a_task(every("1000h"), number=3, name="Service", covers=(2,))


def nothing(task: Task) -> str:
    """Say that no sheet keeps a task open."""
    return ""


def closings(
    *tasks: Task,
    named: tuple[int, ...],
    elsewhere: tuple[int, ...] = (),
    why_open: Callable[[Task], str] = nothing,
    on: str = "2026-05-01",
    hours: float | None = 1000,
) -> list[Closing]:
    """Close tasks with an entry of a day, of which the figure is known where hours are given."""
    entry = done(on, entry=9, **({"hours": hours} if hours is not None else {}))
    return close(facts(*tasks, on=on, hours=1000), named, entry, why_open, elsewhere)


def told(found: list[Closing]) -> list[tuple[str, str | None, bool]]:
    """Give of each closing the task, what it is done along with, and whether it closes."""
    return [(one.task.name, one.along_with.name if one.along_with else None, one.closes) for one in found]


def test_the_small_jobs_of_a_big_one_are_done_along_with_it_however_deep() -> None:
    assert told(closings(OIL, FILTER, SERVICE, named=(3,))) == [
        ("Service", None, True),
        ("Filter", "Service", True),
        ("Oil", "Service", True),
    ]


def test_a_task_named_is_closed_once_and_by_itself() -> None:
    assert told(closings(OIL, FILTER, named=(2, 1, 2))) == [("Filter", None, True), ("Oil", None, True)]


def test_a_task_covered_by_two_is_done_along_with_the_first() -> None:
    other = a_task(every("1000h"), number=4, name="Overhaul", covers=(1,))
    assert told(closings(OIL, FILTER, other, named=(4, 2))) == [
        ("Overhaul", None, True),
        ("Oil", "Overhaul", True),
        ("Filter", None, True),
    ]


def test_what_another_entry_of_the_day_did_is_not_done_again() -> None:
    assert told(closings(OIL, FILTER, named=(2,), elsewhere=(1,))) == [("Filter", None, True)]


@pytest.mark.parametrize(
    "small", [{"removed_on": day("2026-04-01")}, {"on_condition": True}], ids=["removed", "called"]
)
def test_a_task_removed_or_done_only_when_called_for_is_not_done_along(small: dict[str, object]) -> None:
    oil = a_task(every("250h"), number=1, name="Oil", **small)
    assert told(closings(oil, FILTER, named=(2,))) == [("Filter", None, True)]


def test_a_covered_task_that_is_not_among_the_facts_is_passed_over() -> None:
    assert told(closings(FILTER, named=(2,))) == [("Filter", None, True)]


def test_a_covered_task_that_wants_its_sheet_stays_open_and_is_tried_again_with_the_next() -> None:
    other = a_task(every("1000h"), number=4, name="Overhaul", covers=(1,))

    def why_open(task: Task) -> str:
        return "closes only with its lash sheet" if task.name == "Oil" else ""

    found = closings(OIL, FILTER, other, named=(2, 4), why_open=why_open)
    assert told(found) == [
        ("Filter", None, True),
        ("Oil", "Filter", False),
        ("Overhaul", None, True),
        ("Oil", "Overhaul", False),
    ]
    assert found[1].wants == "closes only with its lash sheet"


def test_a_figure_a_task_cannot_do_without_is_named() -> None:
    (found,) = closings(OIL, named=(1,), hours=None)
    assert (found.lacks, found.closes) == (Kind.HOURS, False)


def test_a_kind_that_no_meter_counts_is_not_asked_for() -> None:
    by_distance = a_task(every("5000km"), number=1, name="Oil")
    (found,) = closings(by_distance, named=(1,), hours=None)
    assert (found.lacks, found.closes) == (None, True)


def test_a_plain_interval_is_closed_whatever_was_done_before() -> None:
    yearly = a_task(every("12mo"), number=1, name="Oil")
    (found,) = closings(yearly, named=(1,))
    assert (found.work.number, found.work.counted, found.work.note) == (9, True, "")


def test_work_before_its_window_opens_closes_nothing_and_says_from_when_it_counts() -> None:
    look = a_task(every("6mo", window_days=10), number=1, name="Look", origin=last_done("2026-02-01"))
    (found,) = closings(look, named=(1,))
    assert not found.closes
    assert found.work.note == "before its window opened on 2026-07-22"
    (found,) = closings(look, named=(1,), on="2026-07-22")
    assert found.closes


def test_a_once_each_task_says_which_period_it_serves() -> None:
    test = a_task(every("1mo", once_each=Period.MONTH), number=1, name="Test", origin=last_done("2026-04-10"))
    (found,) = closings(test, named=(1,))
    assert (found.work.served, found.closes) == ("2026-05", True)


def test_an_entry_is_added_to_what_was_done_before() -> None:
    before, now = done("2026-04-01", entry=1, hours=900), done("2026-05-01", entry=9, hours=1000)
    added = with_done(facts(OIL, FILTER, on="2026-05-01", hours=1000, done=[before]), [1, 2], now)
    assert added.done == {1: (before, now), 2: (now,)}
