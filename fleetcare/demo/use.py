"""How much the engines of the demo fleet run: invented, seeded, day by day."""

from bisect import bisect_left
from collections.abc import Callable, Collection, Mapping
from datetime import date, timedelta
from decimal import Decimal
from itertools import accumulate
from random import Random

Rhythm = Callable[[date, Random], int]
"""Gives what a meter gains on a day, in tenths of its unit."""

_THURSDAY, _SATURDAY = 3, 5
_PROVED_UNTIL = 63
"""Days of a year: nine Thursdays are among them."""

PROVING_TENTHS = 100


class Curve:
    """What a meter has counted by the end of each day, in its unit, to the tenth."""

    def __init__(
        self,
        first: date,
        last: date,
        rhythm: Rhythm,
        seed: str,
        extra: Mapping[date, int] | None = None,
        idle: tuple[date, date] = (date.max, date.max),
    ) -> None:
        """Begin at 0 on `first`. `extra` are tenths gained on single days besides, `idle` the days without any use."""
        self.first = first
        random, days = Random(seed), [first + timedelta(days=n) for n in range(1, (last - first).days + 1)]
        gained = {day: rhythm(day, random) for day in days}
        for day, more in (extra or {}).items():
            if day in gained:
                gained[day] += more
        begins, ends = idle
        self._tenths = list(accumulate((0 if begins <= day <= ends else gained[day] for day in days), initial=0))
        self.lift(Decimal(0))

    def lift(self, start: Decimal) -> None:
        """Let it begin at another figure."""
        self._start = int(start * 10)

    @property
    def start(self) -> Decimal:
        """The figure it began at."""
        return Decimal(self._start) / 10

    def at(self, day: date) -> Decimal:
        """Give the total at the end of a day."""
        return Decimal(self._start + self._tenths[(day - self.first).days]) / 10

    def day_of(self, total: Decimal) -> date:
        """Give the first day on which a total was reached."""
        return self.first + timedelta(days=bisect_left(self._tenths, int(total * 10) - self._start))


def steady(low: int, high: int, chance: float, every_day: bool = False) -> Rhythm:
    """Run on working days alike all year, or on every day, with a chance, from `low` to `high` tenths."""

    span = high - low + 1

    def rhythm(day: date, random: Random) -> int:
        if day.weekday() >= _SATURDAY and not every_day:
            return 0
        return low + int(random.random() * span) if random.random() < chance else 0

    return rhythm


def seasonal(months: Collection[int], busy: Rhythm, quiet: Rhythm) -> Rhythm:
    """Run in one way in some months, in another in the rest."""
    return lambda day, random: busy(day, random) if day.month in months else quiet(day, random)


def scaled(rhythm: Rhythm, times: float, unit: int = 1) -> Rhythm:
    """Run so many times another rhythm, in whole multiples of `unit` tenths."""
    return lambda day, random: int(rhythm(day, random) * times) // unit * unit


def once_a_week(weekday: int, tenths: int) -> Rhythm:
    """Run the same on one day of each week."""
    return lambda day, random: tenths if day.weekday() == weekday else 0


def together(*rhythms: Rhythm) -> Rhythm:
    """Add rhythms up."""
    return lambda day, random: sum(rhythm(day, random) for rhythm in rhythms)


def is_proving(day: date) -> bool:
    """Whether a set that is proved on a load bank each year runs on it that day, ten hours."""
    return day.weekday() == _THURSDAY and day.timetuple().tm_yday <= _PROVED_UNTIL


_WINTER, _FIELD_WORK, _WEED = (11, 12, 1, 2, 3), range(4, 11), range(5, 10)

winter_pump = seasonal(_WINTER, steady(30, 90, 0.6, every_day=True), once_a_week(2, 5))
"""Runs on most winter days, half an hour each Wednesday else."""

standby = steady(15, 80, 0.007, every_day=True)
"""Runs when the mains fails, two or three times a year; its exercise runs are entered one by one."""

proved = together(standby, lambda day, random: PROVING_TENTHS if is_proving(day) else 0)
"""Runs as `standby`, and on a load bank at the beginning of each year."""

self_test = together(once_a_week(0, 10), scaled(steady(10, 39, 0.02, every_day=True), 1, unit=10))
"""Starts by itself each Monday, and when the mains fails."""

tractor = seasonal(_FIELD_WORK, steady(30, 70, 0.75), steady(5, 30, 0.5))
"""Works long days from April to October, now and then else."""

weed_boat = seasonal(_WEED, steady(40, 80, 0.5), seasonal((4, 10), steady(40, 80, 0.1), steady(0, 0, 0.0)))
"""Cuts weed from May to September, moves now and then in April and October, else lies still."""

digger = seasonal((8, 9, 10, 11, 2, 3), steady(40, 75, 0.75), steady(20, 60, 0.4))
"""Digs banks after harvest and before the spring, less else."""

now_and_then = steady(8, 35, 0.22)
"""Some hours a week: compressors, chippers, small pumps."""

lorry_km = scaled(steady(600, 1700, 0.8), 1, unit=10)
"""Drives on most working days; the dial has no decimals."""

lorry_hours = scaled(lorry_km, 1 / 35)
"""Runs an hour for every 35 km; with the same seed the hours of `lorry_km`."""

lorry_miles = scaled(lorry_km, 1 / 1.6, unit=10)
"""Drives as `lorry_km`, in miles."""
