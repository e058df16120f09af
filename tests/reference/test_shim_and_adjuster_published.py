"""Shims, adjusters and gauged lash against published clearances and sums worked by hand; each case names its source."""

from decimal import Decimal

import pytest

from fleetcare.domain.sheets import Place
from fleetcare.rules.lash import Gap, judge, read_gap
from fleetcare.rules.lash_setting import Direction, LashAt, ScrewAt, choose_shim, screw_turn

MM_PER_INCH = Decimal("25.4")


@pytest.mark.parametrize(
    ("fitted", "measured", "target", "step", "shim", "lash"),
    [
        # Owners' board of a motorcycle, quoting the formula of a printed manual.
        ("2.25", "0.20", "0.15", "0.05", "2.30", "0.15"),
        # Worked by hand from new = fitted + measured - target; the second is a tie.
        ("2.75", "0.09", "0.15", "0.05", "2.70", "0.14"),
        ("2.75", "0.125", "0.15", "0.05", "2.70", "0.175"),
    ],
)
def test_the_shim_is_the_one_the_workshop_formula_gives(
    fitted: str, measured: str, target: str, step: str, shim: str, lash: str
) -> None:
    choice = choose_shim(Decimal(measured), Decimal(target), Decimal(fitted), Decimal(step))
    assert (choice.shim, choice.lash) == (Decimal(shim), Decimal(lash))


def test_a_workshop_set_of_17_shims_is_every_whole_step_from_2_50_to_3_30() -> None:
    """Shim chart of a workshop manual: 17 sizes, 2.50 to 3.30 mm in steps of 0.05 mm, N = T + (A - V)."""
    stock = (Decimal("2.50"), Decimal("3.30"))
    hundredths = range(248, 333)
    chosen = {
        choose_shim(Decimal("0.20"), Decimal("0.20"), Decimal(size) / 100, Decimal("0.05"), stock=stock).shim
        for size in hundredths
    }
    assert sorted(chosen) == [Decimal(250 + 5 * size) / 100 for size in range(17)]


@pytest.mark.parametrize(
    ("pitch", "degrees"),
    [
        ("0.75", ("24.0", "18.5", "16.0", "15.0")),
        ("0.80", ("22.5", "17.3", "15.0", "14.1")),
        ("1.00", ("18.0", "13.8", "12.0", "11.2")),
        ("1.25", ("14.4", "11.1", "9.6", "9.0")),
    ],
)
def test_degrees_of_screw_for_a_twentieth_of_a_millimetre_at_the_valve(pitch: str, degrees: tuple[str, ...]) -> None:
    """Table worked by hand from turns = change / (pitch * R), screw on the pushrod side, R 1.0, 1.3, 1.5 and 1.6.

    11.25 degrees stand as 11.2 there.
    """
    for ratio, shown in zip(("1.0", "1.3", "1.5", "1.6"), degrees, strict=True):
        turn = screw_turn(Decimal("0.20"), Decimal("0.25"), Decimal(pitch), rocker_ratio=Decimal(ratio))
        assert abs(turn.degrees - Decimal(shown)) <= Decimal("0.05")


def test_a_tenth_too_wide_on_a_1_mm_screw_is_24_degrees_tighter() -> None:
    """Worked by hand: 0.30 to 0.20 mm, pitch 1.0, R 1.5: -0.0667 turn."""
    turn = screw_turn(Decimal("0.30"), Decimal("0.20"), Decimal(1), rocker_ratio=Decimal("1.5"))
    assert (round(turn.turns, 4), turn.degrees, turn.direction) == (Decimal("-0.0667"), Decimal(-24), Direction.TIGHTER)


def test_one_turn_of_a_three_eighths_24_stud_nut_opens_the_valve_side_by_0_1042_inch() -> None:
    """Worked by hand: 1/24 in of nut travel times 1 + R with R 1.5; one turn back is what takes it out again."""
    opened = Decimal("0.1042") * MM_PER_INCH
    pitch = MM_PER_INCH / 24
    turn = screw_turn(Decimal(0), opened, pitch, rocker_ratio=Decimal("1.5"), screw_at=ScrewAt.CENTRE)
    assert round(turn.turns, 3) == 1


@pytest.mark.parametrize(
    ("screw_at", "lash_at", "lash_per_mm_of_screw"),
    [
        (ScrewAt.PUSHROD, LashAt.VALVE, "1.5"),
        (ScrewAt.PUSHROD, LashAt.CAM, "1"),
        (ScrewAt.VALVE, LashAt.VALVE, "1"),
        (ScrewAt.VALVE, LashAt.CAM, "0.6666666667"),
        (ScrewAt.CENTRE, LashAt.VALVE, "2.5"),
        (ScrewAt.CENTRE, LashAt.CAM, "1.6666666667"),
    ],
)
def test_the_lever_is_that_of_the_rocker_arms(screw_at: ScrewAt, lash_at: LashAt, lash_per_mm_of_screw: str) -> None:
    """From the lever law with arms of 30 mm (valve) and 20 mm (cam): what 1 mm of screw does to the gap."""
    turn = screw_turn(
        Decimal(0), Decimal(1), Decimal(1), rocker_ratio=Decimal("1.5"), screw_at=screw_at, lash_at=lash_at
    )
    assert round(1 / turn.turns, 10) == Decimal(lash_per_mm_of_screw)


# Published check ranges as mm and inch: source, least and most in mm, in inch.
CHECK_RANGES = [
    ("TM 5-3895-383-24 p. 6-60, intake", "0.30", "0.46", "0.012", "0.018"),
    ("TM 5-3895-383-24 p. 6-60, exhaust", "0.56", "0.72", "0.022", "0.028"),
    ("TM 5-3895-385-23-2 WP 0326 table 1, intake", "0.152", "0.381", "0.006", "0.015"),
    ("TM 5-3895-385-23-2 WP 0326 table 1, exhaust", "0.381", "0.762", "0.015", "0.030"),
    ("TM 9-6115-670-14&P para 5.37", "0.145", "0.185", "0.0059", "0.0073"),
]


@pytest.mark.parametrize(("source", "least", "most", "least_in", "most_in"), CHECK_RANGES, ids=lambda value: str(value))
def test_a_published_check_range_judges_a_gap_in_its_middle_and_beside_it_alike_in_mm_and_inch(
    source: str, least: str, most: str, least_in: str, most_in: str
) -> None:
    low, high = Decimal(least), Decimal(most)
    step = (high - low) / 2
    for offset, place in ((-1, Place.BELOW), (1, Place.IN), (3, Place.ABOVE)):
        gap = low + offset * step
        inches = gap / MM_PER_INCH
        assert judge(Gap(gap, gap), low, high).place is place
        assert judge(Gap(inches, inches), Decimal(least_in), Decimal(most_in)).place is place


def test_blades_a_thousandth_either_side_of_nominal_bracket_it() -> None:
    """TM 5-3820-233-12/1 ch. 4: exhaust 0.012 in cold, the 0.011 blade goes and the 0.013 does not; 0.008 / 0.010 hot."""
    cold, hot = read_gap("11..13", "in"), read_gap("8..10", "in")
    assert (cold.best, hot.best) == (Decimal("0.012"), Decimal("0.009"))
    assert judge(cold, Decimal("0.011"), Decimal("0.013")).place is Place.IN
    assert judge(hot, Decimal("0.011"), Decimal("0.013")).place is Place.BELOW


@pytest.mark.parametrize(
    ("typed", "unit", "figure"),
    [
        # Published clearances as they stand on the blade that goes.
        ("38", "mm", "0.38"),  # TM 5-3895-383-24 p. 6-60, intake
        ("15", "in", "0.015"),  # the same in inches
        ("152", "mm", "0.152"),  # TM 5-3895-385-23-2 WP 0326 table 1, intake
        ("6", "in", "0.006"),  # the same in inches
        ("10", "mm", "0.10"),  # TM 10-4320-318-14 para 4-30
        ("4", "in", "0.004"),  # the same in inches
    ],
)
def test_blade_digits_are_the_published_clearance(typed: str, unit: str, figure: str) -> None:
    assert read_gap(typed, "in" if unit == "in" else "mm").best == Decimal(figure)
