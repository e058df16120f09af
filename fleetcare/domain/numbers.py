"""Plain numbers as people type them."""

import re
from decimal import Decimal

from fleetcare.errors import Misread

_NUMBER = re.compile(r"[+-]?(?:[0-9]{1,15}(?:\.[0-9]{0,15})?|\.[0-9]{1,15})")
_WHOLE = re.compile(r"[+-]?[0-9]{1,15}")


def parse_number(text: str) -> Decimal:
    """Read a plain number, exactly; no exponent, no digits but 0 to 9, at most 15 of them. Raises Misread."""
    if not _NUMBER.fullmatch(text):
        raise Misread(f"{text!r} is not a number", "write digits, with a point for decimals")
    return Decimal(text)


def parse_whole(text: str) -> int:
    """Read a whole number of at most 15 digits. Raises Misread."""
    if not _WHOLE.fullmatch(text):
        raise Misread(f"{text!r} is not a whole number", "write digits only")
    return int(text)
