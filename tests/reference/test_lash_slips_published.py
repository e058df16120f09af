"""Slips of unit printed in published manuals, typed as a mechanic would copy them: each is asked about, rightly guessed."""

from decimal import Decimal

import pytest

from fleetcare.domain.sheets import Phase, SheetValue
from fleetcare.rules.lash import MM_PER
from fleetcare.rules.lash_doubts import PUBLISHED_MM, doubt

# The figure in inches, the millimetres printed beside it, and what they ought to be.
SLIPS = [
    ("0.011", "0.028", "0.28"),  # TM 10-4320-307-24 para 2-54, intake
    ("0.023", "0.058", "0.58"),  # TM 10-4320-307-24 para 2-54, exhaust
    ("0.012", "0.03", "0.3"),  # manual of a marine diesel, valve adjustment
]

# Check ranges, or settings with the gauge on either side, in mm.
CLEARANCES = [
    ("0.30", "0.46"),  # TM 5-3895-383-24 p. 6-60, intake 0.38 +-0.08
    ("0.56", "0.72"),  # TM 5-3895-383-24 p. 6-60, exhaust 0.64 +-0.08
    ("0.152", "0.381"),  # TM 5-3895-385-23-2 WP 0326 table 1, intake
    ("0.381", "0.762"),  # TM 5-3895-385-23-2 WP 0326 table 1, exhaust
    ("0.145", "0.185"),  # TM 9-6115-670-14&P para 5.37
    ("0.10", "0.10"),  # TM 10-4320-318-14 para 4-30
    ("0.20", "0.20"),  # TM 5-3805-290-23-2 WP 0155 00 table 1, intake, any temperature
    ("0.45", "0.45"),  # TM 5-3805-290-23-2 WP 0155 00 table 1, exhaust, any temperature
    ("0.15", "0.15"),  # TM 5-4310-386-14 para 5-41; TM 10-4320-226-14 para 4.10.23; TM 10-4320-315-24 table 3-3
    ("0.28", "0.28"),  # TM 10-4320-307-24 para 2-54, intake 0.011 in
    ("0.58", "0.58"),  # TM 10-4320-307-24 para 2-54, exhaust 0.023 in
]


def left(figure: str) -> SheetValue:
    """A gap left so, in mm."""
    return SheetValue("lash", "1I", Phase.LEFT, Decimal(figure), None, None, "mm")


@pytest.mark.parametrize(("inches", "printed", "right"), SLIPS)
def test_a_misprinted_figure_that_was_set_is_doubted_and_the_right_one_named(
    inches: str, printed: str, right: str
) -> None:
    gauge = Decimal("0.001")
    found = doubt(left(printed), (Decimal(inches) - gauge, Decimal(inches) + gauge), "in")
    assert found is not None
    assert (Decimal(right), "mm") in found.meant


@pytest.mark.parametrize(("least", "most"), CLEARANCES)
def test_no_published_clearance_is_doubted_in_its_own_range_or_without_one(least: str, most: str) -> None:
    limits = Decimal(least), Decimal(most)
    for figure in (least, most):
        for phase in (Phase.FOUND, Phase.LEFT):
            value = SheetValue("lash", "1I", phase, Decimal(figure), None, None, "mm")
            assert doubt(value, limits, "mm") is None
            assert doubt(value, None, "mm") is None


@pytest.mark.parametrize(("least", "most"), CLEARANCES)
def test_a_published_clearance_typed_ten_times_too_large_is_doubted_and_named(least: str, most: str) -> None:
    for figure in (least, most):
        value = SheetValue("lash", "1I", Phase.FOUND, Decimal(figure) * 10, None, None, "mm")
        found = doubt(value, (Decimal(least), Decimal(most)), "mm")
        assert found is not None
        assert Decimal(figure) in [meant for meant, unit in found.meant if unit == "mm"]


def test_the_range_that_stands_in_spans_every_published_clearance() -> None:
    ends = [Decimal(end) for pair in CLEARANCES for end in pair]
    assert (min(ends), max(ends)) == PUBLISHED_MM
    assert round(Decimal("0.030") * MM_PER["in"], 3) == PUBLISHED_MM[1]
