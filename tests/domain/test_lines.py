"""Due lines: the order of states, and how far apart two points lie."""

from datetime import date
from decimal import Decimal

from fleetcare.domain.lines import State, apart


def test_states_are_ranked_as_the_due_list_shows_them() -> None:
    ranked = sorted(State, key=lambda state: state.rank)
    assert [state.value for state in ranked] == ["overdue", "due", "near", "unset", "clear"]
    assert State.OVERDUE.rank == 0


def test_points_lie_apart_in_their_base_unit_or_in_days_and_below_0_where_the_first_lies_before() -> None:
    assert apart(Decimal("1250.5"), Decimal(1250)) == Decimal("0.5")
    assert apart(date(2024, 3, 1), date(2024, 2, 28)) == 2
    assert apart(date(2026, 5, 1), date(2026, 5, 11)) == -10
