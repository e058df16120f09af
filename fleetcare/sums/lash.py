"""Bench sums on setting a valve: which shim to fit, how far to turn a screw."""

from decimal import Decimal

from fleetcare.domain.quantities import plain
from fleetcare.sums.base import Answer, Given, Option, Sum, Takes, shown


def _shim(given: Given) -> Answer:
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


def _adjuster(given: Given) -> Answer:
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


def _millimetres(name: str, tells: str, *, is_required: bool = True, plate: str = "") -> Option:
    return Option(name, f"{tells}, mm", "MM", is_required=is_required, plate=plate)


SUMS = (
    Sum(
        "shim",
        "the stocked shim that comes nearest to a lash",
        (
            _millimetres("measured", "lash measured"),
            _millimetres("target", "lash wanted"),
            _millimetres("fitted", "shim fitted now"),
            _millimetres("step", "step between stocked sizes", plate="shim_step_mm"),
            _millimetres("stock-min", "thinnest size stocked", is_required=False),
            _millimetres("stock-max", "thickest size stocked", is_required=False),
        ),
        _shim,
    ),
    Sum(
        "adjuster",
        "how far to turn an adjusting screw",
        (
            _millimetres("measured", "lash measured"),
            _millimetres("target", "lash wanted"),
            _millimetres("pitch", "thread pitch", plate="screw_pitch_mm"),
            Option("rocker-ratio", "valve lift over cam lift (1)", "R", default=Decimal(1), plate="rocker_ratio"),
            Option(
                "screw-at",
                "where the screw is (pushrod)",
                takes=Takes.TEXT,
                default="pushrod",
                words=("pushrod", "valve", "centre"),
                plate="screw_at",
            ),
            Option(
                "lash-at",
                "where the lash is measured (valve)",
                takes=Takes.TEXT,
                default="valve",
                words=("valve", "cam"),
            ),
        ),
        _adjuster,
    ),
)
