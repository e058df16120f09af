"""Which valves may be set at which position of the crank, from the firing order.

Crank angles are in degrees, 0 where the first cylinder of the firing order stands at TDC on compression. The phase
of a cylinder is the angle past its own TDC on compression: 0-180 power, 180-360 exhaust, 360 overlap ("rocking"),
360-540 intake, 540-720 compression. Angles are exact fractions: 720/7 is no decimal.

Stroke rule (two positions): an intake valve may be set at 0 <= phase < 360, an exhaust valve at phase 0 or
360 < phase < 720. One turn of the crank moves every phase by 360, so two positions cover every valve exactly once, for
any firing order and any number of cylinders, even or odd; how near overlap that comes, 720/n degrees or for odd n half
of it, is held against the valve timing. Sources: TM 5-3895-383-24 pp. 6-60 and 6-61,
TM 5-3805-290-23-2 WP 0155 00 table 1; mates and rocking: TM 5-6115-400-12 fig. 3-11, TM 10-3930-671-24.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, fields
from decimal import Decimal
from enum import StrEnum
from fractions import Fraction

from fleetcare.domain.quantities import plain
from fleetcare.errors import Refused
from fleetcare.rules.bounds import check_between, check_within
from fleetcare.rules.geometry import MOST_CYLINDERS

TURN = 360
CYCLE = 720

# Room for the ramps that begin before a valve is said to open, in crank degrees: common practice.
MARGIN = 15

_EARLIEST, _LATEST = -60, 120  # limits of sense; within them no valve is off its seat at its own TDC on compression

Angles = Mapping[int, Fraction]


class Method(StrEnum):
    """The two ways of going through all valves."""

    TWO_POSITION = "two-position"
    ONE_BY_ONE = "one-by-one"


@dataclass(frozen=True, slots=True)
class ValveTiming:
    """When the valves move, in crank degrees: intake opens before TDC and closes after BDC, exhaust opens before BDC
    and closes after TDC. Raises Refused for a figure that cannot be right."""

    ivo: Decimal
    ivc: Decimal
    evo: Decimal
    evc: Decimal

    def __post_init__(self) -> None:
        for field in fields(self):
            check_between(field.name.upper(), getattr(self, field.name), _EARLIEST, _LATEST, "degrees")

    def frees_intake(self, phase: Fraction) -> bool:
        """Whether the intake valve is on its base circle, ramps and all."""
        return not TURN - self.ivo - MARGIN < phase < TURN + 180 + self.ivc + MARGIN

    def frees_exhaust(self, phase: Fraction) -> bool:
        """Whether the exhaust valve is on its base circle, ramps and all."""
        return not 180 - self.evo - MARGIN < phase < TURN + self.evc + MARGIN


# What is assumed where nobody knows the cam: common practice.
USUAL_TIMING = ValveTiming(ivo=Decimal(20), ivc=Decimal(50), evo=Decimal(50), evc=Decimal(20))


@dataclass(frozen=True, slots=True)
class Position:
    """One stop of the crank: the cylinders whose intake or exhaust valves are set here, in rising order.

    `tdc_compression` and `rocking` are the cylinders at TDC on compression and at overlap, None where there is none.
    `also_intake` and `also_exhaust` are set at another stop but stand on their base circle here too, as far as the
    valve timing is known; empty where it is not.
    """

    crank: Fraction
    tdc_compression: int | None
    rocking: int | None
    intake: tuple[int, ...]
    exhaust: tuple[int, ...]
    also_intake: tuple[int, ...] = ()
    also_exhaust: tuple[int, ...] = ()


def firing_angles(order: Sequence[int], intervals: Sequence[Decimal] | None = None) -> Angles:
    """Give each cylinder's crank angle of firing, in firing order.

    `intervals` are the degrees from each firing to the next, the last one back to the first; without them the engine
    is taken to fire evenly, every 720/n. Raises Refused unless there is one above 0 for each cylinder and they sum
    to 720, and for more cylinders than any engine has.
    """
    check_within("number of cylinders", Decimal(len(order)), MOST_CYLINDERS)
    if intervals is None:
        steps = [Fraction(CYCLE, len(order))] * len(order)
    else:
        _check_intervals(intervals, len(order))
        steps = [Fraction(interval) for interval in intervals]
    return {cylinder: sum(steps[:fired], Fraction(0)) for fired, cylinder in enumerate(order)}


def mates(angles: Angles) -> tuple[tuple[int, int], ...]:
    """Give the pairs that stand at TDC together, one on compression while the other rocks: 360 degrees apart."""
    pairs = [
        (cylinder, mate)
        for cylinder, angle in angles.items()
        for mate in angles
        if angles[mate] - angle in (TURN, -TURN)
    ]
    return tuple(sorted(pair for pair in pairs if pair[0] < pair[1]))


def setting_order(angles: Angles, method: Method, timing: ValveTiming | None = None) -> tuple[Position, ...]:
    """Give the stops of the crank at which every valve is set exactly once, in the order the crank comes to them.

    Two-position stops at 0 and one turn later, and leaves out a stop with nothing to set (a single cylinder).
    One-by-one stops where each cylinder is at TDC on compression and sets both its valves there.
    Raises Refused where the timing, or USUAL_TIMING where none is given, has a valve off its base circle.
    """
    if method is Method.ONE_BY_ONE:
        return tuple(_stop(angles, angle, [cylinder], [cylinder], timing) for cylinder, angle in angles.items())
    stops = []
    for crank in (Fraction(0), Fraction(TURN)):
        phases = _phases(angles, crank)
        intake = [cylinder for cylinder, phase in phases.items() if phase < TURN]
        exhaust = [cylinder for cylinder, phase in phases.items() if phase == 0 or phase > TURN]
        if intake or exhaust:
            stops.append(_stop(angles, crank, intake, exhaust, timing))
    return tuple(stops)


def easiest_order(angles: Angles, timing: ValveTiming | None = None) -> tuple[Method, tuple[Position, ...]]:
    """Give two positions where the valve timing allows them, else one by one; and which of the two it is."""
    try:
        return Method.TWO_POSITION, setting_order(angles, Method.TWO_POSITION, timing)
    except Refused:
        return Method.ONE_BY_ONE, setting_order(angles, Method.ONE_BY_ONE, timing)


def _check_intervals(intervals: Sequence[Decimal], cylinders: int) -> None:
    if len(intervals) != cylinders or any(interval <= 0 for interval in intervals) or sum(intervals) != CYCLE:
        listed = "-".join(plain(interval) for interval in intervals)
        raise Refused(
            f"firing intervals {listed} do not fit {cylinders} {'cylinder' if cylinders == 1 else 'cylinders'}",
            f"give one above 0 for each cylinder in firing order, {CYCLE} degrees in all",
        )


def _phases(angles: Angles, crank: Fraction) -> dict[int, Fraction]:
    return {cylinder: (crank - angle) % CYCLE for cylinder, angle in angles.items()}


def _stop(
    angles: Angles, crank: Fraction, intake: list[int], exhaust: list[int], timing: ValveTiming | None
) -> Position:
    phases = _phases(angles, crank)
    cam = timing or USUAL_TIMING
    free_intake = {cylinder for cylinder, phase in phases.items() if cam.frees_intake(phase)}
    free_exhaust = {cylinder for cylinder, phase in phases.items() if cam.frees_exhaust(phase)}
    moving = [f"intake {cylinder}" for cylinder in intake if cylinder not in free_intake]
    moving += [f"exhaust {cylinder}" for cylinder in exhaust if cylinder not in free_exhaust]
    if moving:
        whose = "this valve timing" if timing else "the usual valve timing, as none is given,"
        raise Refused(
            f"with {whose} and {MARGIN} degrees to spare, {', '.join(moving)} cannot be set at {crank} degrees",
            "use the one-by-one method",
        )
    standing = {phase: cylinder for cylinder, phase in phases.items()}
    return Position(
        crank=crank,
        tdc_compression=standing.get(Fraction(0)),
        rocking=standing.get(Fraction(TURN)),
        intake=tuple(sorted(intake)),
        exhaust=tuple(sorted(exhaust)),
        also_intake=tuple(sorted(free_intake.difference(intake))) if timing else (),
        also_exhaust=tuple(sorted(free_exhaust.difference(exhaust))) if timing else (),
    )
