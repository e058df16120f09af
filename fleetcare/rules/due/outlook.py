"""How the use of an item goes on: its latest figure per kind, how stale it is, and what it likely shows."""

from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from itertools import pairwise
from statistics import median

from fleetcare.domain.engines import Status, status_on
from fleetcare.domain.forecasts import Forecast
from fleetcare.domain.quantities import Kind
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.forecast import History
from fleetcare.rules.meters import CounterHistory

STALE_DAYS_UNTIL_A_RHYTHM_IS_KNOWN = 60
_GAPS_FOR_A_RHYTHM = 3
_GAPS_LOOKED_AT = 10

LAID_UP = Forecast(None, None, None, 0, "laid up: what is run counts, what will be run is not known")
RECORDED_ONLY = Forecast(None, None, None, 0, "left out: only what was recorded is asked for")


@dataclass(frozen=True, slots=True)
class Outlook:
    """One counter's latest life total, None where it was never read, and the forecast of it.

    `likely_now` is the figure expected on the day asked about, only where the latest reading is
    stale or that day lies in the future; None otherwise, or without a forecast.
    """

    now: Decimal | None
    likely_now: Decimal | None
    history: History | None
    no_forecast: Forecast = LAID_UP

    def reach(self, target: Decimal) -> Forecast:
        """Forecast the days on which a life total is reached."""
        return self.no_forecast if self.history is None else self.history.reach(target)


def outlooks(facts: ItemFacts, is_future: bool, recorded_only: bool = False) -> dict[Kind, Outlook]:
    """Give the outlook of each counter of an item on the day of its facts; `recorded_only` without forecasts."""
    laid_up = status_on(facts.item.spells, facts.on) is Status.LAID_UP
    no_forecast = RECORDED_ONLY if recorded_only else LAID_UP if laid_up else None
    return {
        kind: _outlook(counter, facts.on, facts.stale_days, is_future, no_forecast)
        for kind, counter in facts.counters.items()
    }


def stale_after(days_read: list[date], stale_days: int | None) -> float:
    """Give the age in days past which a latest reading is stale.

    A set number of days; else twice the median gap of the last ten; 60 days under three gaps.
    """
    if stale_days is not None:
        return stale_days
    days = sorted(set(days_read))
    gaps = [(later - earlier).days for earlier, later in pairwise(days)][-_GAPS_LOOKED_AT:]
    if len(gaps) < _GAPS_FOR_A_RHYTHM:
        return STALE_DAYS_UNTIL_A_RHYTHM_IS_KNOWN
    return 2 * median(gaps)


def _outlook(
    counter: CounterHistory, on: date, stale_days: int | None, is_future: bool, no_forecast: Forecast | None
) -> Outlook:
    latest = counter.latest
    now = latest.life if latest is not None else None
    if no_forecast is not None:
        return Outlook(now, None, None, no_forecast)
    history = History([(r.on, r.life) for r in counter.readings])
    days_read = [r.on for r in counter.readings]
    is_stale = latest is not None and (on - latest.on).days > stale_after(days_read, stale_days)
    likely = history.likely_value(on) if is_stale or is_future else None
    return Outlook(now, Decimal(str(round(likely, 3))) if likely is not None else None, history)
