"""When the valve lash of the demo fleet was gauged: with the jobs of its task, and in passing on some rounds."""

from collections.abc import Iterator
from datetime import date, timedelta
from decimal import Decimal
from typing import NamedTuple

from fleetcare.demo.items import Item
from fleetcare.demo.steps import Step, Verb
from fleetcare.demo.wear import Gauged, Occasion, sheets
from fleetcare.demo.yard import Yard
from fleetcare.domain.measured import LASH

_APART = timedelta(days=40)
_IN_PASSING = "Valve lash gauged in passing"
_UNMETERED_HOURS = 2
"""A day, where nothing counts them."""


class _Time(NamedTuple):
    """A day the engine was gauged on, and for a job what the dial showed then; None in passing."""

    on: date
    dial: str | None


def gauged_steps(yard: Yard, item: Item, by: str) -> Iterator[Step]:
    """Log every sheet of an item, each on its day; those from before the changeover came with it, from paper."""
    if item.gauged is None:
        return
    times = list(_times(yard, item, item.gauged))
    occasions = list(_occasions(yard, item, item.gauged, times))
    note = next((kept.note for kept in item.tasks if kept.name == item.gauged.task), "")
    taken = sheets(item.tag, {key: str(value) for key, value in item.plate.items()}, item.gauged, occasions)
    for (on, dial), occasion, sheet in zip(times, occasions, taken, strict=True):
        values = {"sheet": sheet, "kind": LASH, "when": "hot" if occasion.is_hot else item.plate["lash_when"], "by": by}
        values |= {"task": [item.gauged.task], "at": [dial] if dial else []} if occasion.is_job else {}
        values |= {"note": (note if occasion.is_newest_job else "") if occasion.is_job else _IN_PASSING}
        verb = Verb.LOG if occasion.is_job else Verb.SHEET
        yield Step(on, max(on, yard.changeover), verb, item.tag, values)


def _times(yard: Yard, item: Item, gauged: Gauged) -> Iterator[_Time]:
    """Give the days, oldest first. No round is near a job, and each has a reading of its day."""
    plans = [kept.plan for kept in item.tasks if kept.name == gauged.task]
    jobs = [_Time(on, dial) for plan in plans for on, dial in plan.work(yard, item.tag, gauged.task)]
    last = yard.last_round(item.tag) if item.meters else yard.anchor
    rounds = [day for day in yard.rounds() if yard.came[item.tag] < day <= last][gauged.skipped :: gauged.every]
    quiet = [_Time(day, None) for day in rounds if all(abs(day - job.on) > _APART for job in jobs)]
    yield from sorted([*jobs, *quiet])


def _occasions(yard: Yard, item: Item, gauged: Gauged, times: list[_Time]) -> Iterator[Occasion]:
    jobs = [time.on for time in times if time.dial is not None]
    passing = [time.on for time in times if time.dial is None][::-1]
    hot = passing[gauged.hot] if gauged.hot is not None and gauged.hot < len(passing) else None
    for on, dial in times:
        yield Occasion(_hours(yard, item, on), dial is not None, on == jobs[-1] if jobs else False, on == hot)


def _hours(yard: Yard, item: Item, on: date) -> Decimal:
    if item.meters:
        return yard.curves[item.tag].at(on)
    return Decimal((on - yard.came[item.tag]).days * _UNMETERED_HOURS)
