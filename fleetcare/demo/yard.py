"""The yard on an anchor day: what every meter of the demo fleet counted and showed on every day before."""

from collections.abc import Mapping
from datetime import date, timedelta
from decimal import Decimal

from dateutil.relativedelta import relativedelta

from fleetcare.demo.fleet import ITEMS, Item, Meter
from fleetcare.demo.use import Curve
from fleetcare.domain.quantities import plain
from fleetcare.errors import Refused

METER_REPLACED, METER_REPLACED_AGO, _RAN_UNMETERED = "PS-01", 405, 400
"""Whose meter was replaced, how many days ago, and what ran unmetered meanwhile, in tenths of an hour."""

ROLLED_OVER, _MODULUS = "SB-02", 10000
_EXERCISE_TENTHS = 7
_TUESDAY = 1
_YEARS_BACK = 4


class Yard:
    """The demo fleet seen from its anchor day."""

    def __init__(self, anchor: date) -> None:
        """Work out all use up to `anchor`. Refuses a day so early that the history does not fit the calendar."""
        if anchor.year <= _YEARS_BACK:
            raise Refused(f"the demo fleet has no history before {anchor}", "give a later --as-of")
        self.anchor = anchor
        self.came = {item.tag: self.ago(item.came) for item in ITEMS}
        self.meters: Mapping[str, Meter] = {item.tag: item.meter for item in ITEMS if item.meter is not None}
        self.curves = {item.tag: self._curve(item, item.meter) for item in ITEMS if item.meter is not None}
        self.replaced_on = self.ago(METER_REPLACED_AGO)
        self.rolled_over_on = self.curves[ROLLED_OVER].day_of(Decimal(_MODULUS))

    def ago(self, days: int) -> date:
        """Give the day some days before the anchor day; a negative number lies ahead."""
        return self.anchor - timedelta(days=days)

    def last_round(self, tag: str) -> date:
        """Give the day a meter was last read on a round."""
        return self.ago(self.meters[tag].unread)

    def latest(self, tag: str) -> Decimal:
        """Give the total of a meter at its last round."""
        return self.curves[tag].at(self.last_round(tag))

    def dial(self, tag: str, day: date) -> str:
        """Give what a meter showed at the end of a day, with its unit."""
        return self.shown(tag, self.curves[tag].at(day), day)

    def shown(self, tag: str, total: Decimal, day: date, more: int = 0) -> str:
        """Give what a meter showed at a total of some day, with its unit; `more` is added to the figure."""
        if tag == METER_REPLACED and day >= self.replaced_on:
            total = max(Decimal(0), total - self.curves[tag].at(self.replaced_on))
        if tag == ROLLED_OVER and day >= self.rolled_over_on:
            total %= _MODULUS
        return f"{plain(total + more)}{self.meters[tag].unit}"

    def exercise_days(self, since: date, skipped: int) -> list[date]:
        """Give the exercise day of each month from the one after `since`, newest last, the newest `skipped` left out.

        It is the first Tuesday, or the anchor day where that has not come yet.
        """
        first = self.anchor.replace(day=1) - relativedelta(months=skipped)
        days = []
        while first > since:
            tuesday = first + timedelta(days=(_TUESDAY - first.weekday()) % 7)
            days.append(min(tuesday, self.anchor))
            first -= relativedelta(months=1)
        return days[::-1]

    def _curve(self, item: Item, meter: Meter) -> Curve:
        extra: dict[date, int] = {}
        if item.tag == METER_REPLACED:
            extra = {self.ago(METER_REPLACED_AGO): _RAN_UNMETERED}
        if item.tag in MISSED_EXERCISES:
            days = self.exercise_days(self.came[item.tag], MISSED_EXERCISES[item.tag])
            extra = dict.fromkeys(days, _EXERCISE_TENTHS)
        return Curve(self.came[item.tag], self.anchor, meter.start, meter.rhythm, meter.seed, extra)


MISSED_EXERCISES = {"SB-01": 0, "SB-02": 2}
"""Sets that are exercised once each month, and how many of the newest months have no exercise run."""
