"""How to turn the crank to each stop of a lash sheet, in words."""

from fleetcare.domain.engines import ValveTrain
from fleetcare.rules.explain_lash import say_stop
from fleetcare.rules.lash_points import lash_walk


def test_the_first_stop_says_how_the_crank_stands_and_the_next_how_far_to_turn_on() -> None:
    stops = lash_walk(ValveTrain(6, 2, firing_order=(1, 5, 3, 6, 2, 4)))
    # TM 5-3895-383-24 p. 6-61: No. 1 at TDC on compression, then one crank turn later
    assert say_stop(stops, 0) == "Stop 1 of 2: 1 at TDC on compression, 6 rocking"
    assert say_stop(stops, 1) == "Stop 2 of 2: turn on 360°: 6 at TDC on compression, 1 rocking"


def test_of_an_odd_number_of_cylinders_none_stands_at_the_second_stop() -> None:
    stops = lash_walk(ValveTrain(3, 2, firing_order=(1, 3, 2)))
    # Westerbeke BCD manual and Thermo King three-cylinder manual: 240 degrees from one cylinder to the next
    assert say_stop(stops, 0) == "Stop 1 of 2: 1 at TDC on compression"
    assert say_stop(stops, 1) == "Stop 2 of 2: turn on 360°: no cylinder at TDC, 1 rocking"


def test_without_a_firing_order_whoever_measures_sees_to_it_that_each_valve_is_closed() -> None:
    (told,) = [say_stop(lash_walk(ValveTrain(4, 2)), 0)]
    assert told == "No firing order is known: see to it yourself that each valve is closed when it is measured"
