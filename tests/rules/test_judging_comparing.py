"""Values compared with the best of their sheet, with the sheet before, with new oil."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.rule_book import AgainstSheet, Best, By, Change, Limits, Rule, Since
from fleetcare.rules.judging.judge import inputs_missing, judge
from tests.rules.measured import a_rule, a_sheet, beyond, facts, one_signal, pressures, reach, told, value


def compression(reference: Best = Best.HIGHEST, by: By = By.RATIO, unit: str = "%", **limits: Limits) -> Rule:
    """A rule on compression that compares the cylinders."""
    shape = AgainstSheet(reference, by)
    sides = {"low": Limits(alarm=beyond("75")), "high": Limits()} | limits
    return a_rule(id="spread", kinds=("compression",), quantity="pressure", shape=shape, unit=unit, **sides)


@pytest.mark.parametrize(("lowest", "low"), [("300.1", []), ("300", []), ("299.9", ["3"])])
def test_the_lowest_is_held_against_the_highest(lowest: str, low: list[str]) -> None:
    signals = judge([compression()], facts(pressures("400", "380", lowest, "390")))
    assert [one.subject for one in signals] == low


def test_each_low_cylinder_is_told_with_the_highest_and_the_others_as_what_it_was_worked_from() -> None:
    first, second = judge([compression()], facts(pressures("400", "200", "100")))
    assert (first.subject, second.subject) == ("2", "3")
    assert (first.measured, [step.value for step in first.steps]) == (Decimal(50), [Decimal(200), Decimal(400)])
    assert {one.point for one in first.used} == {"1", "3"}


def test_a_mean_is_that_of_all_and_twenty_percent_below_it_is_reached() -> None:
    rule = compression(Best.MEAN, low=Limits(alarm=reach("80")))
    assert told([rule], facts(pressures("80", "110", "110"))) == {("spread", "1"): "alarm"}
    assert told([rule], facts(pressures("81", "110", "109"))) == {}


def test_a_difference_is_compared_in_the_unit_of_the_rule() -> None:
    rule = compression(by=By.DIFFERENCE, unit="psi", low=Limits(alarm=beyond("-10")))
    assert told([rule], facts(pressures("120", "110"))) == {}
    assert told([rule], facts(pressures("120", "109.9"))) == {("spread", "2"): "alarm"}
    signal = one_signal(rule, facts(pressures("9", "8", unit="bar")))
    assert signal.unit == "psi"
    assert round(signal.measured or 0, 2) == Decimal("-14.50")


def test_the_lowest_may_be_what_others_are_compared_with() -> None:
    rule = compression(Best.LOWEST, By.SHARE, low=Limits(), high=Limits(beyond("50")))
    assert told([rule], facts(pressures("100", "150", "151"))) == {("spread", "3"): "alert"}


def test_one_cylinder_alone_and_cylinders_without_any_pressure_tell_no_spread() -> None:
    assert (
        inputs_missing([compression()], facts(pressures("400")))[0].why
        == "one point alone cannot be compared with others"
    )
    assert (
        inputs_missing([compression()], facts(pressures("0", "0")))[0].why
        == "highest is not above 0, so there is no percentage of it"
    )


def test_what_was_found_is_not_compared_with_what_was_left() -> None:
    found = [value("pressure", text, "psi", point, "found") for point, text in (("1", "400"), ("2", "200"))]
    left = [value("pressure", text, "psi", point, "left") for point, text in (("1", "400"), ("2", "390"))]
    (signal,) = judge([compression()], facts(a_sheet(*found, *left, kind="compression")))
    assert signal.flagged[0].phase == "found"


def test_values_of_another_measure_are_not_compared() -> None:
    sheet = a_sheet(value("pressure", "400", "psi", "1"), value("pressure", "3", "ppm", "2"), kind="compression")
    assert inputs_missing([compression()], facts(sheet))[0].why == "ppm cannot be compared in psi"


FALL = a_rule(
    id="fall",
    kinds=("compression",),
    quantity="pressure",
    shape=Change(Since.BEFORE, By.SHARE),
    unit="%",
    low=Limits(beyond("-15"), beyond("-25")),
    high=Limits(),
)


def _tested(text: str, days: int, gauge: str = "", unit: str = "psi", phase: str = "") -> object:
    return a_sheet(value("pressure", text, unit, "1", phase), kind="compression", days=days, gauge=gauge)


@pytest.mark.parametrize(("now", "severity"), [("85", None), ("84.9", "alert"), ("75", "alert"), ("74.9", "alarm")])
def test_a_change_is_that_of_the_same_point_before(now: str, severity: str | None) -> None:
    about = facts(_tested(now, 0), earlier=(_tested("90", 60), _tested("100", 30)))  # type: ignore[arg-type]
    assert told([FALL], about) == ({("fall", "1"): severity} if severity else {})


def test_another_gauge_is_no_trend() -> None:
    earlier = (_tested("100", 60, "G1"), _tested("80", 30, "G2"))
    signal = one_signal(FALL, facts(_tested("80", 0, "G1"), earlier=earlier))  # type: ignore[arg-type]
    assert signal.measured == -20
    (missing,) = inputs_missing([FALL], facts(_tested("80", 0, "G3"), earlier=earlier))  # type: ignore[arg-type]
    assert (missing.subject, missing.why) == ("1", "no earlier sheet with the same gauge has this value")
    assert inputs_missing([FALL], facts(_tested("80", 0)))[0].why == "there is no earlier sheet"  # type: ignore[arg-type]


def test_a_change_reads_the_same_whatever_the_units_and_a_dry_value_is_like_one_without_a_phase() -> None:
    about = facts(_tested("8", 0, unit="bar", phase="dry"), earlier=(_tested("1000", 30, unit="kPa"),))  # type: ignore[arg-type]
    assert one_signal(FALL, about).measured == -20


BEST = replace(FALL, shape=Change(Since.OWN_BEST, By.SHARE))


def test_a_figure_that_fell_and_stayed_there_is_told_again_and_so_is_one_that_fell_step_by_step() -> None:
    stayed = facts(_tested("80", 0), earlier=(_tested("100", 60), _tested("80", 30)))  # type: ignore[arg-type]
    assert told([FALL], stayed) == {}
    assert told([BEST], stayed) == {("fall", "1"): "alert"}
    stepped = facts(_tested("84", 0), earlier=(_tested("100", 60), _tested("92", 30)))  # type: ignore[arg-type]
    signal = one_signal(BEST, stepped)
    assert (signal.measured, [one.value for one in signal.used]) == (Decimal(-16), ["100"])


def test_the_best_is_that_of_the_same_gauge_in_whatever_unit_and_the_lowest_where_a_high_limit_is_held() -> None:
    earlier = (_tested("1200", 90, "G2", "kPa"), _tested("1000", 60, "G1", "kPa"), _tested("9", 30, "G1", "bar"))
    signal = one_signal(BEST, facts(_tested("8", 0, "G1", "bar"), earlier=earlier))  # type: ignore[arg-type]
    assert (signal.measured, [one.value for one in signal.used]) == (Decimal(-20), ["1000"])
    risen = replace(BEST, low=Limits(), high=Limits(beyond("50")))
    signal = one_signal(risen, facts(_tested("1.6", 0, "G1", "MPa"), earlier=earlier))  # type: ignore[arg-type]
    assert [one.value for one in signal.used] == ["9"]
    assert inputs_missing([BEST], facts(_tested("80", 0)))[0].why == "there is no earlier sheet"  # type: ignore[arg-type]


RISE = a_rule(
    id="rise",
    kinds=("compression",),
    quantity="pressure",
    shape=Change(Since.BEST_BEFORE, By.SHARE),
    unit="%",
    high=Limits(beyond("15")),
)


@pytest.mark.parametrize(("now", "is_told"), [("25", False), ("28.75", False), ("28.76", True)])
def test_a_point_is_higher_than_before_only_beyond_what_a_sound_one_showed_then(now: str, is_told: bool) -> None:
    then = a_sheet(
        value("pressure", "17", "bar", "1"), value("pressure", "25", "bar", "2"), kind="compression", days=30
    )
    about = facts(_tested(now, 0, unit="bar"), earlier=(then,))  # type: ignore[arg-type]
    assert told([RISE], about) == ({("rise", "1"): "alert"} if is_told else {})


NEW = a_rule(
    id="new",
    quantity="kv100",
    shape=Change(Since.NEW, By.SHARE),
    unit="%",
    low=Limits(beyond("-20")),
    high=Limits(beyond("20")),
)


@pytest.mark.parametrize(("now", "is_out"), [("10.52", False), ("10.51", True), ("15.78", False), ("15.79", True)])
def test_a_change_from_new_oil_of_exactly_twenty_percent_passes(now: str, is_out: bool) -> None:
    about = facts(a_sheet(value("kv100", now)), fresh=(value("kv100", "13.15", phase="new"),))
    assert bool(judge([NEW], about)) is is_out


def test_without_new_oil_there_is_no_change_from_it() -> None:
    assert inputs_missing([NEW], facts(a_sheet(value("kv100", "12"))))[0].why == "the value of new oil is not known"


def test_a_rise_in_units_of_the_quantity_is_exact() -> None:
    rule = a_rule(
        id="tan",
        quantity="tan",
        shape=Change(Since.NEW, By.DIFFERENCE),
        unit="mg KOH/g",
        high=Limits(alarm=beyond("3.0")),
    )
    fresh = (value("tan", "1.19", phase="new"),)
    assert judge([rule], facts(a_sheet(value("tan", "4.19")), fresh=fresh)) == ()
    assert one_signal(rule, facts(a_sheet(value("tan", "4.20")), fresh=fresh)).margin == Decimal("-0.01")
