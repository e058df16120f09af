"""Work done once, work on condition, and follow-ups."""

import pytest

from fleetcare.domain.lines import State
from fleetcare.domain.schedules import Call, Task
from tests.builders import a_task, day, done, every, last_done, line, lines, new_at


def has_line(task: Task, **kwargs: object) -> bool:
    return task.name in lines(task, **kwargs)  # type: ignore[arg-type]


# Once

RETORQUE = a_task(every("50h"), once=True, origin=new_at(1200, day("2026-01-10")))


@pytest.mark.parametrize(
    ("now", "state"), [(1240, State.CLEAR), (1245, State.NEAR), (1250, State.DUE), (1251, State.OVERDUE)]
)
def test_once_only_work_is_due_an_interval_after_the_start(now: int, state: State) -> None:
    assert line(RETORQUE, on="2026-05-01", hours=now).state is state


def test_once_only_work_with_a_first_interval_is_due_by_that() -> None:
    task = a_task(every("500h", first=50), once=True, origin=new_at(1200, day("2026-01-10")))
    assert line(task, on="2026-05-01", hours=1200).triggers[0].point == 1250


def test_once_only_work_has_no_line_any_more_once_it_is_done() -> None:
    assert has_line(RETORQUE, on="2026-02-01", hours=1250)
    assert not has_line(RETORQUE, on="2026-02-01", hours=1250, done=[done("2026-02-01", hours=1250)])


def test_once_only_work_logged_before_the_start_it_counts_from_is_still_due() -> None:
    assert has_line(RETORQUE, on="2026-02-01", hours=1250, done=[done("2025-12-01", hours=1100)])


def test_once_only_work_counts_from_a_last_done_where_there_is_no_start() -> None:
    task = a_task(every("50h"), once=True, origin=last_done("2026-01-10", hours=1200))
    assert line(task, on="2026-05-01", hours=1210).triggers[0].point == 1250


def test_once_only_work_done_before_its_window_is_still_due() -> None:
    task = a_task(every("2mo", window_days=5), once=True, origin=last_done("2026-01-10"))
    assert has_line(task, on="2026-05-01", done=[done("2026-02-01")])
    assert not has_line(task, on="2026-05-01", done=[done("2026-03-06")])


# On condition


def on_condition(*calls: tuple[str, str]) -> Task:
    """A task called for on some days, each due on some day."""
    made = tuple(Call(n, day(on), day(due), f"defect {n}") for n, (on, due) in enumerate(calls, 1))
    return a_task(on_condition=True, calls=made, name="Weeping gasket")


def test_work_on_condition_has_no_line_until_it_is_called_for() -> None:
    assert not has_line(on_condition(), on="2026-05-01")
    called = on_condition(("2026-05-01", "2026-05-01"))
    assert not has_line(called, on="2026-04-30")
    assert has_line(called, on="2026-05-01")


def test_a_follow_up_is_due_the_day_it_is_raised_and_overdue_the_day_after() -> None:
    task = on_condition(("2026-05-01", "2026-05-01"))
    due = line(task, on="2026-05-01")
    assert (due.state, due.triggers[0].point, due.called_because) == (State.DUE, day("2026-05-01"), "defect 1")
    assert line(task, on="2026-05-02").state is State.OVERDUE


@pytest.mark.parametrize(
    ("on", "state"),
    [
        ("2026-05-01", State.CLEAR),
        ("2026-05-17", State.CLEAR),
        ("2026-05-18", State.NEAR),
        ("2026-05-20", State.NEAR),
        ("2026-05-21", State.DUE),
        ("2026-05-22", State.OVERDUE),
    ],
)
def test_a_follow_up_with_a_day_is_due_on_it_and_near_a_tenth_of_its_time_before(on: str, state: State) -> None:
    task = on_condition(("2026-04-21", "2026-05-21"))
    assert line(task, on=on).state is state


def test_a_follow_up_due_the_day_it_is_raised_takes_its_share_of_one_day() -> None:
    due = line(on_condition(("2026-05-01", "2026-05-01")), on="2026-05-03")
    assert due.triggers[0].share == -2


def test_work_answers_every_call_up_to_its_day() -> None:
    task = on_condition(("2026-04-01", "2026-04-10"), ("2026-04-05", "2026-04-20"))
    assert not has_line(task, on="2026-05-01", done=[done("2026-04-05")])
    assert has_line(task, on="2026-05-01", done=[done("2026-04-04")])


def test_a_call_after_the_work_opens_the_line_again() -> None:
    task = on_condition(("2026-04-01", "2026-04-01"), ("2026-04-20", "2026-04-25"))
    due = line(task, on="2026-05-01", done=[done("2026-04-05", entry=3)])
    assert (due.called_because, due.last_done_number, due.triggers[0].point) == ("defect 2", 3, day("2026-04-25"))


def test_of_several_calls_the_one_due_first_is_shown() -> None:
    task = on_condition(("2026-04-01", "2026-06-01"), ("2026-04-20", "2026-04-25"), ("2026-04-21", "2026-04-25"))
    assert line(task, on="2026-05-01").called_because == "defect 2"
