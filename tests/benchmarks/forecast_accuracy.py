"""How far off forecasts are, on four invented kinds of engine, against the whole-life rate.

    python -m tests.benchmarks.forecast_accuracy

For each kind: the median distance in days between the likely day and the true one, asked 30, 60 and 90 days ahead,
the same divided by that of a straight line at the whole-life rate (below 1 is better), and how often
the range of four in five holds the true day. Fixed seeds; some ten seconds. Run by hand, not by pytest.
"""

import random
import sys
from bisect import bisect_left
from collections.abc import Callable
from datetime import date, timedelta
from statistics import mean, median

from fleetcare.rules.forecast import History

FIRST = date(2020, 1, 6)
DAYS = 5 * 365
ENGINES, TARGETS = 200, 6
LEADS = (30, 60, 90)
SETTLED = 600  # days of history before the first question
Readings = list[tuple[date, float]]
Use = Callable[[int], float]
"""Hours run on a day, counted from the first."""


def drainage_pump(rng: random.Random) -> Use:
    """Runs in the wet months, each winter wetter or drier and earlier or later than the last."""
    starts = [rng.gauss(300, 9) for _ in range(7)]
    wetness = [rng.uniform(5, 11) for _ in range(7)]

    def hours(n: int) -> float:
        year = (n + 100) // 365
        into = n - (year - 1) * 365 - starts[year]
        return rng.uniform(0, 2 * wetness[year]) if 0 <= into < 140 else 0.3 * (rng.random() < 0.05)

    return hours


def yard_tractor(rng: random.Random) -> Use:
    """Works Monday to Friday, with two weeks off in summer and one at the turn of the year."""
    usual, holiday = rng.uniform(3, 8), rng.randint(180, 220)

    def hours(n: int) -> float:
        off = n % 7 > 4 or n % 365 < 7 or 0 <= n % 365 - holiday < 14 or rng.random() < 0.1
        return 0 if off else max(0.5, rng.gauss(usual, 1.5))

    return hours


def weed_boat(rng: random.Random) -> Use:
    """Out for days, moored for days, cut back in winter; the work of a season differs from the last."""
    season = [rng.uniform(6, 12) for _ in range(7)]
    out, left = False, 0

    def hours(n: int) -> float:
        nonlocal out, left
        if left == 0:
            out, left = not out, rng.randint(2, 8)
        left -= 1
        in_season = 110 <= n % 365 < 300
        return max(0, rng.gauss(season[n // 365], 2)) * (1 if in_season else 0.25) if out else 0

    return hours


def lorry(rng: random.Random) -> Use:
    """Six days a week on a round that changes about once a year."""
    usual = rng.uniform(4, 9)

    def hours(n: int) -> float:
        nonlocal usual
        if rng.random() < 1 / 400:
            usual = rng.uniform(4, 9)
        return 0 if n % 7 == 6 else max(0, rng.gauss(usual, 1.5))

    return hours


def run(use: Use, rng: random.Random) -> tuple[list[float], Readings]:
    """The true meter at the start of each day, and what was read off it every one to four weeks."""
    meter = [rng.uniform(0, 5000)]
    for n in range(DAYS):
        meter.append(meter[-1] + use(n))
    readings, n = [], rng.randint(0, 6)
    while n < DAYS:
        readings.append((FIRST + timedelta(days=n), float(round((meter[n] + meter[n + 1]) / 2))))
        n += rng.randint(7, 28)
    return meter, readings


def at_life_rate(readings: Readings, target: float) -> date:
    """The day on a straight line from the first reading through the last."""
    (first, begin), (last, end) = readings[0], readings[-1]
    return last + (last - first) * ((target - end) / (end - begin))


def trial(kind: Callable[[random.Random], Use], seed: int) -> list[tuple[int, int, int, bool]]:
    """(lead, days off, days off at the life rate, held by the range) for each question asked of one engine."""
    rng = random.Random(f"{kind.__name__} {seed}")
    meter, readings = run(kind(rng), rng)
    asked = []
    for _ in range(TARGETS):
        target = round(rng.uniform(meter[SETTLED + max(LEADS)], meter[-1]), -1)
        truth = FIRST + timedelta(days=bisect_left(meter, target) - 1)
        for lead in LEADS:
            known = [(on, total) for on, total in readings if on <= truth - timedelta(days=lead)]
            answer = History(known).reach(target)
            if answer.likely and answer.early and (truth - FIRST).days - lead >= SETTLED:
                held = answer.early <= truth <= (answer.late or date.max)
                naive = abs((at_life_rate(known, target) - truth).days)
                asked.append((lead, abs((answer.likely - truth).days), naive, held))
    return asked


def main() -> None:
    """Print the table."""
    row = "{:<14} {:>8} {:>8} {:>8}   {:>6} {:>6} {:>6}   {:>5}\n"
    sys.stdout.write(row.format("kind", *(f"{lead} d" for lead in LEADS), *(f"x{lead}" for lead in LEADS), "held"))
    for kind in (drainage_pump, yard_tractor, weed_boat, lorry):
        asked = [one for seed in range(ENGINES) for one in trial(kind, seed)]
        off = {lead: median(days for at, days, _, _ in asked if at == lead) for lead in LEADS}
        naive = {lead: median(days for at, _, days, _ in asked if at == lead) for lead in LEADS}
        ratios = (f"{off[lead] / naive[lead]:.2f}" for lead in LEADS)
        held = mean(held for *_, held in asked)
        sys.stdout.write(row.format(kind.__name__, *(f"{off[lead]:g} d" for lead in LEADS), *ratios, f"{held:.2f}"))


if __name__ == "__main__":
    main()
