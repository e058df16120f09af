"""Days as people type them."""

import re
from datetime import date

from fleetcare.errors import Misread

_ISO_DAY = re.compile(r"[0-9]{4}-[0-9]{2}-[0-9]{2}", re.ASCII)


def parse_day(text: str) -> date:
    """Read an ISO 8601 calendar day, "2026-05-01"; no other of its forms. Raises Misread, for 30 February too."""
    if not _ISO_DAY.fullmatch(text.strip()):
        raise Misread(f"{text!r} is not a date", "write year-month-day, such as 2026-05-01")
    try:
        return date.fromisoformat(text.strip())
    except ValueError:
        raise Misread(f"there is no day {text.strip()}", "check month and day against a calendar") from None
