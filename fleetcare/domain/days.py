"""Days as people type them."""

import re
from datetime import date

from fleetcare.errors import Misread, Refused

_ISO_DAY = re.compile(r"[0-9]{4}-[0-9]{2}-[0-9]{2}", re.ASCII)

# No engine is older; and from a later day an interval of a century would lead out of the calendar.
FIRST_DAY = date(1900, 1, 1)
LAST_DAY = date(2199, 12, 31)


def parse_day(text: str) -> date:
    """Read an ISO 8601 calendar day, "2026-05-01"; no other of its forms.

    Raises Misread, for 30 February too; Refused for a day no engine has seen or will see.
    """
    if not _ISO_DAY.fullmatch(text.strip()):
        raise Misread(f"{text!r} is not a date", "write year-month-day, such as 2026-05-01")
    try:
        day = date.fromisoformat(text.strip())
    except ValueError:
        raise Misread(f"there is no day {text.strip()}", "check month and day against a calendar") from None
    if not FIRST_DAY <= day <= LAST_DAY:
        raise Refused(f"{day} cannot be right", f"give a day from {FIRST_DAY} to {LAST_DAY}")
    return day
