"""The scheduled work of the demo fleet, told backwards from how each line is to stand on the anchor day.

Counted work is placed on the day its figure was reached, so that what is left on the anchor day does not hang on
the season; calendar work is placed so many days before its point.
"""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from datetime import date, timedelta
from decimal import Decimal
from random import Random

from dateutil.relativedelta import relativedelta

from fleetcare.demo.fleet import ITEMS
from fleetcare.demo.steps import Step, Verb
from fleetcare.demo.yard import MISSED_EXERCISES, Yard

_NUMBER = {item.tag: place for place, item in enumerate(ITEMS)}
_MECHANICS = ("Fenn", "Quill")


@dataclass(frozen=True, slots=True)
class Counted:
    """Work done about every `every` of a meter (the item's own, else `meter`), next due in `left` (below 0: overrun)."""

    tag: str
    task: str
    every: int
    left: int
    meter: str = ""


@dataclass(frozen=True, slots=True)
class FromNew:
    """Work of an engine that came new: first at `first`, then every `every`; `every` 0 means once."""

    tag: str
    task: str
    first: int
    every: int


@dataclass(frozen=True, slots=True)
class Dated:
    """Work done about every `months`, next due (its nominal day) in `left` days; below 0: days past it."""

    tag: str
    task: str
    months: int
    left: int


COUNTED = (
    Counted("PS-01", "Oil and filter", 250, -12),
    Counted("PS-01", "Valve lash", 1000, 210),
    Counted("PS-01", "Fuel filter", 500, 160),
    Counted("PS-03", "Oil and filter", 250, 14),
    Counted("PS-03", "Fuel filter", 500, -9),
    Counted("PS-05", "Oil and filter", 250, 120),
    Counted("LE-1", "Oil and filter", 10000, -300, "LR-1"),
    Counted("LE-1", "Air filter", 20000, 900, "LR-1"),
    Counted("LE-1", "Full service", 40000, 600, "LR-1"),
    Counted("LE-1", "Valve lash", 1500, 400),
    Counted("LE-2", "Oil and filter", 10000, 1500, "LR-2"),
    Counted("LE-2", "Air filter", 20000, 9500, "LR-2"),
    Counted("LR-2", "Chassis grease", 5000, 4600),
    # Every 250 h, since the duty factor every 200 h.
    Counted("TR-2", "Oil and filter", 200, 30),
    Counted("TR-2", "Air filter", 200, -8),
    Counted("WB-1P", "Oil and filter", 200, 60),
)
FROM_NEW = (
    FromNew("TR-1", "Oil and filter", 50, 250),
    FromNew("TR-1", "Valve lash", 50, 500),
    FromNew("TR-1", "Retighten wheel and drawbar bolts", 10, 0),
    FromNew("WB-1S", "Oil and filter", 50, 200),
)
DATED = (
    Dated("PS-01", "Coolant", 24, 300),
    Dated("PS-04", "Oil and filter", 12, -20),
    Dated("PS-04", "Breather", 6, -40),
    Dated("PS-04", "Starter batteries", 3, -45),
    Dated("SB-01", "Oil and filter", 12, 16),
    Dated("SB-01", "Air cleaner", 12, 140),
    Dated("SB-02", "Oil and filter", 12, 75),
    Dated("SB-02", "Load test", 12, 50),
    Dated("LR-1", "Roadworthiness test", 12, 12),
    Dated("TR-2", "Injector service", 36, 495),
    Dated("WB-1", "Slip, scrape and antifoul", 12, 5),
    Dated("WB-1P", "Reduction gear oil", 12, -25),
    Dated("WB-1P", "Raw water impeller", 12, 90),
)
GRID = ("PS-02", 250, {1000: "1000 h service", 500: "500 h service", 250: "250 h service"})
WEEKLY = ("SB-01", "Weekly check", 26)


def work(yard: Yard) -> Iterator[Step]:
    """Give every scheduled job of the history; the newest of each task is named "TAG TASK"."""
    for counted in COUNTED:
        yield from _counted(yard, counted)
    for from_new in FROM_NEW:
        yield from _from_new(yard, from_new)
    for dated in DATED:
        yield from _dated(yard, dated)
    yield from _on_grid(yard)
    for tag, skipped in MISSED_EXERCISES.items():
        for day in yard.exercise_days(yard.came[tag], skipped):
            yield _log(tag, "Exercise run", day, yard.dial(tag, day))
    tag, task, weeks = WEEKLY
    monday = yard.ago(yard.anchor.weekday())
    for week in range(weeks):
        yield _log(tag, task, monday - timedelta(weeks=week))


def _counted(yard: Yard, row: Counted) -> Iterator[Step]:
    meter = row.meter or row.tag
    random = Random(f"{row.tag} {row.task}")
    figure = yard.latest(meter) - row.every + row.left
    newest = True
    while figure > yard.meters[meter].start:
        day = yard.curves[meter].day_of(figure)
        yield _log(row.tag, row.task, day, yard.shown(meter, figure, day), newest=newest)
        newest = False
        figure -= row.every * Decimal(random.randint(94, 102)) // 100


def _from_new(yard: Yard, row: FromNew) -> Iterator[Step]:
    random = Random(f"{row.tag} {row.task}")
    figure = Decimal(row.first - random.randint(1, 2))
    while figure <= yard.latest(row.tag):
        day = yard.curves[row.tag].day_of(figure)
        yield _log(row.tag, row.task, day, yard.shown(row.tag, figure, day))
        if not row.every:
            return
        figure += row.every - random.randint(1, 6)


def _dated(yard: Yard, row: Dated) -> Iterator[Step]:
    random = Random(f"{row.tag} {row.task}")
    day = yard.ago(-row.left) - relativedelta(months=row.months)
    newest = True
    while day > yard.came[row.tag]:
        dial = yard.dial(row.tag, day) if row.tag in yard.meters else ""
        yield _log(row.tag, row.task, day, dial, newest=newest)
        newest = False
        # A few days early each time, so that none is late by the length of a month.
        day += timedelta(days=random.randint(0, 6)) - relativedelta(months=row.months)


def _on_grid(yard: Yard) -> Iterator[Step]:
    """Do the biggest service of each multiple a few hours early; it covers the smaller ones."""
    tag, interval, services = GRID
    random = Random(tag)
    figure = interval
    while (done := Decimal(figure - random.randint(2, 12))) <= yard.latest(tag):
        task = next(name for every, name in services.items() if figure % every == 0)
        day = yard.curves[tag].day_of(done)
        yield _log(tag, task, day, yard.shown(tag, done, day))
        figure += interval


def _log(tag: str, task: str, on: date, at: str = "", *, newest: bool = False) -> Step:
    values: Mapping[str, object] = {"task": [task], "at": [at] if at else [], "by": _MECHANICS[_NUMBER[tag] % 2]}
    return Step(on, Verb.LOG, tag, values, name=f"{tag} {task}" if newest else "")
