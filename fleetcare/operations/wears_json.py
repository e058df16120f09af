"""What sheets show over the hours of an engine as one line of JSON and back, figures and days exact; light to load."""

import json
from datetime import date
from decimal import Decimal
from typing import Any

from fleetcare.domain.quantities import Kind
from fleetcare.domain.trends import End, Point, Segment
from fleetcare.domain.wear import MeasuredWears, Wear

WEARS_FORM = "4"
"""Another one when what is written, or how it is worked out, becomes another."""


def wears_text(wears: MeasuredWears, book: str) -> str:
    """Write them, with the digest of the rules they rest on."""
    groups = [[_wear(wear) for wear in group] for group in (wears.pulling, wears.sound_oil)]
    return json.dumps([f"{WEARS_FORM} {book}", *groups], ensure_ascii=False, separators=(",", ":"))


def wears_of(text: str) -> tuple[MeasuredWears, str]:
    """Read what `wears_text` wrote: what sheets show, and the digest of the rules; that is empty for another form."""
    if not text:
        return MeasuredWears(), ""
    mark, pulling, sound = json.loads(text)
    form, _, book = mark.partition(" ")
    if form != WEARS_FORM:
        return MeasuredWears(), ""
    return MeasuredWears(tuple(map(_read_wear, pulling)), tuple(map(_read_wear, sound))), book


def _wear(wear: Wear) -> list[Any]:
    segments = [
        [str(one.opened) if one.opened is not None else None, [[str(point.x), str(point.y)] for point in one.points]]
        for one in wear.segments
    ]
    limits = {end.value: str(limit) for end, limit in wear.limits.items()}
    received = wear.received_on.isoformat() if wear.received_on else None
    return [
        *(wear.work, wear.subject, wear.kind.value, wear.unit, segments, limits),
        *(wear.measured_on.isoformat(), received, wear.is_topped_up_by_log, wear.may_pull),
    ]


def _read_wear(cells: list[Any]) -> Wear:
    work, subject, kind, unit, segments, limits, measured, received, by_log, may_pull = cells
    return Wear(
        work,
        subject,
        Kind(kind),
        unit,
        tuple(
            Segment(
                tuple(Point(Decimal(x), Decimal(y)) for x, y in points),
                Decimal(opened) if opened is not None else None,
            )
            for opened, points in segments
        ),
        {End(end): Decimal(limit) for end, limit in limits.items()},
        date.fromisoformat(measured),
        date.fromisoformat(received) if received else None,
        by_log,
        may_pull,
    )
