"""A test run in the few words of a line of the log."""

from decimal import Decimal

import pytest

from fleetcare.domain.sheets import Phase, SheetValue
from fleetcare.rules.explain_run import say_run
from tests.rules.measured import value

PURPOSE = SheetValue("purpose", "", Phase.NONE, None, None, None, "", "test")
"""What a run was for is a word."""


@pytest.mark.parametrize(
    ("values", "rated", "said"),
    [
        # 15 / 64
        ((value("minutes", "35", "min"), value("load", "15", "kW")), "64", "35 min at 15 kW, 23.44 % of the nameplate"),
        ((value("minutes", "35", "min"), value("load", "15", "kW")), None, "35 min at 15 kW"),
        ((value("minutes", "35", "min"), value("load", "30", "%")), "64", "35 min at 30 %"),
        ((value("minutes", "35", "min"), value("load", "ND", "kW")), "64", "35 min at ND kW"),
        ((value("minutes", "1.5", "h"),), "64", "1.5 h"),
        ((value("oil_pressure", "400", "kPa"),), "64", ""),
        (
            (
                value("minutes", "30", "min", point="1"),
                value("load", "50", "%", point="1"),
                value("minutes", "60", "min", point="2"),
                value("load", "75", "%", point="2"),
            ),
            "64",
            "30 min at 50 %, 60 min at 75 %",
        ),
    ],
)
def test_a_run_says_how_long_at_which_share_of_its_load(
    values: tuple[SheetValue, ...], rated: str | None, said: str
) -> None:
    assert say_run(values, Decimal(rated) if rated else None) == said


def test_a_run_says_what_it_was_for() -> None:
    assert say_run((value("minutes", "35", "min"), PURPOSE), None) == "35 min, test"
