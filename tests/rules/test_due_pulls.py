"""A line pulled forward: its point in force, its state, and what a deferral, later work and a bigger job do to it.

The gap is the worked example of valve lash: measured to 4000 h, its early end at 0.25 mm is 5975.1 h.
"""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.lines import State, TriggerLine
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Combine, Deferral, Task, Trigger
from tests.builders import Readings, a_deferral, a_task, day, done, every, last_done, line, lines, trigger
from tests.rules.wearing import a_wear

LAST = last_done("2026-04-20", hours=4000)


def lash(
    interval: str = "2500h", *also: Trigger, ahead: float | None = None, grace: float = 0, **changes: object
) -> Task:
    """Valve lash every 2500 h, done at 4000 h: due of itself at 6500."""
    hours = every(interval, grace=grace, **({} if ahead is None else {"ahead": ahead}))
    given = {"name": "Valve lash", "origin": LAST, "needs_sheet": "lash"} | changes
    return a_task(hours, *also, **given)  # type: ignore[arg-type]


def pulled(task: Task | None = None, hours: Readings = 4000, **facts: object) -> TriggerLine:
    given = {"on": "2026-05-01", "hours": hours, "wears": (a_wear(),)} | facts
    return trigger(task or lash(), **given)


def test_a_point_projected_to_its_limit_before_the_own_point_moves_the_point_in_force_forward() -> None:
    found = pulled()
    assert (found.point, found.own) == (Decimal("5975.1"), Decimal(6500))
    assert found.remaining == Decimal("1975.1")
    assert found.pull is not None
    assert found.pull.wear.subject == "3E"


def test_without_sheets_nothing_is_pulled() -> None:
    found = pulled(wears=())
    assert (found.point, found.own, found.pull) == (Decimal(6500), Decimal(6500), None)


@pytest.mark.parametrize(("interval", "is_pulled"), [("1975.1h", False), ("1975.2h", True)])
def test_a_pull_must_come_before_the_own_point_not_on_it(interval: str, is_pulled: bool) -> None:
    found = pulled(lash(interval))
    assert (found.pull is not None) is is_pulled
    assert found.point == Decimal("5975.1")


@pytest.mark.parametrize(
    ("hours", "state"),
    [("5725", State.CLEAR), ("5725.1", State.NEAR), ("5975", State.NEAR), ("5975.1", State.DUE), ("6500", State.DUE)],
)
def test_a_pulled_line_is_near_from_its_usual_ahead_and_due_from_its_point_on(hours: str, state: State) -> None:
    assert pulled(lash(ahead=250), hours=hours).state is state


def test_it_is_overdue_only_by_its_own_point_and_grace() -> None:
    task = lash(grace=10)
    assert pulled(task, hours="6510").state is State.DUE
    assert pulled(task, hours="6510.1").state is State.OVERDUE


def test_the_state_by_estimate_is_that_of_the_pulled_point() -> None:
    weekly = [(f"2026-{month:02}-{on:02}", 4000 + 100 * (4 * month + on // 7)) for month in (1, 2) for on in (1, 8, 15)]
    found = pulled(lash("2000h", origin=last_done("2026-01-01", hours=4000)), hours=weekly, on="2026-06-01")
    assert found.pull is not None
    assert found.estimated is State.DUE or found.estimated is State.OVERDUE


def test_overruns_are_counted_from_the_own_point_whatever_pulled() -> None:
    task = lash("100h", grace=5)
    wear = a_wear(on="2026-04-28")
    found = line(task, on="2026-05-01", hours=4200, done=[done("2026-04-28", hours=4120)], wears=(wear,))
    assert found.past[0].over == {Kind.HOURS: (Decimal(20), Decimal(5))}
    assert found.triggers[0].own == 4220


@pytest.mark.parametrize(("sheet", "work"), [("", "lash"), ("lash", "inspection")])
def test_a_task_is_pulled_by_its_kind_of_work_or_by_the_sheet_it_needs(sheet: str, work: str) -> None:
    assert pulled(lash(needs_sheet=sheet, work=work)).pull is not None


@pytest.mark.parametrize("other", [a_wear(work="compression"), a_wear(kind=Kind.STARTS)])
def test_what_another_task_measures_or_another_meter_counts_pulls_nothing(other: object) -> None:
    assert pulled(wears=(other,)).pull is None


def test_work_done_since_the_last_sheet_without_one_ends_the_pull() -> None:
    later = last_done("2026-04-21", hours=4000)
    assert pulled(lash(origin=later)).pull is None


def test_a_calendar_trigger_is_not_pulled_and_a_line_without_a_reading_neither() -> None:
    both = line(lash("2500h", every("12mo")), on="2026-05-01", hours=4000, wears=(a_wear(),))
    assert [one.pull is not None for one in both.triggers] == [True, False]
    unread = line(lash(), on="2026-05-01", wears=(a_wear(),))
    assert unread.triggers[0].pull is None


def deferred(on: str, to: int = 7000) -> Deferral:
    return a_deferral(hours=to, on=on)


def test_a_deferral_made_when_the_sheet_was_known_stands() -> None:
    found = pulled(lash(deferrals=(deferred("2026-04-20"),)))
    assert (found.point, found.deferred, found.pull) == (Decimal(7000), True, None)


def test_a_sheet_later_than_the_deferral_pulls_again() -> None:
    found = pulled(lash(deferrals=(deferred("2026-04-19"),), origin=last_done("2026-04-18", hours=4000)))
    assert (found.point, found.deferred) == (Decimal("5975.1"), False)


def test_a_pull_between_the_own_point_and_the_deferred_one_moves_the_line_too() -> None:
    task = lash("1500h", deferrals=(deferred("2026-04-19"),), origin=last_done("2026-04-18", hours=4000))
    found = pulled(task, hours=5600)
    assert (found.own, found.point, found.state) == (Decimal(5500), Decimal("5975.1"), State.NEAR)


def test_a_deferral_that_has_ended_holds_no_pull_back() -> None:
    found = pulled(lash("2200h", deferrals=(deferred("2026-04-20", to=6300),)), hours=6350)
    assert (found.own, found.point) == (Decimal(6200), Decimal("5975.1"))


def test_a_deferral_of_another_trigger_holds_no_pull_back() -> None:
    task = lash("2500h", every("12mo"), deferrals=(a_deferral("2027-06-01", on="2026-04-25"),))
    found = line(task, on="2026-05-01", hours=4000, wears=(a_wear(),))
    assert found.triggers[0].pull is not None


def test_a_line_that_waits_for_its_last_interval_does_not_wait_once_it_is_pulled() -> None:
    task = lash("2500h", every("5y"), combine=Combine.LAST)
    found = line(task, on="2026-05-01", hours=5980, wears=(a_wear(),))
    assert (found.state, found.deciding.kind) == (State.DUE, Kind.HOURS)


def test_a_waiting_line_pulled_but_clear_still_says_what_is_unset() -> None:
    task = lash("2500h", every("5y"), combine=Combine.LAST, origin=last_done(None, hours=4000))
    found = line(task, on="2026-05-01", hours=4000, wears=(a_wear(),))
    assert found.state is State.UNSET
    assert found.triggers[0].pull is not None


def overhaul(at: str, grace: int = 0) -> dict[str, str]:
    """Who covers a lash task without a sheet, with an overhaul due at a figure of hours."""
    check = lash(needs_sheet="", work="lash", grace=grace)
    big = a_task(every("3000h"), number=2, name="Overhaul", covers=(1,), origin=last_done("2026-04-20", hours=at))
    found = lines(check, big, on="2026-05-01", hours=4000, wears=(a_wear(),))
    return {name: one.covered_by for name, one in found.items()}


@pytest.mark.parametrize(("at", "covered"), [("2975.1", "Overhaul"), ("2975.2", ""), ("3400", "")])
def test_a_bigger_job_covers_a_pulled_line_only_up_to_the_pulled_point_without_grace(at: str, covered: str) -> None:
    assert overhaul(at, grace=500)["Valve lash"] == covered


def test_the_forecast_is_that_of_the_pulled_point() -> None:
    readings = [(f"2026-{month:02}-01", 3000 + 300 * month) for month in (1, 2, 3, 4)]
    task = lash(origin=last_done("2026-04-01", hours=4200))
    found = pulled(task, hours=readings, on="2026-05-01")
    own = pulled(task, hours=readings, on="2026-05-01", wears=())
    assert found.forecast is not None
    assert own.forecast is not None
    assert found.forecast.likely is not None
    assert own.forecast.likely is not None
    assert day("2026-05-01") < found.forecast.likely < own.forecast.likely


def drain(**changes: object) -> Task:
    """An oil change every 2500 h, done at 4000 h, before the sample."""
    given = {"number": 1, "name": "Oil", "work": "drain", "origin": last_done("2026-04-19", hours=4000)} | changes
    return a_task(every("2500h"), **given)  # type: ignore[arg-type]


def sampling(*triggers: Trigger, **changes: object) -> Task:
    """A task that takes oil samples, every 2500 h unless said otherwise."""
    given = {"number": 2, "name": "Sample", "needs_sheet": "oil", "origin": LAST} | changes
    return a_task(*(triggers or (every("2500h"),)), **given)  # type: ignore[arg-type]


def pulled_by_oil(*tasks: Task, **changes: object) -> dict[str, bool]:
    """Which lines are pulled by an oil sample."""
    given = {"on": "2026-05-01", "hours": 4000, "wears": (a_wear(work="oil"),)} | changes
    found = lines(*tasks, **given)  # type: ignore[arg-type]
    return {name: any(one.pull is not None for one in line.triggers) for name, line in found.items()}


def test_an_oil_sample_pulls_the_next_sample_else_the_drain() -> None:
    assert pulled_by_oil(drain(), sampling()) == {"Oil": False, "Sample": True}
    assert pulled_by_oil(drain()) == {"Oil": True}
    assert pulled_by_oil(drain(needs_sheet="oil")) == {"Oil": True}
    assert pulled_by_oil(drain(work="filter")) == {"Oil": False}


def test_a_sampling_task_without_hours_or_removed_leaves_the_pull_to_the_drain() -> None:
    assert pulled_by_oil(drain(), sampling(every("3mo"))) == {"Oil": True, "Sample": False}
    assert pulled_by_oil(drain(), sampling(removed_on=day("2026-04-01"))) == {"Oil": True}


@pytest.mark.parametrize(("on", "is_pulled"), [("2026-04-19", True), ("2026-04-20", False), ("2026-04-25", False)])
def test_an_oil_change_on_the_day_of_the_sample_or_later_ends_its_pull(on: str, is_pulled: bool) -> None:
    changed = {1: [done(on, hours=4000)]}
    assert pulled_by_oil(drain(origin=None), sampling(), done=changed)["Sample"] is is_pulled
    assert pulled_by_oil(drain(origin=last_done(on, hours=4000)), sampling())["Sample"] is is_pulled


@pytest.mark.parametrize("work", ["gear-oil", "coolant", "hydraulic-oil", "fuel"])
def test_another_fluid_changed_after_the_sample_leaves_the_oil_in_the_engine(work: str) -> None:
    other = drain(number=3, name="Other", work=work, origin=last_done("2026-04-25", hours=4000))
    assert pulled_by_oil(drain(), other) == {"Oil": True, "Other": False}


def test_a_drain_is_pulled_though_its_interval_is_longer_than_the_oil_was_watched() -> None:
    short = a_wear(("3700 3800 3900 4000", "40 60 81 100", None), low="0", high="150", work="oil")
    assert pulled_by_oil(drain(), wears=(short,)) == {"Oil": True}


def test_a_deferral_made_before_the_laboratory_answered_did_not_know_of_it() -> None:
    wear = replace(a_wear(work="oil"), received_on=day("2026-04-28"))
    for on, is_pulled in (("2026-04-27", True), ("2026-04-28", False)):
        task = sampling(deferrals=(deferred(on),))
        assert pulled_by_oil(task, wears=(wear,)) == {"Sample": is_pulled}


def test_values_of_a_fill_before_do_not_say_where_the_oil_stands_now() -> None:
    """The fill before, brought to the hours of this one, ran further than this one has by now."""
    wear = a_wear(
        ("3600 3900 4200", "40 100 161", None), ("3600 3700 3800", "40 61 80", None), low="0", high="85", work="oil"
    )
    (found,) = lines(drain(), on="2026-05-01", hours=3800, wears=(wear,)).values()
    assert found.triggers[0].pull is not None
    assert 3800 <= found.triggers[0].pull.at < 3830
