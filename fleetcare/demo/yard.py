"""The yard on an anchor day: what every meter of the demo fleet counted and showed on every day before."""

from collections.abc import Iterator, Sequence
from datetime import date, timedelta
from decimal import Decimal

from fleetcare.demo.items import Item, Meter
from fleetcare.demo.use import Curve
from fleetcare.domain.days import FIRST_DAY
from fleetcare.domain.quantities import plain
from fleetcare.errors import Refused

CHANGEOVER = 120
"""How many days ago the Board began to use the tool. What is older was entered then, from the card index."""

UNMETERED = 400
"""What ran on the day a meter was replaced without being counted, in tenths."""

_WEEKS, _WEEKS_BEFORE = 4, 8
"""Weeks between two rounds, since and before the tool is used."""

_EXERCISE_TENTHS = 7
_PAST_THE_TURN = Decimal("0.4")


class Yard:
    """Some items of the demo fleet seen from an anchor day. Meters go by the names their items give them."""

    def __init__(self, anchor: date, items: Sequence[Item], changeover: int = CHANGEOVER) -> None:
        """Work out all use up to `anchor`. Refuses a day so early that the history would begin before any can.

        `changeover` is how many days before it the tool came into use.
        """
        earliest = FIRST_DAY + timedelta(days=max(item.came for item in items))
        if anchor < earliest:
            raise Refused(
                f"the history of the demo fleet does not fit before {anchor}", f"give a day from {earliest} on"
            )
        self.anchor = anchor
        self.changeover = self.ago(changeover)
        self.came = {item.tag: self.ago(item.came) for item in items}
        self._rounds = tuple(self._round_days())
        self.meters: dict[str, Meter] = {}
        self.curves: dict[str, Curve] = {}
        for item in items:
            for name, meter in zip(item.meter_names(), item.meters, strict=True):
                self.meters[name] = meter
                self.curves[name] = self._curve(item, meter)

    def ago(self, days: int) -> date:
        """Give the day some days before the anchor day; a negative number lies ahead."""
        return self.anchor - timedelta(days=days)

    def rounds(self) -> tuple[date, ...]:
        """Give the days of the rounds on which meters were read, Mondays, newest first."""
        return self._rounds

    def start(self, meter: str) -> Decimal:
        """Give the figure a meter came with."""
        return self.curves[meter].start

    def last_round(self, meter: str) -> date:
        """Give the day a meter was last read on a round."""
        unread = self.ago(self.meters[meter].unread)
        return next(day for day in self.rounds() if day <= unread)

    def latest(self, meter: str) -> Decimal:
        """Give the total of a meter at its last round."""
        return self.curves[meter].at(self.last_round(meter))

    def turned_on(self, meter: str) -> date | None:
        """Give the day a meter rolled over, None where it did not."""
        modulus = self._modulus(meter)
        if self.meters[meter].turned is None or modulus is None:
            return None
        return self.curves[meter].day_of(modulus)

    def dial(self, meter: str, day: date) -> str:
        """Give what a meter showed at the end of a day, with its unit."""
        return self.shown(meter, self.curves[meter].at(day), day)

    def shown(self, meter: str, total: Decimal, day: date, more: int = 0) -> str:
        """Give what a meter showed at a total of some day, with its unit; `more` is added to the figure."""
        replaced = self.meters[meter].replaced
        if replaced is not None and day >= self.ago(replaced):
            total = max(Decimal(0), total - self.curves[meter].at(self.ago(replaced)))
        turned, modulus = self.turned_on(meter), self._modulus(meter)
        if turned is not None and modulus is not None and day >= turned:
            total %= modulus
        return f"{plain(total + more)}{self.meters[meter].unit}"

    def _round_days(self) -> Iterator[date]:
        day = self.anchor - timedelta(days=self.anchor.weekday())
        while day > min(self.came.values()):
            yield day
            day -= timedelta(weeks=_WEEKS if day > self.changeover else _WEEKS_BEFORE)

    def _modulus(self, meter: str) -> Decimal | None:
        digits = self.meters[meter].digits.partition(".")[0]
        return Decimal(10) ** int(digits) if digits else None

    def _curve(self, item: Item, meter: Meter) -> Curve:
        extra = {}
        if meter.replaced is not None:
            extra[self.ago(meter.replaced)] = UNMETERED
        if meter.exercise is not None:
            extra |= dict.fromkeys(meter.exercise.days(self.anchor), _EXERCISE_TENTHS)
        idle = (self.ago(meter.idle[0]), self.ago(meter.idle[1])) if meter.idle else (date.max, date.max)
        curve = Curve(self.came[item.tag], self.anchor, meter.rhythm, meter.seed or item.tag, extra, idle)
        curve.lift(Decimal(meter.start))
        if meter.turned is not None:
            digits = int(meter.digits.partition(".")[0])
            curve.lift(Decimal(10) ** digits + _PAST_THE_TURN - curve.at(self.ago(meter.turned)) + meter.start)
        return curve
