"""Bench sums on setting a valve: which shim to fit, how far to turn a screw."""

import argparse
from decimal import Decimal

from fleetcare.cli.calc.answers import Answer, add_sum, shown
from fleetcare.cli.parser import CommandParser, Commands, number
from fleetcare.domain.quantities import plain


def add_sums(sums: Commands) -> None:
    """Add `shim` and `adjuster`."""
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
