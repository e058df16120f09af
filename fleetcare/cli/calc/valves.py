"""Bench sums on valves: in which order they are set, which shim to fit, how far to turn a screw."""

import argparse
from collections.abc import Sequence
from decimal import Decimal
from typing import TYPE_CHECKING, Any

from fleetcare.cli.calc.answers import Answer, add_sum, all_or_none, shown
from fleetcare.cli.parser import CommandParser, Commands, number
from fleetcare.domain.quantities import plain

if TYPE_CHECKING:
    from fractions import Fraction

    from fleetcare.rules.valve_order import Method, Position, ValveTiming

_TIMING = {
    "ivo": "intake opens, degrees before TDC",
    "ivc": "intake closes, degrees after BDC",
    "evo": "exhaust opens, degrees before BDC",
    "evc": "exhaust closes, degrees after TDC",
}


def _numbers(text: str) -> list[Decimal]:
    return [number(part) for part in text.split("-")]


def add_sums(sums: Commands) -> None:
    """Add `valve-order`, `shim` and `adjuster`."""
    order = add_sum(sums, "valve-order", "which valves may be set at which crank position", _valve_order)
    order.add_argument("--firing-order", required=True, metavar="ORDER", help="cylinders as they fire: 1-5-3-6-2-4")
    order.add_argument(
        "--method",
        choices=("two-position", "one-by-one"),
        help="two stops of the crank (default where the cam allows it), or one for each cylinder",
    )
    for name, meaning in _TIMING.items():
        order.add_argument(f"--{name}", type=number, metavar="DEG", help=meaning)
    order.add_argument(
        "--intervals",
        type=_numbers,
        metavar="DEG-DEG-...",
        help="degrees of crank from each firing to the next where they are not even",
    )

    shim = add_sum(sums, "shim", "the stocked shim that comes nearest to a lash", _shim)
    _add_millimetres(shim, {"measured": "lash measured", "target": "lash wanted", "fitted": "shim fitted now"})
    _add_millimetres(shim, {"step": "step between stocked sizes"})
    _add_millimetres(shim, {"stock-min": "thinnest size stocked", "stock-max": "thickest size stocked"}, required=False)

    adjuster = add_sum(sums, "adjuster", "how far to turn an adjusting screw", _adjuster)
    _add_millimetres(adjuster, {"measured": "lash measured", "target": "lash wanted", "pitch": "thread pitch"})
    adjuster.add_argument(
        "--rocker-ratio", type=number, default=Decimal(1), metavar="R", help="valve lift over cam lift (1)"
    )
    adjuster.add_argument(
        "--screw-at", choices=("pushrod", "valve", "centre"), default="pushrod", help="where the screw is (pushrod)"
    )
    adjuster.add_argument(
        "--lash-at", choices=("valve", "cam"), default="valve", help="where the lash is measured (valve)"
    )


def _add_millimetres(parser: CommandParser, options: dict[str, str], *, required: bool = True) -> None:
    for name, meaning in options.items():
        parser.add_argument(f"--{name}", type=number, required=required, metavar="MM", help=f"{meaning}, mm")


def _valve_order(given: argparse.Namespace) -> Answer:
    from fleetcare.rules.nameplate import check_firing_order
    from fleetcare.rules.valve_order import (
        CYCLE,
        Method,
        ValveTiming,
        easiest_order,
        firing_angles,
        mates,
        setting_order,
    )

    known = all_or_none(given, *_TIMING)
    timing = ValveTiming(given.ivo, given.ivc, given.evo, given.evc) if known else None
    order = check_firing_order(given.firing_order, given.firing_order.count("-") + 1)
    angles = firing_angles(order, given.intervals)
    pairs = mates(angles)
    if given.method:
        method, positions = Method(given.method), setting_order(angles, Method(given.method), timing)
    else:
        method, positions = easiest_order(angles, timing)
    firing = (
        "at the intervals given"
        if given.intervals
        else f"taken to be even, every {shown(Decimal(CYCLE) / len(order))}°"
    )
    lines = [
        f"Firing order {'-'.join(map(str, order))}, firing {firing}; 0° is cylinder {order[0]} at TDC on compression:",
        *(f"  {_position_line(position)}" for position in positions),
        _valve_working(method, timing),
    ]
    if not given.method and method is Method.ONE_BY_ONE:
        lines.append("Two positions will not do: at one of them a valve would be too near its cam.")
    if pairs:
        lines.append(f"Mates, at TDC together: {', '.join(f'{first}-{second}' for first, second in pairs)}.")
    return Answer(
        "\n".join(lines),
        {
            "method": method,
            "positions": [_position_keys(position) for position in positions],
            "mates": [list(pair) for pair in pairs],
        },
    )


def _position_line(position: "Position") -> str:
    from fleetcare.rules.valve_order import TURN

    where = _degrees(position.crank) + (", one full turn on" if position.crank == TURN else "")
    standing = f"{position.tdc_compression or 'no cylinder'} at TDC on compression"
    rocking = f", {position.rocking} rocking" if position.rocking else ""
    also = _valves(position.also_intake, position.also_exhaust)
    free = f" (free too: {also})" if also else ""
    return f"{where} ({standing}{rocking}): set {_valves(position.intake, position.exhaust)}{free}"


def _valve_working(method: "Method", timing: "ValveTiming | None") -> str:
    from fleetcare.rules.valve_order import MARGIN, USUAL_TIMING, Method

    if method is Method.ONE_BY_ONE:
        return "Both valves of a cylinder are closed at its own TDC on compression, when its mate, if any, is rocking."
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


def _shim(given: argparse.Namespace) -> Answer:
    from fleetcare.rules.lash_setting import choose_shim

    choice = choose_shim(
        given.measured, given.target, given.fitted, given.step, stock=(given.stock_min, given.stock_max)
    )
    fitted, measured, target = plain(given.fitted), plain(given.measured), plain(given.target)
    return Answer(
        f"Fit the {plain(choice.shim)} mm shim: {fitted} fitted + {measured} measured − {target} wanted = "
        f"{plain(choice.ideal)} mm, to the nearest {plain(given.step)} mm; expected lash {plain(choice.lash)} mm.",
        {"ideal_mm": choice.ideal, "shim_mm": choice.shim, "expected_lash_mm": choice.lash},
    )


def _adjuster(given: argparse.Namespace) -> Answer:
    from fleetcare.rules.lash_setting import Direction, LashAt, ScrewAt, screw_turn

    turn = screw_turn(
        given.measured,
        given.target,
        given.pitch,
        rocker_ratio=given.rocker_ratio,
        screw_at=ScrewAt(given.screw_at),
        lash_at=LashAt(given.lash_at),
    )
    if turn.direction is Direction.NONE:
        sentence = f"Leave the screw: the lash is {plain(given.target)} mm as wanted."
    else:
        sentence = (
            f"Turn the screw {shown(abs(turn.degrees))}° {turn.direction} ({shown(turn.turns)} turn): "
            f"({plain(given.target)} wanted − {plain(given.measured)} measured) / "
            f"({plain(given.pitch)} mm pitch × k), k = {turn.lever.formula}, R = {plain(given.rocker_ratio)}."
        )
    return Answer(sentence, {"turns": turn.turns, "degrees": turn.degrees, "direction": turn.direction})
