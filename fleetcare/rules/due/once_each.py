"""Once each calendar period: which period an entry serves, and which is due next.

An entry serves the earliest unserved period still open by grace or deferral, else its own, and
only one. A period that closes unserved is missed: it stays overdue until the next entry. A pause
makes the owed period longer: its last day moves, and the next one is the one after the day of the entry.
"""

from dataclasses import dataclass
from datetime import date, timedelta

from fleetcare.domain.schedules import CalendarTrigger, Period
from fleetcare.rules.due.calendar import CalendarPeriod, period_after, period_of


@dataclass(frozen=True, slots=True)
class Served:
    """What an entry did: the period it served (None where its own was served before), and those missed."""

    period: CalendarPeriod | None
    missed: tuple[CalendarPeriod, ...]
    next: CalendarPeriod


def serve(trigger: CalendarTrigger, owed: CalendarPeriod, open_until: date, on: date) -> Served:
    """Work out which period an entry of day `on` serves, where `owed` is the earliest unserved one.

    `open_until` is the last day on which `owed` may still be served (grace and deferral counted);
    later periods stay open by the trigger's grace.
    """
    each = trigger.once_each
    assert each is not None
    own = period_of(each, on)
    missed: list[CalendarPeriod] = []
    candidate, closes = owed, open_until
    while candidate.first < own.first and closes < on:
        missed.append(candidate)
        candidate = _following(each, candidate)
        closes = candidate.last + timedelta(days=trigger.grace)
    if candidate.first > on:
        return Served(None, (), owed)
    return Served(candidate, tuple(missed), period_after(each, min(on, candidate.last)))


def _following(each: Period, period: CalendarPeriod) -> CalendarPeriod:
    """Give the period owed after one that was missed: where a pause made that one longer, the one it ends in."""
    ends_in = period_of(each, period.last)
    return ends_in if ends_in.first > period.first else period_after(each, period.last)
