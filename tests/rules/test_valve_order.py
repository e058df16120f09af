"""Which valves may be set where."""

from decimal import Decimal
from fractions import Fraction

import pytest

from fleetcare.errors import Refused
from fleetcare.rules.valve_order import (
    USUAL_TIMING,
    Method,
    ValveTiming,
    easiest_order,
    firing_angles,
    mates,
    setting_order,
)


def _timing(ivo: str = "20", ivc: str = "50", evo: str = "50", evc: str = "20") -> ValveTiming:
    return ValveTiming(Decimal(ivo), Decimal(ivc), Decimal(evo), Decimal(evc))


def _intervals(text: str) -> list[Decimal]:
    return [Decimal(part) for part in text.split("-")]


def test_an_even_engine_fires_every_720_over_n_degrees_exactly() -> None:
    assert firing_angles((1, 3, 5, 7, 2, 4, 6))[2] == Fraction(4 * 720, 7)


def test_an_uneven_engine_fires_at_the_intervals_given() -> None:
    assert firing_angles((1, 2), _intervals("315-405")) == {1: 0, 2: 315}


@pytest.mark.parametrize(
    "intervals",
    [(720,), (315, 404), (720, 0), (-90, 810), (240, 240, 240)],
    ids=lambda given: "-".join(map(str, given)),
)
def test_intervals_that_do_not_fit_the_engine_are_refused(intervals: tuple[int, ...]) -> None:
    with pytest.raises(Refused, match="do not fit 2 cylinders; give one above 0 for each cylinder"):
        firing_angles((1, 2), [Decimal(interval) for interval in intervals])


def test_more_cylinders_than_any_engine_has_are_refused() -> None:
    assert len(firing_angles(range(1, 65))) == 64
    with pytest.raises(Refused, match="number of cylinders 65 cannot be right"):
        firing_angles(range(1, 66))


def test_an_odd_number_of_cylinders_has_no_mates() -> None:
    assert mates(firing_angles((1, 2, 4, 5, 3))) == ()


def test_uneven_cylinders_are_mates_only_where_they_stand_360_degrees_apart() -> None:
    assert mates(firing_angles((1, 2), _intervals("315-405"))) == ()
    assert mates(firing_angles((1, 4, 3, 2), _intervals("90-270-90-270"))) == ((1, 3), (2, 4))


def test_a_single_is_set_in_one_position() -> None:
    (stop,) = setting_order(firing_angles((1,)), Method.TWO_POSITION)
    assert (stop.tdc_compression, stop.rocking, stop.intake, stop.exhaust) == (1, None, (1,), (1,))


def test_a_firing_order_may_begin_at_any_cylinder() -> None:
    first, second = setting_order(firing_angles((4, 2, 1, 3)), Method.TWO_POSITION)
    assert (first.tdc_compression, first.intake, first.exhaust) == (4, (3, 4), (2, 4))
    assert (second.tdc_compression, second.intake, second.exhaust) == (1, (1, 2), (1, 3))


def test_with_an_odd_number_no_cylinder_is_on_compression_one_turn_on_but_the_first_rocks() -> None:
    second = setting_order(firing_angles((1, 3, 2)), Method.TWO_POSITION)[1]
    assert (second.tdc_compression, second.rocking) == (None, 1)


def test_an_uneven_twin_is_set_in_two_positions_where_its_cam_allows() -> None:
    first, second = setting_order(firing_angles((1, 2), _intervals("315-405")), Method.TWO_POSITION)
    assert (first.intake, first.exhaust) == ((1,), (1, 2))
    assert (second.intake, second.exhaust) == ((2,), ())


def test_a_cylinder_too_near_overlap_sends_the_engine_to_the_one_by_one_method() -> None:
    angles = firing_angles((1, 2), _intervals("330-390"))
    with pytest.raises(Refused, match=r"usual valve timing.* exhaust 2 cannot be set at 0 degrees; use the one-by-one"):
        setting_order(angles, Method.TWO_POSITION)
    assert easiest_order(angles) == (Method.ONE_BY_ONE, setting_order(angles, Method.ONE_BY_ONE))


def test_two_positions_are_easiest_where_the_cam_allows_them() -> None:
    angles = firing_angles((1, 2, 4, 5, 3))
    assert easiest_order(angles) == (Method.TWO_POSITION, setting_order(angles, Method.TWO_POSITION))


@pytest.mark.parametrize(("cylinders", "method"), [(9, Method.TWO_POSITION), (11, Method.ONE_BY_ONE)])
def test_an_odd_engine_comes_as_near_overlap_as_360_over_n(cylinders: int, method: Method) -> None:
    """40 degrees in a nine are more than the 20 of a usual cam and 15 to spare, 32.7 in an eleven are less."""
    assert easiest_order(firing_angles(range(1, cylinders + 1)))[0] is method


@pytest.mark.parametrize(
    ("ivo", "evc", "refused"),
    [
        ("30", "30", None),  # 45 degrees from overlap, just 30 and 15 to spare
        ("31", "30", "with this valve timing and 15 degrees to spare, intake 10 cannot be set at 0 degrees"),
        ("30", "31", "with this valve timing and 15 degrees to spare, exhaust 8 cannot be set at 0 degrees"),
    ],
)
def test_a_sixteen_has_45_degrees_on_either_side_of_overlap(ivo: str, evc: str, refused: str | None) -> None:
    """Fired 1 to 16 in turn, cylinder 8 is 45 degrees past overlap at the first stop and cylinder 10 as far before it."""
    angles = firing_angles(range(1, 17))
    timing = _timing(ivo=ivo, evc=evc)
    if refused is None:
        assert len(setting_order(angles, Method.TWO_POSITION, timing)) == 2
    else:
        with pytest.raises(Refused, match=refused):
            setting_order(angles, Method.TWO_POSITION, timing)


def test_without_timing_no_further_valves_are_called_free() -> None:
    angles = firing_angles((1, 8, 7, 2, 6, 5, 4, 3))
    unknown, known = (setting_order(angles, Method.TWO_POSITION, timing)[0] for timing in (None, USUAL_TIMING))
    assert (unknown.also_intake, unknown.also_exhaust) == ((), ())
    assert (known.also_intake, known.also_exhaust) == ((8,), (3,))


def test_an_intake_that_closes_later_is_free_in_fewer_places() -> None:
    """Intake 8 of this V8 stands 630 degrees past its TDC on compression, 90 past BDC."""
    angles = firing_angles((1, 8, 7, 2, 6, 5, 4, 3))
    by_closing = {
        ivc: setting_order(angles, Method.TWO_POSITION, _timing(ivc=ivc))[0].also_intake for ivc in ("75", "76")
    }
    assert by_closing == {"75": (8,), "76": ()}


@pytest.mark.parametrize("figure", ["-60.1", "120.5"])
@pytest.mark.parametrize("name", ["ivo", "ivc", "evo", "evc"])
def test_timing_that_cannot_be_right_is_refused_by_name(name: str, figure: str) -> None:
    with pytest.raises(
        Refused, match=f"{name.upper()} {figure} degrees cannot be right; give a figure from -60 to 120"
    ):
        _timing(**{name: figure})


@pytest.mark.parametrize("extreme", ["-60", "120"])
def test_both_valves_are_closed_at_their_own_tdc_with_any_timing_of_sense(extreme: str) -> None:
    timing = _timing(extreme, extreme, extreme, extreme)
    assert timing.frees_intake(Fraction(0))
    assert timing.frees_exhaust(Fraction(0))
