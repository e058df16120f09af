"""The bench sum on valve order: which valves may be set at which position of the crank."""

from collections.abc import Sequence
from decimal import Decimal
from typing import TYPE_CHECKING, Any

from fleetcare.domain.quantities import plain
from fleetcare.sums.base import Answer, Given, Option, Sum, Takes, all_or_none, shown

if TYPE_CHECKING:
    from fractions import Fraction

    from fleetcare.rules.valve_order import Method, Position, ValveTiming

_TIMING = {
    "ivo": "intake opens, degrees before TDC",
    "ivc": "intake closes, degrees after BDC",
    "evo": "exhaust opens, degrees before BDC",
    "evc": "exhaust closes, degrees after TDC",
}


def _valve_order(given: Given) -> Answer:
    from fleetcare.rules import valve_order
    from fleetcare.rules.nameplate import check_firing_order

    known = all_or_none(given, *_TIMING)
    timing = valve_order.ValveTiming(given.ivo, given.ivc, given.evo, given.evc) if known else None
    order = check_firing_order(given.firing_order, given.firing_order.count("-") + 1)
    angles = valve_order.firing_angles(order, given.intervals)
    pairs = valve_order.mates(angles)
    if given.method:
        method = valve_order.Method(given.method)
        positions = valve_order.setting_order(angles, method, timing)
    else:
        method, positions = valve_order.easiest_order(angles, timing)
    lines = [
        _firing_line(order, is_even=not given.intervals),
        *(f"  {_position_line(position)}" for position in positions),
        _working_line(method, timing, chosen=bool(given.method)),
    ]
    if pairs:
        lines.append(f"Mates, at TDC together: {', '.join(f'{first}-{second}' for first, second in pairs)}.")
    keys = [_position_keys(position) for position in positions]
    return Answer("\n".join(lines), {"method": method, "positions": keys, "mates": pairs})


def _firing_line(order: Sequence[int], *, is_even: bool) -> str:
    from fleetcare.rules.valve_order import CYCLE

    every = f"taken to be even, every {shown(Decimal(CYCLE) / len(order))}°" if is_even else "at the intervals given"
    return f"Firing order {'-'.join(map(str, order))}, firing {every}; 0° is cylinder {order[0]} at TDC on compression:"


def _position_line(position: "Position") -> str:
    from fleetcare.rules.valve_order import TURN

    where = _degrees(position.crank) + (", one full turn on" if position.crank == TURN else "")
    standing = f"{position.tdc_compression or 'no cylinder'} at TDC on compression"
    rocking = f", {position.rocking} rocking" if position.rocking else ""
    also = _valves(position.also_intake, position.also_exhaust)
    free = f" (free too: {also})" if also else ""
    return f"{where} ({standing}{rocking}): set {_valves(position.intake, position.exhaust)}{free}"


def _working_line(method: "Method", timing: "ValveTiming | None", *, chosen: bool) -> str:
    from fleetcare.rules.valve_order import MARGIN, USUAL_TIMING, Method

    if method is Method.ONE_BY_ONE:
        closed = (
            "Both valves of a cylinder are closed at its own TDC on compression, when its mate, if any, is rocking."
        )
        return closed if chosen else f"{closed} Two positions would bring a valve too near its cam."
    cam = timing or USUAL_TIMING
    figures = ", ".join(f"{name.upper()} {plain(getattr(cam, name))}°" for name in _TIMING)
    return (
        "An intake valve is set from TDC on compression to short of overlap, an exhaust valve from past overlap to TDC on "
        f"compression; {'given' if timing else 'assumed, as usual'}: {figures}, with {MARGIN}° to spare."
    )


def _valves(intake: Sequence[int], exhaust: Sequence[int]) -> str:
    kinds = {"intake": intake, "exhaust": exhaust}
    return "; ".join(f"{kind} {', '.join(map(str, numbers))}" for kind, numbers in kinds.items() if numbers)


def _position_keys(position: "Position") -> dict[str, Any]:
    return {
        "crank_deg": _decimal(position.crank),
        "tdc_compression": position.tdc_compression,
        "intake": position.intake,
        "exhaust": position.exhaust,
        "rocking": position.rocking,
        "also_intake": position.also_intake,
        "also_exhaust": position.also_exhaust,
    }


def _decimal(angle: "Fraction") -> Decimal:
    return Decimal(angle.numerator) / angle.denominator


def _degrees(angle: "Fraction") -> str:
    return f"{shown(_decimal(angle))}°"


SUMS = (
    Sum(
        "valve-order",
        "which valves may be set at which crank position",
        (
            Option(
                "firing-order",
                "cylinders as they fire: 1-5-3-6-2-4",
                "ORDER",
                takes=Takes.TEXT,
                is_required=True,
                plate="firing_order",
            ),
            Option(
                "method",
                "two stops of the crank (default where the cam allows it), or one for each cylinder",
                takes=Takes.TEXT,
                words=("two-position", "one-by-one"),
            ),
            *(Option(name, meaning, "DEG") for name, meaning in _TIMING.items()),
            Option(
                "intervals",
                "degrees of crank from each firing to the next where they are not even",
                "DEG-DEG-...",
                takes=Takes.NUMBERS,
            ),
        ),
        _valve_order,
    ),
)
