"""How the tasks of the demo fleet were kept up, told backwards from how each line is to stand on the anchor day.

Counted work is placed on the day its figure was reached, so that what is left on the anchor day does not hang on
the season; calendar work is placed so many days before its point. A plan gives days and dial figures, newest first.
"""

from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date, timedelta
from decimal import Decimal
from random import Random
from typing import TYPE_CHECKING, Protocol

from dateutil.relativedelta import relativedelta

if TYPE_CHECKING:
    from fleetcare.demo.yard import Yard

Work = tuple[date, str]
"""A day, and what the dial showed; empty where none was read."""


class Plan(Protocol):
    """When a task was done."""

    def work(self, yard: "Yard", tag: str, task: str) -> Iterator[Work]:
        """Give the days on which the task of an item was done, newest first."""


@dataclass(frozen=True, slots=True)
class Never:
    """Not done since the register began."""

    def work(self, yard: "Yard", tag: str, task: str) -> Iterator[Work]:
        """Give nothing."""
        return iter(())


@dataclass(frozen=True, slots=True)
class Counted:
    """Done about every `every` of a meter, next due in `left` of its units; below 0: so far past it.

    `of` names the meter: the item's first where empty. `most` is how many times are on record.
    """

    every: int
    left: int
    of: str = ""
    most: int = 99

    def work(self, yard: "Yard", tag: str, task: str) -> Iterator[Work]:
        """Give the days on which each figure was reached, back to where the meter started."""
        meter, random = self.of or tag, Random(f"{tag} {task}")
        figure = yard.latest(meter) - self.every + self.left
        for _ in range(self.most):
            if figure <= yard.start(meter):
                return
            day = yard.curves[meter].day_of(figure)
            yield day, yard.shown(meter, figure, day)
            figure -= self.every * Decimal(random.randint(94, 102)) // 100


@dataclass(frozen=True, slots=True)
class FromNew:
    """Done first at about `first`, then every `every` of the item's meter; `every` 0 means once."""

    first: int
    every: int

    def work(self, yard: "Yard", tag: str, task: str) -> Iterator[Work]:
        """Give the day of each figure reached, each a little early."""
        random, done = Random(f"{tag} {task}"), []
        figure = Decimal(self.first - random.randint(1, 2))
        while figure <= yard.latest(tag):
            day = yard.curves[tag].day_of(figure)
            done.append((day, yard.shown(tag, figure, day)))
            if not self.every:
                break
            figure += self.every - random.randint(1, 6)
        return reversed(done)


@dataclass(frozen=True, slots=True)
class OnGrid:
    """Done a few hours before each multiple of `size`, save those of a `bigger` one that covers it."""

    size: int
    bigger: int = 0

    def work(self, yard: "Yard", tag: str, task: str) -> Iterator[Work]:
        """Give the day of each multiple reached."""
        random, done = Random(f"{tag} {task}"), []
        for figure in range(self.size, int(yard.latest(tag)), self.size):
            early = Decimal(figure - random.randint(2, 12))
            if not self.bigger or figure % self.bigger:
                day = yard.curves[tag].day_of(early)
                done.append((day, yard.shown(tag, early, day)))
        return reversed(done)


@dataclass(frozen=True, slots=True)
class Dated:
    """Done about every `months`, next due (its nominal day) in `left` days; below 0: days past it."""

    months: int
    left: int
    most: int = 99

    def work(self, yard: "Yard", tag: str, task: str) -> Iterator[Work]:
        """Give the days, each a few days before the next one is due, so that none is late by the length of a month."""
        random = Random(f"{tag} {task}")
        day = yard.ago(-self.left) - relativedelta(months=self.months)
        for _ in range(self.most):
            if day <= yard.came[tag]:
                return
            yield day, yard.dial(tag, day) if tag in yard.meters else ""
            day += timedelta(days=random.randint(0, 6)) - relativedelta(months=self.months)


@dataclass(frozen=True, slots=True)
class Each:
    """Done once each calendar period of so many months (0: each week), the newest `skipped` left out.

    `missed` counts back to a period before those in which it was forgotten.
    """

    months: int
    skipped: int = 0
    most: int = 12
    missed: int | None = None

    def work(self, yard: "Yard", tag: str, task: str) -> Iterator[Work]:
        """Give a Monday of each week, or the second Tuesday of each period, where it has come."""
        for day in self.days(yard.anchor):
            if day > yard.came[tag]:
                yield day, yard.dial(tag, day) if tag in yard.meters else ""

    def days(self, anchor: date) -> Iterator[date]:
        """Give the days up to an anchor day, newest first."""
        for number in range(self.skipped, self.skipped + self.most):
            if number == self.missed:
                continue
            if self.months:
                begins = anchor.replace(day=1) - relativedelta(months=(anchor.month - 1) % self.months)
                begins -= relativedelta(months=self.months * number)
                day = begins + timedelta(days=7 + (1 - begins.weekday()) % 7)
            else:
                day = anchor - timedelta(days=anchor.weekday() + 7 * number)
            if day <= anchor:
                yield day
