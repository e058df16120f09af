"""How much the engines of the demo fleet run: invented, seeded, day by day."""

from bisect import bisect_left
from collections.abc import Callable, Mapping
from datetime import date, timedelta
from decimal import Decimal
from random import Random

Rhythm = Callable[[date, Random], int]
"""Gives what a meter gains on a day, in tenths of its unit."""

_WINTER = (11, 12, 1, 2, 3)
_SEASON_OF_FIELD_WORK = range(4, 11)
_SEASON_OF_WEED = range(5, 10)
_WEDNESDAY = 2


class Curve:
    """What a meter kind has counted by the end of each day, in the meter's unit, to the tenth."""

    def __init__(
        self, first: date, last: date, start: int, rhythm: Rhythm, seed: str, extra: Mapping[date, int] | None = None
    ) -> None:
        """Begin at `start` on `first`; `extra` are tenths gained on single days besides the rhythm."""
        self.first = first
        self._tenths = [start * 10]
        random = Random(seed)
        for number in range(1, (last - first).days + 1):
            day = first + timedelta(days=number)
            self._tenths.append(self._tenths[-1] + rhythm(day, random) + (extra or {}).get(day, 0))

    def at(self, day: date) -> Decimal:
        """Give the total at the end of a day."""
        return Decimal(self._tenths[(day - self.first).days]) / 10

    def day_of(self, total: Decimal) -> date:
        """Give the first day on which a total was reached."""
        return self.first + timedelta(days=bisect_left(self._tenths, int(total * 10)))


def winter_pump(day: date, random: Random) -> int:
    """Runs on most winter days, half an hour each Wednesday else."""
    if day.month in _WINTER:
        return random.randint(30, 90) if random.random() < 0.6 else 0
    return 5 if day.weekday() == _WEDNESDAY else 0


def standby(day: date, random: Random) -> int:
    """Runs when the mains fails, two or three times a year; its exercise runs are entered one by one."""
    return random.randint(15, 80) if random.random() < 0.007 else 0


def lorry_km(day: date, random: Random) -> int:
    """Drives whole kilometres on most working days."""
    if day.weekday() > 4:
        return 0
    kilometres = random.randint(60, 170)
    return 10 * kilometres if random.random() < 0.8 else 0


def lorry_hours(day: date, random: Random) -> int:
    """Runs an hour for every 35 km; with the same seed the hours of `lorry_km`."""
    return lorry_km(day, random) // 35


def lorry_miles(day: date, random: Random) -> int:
    """Drives whole miles on most working days."""
    return lorry_km(day, random) // 16 * 10


def tractor(day: date, random: Random) -> int:
    """Works on weekdays, long days from April to October."""
    if day.weekday() > 4:
        return 0
    if day.month in _SEASON_OF_FIELD_WORK:
        return random.randint(30, 70) if random.random() < 0.75 else 0
    return random.randint(5, 30) if random.random() < 0.5 else 0


def weed_boat(day: date, random: Random) -> int:
    """Cuts weed from May to September, moves now and then in April and October, else lies still."""
    if day.weekday() > 4:
        return 0
    chance = 0.5 if day.month in _SEASON_OF_WEED else 0.1 if day.month in {4, 10} else 0.0
    hours = random.randint(40, 80)
    return hours if random.random() < chance else 0
