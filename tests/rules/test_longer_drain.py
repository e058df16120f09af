"""How much longer a sound oil could stay in: until which hours, by which figure, and when nothing is advised.

Worked: iron at 1100, 1200, 1300 and 1400 h is 10, 20, 31 and 40 ppm: 0.101 ppm/h about (1250 h, 25.25 ppm), s = 0.67. It
was watched for 300 h, so nothing is told beyond 1700 h; of a limit of 50 ppm, likely at 1495 h, the early end comes first.
"""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.lines import DueLine
from fleetcare.domain.quantities import Kind, Span
from fleetcare.domain.schedules import Combine, Task
from fleetcare.domain.trends import End
from fleetcare.domain.wear import Wear
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.row import due_row
from fleetcare.rules.explain import explain
from fleetcare.rules.explain_longer_drain import say_no_advice
from fleetcare.rules.longer_drain import Bar, LongerDrain, NoAdvice, longer_drain, sound_beyond
from tests.builders import a_deferral, a_task, day, done, every, facts, last_done
from tests.rules.wearing import segments

HOURS = "1100 1200 1300 1400"


def oil(values: str = "10 20 31 40", subject: str = "Fe iron", hours: str = HOURS, **limits: str) -> Wear:
    told = {End(name): Decimal(text) for name, text in (limits or {"high": "100"}).items()}
    return Wear("oil", subject, Kind.HOURS, "ppm", segments((hours, values, None)), told, day("2026-04-20"))


def drain(interval: str = "500h", *also: object, **changes: object) -> Task:
    """An oil change every 500 h, last at 1000 h."""
    given = {"name": "Oil", "work": "drain", "origin": last_done("2026-01-01", hours=1000)} | changes
    return a_task(every(interval), *also, **given)  # type: ignore[arg-type]


def looked_at(task: Task | None = None, *wears: Wear, hours: float = 1450, **more: object) -> tuple[DueLine, ItemFacts]:
    known = facts(task or drain(), on="2026-05-01", hours=hours, sound_oil=wears or (oil(),), **more)  # type: ignore[arg-type]
    return item_lines(known, recorded_only=True)[0], known


def advice(task: Task | None = None, *wears: Wear, **more: object) -> LongerDrain | NoAdvice:
    return longer_drain(*looked_at(task, *wears, **more))  # type: ignore[arg-type]


def until(task: Task | None = None, *wears: Wear, **more: object) -> int | None:
    found = advice(task, *wears, **more)
    return int(found.until) if isinstance(found, LongerDrain) else None


def why_none(task: Task | None = None, *wears: Wear, **more: object) -> str:
    line, known = looked_at(task, *wears, **more)  # type: ignore[arg-type]
    found = longer_drain(line, known)
    assert isinstance(found, NoAdvice)
    return say_no_advice(found, known)


@pytest.mark.parametrize("work", ["gear-oil", "coolant", "hydraulic-oil", "fuel"])
def test_only_the_drain_of_the_engine_s_oil_is_advised(work: str) -> None:
    assert until(drain(work=work)) is None


def test_a_limit_far_off_lets_it_stay_as_far_ahead_as_it_was_watched() -> None:
    assert until() == 1700


def test_a_limit_that_comes_before_that_ends_it_at_the_early_end() -> None:
    found = advice(drain("450h"), oil(high="50"), oil(subject="Cu copper", high="300"), hours=1400)
    assert isinstance(found, LongerDrain)
    assert 1450 < found.until < 1495
    assert (found.subject, found.subjects) == ("Fe iron", ("Fe iron", "Cu copper"))


def test_what_goes_nowhere_or_away_from_its_limit_holds_nothing_back_while_it_lies_well_inside() -> None:
    assert until(None, oil(), oil("5 6 5 6", "Cr", high="20")) == 1700
    assert until(None, oil(), oil("5 5 5 5", "Cr", low="2", high="20")) == 1700
    assert until(None, oil(), oil("9 8 7 6", "Si", high="20")) == 1700


@pytest.mark.parametrize(
    "other",
    [
        oil("5 9 4 8", "Cr", high="9"),
        oil("5 9 4 8", "Cr", low="3.9"),
        oil("10 20", "Cr", hours="1300 1400"),
        oil("10 20 30 120", "Cr"),
        oil("10 11 12 13", "Cr", hours="1400 1400 1400 1400"),
    ],
    ids=["too near above", "too near below", "too few", "past it", "all at once"],
)
def test_a_figure_not_watched_well_enough_takes_the_advice_away(other: Wear) -> None:
    assert until(None, oil(), other) is None


def test_nothing_is_advised_that_does_not_lie_beyond_the_own_point_and_today() -> None:
    assert until(drain("700h")) is None
    assert due_row(*looked_at(drain("700h"))).reason == ""
    assert until(drain("699h")) == 1700
    assert until(None, hours=1600) == 1700
    assert until(drain("500h"), oil(hours="1350 1400 1450 1500"), hours=1650) is None


@pytest.mark.parametrize(
    ("task", "why"),
    [
        (drain(law=True, deferrable=False), "it is required by law"),
        (drain(law=True), "it is required by law"),
        (drain(insurer=True), "it is required by the insurer"),
        (drain(deferrable=False), "it is not deferrable"),
        (drain(work="filter"), "it is no change of an engine's oil"),
        (drain("500h", every("4mo")), "it is not its hours that decide when it is due"),
        (drain(origin=None), "it is not its hours that decide when it is due"),
        (drain(deferrals=(a_deferral(hours=1600, on="2026-04-25"),)), "it is put off already"),
        (
            drain(origin=last_done("2026-04-20", hours=1000)),
            "the oil that was sampled is not in the engine any more",
        ),
        (drain("700h"), "Fe iron is only known to keep inside its limits until 1700 h on the dial"),
    ],
    ids=[
        "law",
        "law though deferrable",
        "insurer",
        "not deferrable",
        "other work",
        "due by date",
        "unset",
        "put off",
        "changed since",
        "not beyond",
    ],
)
def test_no_advice_for(task: Task, why: str) -> None:
    assert until(task) is None
    assert why_none(task) == why


def test_without_a_sound_sample_nothing_is_advised() -> None:
    known = facts(drain(), on="2026-05-01", hours=1450)
    found = longer_drain(item_lines(known, recorded_only=True)[0], known)
    assert isinstance(found, NoAdvice)
    assert say_no_advice(found, known) == "there is no oil sample that flags nothing"


def test_what_takes_the_advice_away_is_named() -> None:
    few, scattered = oil("10 20", "Cr", hours="1300 1400"), oil("5 9 4 8", "Cr", high="9")
    assert why_none(None, oil(), few).startswith("not everything in the oil can be projected: Cr: no slope yet: 2 more")
    assert why_none(None, oil(), scattered) == "a single value may lie outside its limits by then: Cr"


def test_how_long_an_oil_is_sound_is_told_of_a_line_that_is_put_off_too() -> None:
    found = sound_beyond(*looked_at(drain(deferrals=(a_deferral(hours=1600, on="2026-04-25"),))))
    assert isinstance(found, LongerDrain)
    assert found.until == 1700


def test_no_advice_for_a_line_that_its_samples_pull_forward() -> None:
    line, known = looked_at(drain("600h"), wears=(oil(high="48"),))
    assert longer_drain(line, known) == NoAdvice(Bar.PULLED)


def test_no_advice_once_the_oil_was_changed() -> None:
    assert until(done=[done("2026-04-20", hours=1420)]) is None


def test_the_row_says_it_in_short_and_the_working_on_what_it_rests_and_where_it_ends() -> None:
    line, known = looked_at(drain("500h", every("12mo")))
    assert due_row(line, known).reason == "oil sound until 1700 h on the dial: a supervisor can put it off to there"
    said = dict(explain(line, known))["longer drain"]
    assert "until 1700 h on the dial, 200 h beyond its own point (four times in five; looked at: Fe iron" in said
    assert "and never beyond 2027-01-01. Ask" in said
    by_log = looked_at(drain(), replace(oil(), is_topped_up_by_log=True))
    assert "beyond that Fe iron may not, topped up by the log). Advice" in dict(explain(*by_log))["longer drain"]


def test_the_bound_of_a_task_is_named_and_one_without_is_not() -> None:
    said = dict(explain(*looked_at()))["longer drain"]
    assert "to no later than there. Ask" in said
    bound = drain(combine=Combine.LAST, not_later_than=Span(2, "y"))
    assert "and never beyond 2028-01-01. Ask" in dict(explain(*looked_at(bound)))["longer drain"]


def test_no_other_line_says_anything_of_it() -> None:
    line, known = looked_at(drain(work="filter"))
    assert due_row(line, known).reason == ""
    assert "longer drain" not in dict(explain(line, known))
