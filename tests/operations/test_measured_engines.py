"""Engines as the rules see them: what the nameplate says, and what rules make of it."""

from decimal import Decimal

from fleetcare.context import Context
from tests.operations.importing import engine
from tests.operations.measure_yard import loaded, take


def test_the_nameplate_is_loaded_as_rules_ask_for_it(ctx: Context) -> None:
    engine(
        ctx,
        "V-01",
        cylinders=6,
        layout="v",
        fuel="petrol",
        duty="standby",
        adjuster="hydraulic",
        sump="9.5",
        altitude="120",
    )
    engine(ctx, "X-01")
    known, unknown = loaded(ctx, "V-01").engine, loaded(ctx, "X-01").engine
    assert (known.tag, known.cylinders, known.banks) == ("V-01", 6, ((1, 2, 3), (4, 5, 6)))
    assert (known.fuel, known.duty, known.adjuster, known.sump) == ("petrol", "standby", "hydraulic", Decimal("9.5"))
    assert (known.altitude, known.is_marine) == (Decimal(120), False)
    assert (unknown.cylinders, unknown.banks, unknown.rated_kw, unknown.altitude, unknown.is_marine) == (
        0,
        (),
        None,
        None,
        None,
    )


def test_sodium_alone_is_sea_water_where_the_duty_on_the_nameplate_is_a_marine_one(ctx: Context) -> None:
    """TM 10-6640-233-10: Na with marine equipment."""
    engine(ctx, "B-01", duty="marine propulsion", cylinders=4)
    engine(ctx, "P-01", duty="pump", cylinders=4)
    found = [take(ctx, "oil", "Na,,,120,ppm", "K,,,3,ppm", tag=tag).report.findings for tag in ("B-01", "P-01")]
    assert [[one.row.cause for one in findings] for findings in found] == [["sea water in the oil"], ["sodium"]]
