"""What would bring a gap back: the shim to fit, or the turn of the screw, as far as the nameplate and the sheet say enough.

The target is the setting of the spec. A shim needs its fitted thickness and the step between stocked sizes, a screw its
pitch; rocker ratio 1 and a screw on the pushrod's side where nobody said. The lash is that at the valve.
"""

from dataclasses import dataclass
from decimal import Decimal

from fleetcare.domain.engines import Adjuster, Side
from fleetcare.domain.sheets import Judgement, LashSpec, Place
from fleetcare.errors import Refused
from fleetcare.rules.lash import MM_PER, Gap, ends_in_mm
from fleetcare.rules.lash_setting import ScrewAt, ScrewTurn, ShimChoice, choose_shim, screw_turn


@dataclass(frozen=True, slots=True)
class Mending:
    """A shim, a turn of the screw, or why neither could bring the gap back."""

    shim: ShimChoice | None = None
    turn: ScrewTurn | None = None
    wanting: str = ""


def mend(
    judged: Judgement, side: Side, spec: LashSpec | None, adjuster: Adjuster, fitted: Decimal | None
) -> Mending | None:
    """Give what mends a gap outside its range, None where it is inside or too little is known; `fitted` in mm."""
    if spec is None or side not in spec.settings or judged.place not in {Place.BELOW, Place.ABOVE}:
        return None
    best = Gap(*ends_in_mm(judged.value)).best
    target = spec.settings[side] * MM_PER[spec.unit]
    try:
        if adjuster.kind == "screw" and adjuster.screw_pitch is not None:
            return Mending(turn=_turn(best, target, adjuster, adjuster.screw_pitch))
        if adjuster.kind == "shim" and adjuster.shim_step is not None and fitted is not None:
            least, most = (end * MM_PER[spec.unit] for end in spec.ranges[side])
            return Mending(shim=choose_shim(best, target, fitted, adjuster.shim_step, check_range=(least, most)))
    except Refused as error:
        return Mending(wanting=error.detail)
    return None


def _turn(best: Decimal, target: Decimal, adjuster: Adjuster, pitch: Decimal) -> ScrewTurn:
    return screw_turn(
        best,
        target,
        pitch,
        rocker_ratio=adjuster.rocker_ratio or Decimal(1),
        screw_at=ScrewAt(adjuster.screw_at or ScrewAt.PUSHROD),
    )
