"""What wears, with sane defaults: an exhaust valve that closes, measured over its hours."""

from decimal import Decimal

from fleetcare.domain.quantities import Kind
from fleetcare.domain.trends import End, Point, Segment
from fleetcare.domain.wear import Wear
from tests.builders import day

# The worked example of valve lash: hours 0 to 4000, reset to 0.40 mm twice. Its early end at 0.25 mm lies at 5975.1 h.
LASH = (
    ("0 500 1000 1500", ".400 .372 .353 .322", None),
    ("1500 2000 2600 3000", ".400 .378 .347 .331", "1500"),
    ("3000 3500 4000", ".400 .377 .352", "3000"),
)


def segments(*told: tuple[str, str, str | None]) -> tuple[Segment, ...]:
    """Segments from their hours and values, and where each was opened."""
    return tuple(
        Segment(
            tuple(Point(Decimal(x), Decimal(y)) for x, y in zip(hours.split(), values.split(), strict=True)),
            Decimal(opened) if opened is not None else None,
        )
        for hours, values, opened in told
    )


def a_wear(
    *told: tuple[str, str, str | None],
    low: str = "0.25",
    high: str = "0.45",
    subject: str = "3E",
    work: str = "lash",
    kind: Kind = Kind.HOURS,
    on: str = "2026-04-20",
    unit: str = "mm",
) -> Wear:
    """A lash point measured on 2026-04-20, by default the worked example."""
    limits = {End.LOW: Decimal(low), End.HIGH: Decimal(high)}
    return Wear(work, subject, kind, unit, segments(*(told or LASH)), limits, day(on))
