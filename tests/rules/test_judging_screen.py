"""A glance at a sheet: what it is certain of, and what it leaves to a closer look."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.measured import Pools
from fleetcare.domain.rule_book import (
    AgainstSheet,
    Asks,
    Basis,
    Best,
    Bounds,
    By,
    Change,
    Condition,
    End,
    Limits,
    Method,
    Pool,
    Rate,
    Rule,
    Since,
    Statistical,
)
from fleetcare.domain.sheets import Judgement, Phase, SheetValue, Verdict
from fleetcare.rules.judging.screen import is_outside, screened
from tests.rules.measured import a_rule, a_sheet, beyond, facts, reach, value

HIGH = Limits(beyond("10"), beyond("20"))
LOW = Limits(beyond("-10"), beyond("-20"))


def clear(rule: Rule, *values: SheetValue, **changes: object) -> bool:
    """Whether a glance at a sheet with some values tells that a rule flags nothing."""
    words = changes.pop("words", {})
    return screened(rule).is_clear(facts(a_sheet(*values, words=words), **changes))


@pytest.mark.parametrize(
    ("text", "unit", "is_clear"),
    [
        ("99", "ppm", True),
        ("100", "ppm", False),
        ("<150", "ppm", True),
        ("0.0099", "%", True),
        ("0.0101", "%", False),
        ("50", "psi", False),
    ],
)
def test_plain_values_are_clear_of_bounds_in_any_unit_that_converts(text: str, unit: str, is_clear: bool) -> None:
    assert clear(a_rule(), value("Fe", text, unit)) is is_clear


def test_a_low_limit_is_looked_at_from_the_high_end_of_a_value() -> None:
    rule = a_rule(low=Limits(beyond("5")), high=Limits())
    assert clear(rule, value("Fe", "6"))
    assert not clear(rule, value("Fe", "<5"))


def test_what_new_oil_takes_off_only_makes_a_value_smaller_and_a_low_limit_is_looked_at_closely() -> None:
    rule = a_rule(shape=Bounds(Basis.LESS_NEW))
    assert clear(rule, value("Fe", "90"))
    assert not clear(rule, value("Fe", "110"))
    assert not clear(a_rule(shape=Bounds(Basis.LESS_NEW), low=Limits(beyond("5"))), value("Fe", "90"))


def test_a_rule_that_the_words_of_a_sheet_keep_out_flags_nothing() -> None:
    rule = a_rule(words={"purpose": ("test",)})
    assert clear(rule, value("Fe", "500"))
    assert not clear(rule, value("Fe", "500"), words={"purpose": "test"})
    assert clear(a_rule(unless={"purpose": ("test",)}), value("Fe", "500"), words={"purpose": "test"})


def test_a_load_in_percent_is_told_and_one_in_kw_is_looked_at() -> None:
    rule = a_rule(quantity="load", shape=Bounds(Basis.NAMEPLATE), unit="%", low=Limits(beyond("30")), high=Limits())
    assert clear(rule, value("load", "45", "%"))
    assert not clear(rule, value("load", "450", "kW"))


def test_a_total_of_the_year_is_always_looked_at() -> None:
    assert not clear(a_rule(shape=Bounds(Basis.YEAR)), value("Fe", "1"))


def test_the_lash_is_clear_where_no_gap_is_out() -> None:
    gap = value("lash", "0.30", "mm", "1E", "found")
    sheet = a_sheet(gap, kind="lash")
    rule = a_rule(quantity="lash", shape=Bounds(Basis.SPEC, End.LOW), unit="mm", high=Limits())
    for verdict in (Verdict.IN, Verdict.ALERT):
        about = facts(sheet, lash={sheet.entry: (Judgement(gap, verdict),)})
        assert screened(rule).is_clear(about) is (verdict is Verdict.IN)


@pytest.mark.parametrize(
    ("reference", "by", "low", "high", "figures", "is_clear"),
    [
        (Best.HIGHEST, By.RATIO, Limits(beyond("75")), Limits(), ("100", "80"), True),
        (Best.HIGHEST, By.RATIO, Limits(beyond("75")), Limits(), ("100", "74"), False),
        (Best.LOWEST, By.SHARE, Limits(), HIGH, ("100", "109"), True),
        (Best.LOWEST, By.SHARE, Limits(), HIGH, ("100", "111"), False),
        (Best.MEAN, By.DIFFERENCE, LOW, HIGH, ("100", "110"), True),
        (Best.MEAN, By.DIFFERENCE, LOW, HIGH, ("100", "130"), False),
        (Best.MEAN, By.DIFFERENCE, LOW, HIGH, ("100",), True),
        (Best.HIGHEST, By.RATIO, Limits(beyond("75")), Limits(), ("0", "0"), False),
        (Best.HIGHEST, By.RATIO, Limits(beyond("75")), Limits(), ("100", "<90"), False),
    ],
)
def test_points_are_compared_with_their_sheet(
    reference: Best, by: By, low: Limits, high: Limits, figures: tuple[str, ...], is_clear: bool
) -> None:
    rule = a_rule(quantity="pressure", shape=AgainstSheet(reference, by), unit="kPa", low=low, high=high)
    values = [value("pressure", text, "kPa", str(point)) for point, text in enumerate(figures, 1)]
    assert clear(rule, *values) is is_clear


@pytest.mark.parametrize(
    ("now", "then", "gauge", "is_clear"),
    [
        (value("pressure", "105", "kPa", "1"), value("pressure", "100", "kPa", "1"), "", True),
        (value("pressure", "115", "kPa", "1"), value("pressure", "100", "kPa", "1"), "", False),
        (value("pressure", "105", "kPa", "1"), value("pressure", "100", "kPa", "1"), "other", False),
        (value("pressure", "105", "kPa", "1"), value("pressure", "100", "kPa", "2"), "", False),
        (value("pressure", "105", "kPa", "1"), value("pressure", "1", "bar", "1"), "", False),
    ],
)
def test_a_change_is_told_from_the_sheet_before_with_the_same_gauge(
    now: SheetValue, then: SheetValue, gauge: str, is_clear: bool
) -> None:
    before = a_sheet(then, days=30, gauge=gauge)
    for by in (By.SHARE, By.DIFFERENCE):
        rule = a_rule(quantity="pressure", shape=Change(Since.BEFORE, by), unit="kPa", high=HIGH)
        assert clear(rule, now, earlier=(before,)) is is_clear
        assert clear(rule, now)


HIGHEST = Change(Since.BEST_BEFORE, By.RATIO)


@pytest.mark.parametrize(
    ("now", "then", "is_clear"),
    [
        (("80", "100"), ("100", "90"), True),
        (("69", "100"), ("100", "90"), False),
        (("75", "100"), ("90", "110"), False),
        (("80", "100"), ("100",), False),
        (("80", "100"), (), False),
        (("80", "100"), ("100", "<90"), False),
    ],
)
def test_a_change_from_the_highest_before_is_told_where_every_point_has_a_plain_figure_then(
    now: tuple[str, ...], then: tuple[str, ...], is_clear: bool
) -> None:
    """70 % of the highest: 80 of 100 is clear of it, 69 of 100 and 75 of 110 (68.2 %) are not."""
    rule = a_rule(quantity="pressure", shape=HIGHEST, unit="%", low=Limits(beyond("70")), high=Limits())
    sheet, before = (
        a_sheet(*(value("pressure", text, "psi", str(number)) for number, text in enumerate(told, start=1)), days=days)
        for told, days in ((now, 0), (then, 30))
    )
    assert screened(rule).is_clear(facts(sheet, earlier=(before,))) is is_clear
    assert screened(rule).is_clear(facts(sheet))


def test_a_point_that_was_entered_twice_before_is_looked_at() -> None:
    rule = a_rule(quantity="pressure", shape=HIGHEST, unit="%", low=Limits(beyond("70")), high=Limits())
    before = a_sheet(*(value("pressure", text, "psi", "1") for text in ("100", "101")), days=30)
    assert not clear(rule, value("pressure", "100", "psi", "1"), earlier=(before,))


@pytest.mark.parametrize(
    ("now", "then", "unit", "gauge", "is_clear"),
    [
        ("86", "100", "psi", "", True),
        ("84", "100", "psi", "", False),
        ("86", "103", "psi", "", False),
        ("84", "100", "psi", "another", True),
        ("84", "100", "kPa", "", False),
        ("84", "<100", "psi", "", False),
    ],
)
def test_a_fall_from_the_best_of_its_own_past_is_told_from_all_sheets_with_the_same_gauge(
    now: str, then: str, unit: str, gauge: str, is_clear: bool
) -> None:
    """15 % below the best: 86 of 100 is clear of it, 84 of 100 and 86 of 103 (83.5 %) are not."""
    best, last = (
        a_sheet(value("pressure", text, one, "1"), value("pressure", "90", one, "2"), days=days, gauge=gauge)
        for text, one, days in ((then, unit, 60), ("86", "psi", 30))
    )
    for by, limit, in_unit in ((By.SHARE, "-15", "%"), (By.DIFFERENCE, "-15", "psi")):
        shape = Change(Since.OWN_BEST, by)
        rule = a_rule(quantity="pressure", shape=shape, unit=in_unit, low=Limits(beyond(limit)), high=Limits())
        assert clear(rule, value("pressure", now, "psi", "1"), earlier=(best, last)) is is_clear
        assert clear(rule, value("pressure", now, "psi", "1"))


def test_a_rise_from_the_best_of_its_own_past_is_told_from_the_lowest() -> None:
    rule = a_rule(quantity="leak", shape=Change(Since.OWN_BEST, By.DIFFERENCE), unit="%", high=Limits(beyond("10")))
    earlier = tuple(a_sheet(value("leak", text, "%", "1"), days=days) for text, days in (("5", 60), ("14", 30)))
    assert clear(rule, value("leak", "14", "%", "1"), earlier=earlier)
    assert not clear(rule, value("leak", "16", "%", "1"), earlier=earlier)
    pair = a_sheet(value("supply", "80", "psi", "1"), value("held", "80", "psi", "1"), days=90)
    assert not clear(rule, value("leak", "14", "%", "1"), earlier=(pair, *earlier))


BETWEEN = Condition(("Na", "K"), Asks.WITHIN, low=reach("50"), high=beyond("100"), unit="ppm")


@pytest.mark.parametrize(
    ("condition", "text", "unit", "outside"),
    [
        (BETWEEN, "49", "ppm", True),
        (BETWEEN, "50", "ppm", False),
        (BETWEEN, "100", "ppm", False),
        (BETWEEN, "101", "ppm", True),
        (BETWEEN, "<60", "ppm", True),
        (BETWEEN, "0.02", "%", True),
        (BETWEEN, "20", "psi", False),
        (replace(BETWEEN, low=None), "101", "ppm", True),
        (replace(BETWEEN, high=None), "49", "ppm", True),
        (replace(BETWEEN, less_new=True), "49", "ppm", False),
        (replace(BETWEEN, over="Al"), "49", "ppm", False),
        (replace(BETWEEN, asks=Asks.CLEAR), "49", "ppm", False),
        (replace(BETWEEN, quantities=("leak",)), "49", "ppm", False),
        (replace(BETWEEN, quantities=("Cu",)), "49", "ppm", False),
    ],
)
def test_a_condition_no_value_can_lie_within_is_told(condition: Condition, text: str, unit: str, outside: bool) -> None:
    assert is_outside(condition, [a_sheet(value("Fe", "75")), a_sheet(value("Na", text, unit))]) is outside


def test_a_difference_in_another_unit_than_the_rule_is_looked_at() -> None:
    rule = a_rule(quantity="pressure", shape=Change(Since.BEFORE, By.DIFFERENCE), unit="kPa", high=HIGH)
    before = a_sheet(value("pressure", "1", "bar", "1"), days=30)
    assert not clear(rule, value("pressure", "1", "bar", "1"), earlier=(before,))


def test_a_change_from_new_oil_is_clear_only_while_new_oil_is_not_known() -> None:
    rule = a_rule(shape=Change(Since.NEW, By.SHARE), unit="%")
    assert clear(rule, value("Fe", "500"))
    assert not clear(rule, value("Fe", "1"), fresh=(value("Fe", "1", phase="new"),))


def test_a_rate_since_the_change_is_clear_without_hours_or_without_the_make_up_it_asks_for() -> None:
    plain, corrected = (a_rule(shape=Rate(Since.NEW, 100, is_corrected=is_corrected)) for is_corrected in (False, True))
    iron, hours, top_up = value("Fe", "500"), value("hours_on_oil", "100"), value("top_up", "2")
    assert clear(plain, iron)
    assert not clear(plain, iron, hours)
    assert clear(corrected, iron, hours)
    assert not clear(corrected, iron, hours, top_up)
    by_log = facts(a_sheet(iron, hours, logged_top_up=Decimal(2)))
    assert not screened(corrected).is_clear(by_log)
    assert not clear(a_rule(shape=Rate(Since.BEFORE, 10)), iron)


def test_statistics_are_clear_while_the_pool_is_too_small() -> None:
    for pool in Pool:
        rule = a_rule(shape=Statistical(pool, Method.MEAN, 3))
        few, enough = ({"Fe": (Decimal(1),) * number} for number in (2, 3))
        assert clear(rule, value("Fe", "500"), pools=Pools(few, few))
        assert not clear(rule, value("Fe", "1"), pools=Pools(enough, enough))


def test_what_is_worked_out_of_other_values_is_looked_at() -> None:
    leak = a_rule(quantity="leak", unit="%", high=HIGH)
    assert clear(leak, value("leak", "5", point="1"))
    assert not clear(leak, value("supply", "80", "psi", "1"), value("held", "79", "psi", "1"))
    assert not clear(a_rule(quantity="wet_gain", unit="%", high=HIGH))


def test_a_rule_on_wet_values_or_on_new_oil_is_looked_at() -> None:
    """A glance sees neither, so it cannot be certain of them."""
    assert not clear(
        a_rule(quantity="pressure", unit="kPa", phases=(Phase.WET,)), value("pressure", "5", "kPa", "1", "wet")
    )
    assert not clear(a_rule(phases=(Phase.NEW,)), value("Fe", "500", phase="new"))


def test_points_are_compared_in_the_unit_of_the_rule_and_with_the_points_it_names() -> None:
    """2 bar are 29 psi; 400 is 20 below the mean of 400 and 440, and above that of all three."""
    spread = a_rule(
        quantity="pressure",
        unit="psi",
        shape=AgainstSheet(Best.HIGHEST, By.DIFFERENCE),
        low=Limits(beyond("-25")),
        high=Limits(),
    )
    bar = [value("pressure", text, "bar", point) for point, text in (("1", "18"), ("2", "20"))]
    assert not clear(spread, *bar)
    named = a_rule(
        quantity="exhaust",
        unit="°C",
        points=("1", "2"),
        shape=AgainstSheet(Best.MEAN, By.DIFFERENCE),
        low=Limits(beyond("-15")),
        high=Limits(),
    )
    hot = [value("exhaust", text, "°C", point) for point, text in (("1", "400"), ("2", "440"), ("3", "340"))]
    assert not clear(named, *hot)
