"""Laws of new readings held against old ones.

Only new ones are named, each with what it really breaks the rule with; without them no new one breaks the rule
with a neighbour; all new ones are taken where none does.
"""

from datetime import date, timedelta
from decimal import Decimal
from itertools import pairwise

from hypothesis import given
from hypothesis import strategies as st

from fleetcare.rules.readings import breaks_rule, misfits

FIRST = date(2026, 3, 2)
CAP = Decimal(24)

readings = st.lists(st.tuples(st.integers(0, 20), st.integers(0, 300), st.booleans()), max_size=14).map(sorted)


def pairs_that_break(figures: list[tuple[date, Decimal]], kept: list[int]) -> list[tuple[int, int]]:
    """The neighbours among some figures that break the hard rule."""
    return [(one, after) for one, after in pairwise(kept) if breaks_rule(figures[one], figures[after], CAP, "h")]


@given(readings)
def test_without_the_misfits_no_new_reading_breaks_the_rule(typed: list[tuple[int, int, bool]]) -> None:
    figures = [(FIRST + timedelta(days=days), Decimal(total)) for days, total, _ in typed]
    is_new = [new for _, _, new in typed]
    found = misfits(figures, is_new, CAP)
    kept = [index for index in range(len(figures)) if index not in found]
    assert not [pair for pair in pairs_that_break(figures, kept) if is_new[pair[0]] or is_new[pair[1]]]
    assert all(is_new[index] for index in found)
    for wrong, other in found.items():
        assert breaks_rule(figures[min(wrong, other)], figures[max(wrong, other)], CAP, "h")
    if not pairs_that_break(figures, list(range(len(figures)))):
        assert found == {}
