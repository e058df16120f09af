"""A figure that cannot be true is refused before it is worked with."""

from decimal import Decimal

from fleetcare.domain.quantities import plain
from fleetcare.errors import Refused


def check_within(name: str, value: Decimal, most: int, unit: str = "") -> Decimal:
    """Give the value back if 0 < value <= most, else refuse it; `most` itself is allowed.

    `most` is far beyond any engine built: it stops a slipped decimal point, it is no opinion on engines.
    """
    if 0 < value <= most:
        return value
    shown, unit = plain(value), unit and f" {unit}"
    raise Refused(f"{name} {shown}{unit} cannot be right", f"give a figure above 0 and up to {most}{unit}")


def check_between(name: str, value: Decimal, least: Decimal | int, most: Decimal | int, unit: str = "") -> Decimal:
    """Give the value back if least <= value <= most, else refuse it; limits of sense, as for `check_within`."""
    if least <= value <= most:
        return value
    shown, unit = plain(value), unit and f" {unit}"
    raise Refused(f"{name} {shown}{unit} cannot be right", f"give a figure from {least} to {most}{unit}")
