"""Days by which something is to be done, in business days: Monday to Friday, without the holidays the shop names.

What a business day is, 40 CFR 63.6625 does not say where it sets two of them; this reading is common practice.
"""

from datetime import date, timedelta

_SATURDAY = 5


def business_days_after(day: date, days: int, holidays: frozenset[date]) -> date:
    """Give the last of so many business days after a day; the day itself does not count."""
    while days:
        day += timedelta(days=1)
        if day.weekday() < _SATURDAY and day not in holidays:
            days -= 1
    return day
