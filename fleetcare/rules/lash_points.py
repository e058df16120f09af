"""The lash points of an engine: what they are called, how they stand, and in which order they can be set.

Names are a cylinder, I or E, and a number where a side has several: 3E, 3I2. Two valves under one bridge are one point.
Of an odd number of valves the intake has one more: common practice. The order of setting is that of rules/valve_order.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from fleetcare.domain.engines import Bridged, Layout, Side, ValveTrain
from fleetcare.domain.sheets import LashPoint
from fleetcare.errors import Refused

if TYPE_CHECKING:
    from fleetcare.rules.valve_order import Position

_LETTER = {Side.INTAKE: "I", Side.EXHAUST: "E"}
_UNDER_A_BRIDGE = 2


@dataclass(frozen=True, slots=True)
class Stop:
    """The points set at one stop of the crank, cylinder by cylinder; `position` is None where no order is known."""

    position: "Position | None"
    points: tuple[LashPoint, ...]


def split_valves(valves_per_cylinder: int) -> Mapping[Side, int]:
    """Give how many valves of a cylinder are on which side: of an odd number the intake has one more."""
    return {Side.INTAKE: valves_per_cylinder - valves_per_cylinder // 2, Side.EXHAUST: valves_per_cylinder // 2}


def check_bridges(valves_per_cylinder: int, bridged: Bridged) -> None:
    """Refuse a bridge on a side that has not the two valves to be under it."""
    for side, valves in split_valves(valves_per_cylinder).items():
        if _is_bridged(side, bridged) and valves != _UNDER_A_BRIDGE:
            have = f"{valves} {side} {'valve' if valves == 1 else 'valves'}"
            raise Refused(f"a bridge joins two valves, and each cylinder has {have}", "mend one of them")


def lash_points(train: ValveTrain) -> tuple[LashPoint, ...]:
    """Give the points as the engine stands: cylinder by cylinder, intake before exhaust."""
    return tuple(point for cylinder in range(1, train.cylinders + 1) for point in _of_cylinder(train, cylinder))


def banks(train: ValveTrain) -> tuple[tuple[int, ...], ...]:
    """Give the cylinders as they stand: one row, or the two banks of a V or opposed engine.

    Banks are numbered one after the other, or alternating; where nobody said, a V by bank and an opposed engine
    alternating (common practice).
    """
    every = tuple(range(1, train.cylinders + 1))
    if train.layout not in {Layout.V, Layout.OPPOSED}:
        return (every,)
    numbering = train.numbering or ("by-bank" if train.layout is Layout.V else "alternating")
    if numbering == "alternating":
        return every[::2], every[1::2]
    half = len(every) // 2
    return every[:half], every[half:]


def lash_walk(train: ValveTrain) -> tuple[Stop, ...]:
    """Give the points stop by stop as the crank is turned, each point once.

    Without a firing order there is one stop that says nothing of the crank, with the points as the engine stands.
    """
    points = lash_points(train)
    order = train.firing_order or ((1,) if train.cylinders == 1 else ())
    if not order:
        return (Stop(None, points),)
    from fleetcare.rules.valve_order import easiest_order, firing_angles  # only who walks the points needs it

    _, positions = easiest_order(firing_angles(order))
    return tuple(Stop(position, _set_at(points, position)) for position in positions)


def side_of(name: str) -> Side:
    """Give the side a point is on by its name alone, as a sheet may be older than the nameplate."""
    return Side.INTAKE if _LETTER[Side.INTAKE] in name else Side.EXHAUST


def find_point(points: Sequence[LashPoint], name: str, tag: str) -> LashPoint:
    """Find a point by name, whatever its case. Refuses an unknown one, naming those of the engine `tag`."""
    wanted = name.strip().upper()
    for point in points:
        if point.name == wanted:
            return point
    raise Refused(
        f"{tag} has no lash point {name.strip()!r}; its points are {say_points(points)}",
        "name one of them, or mend its valves with fleetcare engine edit",
    )


def say_points(points: Sequence[LashPoint]) -> str:
    """Say which points there are by those of the first and the last cylinder: "1I, 1E to 6I, 6E"."""
    ends = dict.fromkeys((points[0].cylinder, points[-1].cylinder))
    return " to ".join(", ".join(point.name for point in points if point.cylinder == end) for end in ends)


def _is_bridged(side: Side, bridged: Bridged) -> bool:
    return bridged is Bridged.BOTH or bridged.value == side.value


def _of_cylinder(train: ValveTrain, cylinder: int) -> list[LashPoint]:
    points = []
    for side, valves in split_valves(train.valves_per_cylinder).items():
        name = f"{cylinder}{_LETTER[side]}"
        if valves == 1 or _is_bridged(side, train.bridged):
            points.append(LashPoint(name, cylinder, side, valves))
        else:
            points += [LashPoint(f"{name}{number}", cylinder, side) for number in range(1, valves + 1)]
    return points


def _set_at(points: Sequence[LashPoint], position: "Position") -> tuple[LashPoint, ...]:
    cylinders = {Side.INTAKE: position.intake, Side.EXHAUST: position.exhaust}
    return tuple(point for point in points if point.cylinder in cylinders[point.side])
