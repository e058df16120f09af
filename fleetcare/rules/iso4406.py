"""The particle code of ISO 4406: three scale numbers for particles from 4, 6 and 14 um(c) on, such as 18/16/13.

Counts are cumulative, so no number is above the one before it. ">=" stands before a number worked out from fewer than 20
particles; a microscope count has no first number, "-" (ISO 4407). Scale 0 to 28, and ">28" for more than 2,500,000 in
1 mL (tables in a filter handbook and a trade article on the code; ISO 4406:2021 scope).
"""

import re
from itertools import pairwise

from fleetcare.errors import Misread, Refused

MOST_SCALE = 28
_NUMBER = re.compile(r"(>=|>|≥)?([0-9]{1,2})")
_REMEDY = "write three scale numbers as the lab has them, such as 18/16/13 or 14/12/>=7"


def read_code(text: str) -> str:
    """Give a code as the lab writes it, spaces left out. Raises Misread for no code, Refused for one that cannot be."""
    parts = "".join(text.split()).replace("≥", ">=").split("/")
    if len(parts) != 3:
        raise Misread(f"{text!r} is no ISO 4406 code", _REMEDY)
    scales = [_scale(part, text) for part in (parts[1:] if parts[0] == "-" else parts)]
    for larger, smaller in pairwise(scales):
        if smaller > larger:
            raise Refused(
                f"{'/'.join(parts)} rises from {larger} to {smaller}, and counts of larger particles are part of those"
                " of smaller ones",
                "check the order: 4, 6, then 14 um(c)",
            )
    return "/".join(parts)


def _scale(part: str, text: str) -> int:
    found = _NUMBER.fullmatch(part)
    if found is None:
        raise Misread(f"{text!r} is no ISO 4406 code", _REMEDY)
    sign, scale = found[1], int(found[2])
    if scale > MOST_SCALE or (sign == ">" and scale != MOST_SCALE):
        raise Refused(f"{part} is no scale number", f"use 0 to {MOST_SCALE}, or >{MOST_SCALE} for more")
    return scale + (sign == ">")
