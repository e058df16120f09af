"""What a nameplate may say: only what cannot be true of any four-stroke engine is refused; and what its duty says."""

import re
from collections import Counter
from decimal import Decimal
from typing import Literal

from fleetcare.domain.engines import Layout
from fleetcare.domain.quantities import plain
from fleetcare.errors import Misread, Refused

LashUnit = Literal["mm", "in"]
UNIT_WORDS = {"mm": "mm", "in": "inches"}
"""Units of lash as they are said in a sentence."""

_ORDER = re.compile(r"[0-9]{1,3}(?:-[0-9]{1,3})*", re.ASCII)
_RANGE = re.compile(r"\s*(\d*\.?\d+)\s*-\s*(\d*\.?\d+)\s*(mm|in)?\s*", re.ASCII)
_MARINE = re.compile(r"(?<!non-)(?<!non )(?<!not )\b(marine|[a-z]*boat|ship|vessel)s?\b", re.IGNORECASE)
_SETTING = re.compile(r"\s*(\d*\.?\d+)\s*(mm|in)?\s*", re.ASCII)


def check_positive(name: str, value: Decimal | int, unit: str = "") -> None:
    """Refuse a nameplate figure of 0 or less, naming it."""
    if value <= 0:
        shown = plain(Decimal(value)) + (unit and f" {unit}")
        raise Refused(f"{name} {shown} cannot be right", "give a figure above 0, or leave it out")


def check_firing_order(order: str, cylinders: int) -> tuple[int, ...]:
    """Read a firing order such as "1-5-3-6-2-4"; every cylinder from 1 to `cylinders` fires exactly once.

    Raises Misread where it is not numbers joined by hyphens, Refused naming each cylinder that is
    missing, named twice, or not on the engine.
    """
    text = order.strip()
    if not _ORDER.fullmatch(text):
        raise Misread(f"{order!r} is not a firing order", "write cylinder numbers joined by hyphens, such as 1-3-4-2")
    fired = tuple(int(number) for number in text.split("-"))
    times = Counter(fired)
    complaints = [
        f"{verb} {_cylinders(numbers)}"
        for verb, numbers in (
            ("leaves out", [n for n in range(1, cylinders + 1) if n not in times]),
            ("names more than once", [n for n, count in times.items() if count > 1]),
            ("goes beyond the engine with", [n for n in times if not 1 <= n <= cylinders]),
        )
        if numbers
    ]
    if complaints:
        wrong = f"firing order {text} {' and '.join(complaints)}"
        raise Refused(wrong, f"name each of cylinders 1 to {cylinders} once, or mend the number of cylinders")
    return fired


def check_layout(layout: Layout, cylinders: int) -> None:
    """Refuse a layout the cylinders cannot stand in: single is one, a V or opposed engine an even number."""
    check_positive("number of cylinders", cylinders)
    if layout is Layout.SINGLE and cylinders != 1:
        raise Refused(f"a single has 1 cylinder, not {cylinders}", "choose inline, v or opposed")
    if layout in {Layout.V, Layout.OPPOSED} and cylinders % 2:
        raise Refused(
            f"layout {layout} with {cylinders} {_noun(cylinders)} leaves one without a partner",
            "give an even number, or choose inline",
        )


def parse_lash_range(text: str) -> tuple[Decimal, Decimal, LashUnit]:
    """Read a check range for valve lash, "0.20-0.30" (mm) or "0.008-0.012in", as least, most and unit.

    Both ends belong to the range. Raises Misread where it is no range, Refused where it runs
    backwards or begins at nothing.
    """
    found = _RANGE.fullmatch(text)
    if not found:
        raise Misread(f"{text!r} is not a lash range", "write it like 0.20-0.30 (mm) or 0.008-0.012in")
    least, most = Decimal(found[1]), Decimal(found[2])
    check_positive("lash", least)
    if least > most:
        raise Refused(f"lash range {text.strip()} runs backwards", "put the smaller figure first")
    return least, most, "in" if found[3] == "in" else "mm"


def parse_lash_setting(text: str) -> tuple[Decimal, LashUnit]:
    """Read what to set the lash to, "0.25" (mm) or "0.010in", as figure and unit.

    Raises Misread where it is no figure, Refused where it is nothing.
    """
    found = _SETTING.fullmatch(text)
    if not found:
        raise Misread(f"{text!r} is not a lash", "write it like 0.25 (mm) or 0.010in")
    setting = Decimal(found[1])
    check_positive("lash", setting)
    return setting, "in" if found[2] == "in" else "mm"


def says_marine(duty: str) -> bool | None:
    """Say whether a duty in words is one at sea: marine, a boat, ship or vessel of some kind. None where it says nothing."""
    return bool(_MARINE.search(duty)) if duty.strip() else None


def _cylinders(numbers: list[int]) -> str:
    return f"{_noun(len(numbers))} {', '.join(str(n) for n in sorted(numbers))}"


def _noun(count: int) -> str:
    return "cylinder" if count == 1 else "cylinders"
