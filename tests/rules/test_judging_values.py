"""Values of a sheet are found by what and where, in the order of the engine, whatever the order of entry."""

from decimal import Decimal

import pytest

from fleetcare.domain.sheets import Phase
from fleetcare.rules.judging.facts import CannotTell
from fleetcare.rules.judging.spans import decimal
from fleetcare.rules.judging.values import (
    by_number,
    contradictions,
    cylinder_of,
    fresh_of,
    same_place,
    single,
    step,
    title,
    values_of,
)
from tests.rules.measured import a_sheet, pressures, value


def test_points_stand_in_the_order_of_the_engine() -> None:
    assert sorted(["10E", "2I", "2E", "", "next"], key=by_number) == ["", "next", "2E", "2I", "10E"]


@pytest.mark.parametrize(("point", "cylinder"), [("3", 3), ("3E", 3), ("12I2", 12), ("", None), ("left", None)])
def test_a_point_tells_its_cylinder(point: str, cylinder: int | None) -> None:
    assert cylinder_of(point) == cylinder


def test_a_value_entered_twice_alike_counts_once_and_one_entered_differently_not_at_all() -> None:
    sheet = a_sheet(value("Fe", "20"), value("Fe", "20"), value("Cu", "3"), value("Cu", "4"))
    assert len(values_of(sheet, "Fe")) == 1
    assert values_of(sheet, "Cu") == ()
    assert contradictions(sheet, "Cu", ()) == ("",)
    assert contradictions(sheet, "Fe", ()) == ()
    assert contradictions(sheet, "Cu", (Phase.LEFT,)) == ()


def test_a_leak_is_worked_out_of_supply_and_held_where_it_was_not_entered() -> None:
    sheet = a_sheet(
        value("supply", "80", "psi", "1"),
        value("held", "72", "psi", "1"),
        value("supply", "80", "psi", "2"),
        value("held", "40", "psi", "2"),
        value("leak", "12", "%", "2"),
    )
    assert [(one.point, decimal(one.span.low)) for one in values_of(sheet, "leak")] == [
        ("1", Decimal(10)),
        ("2", Decimal(12)),
    ]


def test_a_supply_without_a_point_is_that_of_every_cylinder() -> None:
    sheet = a_sheet(value("supply", "80", "psi"), value("held", "72", "psi", "1"), value("held", "60", "psi", "2"))
    assert [(one.point, decimal(one.span.low)) for one in values_of(sheet, "leak")] == [
        ("1", Decimal(10)),
        ("2", Decimal(25)),
    ]


@pytest.mark.parametrize(
    "others",
    [
        [value("supply", "80", "psi", "2")],
        [value("supply", "0", "psi", "1")],
        [value("supply", "80", "ppm", "1")],
        [],
    ],
    ids=["another cylinder", "no supply", "another measure", "alone"],
)
def test_a_held_pressure_without_a_fitting_supply_tells_no_leak(others: list[object]) -> None:
    assert values_of(a_sheet(value("held", "72", "psi", "1"), *others), "leak") == ()  # type: ignore[arg-type]


def test_the_gain_of_a_wet_test_is_a_share_of_the_dry_value_in_any_unit() -> None:
    sheet = a_sheet(value("pressure", "10", "bar", "1"), value("pressure", "1150", "kPa", "1", "wet"))
    (gain,) = values_of(sheet, "wet_gain")
    assert (gain.point, decimal(gain.span.low), gain.unit) == ("1", Decimal(15), "%")


@pytest.mark.parametrize("dry", [value("pressure", "0", "bar", "1"), value("pressure", "10", "ppm", "1"), None])
def test_a_wet_value_without_a_dry_one_tells_no_gain(dry: object) -> None:
    values = [value("pressure", "11", "bar", "1", "wet"), *([dry] if dry else [])]
    assert values_of(a_sheet(*values), "wet_gain") == ()  # type: ignore[arg-type]


def test_a_wet_value_is_no_dry_one_and_a_dry_one_is_like_one_without_a_phase() -> None:
    sheet = pressures("100", wet={1: "120"})
    assert single(sheet, "pressure") is not None
    (dry,) = values_of(a_sheet(value("pressure", "99", "psi", "1", "dry")), "pressure")
    found = same_place(values_of(sheet, "pressure"), dry)
    assert found is not None
    assert found.phase is Phase.NONE
    assert same_place([], dry) is None


def test_several_values_are_no_single_one() -> None:
    assert single(pressures("100", "101"), "pressure") is None


def test_new_oil_is_what_the_sheet_says_of_it_before_the_reference_of_its_grade() -> None:
    fresh = (value("kv100", "14.5", phase="new"), value("tbn", "10", phase="new"))
    sheet = a_sheet(value("tbn", "9", phase="new"))
    own, reference = fresh_of(sheet, fresh, "tbn"), fresh_of(sheet, fresh, "kv100")
    assert own is not None
    assert reference is not None
    assert (own.evidence.value, reference.evidence.value) == ("9", "14.5")
    assert fresh_of(sheet, fresh, "Fe") is None


def test_a_value_of_another_measure_cannot_be_compared() -> None:
    (one,) = values_of(a_sheet(value("Fe", "3", "kPa")), "Fe")
    with pytest.raises(CannotTell, match="kPa cannot be compared in ppm"):
        one.within("ppm")
    (bare,) = values_of(a_sheet(value("Fe", "3", "")), "Fe")
    with pytest.raises(CannotTell) as told:
        bare.within("ppm")
    assert told.value.why == "a bare figure cannot be compared in ppm"


def test_a_number_of_the_working_says_when_it_is_only_a_bound() -> None:
    (one,) = values_of(a_sheet(value("water", "<0.1")), "water")
    assert step("water", one.span, "%").label == "water, at most"
    assert step("water", one.span, "%").value == Decimal("0.1")


def test_a_quantity_has_the_name_people_use() -> None:
    assert (title("Fe"), title("wet_gain")) == ("iron", "wet gain")
