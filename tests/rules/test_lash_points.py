"""The lash points of an engine: their names, how they stand, and in which order the crank brings them up."""

import pytest

from fleetcare.domain.engines import Bridged, Layout, Side, ValveTrain
from fleetcare.errors import Refused
from fleetcare.rules.lash_points import banks, check_bridges, find_point, lash_points, lash_walk, say_points


def names(train: ValveTrain) -> str:
    return " ".join(point.name for point in lash_points(train))


@pytest.mark.parametrize(
    ("valves", "bridged", "wanted"),
    [
        (2, "none", "1I 1E"),
        (3, "none", "1I1 1I2 1E"),
        (4, "none", "1I1 1I2 1E1 1E2"),
        (5, "none", "1I1 1I2 1I3 1E1 1E2"),
        (6, "none", "1I1 1I2 1I3 1E1 1E2 1E3"),
        (3, "intake", "1I 1E"),
        (4, "intake", "1I 1E1 1E2"),
        (4, "exhaust", "1I1 1I2 1E"),
        (4, "both", "1I 1E"),
        (5, "exhaust", "1I1 1I2 1I3 1E"),
    ],
)
def test_a_side_with_one_gap_has_no_number_and_a_bridge_is_one_gap(valves: int, bridged: str, wanted: str) -> None:
    assert names(ValveTrain(1, valves, Bridged(bridged))) == wanted


def test_a_bridged_point_says_how_many_valves_hang_under_it() -> None:
    points = lash_points(ValveTrain(1, 4, Bridged.EXHAUST))
    assert [(point.name, point.side, point.valves) for point in points] == [
        ("1I1", Side.INTAKE, 1),
        ("1I2", Side.INTAKE, 1),
        ("1E", Side.EXHAUST, 2),
    ]


def test_the_points_follow_the_cylinders_intake_before_exhaust() -> None:
    assert names(ValveTrain(3, 2)) == "1I 1E 2I 2E 3I 3E"


@pytest.mark.parametrize(
    ("valves", "bridged", "have"),
    [
        (2, "both", "1 intake valve"),
        (2, "exhaust", "1 exhaust valve"),
        (3, "exhaust", "1 exhaust valve"),
        (5, "both", "3 intake valves"),
    ],
)
def test_a_bridge_without_two_valves_under_it_is_refused(valves: int, bridged: str, have: str) -> None:
    with pytest.raises(Refused, match=f"a bridge joins two valves, and each cylinder has {have};"):
        check_bridges(valves, Bridged(bridged))


@pytest.mark.parametrize(("valves", "bridged"), [(2, "none"), (3, "intake"), (4, "both"), (5, "exhaust")])
def test_a_bridge_over_two_valves_is_good(valves: int, bridged: str) -> None:
    check_bridges(valves, Bridged(bridged))


@pytest.mark.parametrize(
    ("cylinders", "layout", "numbering", "wanted"),
    [
        (3, Layout.INLINE, "", ((1, 2, 3),)),
        (1, Layout.SINGLE, "", ((1,),)),
        (6, None, "", ((1, 2, 3, 4, 5, 6),)),
        (8, Layout.V, "", ((1, 2, 3, 4), (5, 6, 7, 8))),
        (8, Layout.V, "alternating", ((1, 3, 5, 7), (2, 4, 6, 8))),
        (4, Layout.OPPOSED, "", ((1, 3), (2, 4))),
        (4, Layout.OPPOSED, "by-bank", ((1, 2), (3, 4))),
    ],
)
def test_the_cylinders_stand_in_one_row_or_in_two_banks(
    cylinders: int, layout: Layout | None, numbering: str, wanted: tuple[tuple[int, ...], ...]
) -> None:
    assert banks(ValveTrain(cylinders, 2, layout=layout, numbering=numbering)) == wanted


def test_the_walk_of_an_inline_six_is_the_published_table_cylinder_by_cylinder() -> None:
    """TM 5-3895-383-24 p. 6-61: I 1, 2, 4 and E 1, 3, 5 first; one turn later I 3, 5, 6 and E 2, 4, 6."""
    first, second = lash_walk(ValveTrain(6, 2, firing_order=(1, 5, 3, 6, 2, 4)))
    assert [point.name for point in first.points] == ["1I", "1E", "2I", "3E", "4I", "5E"]
    assert [point.name for point in second.points] == ["2E", "3I", "4E", "5I", "6I", "6E"]
    assert second.position is not None
    assert second.position.crank == 360
    assert second.position.tdc_compression == 6


def test_all_points_of_a_side_are_set_at_the_stop_of_that_side() -> None:
    first, _ = lash_walk(ValveTrain(4, 4, Bridged.EXHAUST, firing_order=(1, 3, 4, 2)))
    assert [point.name for point in first.points] == ["1I1", "1I2", "1E", "2I1", "2I2", "3E"]


def test_a_single_needs_no_firing_order() -> None:
    (only,) = lash_walk(ValveTrain(1, 2))
    assert only.position is not None
    assert [point.name for point in only.points] == ["1I", "1E"]


def test_without_a_firing_order_nothing_is_said_of_the_crank() -> None:
    (only,) = lash_walk(ValveTrain(2, 2))
    assert only.position is None
    assert [point.name for point in only.points] == ["1I", "1E", "2I", "2E"]


def test_a_point_is_found_whatever_its_case() -> None:
    points = lash_points(ValveTrain(2, 3))
    assert find_point(points, " 2i2 ", "P-01").name == "2I2"


@pytest.mark.parametrize("name", ["3", "7E", "3E1", "E3", "", "3X"])
def test_an_unknown_point_is_refused_with_the_points_there_are(name: str) -> None:
    with pytest.raises(Refused) as refused:
        find_point(lash_points(ValveTrain(6, 2)), name, "P-01")
    assert refused.value.detail == f"P-01 has no lash point {name!r}; its points are 1I, 1E to 6I, 6E"


def test_the_points_of_a_single_are_said_once() -> None:
    assert say_points(lash_points(ValveTrain(1, 4))) == "1I1, 1I2, 1E1, 1E2"
