"""The worked example of valve lash driving a next check.

An invented engine, its figures worked with statsmodels 0.15.0 (`OLS` with a level for each segment, `get_prediction`) before
this code was written: slope -4.855274e-05 mm/h; 0.25 mm at 6102.0 h, four times in five from 5975.1 to 6237.1 h, nineteen in
twenty from 5894.1 to 6332.9 h. One line through all of it, adjustments ignored, has no slope (p = 0.486) and would pull nothing.
"""

from decimal import Decimal

from fleetcare.domain.lines import State
from fleetcare.rules.due.row import due_row
from tests.builders import a_task, every, facts, last_done, line
from tests.rules.wearing import LASH, a_wear

TASK = a_task(every("3000h"), name="Valve lash", needs_sheet="lash", origin=last_done("2026-04-20", hours=4000))


def test_the_next_check_of_the_worked_example_is_at_the_early_end_of_its_range() -> None:
    known = facts(TASK, on="2026-05-01", hours=4000, wears=(a_wear(),))
    found = line(TASK, on="2026-05-01", hours=4000, wears=(a_wear(),))
    assert (found.triggers[0].point, found.triggers[0].own) == (Decimal("5975.1"), Decimal(7000))
    pull = found.triggers[0].pull
    assert pull is not None
    projection = pull.projection
    assert [f"{figure:.1f}" for figure in (projection.early, projection.likely, projection.late) if figure] == [
        "5975.1",
        "6102.0",
        "6237.1",
    ]
    assert projection.trend is not None
    assert f"{projection.trend.slope:.6e}" == "-4.855274e-5"
    assert due_row(found, known).next_due_at == Decimal("5975.1")


def test_it_is_near_a_tenth_of_the_interval_ahead_and_due_at_that_figure() -> None:
    states = [line(TASK, on="2026-05-01", hours=h, wears=(a_wear(),)).state for h in ("5675", "5675.1", "5975.1")]
    assert states == [State.CLEAR, State.NEAR, State.DUE]


def test_with_the_adjustments_ignored_the_same_values_would_pull_nothing() -> None:
    hours = " ".join(told[0] for told in LASH)
    values = " ".join(told[1] for told in LASH)
    found = line(TASK, on="2026-05-01", hours=4000, wears=(a_wear((hours, values, None)),))
    assert found.triggers[0].point == 7000


def test_an_engine_whose_gap_does_not_change_is_pulled_nowhere() -> None:
    """The refusal of the same source: 0.40 0.39 0.41 0.395 mm at 0 to 1500 h, gq = 309."""
    wear = a_wear(("2500 3000 3500 4000", ".40 .39 .41 .395", None))
    assert line(TASK, on="2026-05-01", hours=4000, wears=(wear,)).triggers[0].point == 7000
