"""Change per so many hours, between two sheets and since the oil change."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import Limits, Rate, Rule, Since
from fleetcare.rules.judging.judge import inputs_missing, judge
from tests.rules.measured import ENGINE, a_rule, a_sheet, beyond, facts, one_signal, reach, value

JOAP = a_rule(id="trend", shape=Rate(Since.BEFORE, 10, least_hours=Decimal(5)), high=Limits(alarm=reach("43")))
WEAR = a_rule(id="wear", shape=Rate(Since.NEW, 100, is_corrected=True), high=Limits(beyond("16")))


def oil(
    iron: str, hours: str | None, top_up: str | None = None, days: int = 0, engine_hours: Decimal | None = None
) -> MeasuredSheet:
    """An oil sample with its iron, hours and top-up."""
    values = [value("Fe", iron)]
    values += [value("hours_on_oil", hours)] if hours is not None else []
    values += [value("top_up", top_up)] if top_up is not None else []
    return a_sheet(*values, days=days, engine_hours=engine_hours)


def _why(rule: Rule, *sheets: MeasuredSheet, **changes: object) -> str:
    *earlier, sheet = sheets
    (missing,) = inputs_missing([rule], facts(sheet, earlier=tuple(earlier), **changes))
    return missing.why


@pytest.mark.parametrize(("iron", "is_out"), [("95.9", False), ("96", True)])
def test_a_trend_is_told_per_ten_hours_between_two_samples_of_one_fill(iron: str, is_out: bool) -> None:
    about = facts(oil(iron, "60"), earlier=(oil("10", "40", days=9),))
    assert bool(judge([JOAP], about)) is is_out


def test_a_trend_carries_both_samples_and_the_hours_between() -> None:
    signal = one_signal(JOAP, facts(oil("110", "60"), earlier=(oil("10", "40", days=9),)))
    assert (signal.measured, [step.value for step in signal.steps]) == (
        Decimal(50),
        [Decimal(110), Decimal(10), Decimal(20)],
    )
    assert [one.value for one in signal.used] == ["10"]


@pytest.mark.parametrize(
    ("then", "now", "why"),
    [
        (oil("10", "240", days=9), oil("300", "20"), "the oil was changed in between"),
        (
            oil("10", "100", days=9, engine_hours=Decimal(1000)),
            oil("300", "120", engine_hours=Decimal(1071)),
            "the oil was changed in between",
        ),
        (oil("10", "40", days=9), oil("300", "44"), "too few hours in between"),
        (oil("10", None, days=9), oil("300", "44"), "hours on the oil: not stated on 2026-04-08"),
        (oil("10", "40", "0", days=9), oil("300", "90", "0.81"), "large top-up in between"),
        (oil("<10", "40", days=9), oil("300", "90"), "a bound tells no rate"),
        (oil("10", "40", "3", days=9), oil("300", "90", "1"), "top-up -2 L cannot be right"),
    ],
    ids=["shorter hours", "engine ran longer", "too close", "no hours", "large top-up", "a bound", "less added"],
)
def test_no_trend_is_told_where_two_samples_cannot_be_compared(
    then: MeasuredSheet, now: MeasuredSheet, why: str
) -> None:
    assert _why(JOAP, then, now) == why


@pytest.mark.parametrize("ran", ["20", "23", "70"])
def test_samples_whose_engine_hours_agree_with_those_of_the_oil_are_of_one_fill(ran: str) -> None:
    """A change would leave at least the 100 h before unseen; hours read a little late leave few, half of it decides."""
    then = oil("10", "100", days=9, engine_hours=Decimal(1000))
    now = oil("300", "120", engine_hours=1000 + Decimal(ran))
    assert one_signal(JOAP, facts(now, earlier=(then,))).measured == 145


def test_a_rule_may_ask_for_more_hours_between_samples_than_the_sum_needs() -> None:
    rule = a_rule(shape=Rate(Since.BEFORE, 10, least_hours=Decimal(25)))
    assert _why(rule, oil("10", "40", days=9), oil("300", "60")) == "too few hours in between"


def test_between_samples_make_up_is_corrected_for_where_the_rule_says_so() -> None:
    rule = a_rule(shape=Rate(Since.BEFORE, 100, is_corrected=True), high=Limits(beyond("1")))
    about = facts(oil("40", "200", "0.8"), earlier=(oil("20", "100", "0", days=9),), fresh=(value("Fe", "2"),))
    corrected = one_signal(rule, about).measured
    assert corrected is not None
    assert Decimal(20) < corrected < Decimal(24)
    assert _why(rule, oil("20", "100", days=9), oil("40", "200", "0.8")) == (
        "oil topped up since the change: not stated on 2026-04-08"
    )


def test_wear_since_the_change_is_corrected_for_make_up_and_new_oil() -> None:
    about = facts(oil("33", "200", "1.2"), fresh=(value("Fe", "3", phase="new"),))
    signal = one_signal(WEAR, about)
    assert round(signal.measured or 0, 2) == Decimal("16.15")  # 0.1615 mg/kg an hour, worked by hand
    assert [step.label for step in signal.steps] == [
        "iron",
        "in new oil",
        "hours on the oil",
        "topped up",
        "sump",
        "multiplied for make-up by",
    ]
    assert [one.quantity for one in signal.used] == ["top_up", "Fe"]


def test_a_top_up_the_sheet_does_not_state_is_that_of_the_log_and_said_to_be() -> None:
    sheet = replace(oil("33", "200"), logged_top_up=Decimal("1.2"))
    signal = one_signal(WEAR, facts(sheet, fresh=(value("Fe", "3", phase="new"),)))
    assert round(signal.measured or 0, 2) == Decimal("16.15")
    assert "topped up by the log" in [step.label for step in signal.steps]
    assert [one.quantity for one in signal.used] == ["Fe"]


def test_a_large_top_up_by_the_log_tells_no_trend_between_two_samples() -> None:
    """A tenth of a sump of 8 L is 0.8 L."""
    first = replace(oil("10", "40", days=9), logged_top_up=Decimal("0.1"))
    assert judge([JOAP], facts(replace(oil("96", "60"), logged_top_up=Decimal("0.9")), earlier=(first,)))
    assert "large top-up" in _why(JOAP, first, replace(oil("96", "60"), logged_top_up=Decimal("1.0")))


def test_wear_as_read_needs_no_top_up_and_without_new_oil_nothing_is_taken_off() -> None:
    rule = a_rule(shape=Rate(Since.NEW, 100), high=Limits(beyond("16.4")))
    signal = one_signal(rule, facts(oil("33", "200")))
    assert (signal.measured, len(signal.steps), signal.used) == (Decimal("16.5"), 2, ())


def test_a_top_up_that_nobody_stated_is_missing_and_not_nothing() -> None:
    assert _why(WEAR, oil("33", "200")) == "oil topped up since the change: not stated on 2026-04-17"


@pytest.mark.parametrize(
    ("sheet", "why"),
    [
        (oil("33", None, "1"), "hours on the oil: not stated on 2026-04-17"),
        (oil("33", "0", "1"), "hours on the oil 0 h cannot be right"),
        (oil("<33", "200", "1"), "a bound tells no rate"),
    ],
    ids=["no hours", "no running", "a bound"],
)
def test_no_wear_is_told_where_its_inputs_are_missing(sheet: MeasuredSheet, why: str) -> None:
    assert _why(WEAR, sheet) == why


def test_wear_needs_the_litres_of_the_sump_and_the_hours_the_rule_asks_for() -> None:
    assert (
        _why(WEAR, oil("33", "200", "1"), engine=replace(ENGINE, sump=None)) == "the litres of the sump are not known"
    )
    rule = a_rule(shape=Rate(Since.NEW, 100, least_hours=Decimal(50)))
    assert _why(rule, oil("33", "49.9")) == "the oil has run less than 50 h"


BLOW_BY = a_rule(
    kinds=("spot",),
    quantity="crankcase",
    unit="kPa",
    shape=Rate(Since.BEFORE, 1000, least_hours=Decimal(100)),
    high=Limits(beyond("0.5")),
)


def spot(pressure: str, hours: str | None, days: int = 0) -> MeasuredSheet:
    """A spot reading of crankcase pressure at engine hours."""
    at = Decimal(hours) if hours else None
    return a_sheet(value("crankcase", pressure), kind="spot", days=days, engine_hours=at)


def test_anything_but_oil_counts_by_the_hours_of_the_engine() -> None:
    about = facts(spot("1.4", "1500"), earlier=(spot("1.0", "1000", 90),))
    assert one_signal(BLOW_BY, about).measured == Decimal("0.8")


@pytest.mark.parametrize(
    ("at", "why"),
    [
        (None, "the engine hours of both sheets are not known"),
        ("1050", "the engine ran too little in between"),
        ("1000", "the engine ran too little in between"),
    ],
)
def test_no_rate_is_told_of_an_engine_that_hardly_ran(at: str | None, why: str) -> None:
    assert _why(BLOW_BY, spot("1.0", "1000", 90), spot("1.4", at)) == why
