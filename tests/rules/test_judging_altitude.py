"""Values less the least for the altitude of their engine: at a row of the table, between two, beyond it."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.findings import NotJudged
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import ByAltitude, Limits
from fleetcare.rules.explain_finding import say_signal, say_working
from fleetcare.rules.judging.judge import inputs_missing
from tests.rules.measured import ENGINE, a_rule, beyond, facts, one_signal, pressures

TABLE = ByAltitude("ft", ((Decimal(500), Decimal(515)), (Decimal(2500), Decimal(480)), (Decimal(5000), Decimal(440))))
LEAST = a_rule(
    id="least",
    kinds=("compression",),
    quantity="pressure",
    unit="psi",
    shape=TABLE,
    low=Limits(alarm=beyond("0")),
    high=Limits(),
)


@pytest.mark.parametrize(
    ("metres", "measured"),
    [("152.4", "-115"), ("762", "-80"), ("457.2", "-97.5"), ("1524", "-40")],
)
def test_the_least_is_that_of_a_row_or_lies_on_the_line_between_two(metres: str, measured: str) -> None:
    signal = one_signal(LEAST, facts(pressures("400"), engine=replace(ENGINE, altitude=Decimal(metres))))
    assert (signal.measured, str(signal.severity), signal.subject) == (Decimal(measured), "alarm", "1")


def test_the_working_has_the_value_the_altitude_and_the_least_there() -> None:
    sheet = pressures("28", unit="bar")
    signal = one_signal(LEAST, facts(sheet, engine=replace(ENGINE, altitude=Decimal(762))))
    # 28 bar are 406.1 psi, of 6.894757 kPa each (NIST SP 811).
    assert say_signal(signal) == (
        "compression less its least for the altitude at cylinder 1 -73.89 psi, 73.89 psi below the alarm limit of 0 psi"
    )
    assert say_working(signal, "1").endswith("from compression 406.11 psi, altitude 2500 ft, least there 480 psi")


@pytest.mark.parametrize(
    ("metres", "why"),
    [
        ("100", "the altitude of 328.1 ft lies beyond the table, which is from 500 to 5000 ft"),
        ("2000", "the altitude of 6561.7 ft lies beyond the table, which is from 500 to 5000 ft"),
        (None, "the nameplate has no altitude"),
    ],
)
def test_beyond_the_table_nothing_is_told_and_why(metres: str | None, why: str) -> None:
    engine = replace(ENGINE, altitude=Decimal(metres) if metres else None)
    assert inputs_missing([LEAST], facts(two(), engine=engine)) == (NotJudged(LEAST, "", why),)


def two() -> MeasuredSheet:
    """Two cylinders, of which both lack the same."""
    return pressures("400", "410")
