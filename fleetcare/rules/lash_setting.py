"""What brings a valve's lash to its target: the shim to fit, or the turn of the adjusting screw.

Exact decimal arithmetic in mm. A thicker shim closes the lash: new = fitted + measured - target (workshop-manual
shim charts). A screw moves the lash by its pitch times a lever that follows from the arms of the rocker.
"""

from collections.abc import Callable
from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum

from fleetcare.domain.quantities import plain
from fleetcare.errors import Refused
from fleetcare.rules.bounds import check_between, check_within

# Limits of sense: the lash of large engines stays well below, and so do shims, caps and threads.
MOST_LASH_MM = 5
MOST_SHIM_MM = 50
MOST_PITCH_MM = 10
MOST_ROCKER_RATIO = 10


@dataclass(frozen=True, slots=True)
class ShimChoice:
    """The thickness that would hit the target, the stocked size to fit, and the lash that leaves; mm."""

    ideal: Decimal
    shim: Decimal
    lash: Decimal


class ScrewAt(StrEnum):
    """Where on the rocker the adjusting screw sits."""

    PUSHROD = "pushrod"
    VALVE = "valve"
    CENTRE = "centre"


class LashAt(StrEnum):
    """Where the lash is measured."""

    VALVE = "valve"
    CAM = "cam"


class Direction(StrEnum):
    """Which way the lash has to go."""

    LOOSER = "looser"
    TIGHTER = "tighter"
    NONE = "none"


@dataclass(frozen=True, slots=True)
class Lever:
    """How far the lash moves for each mm of screw, k: over / under as functions of the rocker ratio R."""

    formula: str
    over: Callable[[Decimal], Decimal]
    under: Callable[[Decimal], Decimal]


@dataclass(frozen=True, slots=True)
class ScrewTurn:
    """How far to turn an adjusting screw: `turns` and `degrees` are positive where the lash opens."""

    turns: Decimal
    degrees: Decimal
    direction: Direction
    lever: Lever


def _one(_: Decimal) -> Decimal:
    return Decimal(1)


def _ratio(ratio: Decimal) -> Decimal:
    return ratio


def _both_arms(ratio: Decimal) -> Decimal:
    return 1 + ratio


# From the lever arms: R is the valve-side arm over the cam-side arm.
LEVERS = {
    (ScrewAt.PUSHROD, LashAt.VALVE): Lever("R", _ratio, _one),
    (ScrewAt.PUSHROD, LashAt.CAM): Lever("1", _one, _one),
    (ScrewAt.VALVE, LashAt.VALVE): Lever("1", _one, _one),
    (ScrewAt.VALVE, LashAt.CAM): Lever("1/R", _one, _ratio),
    (ScrewAt.CENTRE, LashAt.VALVE): Lever("1 + R", _both_arms, _one),
    (ScrewAt.CENTRE, LashAt.CAM): Lever("(1 + R)/R", _both_arms, _ratio),
}


def choose_shim(
    measured: Decimal,
    target: Decimal,
    fitted: Decimal,
    step: Decimal,
    *,
    stock: tuple[Decimal | None, Decimal | None] = (None, None),
    check_range: tuple[Decimal, Decimal] | None = None,
) -> ShimChoice:
    """Choose the shim that comes nearest to the target lash; all figures in mm. A tie takes the thinner.

    Stocked are the whole multiples of `step` from the least to the most of `stock`, where given. The lash it leaves
    must lie in `check_range`, where given, else within half a step of the target: raises Refused where no stocked
    size does that, and for a figure that cannot be right.
    """
    check_between("measured lash", measured, 0, MOST_LASH_MM, "mm")
    check_within("target lash", target, MOST_LASH_MM, "mm")
    check_within("fitted shim", fitted, MOST_SHIM_MM, "mm")
    check_within("step", step, MOST_SHIM_MM, "mm")
    ideal = fitted + measured - target
    sizes = _neighbours(ideal, step, *stock)
    least, most = check_range or (target - step / 2, target + step / 2)
    fitting = [size for size in sizes if least <= target + ideal - size <= most]
    if not fitting:
        nearest = min(sizes, key=lambda size: abs(size - ideal))
        raise Refused(
            f"no stocked shim fits: {plain(ideal)} mm is wanted, and the nearest, {plain(nearest)} mm, "
            f"would leave {plain(target + ideal - nearest)} mm of lash",
            "get a size nearer to it, or check the measurements",
        )
    shim = min(fitting, key=lambda size: abs(size - ideal))  # the first of a tie, so the thinner
    return ShimChoice(ideal, shim, target + ideal - shim)


def screw_turn(
    measured: Decimal,
    target: Decimal,
    pitch: Decimal,
    *,
    rocker_ratio: Decimal = Decimal(1),
    screw_at: ScrewAt = ScrewAt.PUSHROD,
    lash_at: LashAt = LashAt.VALVE,
) -> ScrewTurn:
    """Give the turn of the screw that brings the lash to its target: (target - measured) / (pitch * k), mm.

    k is the lever of the place of the screw and of the lash (LEVERS). Raises Refused for a figure that cannot be right.
    """
    check_between("measured lash", measured, 0, MOST_LASH_MM, "mm")
    check_between("target lash", target, 0, MOST_LASH_MM, "mm")
    check_within("thread pitch", pitch, MOST_PITCH_MM, "mm")
    check_within("rocker ratio", rocker_ratio, MOST_ROCKER_RATIO)
    lever = LEVERS[screw_at, lash_at]
    change = (target - measured) * lever.under(rocker_ratio)
    travel = pitch * lever.over(rocker_ratio)
    direction = Direction.NONE if change == 0 else Direction.LOOSER if change > 0 else Direction.TIGHTER
    return ScrewTurn(change / travel, 360 * change / travel, direction, lever)


def _neighbours(ideal: Decimal, step: Decimal, thinnest: Decimal | None, thickest: Decimal | None) -> list[Decimal]:
    """Give the stocked sizes next to the ideal one, thinner first; a single one where it lies past the stock."""
    least = step if thinnest is None else check_within("thinnest stocked shim", thinnest, MOST_SHIM_MM, "mm")
    most = check_within(
        "thickest stocked shim", Decimal(MOST_SHIM_MM) if thickest is None else thickest, MOST_SHIM_MM, "mm"
    )
    first, last = int(least // step) + bool(least % step), int(most // step)
    if last < first:
        raise Refused(
            f"no shim in steps of {plain(step)} mm lies from {plain(least)} to {plain(most)} mm",
            "mend the step or the ends of the stock",
        )
    below = int(ideal // step)
    return [count * step for count in sorted({min(max(count, first), last) for count in (below, below + 1)})]
