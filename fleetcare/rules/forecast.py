"""When a counted figure will be reached, told from the engine's own past.

Two clues: how long the amount left would take at the use of the last 13 weeks, and how long the same
amount took when started on this calendar day in each of up to four earlier years. The likely time is
their geometric mean. Each clue is weighted by the inverse square of its mean squared error when tried on
past days, most of them in the same season (combination by inverse error: Bates & Granger 1969). The
weights are those for 60 days of usual use and hold for any target, so that a higher target is
never likely earlier.

The range holds the day four times in five. It comes from the errors the weighted pair would have made with
this very amount on six days of the last two years. Under 13 months it is at least that of the first passage of a
Wiener process drifting at the whole-life rate (inverse Gaussian: Ye & Chen 2014).

Days and use are floats here, and errors are of the log of days; nothing is compared to a limit.
"""

from collections.abc import Sequence
from datetime import date
from decimal import Decimal
from math import exp, floor, inf, log, prod, sqrt
from typing import NamedTuple

from fleetcare.domain.forecasts import Clue, Forecast
from fleetcare.rules.use_curve import UseCurve

FEWEST_READINGS, SHORTEST_SPAN = 3, 14
SEASON_KNOWN = 380
RECENT = 91
SAME_DATES = (365.25, 730.5, 1095.75, 1461)  # days back
PATIENCE, SETTLED = 150, 300  # an idle spell adds at most 150 days once 300 days of history tell the usual rate
WEIGHING_DAYS = (365, 325, 405, 710, 750, 60, 150, 240)  # before the last reading; same season first
WEIGHING_AMOUNT = 60  # days of use at the whole-life rate
TRIALS, RANGE_SPAN = 6, 730
# What an error is taken to be before any trial, as if seen so many times: (times, squared error).
RECENT_PRIOR, SEASON_PRIOR, RANGE_PRIOR = (2, 0.35**2), (2, 0.25**2), (3, 0.25**2)
LARGEST_ERROR = 1.5  # one freak spell is not to make the range endless
LEAST_SPREAD_WITHOUT_SEASON = 0.30
TIE = 1e-9  # logs of days closer than this are equal, whatever the unit they were worked out in
FOUR_IN_FIVE = 1.2815515655446004  # standard normal, 90 % point: a central range of 80 %
LATENESS = 1.2  # most misses are late: idle spells are longer than hard runs
NO_LATE_DATE, NO_DATE = 1500, 36525


class _Start(NamedTuple):
    """A day to forecast from, with all about it that does not hang on the amount asked for. Paces are days per use."""

    day: float
    total: float
    recent_pace: float
    life_pace: float
    patience: float
    years: list[tuple[float, float]]  # the same day in earlier years, last year first, and the total then


class _Trial(NamedTuple):
    """Log days on a past day: what came (so far, where it is not finished) and what each clue said."""

    came: float
    finished: bool
    recent: float
    season: float | None

    def error(self, said: float | None) -> float | None:
        """How wrong a word was; None where nothing was said, or where it may still come true."""
        if said is None or not (self.finished or self.came > said + TIE):
            return None
        return self.came - said


class History:
    """The accepted life totals of one meter kind of one engine: built once, asked for many targets.

    `figures` are (day, life total in the base unit) in any order; of several on one day the highest counts.
    """

    __slots__ = ("_curve", "_now", "_range_starts", "_season_weight", "_too_little")

    def __init__(self, figures: Sequence[tuple[date, Decimal | float]]) -> None:
        self._curve = curve = UseCurve(figures)
        self._too_little = _too_little(curve)
        if self._too_little is None:
            self._now = self._start(curve.last)
            self._season_weight = self._weigh_season()
            back = min(RANGE_SPAN, curve.span - _beginning(curve))
            days = [curve.last - back * n / TRIALS for n in range(1, TRIALS + 1)] if back > 15 else []
            self._range_starts = self._starts(days)

    def reach(self, target: Decimal | float) -> Forecast:
        """The days on which the life total `target` (base unit) is reached, or why they cannot be told.

        The likely day is the nearest one; early and late are the days in which the ends of the range fall.
        """
        amount = float(target) - self._curve.end
        readings = len(self._curve.days)
        if readings and amount <= 0:
            reached = f"already reached by the reading of {date.fromordinal(self._curve.last)}"
            return Forecast(None, None, None, readings, reached)
        if self._too_little is not None:
            return Forecast(None, None, None, readings, self._too_little)
        days = self._likely_days(amount)
        if days > NO_DATE:
            return Forecast(None, None, None, readings, "more than 100 years away at the use so far")
        early, late = self._range(amount, days)
        likely_day = self._day(days + 0.5)
        return Forecast(
            early=min(likely_day, self._day(early)),
            likely=likely_day,
            late=max(likely_day, self._day(late)) if late < NO_LATE_DATE else None,
            readings_used=readings,
            clues=self._clues(amount),
        )

    def likely_value(self, on: date) -> float | None:
        """The life total (base unit) whose likely date is `on`; None without a forecast.

        Never below the last reading. Good to a hundredth of a day, save in an idle season, where it stands still.
        """
        if self._too_little is not None:
            return None
        days = on.toordinal() - self._curve.last
        if days <= 0:
            return self._curve.end
        low, high = 0.0, days / self._now.life_pace
        while self._likely_days(high) <= days:
            low, high = high, 2 * high
        amount = low
        while high - low > 1e-6 * high:
            amount = (low + high) / 2
            miss = self._likely_days(amount) - days
            if abs(miss) < 0.01:
                break
            low, high = (low, amount) if miss > 0 else (amount, high)
        return self._curve.end + amount

    def _day(self, days: float) -> date:
        """So many days after the last reading; rounded first, so that no last bit decides between two days."""
        return date.fromordinal(min(self._curve.last + floor(round(days, 6)), date.max.toordinal()))

    def _start(self, day: float) -> _Start:
        curve = self._curve
        total = curve.total_on(day)
        span = day - curve.first
        window = RECENT if span > RECENT else span
        used = total - curve.total_on(day - window)
        life_pace = span / (total - curve.begin)
        years = []
        if curve.span >= SEASON_KNOWN:
            for back in SAME_DATES:
                if back > span:
                    break
                years.append((day - back, curve.total_on(day - back)))
        recent_pace = window / used if used > 0 else life_pace
        return _Start(day, total, recent_pace, life_pace, PATIENCE if span >= SETTLED else inf, years)

    def _starts(self, days: Sequence[float]) -> list[_Start]:
        """Past days to try the clues on; without any use before them there is nothing to try."""
        return [self._start(day) for day in days if day > self._curve.used_from]

    def _recent(self, start: _Start, amount: float) -> float:
        return _log(min(amount * start.recent_pace, amount * start.life_pace + start.patience))

    def _same_dates(self, start: _Start, amount: float) -> list[float]:
        """Days the amount took from the same date in earlier years, last year first.

        What was not used up by the start goes on from there at the whole-life rate.
        """
        last, known, pace = start.day, start.total, start.life_pace
        day_of, in_reach = self._curve.day_of, known + self._curve.slack
        return [
            (day_of(goal) if (goal := total + amount) <= in_reach else last + (goal - known) * pace) - day
            for day, total in start.years
        ]

    def _season(self, start: _Start, amount: float) -> float | None:
        took = self._same_dates(start, amount)
        return _log(prod(took)) / len(took) if took else None

    def _try(self, start: _Start, amount: float) -> _Trial:
        goal = start.total + amount
        finished = goal <= self._curve.end + self._curve.slack
        came = self._curve.day_of(goal) if finished else self._curve.last
        return _Trial(_log(came - start.day), finished, self._recent(start, amount), self._season(start, amount))

    def _weigh_season(self) -> float:
        """The share of the season clue in the likely time, 0 where no season is known."""
        if not self._now.years:
            return 0.0
        room = self._curve.span - _beginning(self._curve)
        backs = [back for back in WEIGHING_DAYS if back <= room][:TRIALS]
        starts = self._starts([self._curve.last - back for back in backs])
        trials = [self._try(start, WEIGHING_AMOUNT / self._now.life_pace) for start in starts]
        recent = _mean_square([trial.error(trial.recent) for trial in trials], RECENT_PRIOR) ** 2
        season = _mean_square([trial.error(trial.season) for trial in trials], SEASON_PRIOR) ** 2
        return recent / (recent + season)

    def _blend(self, recent: float, season: float | None) -> float | None:
        """The weighted mean of the clues; None where today's weightier one is missing."""
        if season is not None:
            return recent + self._season_weight * (season - recent)
        return recent if self._season_weight <= 0.5 else None

    def _likely_days(self, amount: float) -> float:
        recent, season = self._recent(self._now, amount), self._season(self._now, amount)
        return exp(recent if season is None else recent + self._season_weight * (season - recent))

    def _range(self, amount: float, likely: float) -> tuple[float, float]:
        """Days until the early and the late end; the late one may be infinite."""
        trials = [self._try(start, amount) for start in self._range_starts]
        errors = [trial.error(self._blend(trial.recent, trial.season)) for trial in trials]
        clipped = [error and max(-LARGEST_ERROR, min(LARGEST_ERROR, error)) for error in errors]
        seen = RANGE_PRIOR[0] + sum(error is not None for error in errors)
        spread = sqrt(_mean_square(clipped, RANGE_PRIOR)) * (1 + 1 / seen)
        if not self._now.years:
            spread = max(spread, LEAST_SPREAD_WITHOUT_SEASON)
        early = likely * exp(-FOUR_IN_FIVE * spread)
        late = likely * exp(LATENESS * FOUR_IN_FIVE * spread)
        if self._now.years:
            return early, late
        soonest, latest = _first_passage(self._curve, amount)
        return min(early, soonest), max(late, latest)

    def _clues(self, amount: float) -> tuple[Clue, ...]:
        seen = min(RECENT, self._curve.span)
        label = "last 13 weeks" if seen == RECENT else f"last {seen} days"
        recent = Clue(label, (exp(self._recent(self._now, amount)),), 1 - self._season_weight)
        if not self._now.years:
            return recent, Clue("season not known yet", (), 0.0)
        took = self._same_dates(self._now, amount)[::-1]
        year = date.fromordinal(self._curve.last).year
        years = ", ".join(str(year - back) for back in range(len(took), 0, -1))
        return recent, Clue(f"same date in {years}", tuple(took), self._season_weight)


def _too_little(curve: UseCurve) -> str | None:
    """Why a history is too short to forecast from, in words."""
    count = len(curve.days)
    needed = f"three over at least {SHORTEST_SPAN} days are needed"
    if count < FEWEST_READINGS:
        have = {0: "no readings", 1: "only 1 reading"}.get(count, f"only {count} readings")
        return f"{have}; {needed}"
    if curve.span < SHORTEST_SPAN:
        return f"the readings cover only {curve.span} days; {needed}"
    if curve.end <= curve.begin:
        return f"no use since the reading of {date.fromordinal(curve.first)}"
    return None


def _beginning(curve: UseCurve) -> int:
    """Days of history a past forecast must at least have had to start from."""
    return 45 if curve.span < 400 else 120


def _log(days: float) -> float:
    return log(days) if days > 1 else 0.0


def _mean_square(errors: Sequence[float | None], prior: tuple[int, float]) -> float:
    squares = [error * error for error in errors if error is not None]
    times, square = prior
    return (times * square + sum(squares)) / (times + len(squares))


def _first_passage(curve: UseCurve, amount: float) -> tuple[float, float]:
    """The roots of (amount - rate t)^2 = z^2 (v t + v t^2 / span): a drift known only from the span seen."""
    rate = (curve.end - curve.begin) / curve.span
    days, totals = curve.days[-31:], curve.totals[-31:]
    gaps = [(b - a, d - c) for a, b, c, d in zip(days, days[1:], totals, totals[1:], strict=False)]
    scatter = sum((used - rate * gap) ** 2 / gap for gap, used in gaps) / (len(gaps) - 1) * (1 + 2 / len(gaps))
    v = FOUR_IN_FIVE**2 * scatter
    a = rate**2 - v / curve.span
    b = 2 * amount * rate + v
    root = sqrt(max(0.0, b * b - 4 * a * amount**2))
    return 2 * amount**2 / (b + root), (b + root) / (2 * a) if a > 0 else inf
