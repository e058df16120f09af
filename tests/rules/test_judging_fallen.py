"""A value in percent of what the sample before had: called out on one fill of oil, and never across its change."""

from decimal import Decimal

import pytest

from fleetcare.domain.findings import Signal, Step
from fleetcare.domain.measured import MeasuredSheet
from tests.rules.measured import a_sheet, facts, reach, value
from tests.rules.test_judging_patterns import matched, pattern, within


def a_sample(days: int, iron: str, *, on_oil: str = "100", life: str = "1000", added: str = "0") -> MeasuredSheet:
    """A sample of iron on hours of the oil and of life."""
    stated = (value("Fe", iron), value("hours_on_oil", on_oil), value("top_up", added, "L"))
    return a_sheet(*stated, days=days, engine_hours=Decimal(life))


FELL = pattern(within("Fe", of_before=True, high=reach("50"), unit="%", calls_out=True))


def fell(now: MeasuredSheet, then: MeasuredSheet | None = None) -> list[Signal]:
    """What a sample says with the one before it: 40 ppm of iron on oil of 100 h."""
    return matched([FELL], facts(now, earlier=(then or a_sample(30, "40"),)))


def test_a_value_in_percent_of_the_sample_before_is_called_out_where_it_lies_within() -> None:
    (signal,) = fell(a_sample(0, "20", on_oil="200", life="1100"))
    assert [one.value for one in signal.flagged] == ["20"]
    assert "40" in {one.value for one in signal.used}
    assert signal.steps == (
        Step("iron", Decimal(20), "ppm"),
        Step("iron before", Decimal(40), "ppm"),
        Step("iron, of the sample before", Decimal(50), "%"),
    )
    assert fell(a_sample(0, "20.4", on_oil="200", life="1100")) == []


@pytest.mark.parametrize(
    ("now", "then"),
    [
        (a_sample(0, "10", on_oil="50", life="1100"), a_sample(30, "40")),
        (a_sample(0, "10", on_oil="103", life="1003"), a_sample(30, "40")),
        (a_sample(0, "10", on_oil="200", life="1100", added="4"), a_sample(30, "40")),
        (a_sample(0, "10", on_oil="200", life="1100", added="1"), a_sample(30, "40", added="2")),
        (a_sample(0, "<10", on_oil="200", life="1100"), a_sample(30, "40")),
        (a_sample(0, "0", on_oil="200", life="1100"), a_sample(30, "0")),
    ],
    ids=["oil changed", "too close", "large top-up", "less added than before", "a bound", "none before"],
)
def test_a_fall_across_a_change_of_oil_a_large_top_up_or_few_hours_is_none(
    now: MeasuredSheet, then: MeasuredSheet
) -> None:
    assert fell(now, then) == []
    assert matched([FELL], facts(now)) == []
