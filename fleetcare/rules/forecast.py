"""When a counted figure will be reached, told from the engine's own past.

Two clues: how long the amount left would take at the use of the last 13 weeks, and how long the same
amount took when started on this calendar day in each of up to four earlier years. Both are tried out on
six past days of the same engine; each is weighted by the inverse square of its mean squared error there
(combination by inverse error: Bates & Granger 1969), and the range comes from the errors of the weighted
pair. Under 13 months the range is at least that of the first passage of a Wiener process whose drift is
the whole-life rate (inverse Gaussian: Ye & Chen 2014).

Time is counted in days as floats, use in the base unit of the meter; nothing here is compared to a limit.
"""

from bisect import bisect_left, bisect_right
from collections.abc import Sequence
from datetime import date
from decimal import Decimal
from math import exp, floor, inf, log, sqrt
from typing import NamedTuple

from fleetcare.domain.forecasts import Clue, Forecast

FEWEST_READINGS = 3
SHORTEST_HISTORY = 14
SEASON_KNOWN = 380
RECENT = 91
YEAR = 365.25
YEARS_BACK = 4
PATIENCE, SETTLED = 150, 300  # an idle spell adds at most 150 days once 300 days of history tell the usual rate
TRIALS, TRIAL_SPAN = 6, 730
# What a clue's error is taken to be before any trial, as if seen so many times: (times, squared log error).
RECENT_PRIOR, SEASON_PRIOR, SPREAD_PRIOR = (2, 0.35**2), (2, 0.25**2), (3, 0.25**2)
LEAST_SPREAD_WITHOUT_SEASON = 0.30
FOUR_IN_FIVE = 1.2815515655446004  # standard normal, 90 % point: a central range of 80 %
LATENESS = 1.2  # what goes wrong goes wrong late: idle spells are long, hard runs short
NO_LATE_DATE, NO_DATE = 1500, 36525


class _Start(NamedTuple):
    """A day to forecast from, with everything about it that does not hang on the amount asked for."""

    day: float
    total: float
    recent_pace: float  # days per unit of use in the last 13 weeks; the whole-life pace if those were idle
    life_pace: float
    patience: float
    years: tuple[tuple[float, float], ...]  # the same day in earlier years and the total then

    def recent(self, amount: float) -> float:
        """The log of the days the amount takes at the recent rate."""
        return log(max(1.0, min(amount * self.recent_pace, amount * self.life_pace + self.patience)))


class _Trial(NamedTuple):
    """What each clue said on a past day (log days), and what came: `finished` False means it had not come yet."""

    came: float
    finished: bool
    recent: float
    season: float | None

    def error(self, said: float | None) -> float | None:
        """The log error of what was said; None where nothing was, or where it may still come true."""
        if said is None or not (self.finished or self.came > said):
            return None
        return self.came - said


class _Outlook(NamedTuple):
    """The likely number of days as a log, and what it rests on."""

    log_days: float
    recent_weight: float
    season_weight: float
    trials: list[_Trial]

    def said(self, trial: _Trial) -> float | None:
        """What today's weights would have made of a trial; None where less than half of them existed then."""
        if trial.season is not None:
            return self.recent_weight * trial.recent + self.season_weight * trial.season
        return trial.recent if self.recent_weight >= 0.5 else None


class History:
    """The accepted life totals of one meter kind of one engine, read once and asked for many targets.

    `figures` are (day, life total in the base unit), in any order, never falling from day to day; of
    several on one day the highest counts.
    """

    __slots__ = ("_days", "_past", "_present", "_slack", "_totals")

    def __init__(self, figures: Sequence[tuple[date, Decimal | float]]) -> None:
        highest = {on.toordinal(): float(total) for on, total in sorted(figures)}
        self._days = list(highest)
        self._totals = list(highest.values())
        self._present: _Start | None = None
        self._past: list[_Start] = []
        if self._too_little() is None:
            # Sums of scaled figures differ in the last bits; what is equal must stay equal in any unit.
            self._slack = 1e-10 * (self._totals[-1] - self._totals[0])
            self._present = self._start(self._days[-1])
            self._past = [self._start(day) for day in self._trial_days() if self._total(day) > self._totals[0]]

    def reach(self, target: Decimal | float) -> Forecast:
        """When the life total will be `target` (base unit), in whole days, or why that cannot be told.

        The likely day is the nearest one; early and late are the days in which the ends of the range fall.
        """
        used = len(self._days)
        present = self._present
        reason = self._reached(float(target)) or self._too_little()
        if reason is not None or present is None:
            return Forecast(None, None, None, used, reason)
        amount = float(target) - present.total
        outlook = self._outlook(present, amount)
        days = exp(outlook.log_days)
        if days > NO_DATE:
            return Forecast(None, None, None, used, "more than 100 years away at the use so far")
        early, late = self._range(present, outlook, amount)
        likely = _day(present.day + days + 0.5)
        return Forecast(
            early=min(likely, _day(present.day + early)),
            likely=likely,
            late=max(likely, _day(present.day + late)) if late < NO_LATE_DATE else None,
            readings_used=used,
            clues=self._clues(present, outlook, amount),
        )

    def likely_value(self, on: date) -> float | None:
        """The life total (base unit) whose likely date is `on`; None without a forecast.

        Never below the last reading. Exact to a hundredth of a day.
        """
        present = self._present
        if present is None:
            return None
        days = on.toordinal() - present.day
        if days <= 0:
            return present.total
        low, high = 0.0, days / present.life_pace
        while self._likely_days(present, high) <= days:
            low, high = high, 2 * high
        while high - low > 1e-6 * high:
            amount = (low + high) / 2
            miss = self._likely_days(present, amount) - days
            if abs(miss) < 0.01:
                return present.total + amount
            low, high = (low, amount) if miss > 0 else (amount, high)
        return present.total + low

    def _reached(self, target: float) -> str | None:
        if not self._days or target > self._totals[-1]:
            return None
        return f"already reached by the reading of {date.fromordinal(self._days[-1])}"

    def _too_little(self) -> str | None:
        count = len(self._days)
        if count < FEWEST_READINGS:
            have = {0: "no readings", 1: "only 1 reading"}.get(count, f"only {count} readings")
            return f"{have}; three over at least {SHORTEST_HISTORY} days are needed"
        span = self._days[-1] - self._days[0]
        if span < SHORTEST_HISTORY:
            return f"the readings cover only {span} days; three over at least {SHORTEST_HISTORY} days are needed"
        if self._totals[-1] <= self._totals[0]:
            return f"no use since the reading of {date.fromordinal(self._days[0])}"
        return None

    def _trial_days(self) -> list[float]:
        """Past days spread evenly over the last two years, leaving a beginning to forecast from."""
        span = self._days[-1] - self._days[0]
        back = min(TRIAL_SPAN, span - (45 if span < 400 else 120))
        return [self._days[-1] - back * n / TRIALS for n in range(1, TRIALS + 1)] if back > 15 else []

    def _start(self, day: float) -> _Start:
        first, begin = self._days[0], self._totals[0]
        total = self._total(day)
        window = max(day - RECENT, first)
        used = total - self._total(window)
        life_pace = (day - first) / (total - begin)
        recent_pace = (day - window) / used if used > 0 else life_pace
        patience = PATIENCE if day - first >= SETTLED else inf
        years = tuple((then, self._total(then)) for k in range(1, YEARS_BACK + 1) if (then := day - YEAR * k) >= first)
        return _Start(day, total, recent_pace, life_pace, patience, years)

    def _total(self, day: float) -> float:
        """The life total on a day between the first reading and the last."""
        i = bisect_right(self._days, day)
        if i == len(self._days):
            return self._totals[-1]
        day0, total0 = self._days[i - 1], self._totals[i - 1]
        return total0 + (self._totals[i] - total0) * (day - day0) / (self._days[i] - day0)

    def _day_of(self, total: float) -> float:
        """The first day on which a life total within the readings was reached."""
        total -= self._slack
        i = bisect_left(self._totals, total)
        if i == 0:
            return self._days[0]
        day0, total0 = self._days[i - 1], self._totals[i - 1]
        return day0 + (self._days[i] - day0) * (total - total0) / (self._totals[i] - total0)

    def _same_dates(self, start: _Start, amount: float) -> list[tuple[float, float]]:
        """(day, days taken) for each earlier year in which the amount was through before the start."""
        known = start.total + self._slack - amount
        return [(then, self._day_of(total + amount) - then) for then, total in start.years if total <= known]

    def _season(self, start: _Start, amount: float) -> float | None:
        """The log of the days the same amount took in earlier years (their geometric mean)."""
        if self._days[-1] - self._days[0] < SEASON_KNOWN:
            return None
        took = self._same_dates(start, amount)
        return sum(log(max(1.0, days)) for _, days in took) / len(took) if took else None

    def _try(self, start: _Start, present: _Start, amount: float, with_season: bool) -> _Trial:
        total = start.total + amount
        finished = total <= present.total + self._slack
        took = (self._day_of(total) if finished else present.day) - start.day
        season = self._season(start, amount) if with_season else None
        return _Trial(log(max(1.0, took)), finished, start.recent(amount), season)

    def _outlook(self, present: _Start, amount: float) -> _Outlook:
        recent, season = present.recent(amount), self._season(present, amount)
        trials = [self._try(start, present, amount, season is not None) for start in self._past]
        weight = _trust(RECENT_PRIOR, [trial.error(trial.recent) for trial in trials])
        if season is None:
            return _Outlook(recent, 1.0, 0.0, trials)
        season_weight = _trust(SEASON_PRIOR, [trial.error(trial.season) for trial in trials])
        weight /= weight + season_weight
        return _Outlook(weight * recent + (1 - weight) * season, weight, 1 - weight, trials)

    def _likely_days(self, present: _Start, amount: float) -> float:
        return exp(self._outlook(present, amount).log_days)

    def _range(self, present: _Start, outlook: _Outlook, amount: float) -> tuple[float, float]:
        """Days until the early and the late end; the late one may be infinite."""
        times, squares = SPREAD_PRIOR
        total = times * squares
        for trial in outlook.trials:
            error = trial.error(outlook.said(trial))
            if error is not None:
                total += min(1.0, error * error)
                times += 1
        spread = sqrt(total / times) * (1 + 1 / times)
        if outlook.season_weight:
            return self._ends(outlook, spread)
        early, late = self._ends(outlook, max(spread, LEAST_SPREAD_WITHOUT_SEASON))
        passage = self._first_passage(present, amount)
        return min(early, passage[0]), max(late, passage[1])

    def _ends(self, outlook: _Outlook, spread: float) -> tuple[float, float]:
        wide = FOUR_IN_FIVE * spread
        return exp(outlook.log_days - wide), exp(outlook.log_days + LATENESS * wide)

    def _first_passage(self, present: _Start, amount: float) -> tuple[float, float]:
        """Where (amount - rate t)^2 = z^2 (v t + v t^2 / span): the drift known only from the span seen."""
        span = present.day - self._days[0]
        rate = 1 / present.life_pace
        days, totals = self._days[-31:], self._totals[-31:]
        gaps = [(b - a, d - c) for a, b, c, d in zip(days, days[1:], totals, totals[1:], strict=False)]
        scatter = sum((used - rate * gap) ** 2 / gap for gap, used in gaps)
        variance = FOUR_IN_FIVE**2 * scatter / (len(gaps) - 1) * (1 + 2 / len(gaps))
        a = rate**2 - variance / span
        b = 2 * amount * rate + variance
        root = sqrt(max(0.0, b * b - 4 * a * amount**2))
        return 2 * amount**2 / (b + root), (b + root) / (2 * a) if a > 0 else inf

    def _clues(self, present: _Start, outlook: _Outlook, amount: float) -> tuple[Clue, ...]:
        seen = round(min(RECENT, present.day - self._days[0]))
        label = "last 13 weeks" if seen == RECENT else f"last {seen} days"
        if present.recent_pace == present.life_pace:
            label = "whole life"
        recent = Clue(label, (exp(present.recent(amount)),), outlook.recent_weight)
        if present.day - self._days[0] < SEASON_KNOWN:
            return recent, Clue("season not known yet", (), 0.0)
        if not outlook.season_weight:
            return (recent,)
        took = sorted(self._same_dates(present, amount))
        years = ", ".join(str(date.fromordinal(floor(then)).year) for then, _ in took)
        return recent, Clue(f"same date in {years}", tuple(days for _, days in took), outlook.season_weight)


def _trust(prior: tuple[int, float], errors: list[float | None]) -> float:
    """The weight of a clue: the inverse of its mean squared error, squared so as to choose harder."""
    squares = [error * error for error in errors if error is not None]
    times, square = prior
    return ((times + len(squares)) / (times * square + sum(squares))) ** 2


def _day(moment: float) -> date:
    """The day a moment falls in; rounding first keeps the same moment on the same day in any unit."""
    return date.fromordinal(floor(round(moment, 6)))
