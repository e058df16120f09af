"""The whole history of the demo fleet up to an anchor day, as a list of dated entries."""

from collections.abc import Iterator, Mapping
from datetime import date, timedelta

from fleetcare.demo.diary import day_corrected, diary, misread_voided, odd_readings
from fleetcare.demo.fleet import ITEMS, SHOP
from fleetcare.demo.steps import Step, Verb, in_order
from fleetcare.demo.tasks import TASKS
from fleetcare.demo.work import work
from fleetcare.demo.yard import Yard

_READER = "Quill"


def history(anchor: date) -> list[Step]:
    """Give everything that was entered up to the anchor day, in order. Refuses a day too early for a history."""
    yard = Yard(anchor)
    jobs = list(work(yard))
    steps = [
        Step(min(yard.came.values()), Verb.SETTING, values={"name": "shop-name", "value": SHOP}),
        *_arrivals(yard),
        *jobs,
        *diary(yard),
        day_corrected(jobs),
        misread_voided(yard, jobs),
        *_rounds(yard, odd_readings(yard, jobs)),
    ]
    return in_order(steps)


def _arrivals(yard: Yard) -> Iterator[Step]:
    for item in ITEMS:
        values = {"tag": item.tag, "in_service": yard.came[item.tag], "as_new": item.as_new, **item.values}
        if item.meter is not None:
            meter = item.meter
            values |= {"meter": [f"{meter.kind}:{meter.unit}"], "start_at": [f"{meter.start}{meter.unit}"]}
            values |= {"meter_digits": [meter.digits] if meter.digits else []}
        verb = Verb.ENGINE if item.is_engine else Verb.MACHINE
        yield Step(yard.came[item.tag], verb, item.tag, values)
        for task in TASKS.get(item.tag, ()):
            yield Step(yard.came[item.tag], Verb.TASK, item.tag, task)


def _rounds(yard: Yard, odd: Mapping[tuple[str, date], Mapping[str, object]]) -> Iterator[Step]:
    """Read every meter every fourth Monday, on the day of its last round, and on the days something odd was read."""
    for tag in yard.meters:
        first, last = yard.came[tag] + timedelta(days=1), yard.last_round(tag)
        mondays = range(first.toordinal() + (7 - first.weekday()) % 7, last.toordinal(), 28)
        days = {date.fromordinal(day) for day in mondays} | {last} | {day for other, day in odd if other == tag}
        for day in sorted(days):
            values = {"value": yard.dial(tag, day), "by": _READER, **odd.get((tag, day), {})}
            yield Step(day, Verb.READING, tag, values, name=f"{tag} {day}")
