"""What each kind of sheet lacks to close the work that needs it."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.sheets import Phase, SheetValue
from fleetcare.rules.sheet_complete import missing_cylinders, why_incomplete
from tests.rules.measured import ENGINE

TWO = replace(ENGINE, cylinders=2, rated_kw=None)


def values(*told: str) -> list[SheetValue]:
    """Values by "quantity", "quantity point" or "quantity point phase"."""
    found = []
    for text in told:
        quantity, point, phase = [*text.split(), "", ""][:3]
        found.append(SheetValue(quantity, point, Phase(phase), Decimal(1), None, None, ""))
    return found


@pytest.mark.parametrize(
    ("kind", "told", "lacks"),
    [
        ("compression", ["pressure 1 dry", "pressure 2 dry"], ""),
        ("compression", ["pressure 1 dry", "pressure 2 wet"], "cylinder 2 not measured"),
        ("compression", ["cranking_speed"], "cylinders 1, 2 not measured"),
        ("leakdown", ["leak 1", "supply 2", "held 2"], ""),
        ("leakdown", ["leak 1", "heard 2"], "cylinder 2 not measured"),
        ("run", ["minutes"], ""),
        ("run", ["load", "coolant"], "no minutes"),
        ("oil", ["Fe"], ""),
        ("oil", ["hours_on_oil", "grade"], "no value of a laboratory"),
        ("oil", ["tbn x new"], "no value of a laboratory"),
        ("spot", ["coolant"], ""),
        ("spot", [], "nothing was measured"),
    ],
)
def test_a_sheet_says_what_it_lacks(kind: str, told: list[str], lacks: str) -> None:
    assert why_incomplete(kind, values(*told), TWO) == lacks


def test_a_run_needs_its_load_where_the_nameplate_says_the_power() -> None:
    rated = replace(TWO, rated_kw=Decimal(100))
    assert why_incomplete("run", values("minutes"), rated) == "no load"
    assert why_incomplete("run", values(), rated) == "no minutes and no load"
    assert why_incomplete("run", values("minutes 1", "load 1"), rated) == ""


@pytest.mark.parametrize("kind", ["compression", "leakdown"])
def test_without_a_number_of_cylinders_one_is_enough(kind: str) -> None:
    unknown = replace(TWO, cylinders=0)
    quantity = "pressure 3 dry" if kind == "compression" else "leak 3"
    assert why_incomplete(kind, values(quantity), unknown) == ""
    assert why_incomplete(kind, values(), unknown) == "no cylinder was measured"


def test_only_sheets_by_cylinder_miss_cylinders() -> None:
    assert missing_cylinders("compression", values("pressure 2"), TWO) == ("1",)
    assert missing_cylinders("oil", values("Fe"), TWO) == ()
