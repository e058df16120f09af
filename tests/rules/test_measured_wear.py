"""Compression and oil as what wears: over which hours, to which limits, and what is left out."""

from dataclasses import replace
from decimal import Decimal

from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import AgainstSheet, Best, By, Limits, Rule
from fleetcare.domain.sheets import SheetValue
from fleetcare.domain.trends import End
from fleetcare.domain.wear import MeasuredWears, Wear
from fleetcare.rules.judge_engine import Background
from fleetcare.rules.measured_wear import measured_wears
from tests.rules.measured import ENGINE, a_rule, beyond, value
from tests.rules.pasts import a_test, sampled

RATIO = a_rule(
    id="ratio",
    kinds=("compression",),
    quantity="pressure",
    shape=AgainstSheet(Best.HIGHEST, By.RATIO),
    unit="%",
    low=Limits(beyond("75"), beyond("60")),
    high=Limits(),
)
BASE = a_rule(id="base", quantity="tbn", unit="mg KOH/g", low=Limits(beyond("4")), high=Limits())
WATER = a_rule(id="water", quantity="water", unit="%", high=Limits(beyond("0.2"), beyond("0.5")))


def shown(*sheets: MeasuredSheet, rules: tuple[Rule, ...] = (a_rule(), RATIO, BASE, WATER)) -> MeasuredWears:
    return measured_wears(sheets, ENGINE, rules, Background())


def iron(*figures: str, since: int = 1000, every: int = 50, more: tuple[SheetValue, ...] = ()) -> list[MeasuredSheet]:
    """Samples of an oil that was filled at some hours of life."""
    return [
        sampled(90 - since // 50 - n, str(every * n), text, *more, life=str(since + every * n))
        for n, text in enumerate(figures, start=1)
    ]


def xs(wear: Wear) -> list[list[int]]:
    return [[int(point.x) for point in segment.points] for segment in wear.segments]


def test_each_cylinder_lies_over_the_hours_of_life_with_its_nearest_limit() -> None:
    found = shown(a_test(9, "1000", "26", "27"), a_test(1, "1200", "25", "27.31"))
    first, second = found.pulling
    assert (first.subject, first.work, xs(first)) == ("cylinder 1", "compression", [[1000, 1200]])
    assert first.limits == {End.LOW: Decimal("20.49")}  # 75 % of 27.31 bar is 20.4825: rounded inwards
    assert second.measured_on == found.pulling[0].measured_on
    assert found.sound_oil == ()


def test_a_cylinder_below_its_alert_moves_on_to_the_alarm() -> None:
    assert shown(a_test(1, "1200", "20", "27")).pulling[0].limits == {End.LOW: Decimal("16.2")}


def test_where_only_the_log_says_what_was_topped_up_on_some_value_that_is_told() -> None:
    first, second = iron("10", "20")
    silent = replace(second, values=tuple(one for one in second.values if one.quantity != "top_up"))
    assert [wear.is_topped_up_by_log for wear in shown(first, second).pulling] == [False]
    assert [wear.is_topped_up_by_log for wear in shown(first, replace(silent, logged_top_up=Decimal(1))).pulling] == [
        True
    ]


def test_hours_on_the_oil_are_brought_to_those_of_life_by_the_newest_sample_of_the_fill() -> None:
    (wear,) = shown(*iron("10", "20"), *iron("9", "18", since=1200)).pulling
    assert (wear.subject, wear.work, wear.unit) == ("Fe iron", "oil", "ppm")
    assert xs(wear) == [[1250, 1300], [1250, 1300]]
    assert wear.limits == {End.HIGH: 200}


def test_oil_pulls_by_alarms_and_is_sound_by_the_nearest_limits() -> None:
    found = shown(*iron("10", "20", more=(value("tbn", "8"),)))
    assert [(one.subject, dict(one.limits)) for one in found.pulling] == [("Fe iron", {End.HIGH: Decimal(200)})]
    assert [(one.subject, dict(one.limits)) for one in found.sound_oil] == [
        ("base number", {End.LOW: Decimal(4)}),
        ("Fe iron", {End.HIGH: Decimal(100)}),
    ]


def test_an_oil_whose_newest_sample_flags_anything_is_not_sound() -> None:
    found = shown(*iron("10", "20", more=(value("water", "0.3", "%"),)))
    assert (len(found.pulling), found.sound_oil) == (1, ())


def test_left_out_is_a_leak_a_bound_and_what_has_no_limit() -> None:
    found = shown(*iron("10", "20", more=(value("water", "0.1", "%"), value("Cr", "3", "ppm"), value("tbn", "<5"))))
    assert [one.subject for one in found.sound_oil] == ["Fe iron"]


def test_left_out_is_what_was_reported_of_an_earlier_fill_alone() -> None:
    assert shown(*iron("10", "20"), *iron("", "", since=1200)) == MeasuredWears()


def test_what_an_earlier_sample_of_the_fill_reported_counts() -> None:
    assert len(shown(*iron("10", "20", "")).pulling) == 1


def test_nothing_is_told_without_hours_on_the_oil_of_the_newest_sample_or_hours_of_life() -> None:
    first, last = iron("10", "20")
    assert shown(first, sampled(1, "", "20", life="1100")) == MeasuredWears()
    assert shown(first, replace(last, engine_hours=None)) == MeasuredWears()
    assert shown() == MeasuredWears()


def test_results_that_came_later_are_known_from_then_on() -> None:
    first, last = iron("10", "20")
    late = replace(last, received_on=last.on.replace(day=last.on.day))
    (wear,) = shown(first, late).pulling
    assert wear.known_on == late.received_on
