"""Bounds: a value as measured, less new oil, as a share of the nameplate, over a year; and what a sheet says in words."""

from dataclasses import replace
from datetime import timedelta
from decimal import Decimal

import pytest

from fleetcare.domain.measured import MeasuredSheet, SheetWord
from fleetcare.domain.rule_book import Basis, Bounds, End, Limits
from fleetcare.domain.sheets import Phase
from fleetcare.rules.judging.deadlines import business_days_after
from fleetcare.rules.judging.judge import inputs_missing, judge, judge_sheet
from fleetcare.rules.judging.words import words_of
from tests.builders import day
from tests.rules.measured import ENGINE, ON, a_rule, a_sheet, beyond, facts, one_signal, reach, told, value

WATER = a_rule(id="water", quantity="water", unit="%", high=Limits(beyond("0.1"), beyond("0.5")))


@pytest.mark.parametrize(
    ("text", "severity"),
    [
        ("99", None),
        ("100", None),
        ("100.01", "alert"),
        ("200", "alert"),
        ("200.01", "alarm"),
        ("<50", None),
        ("ND", None),
    ],
)
def test_iron_is_judged_by_bounds_that_pass_at_themselves(text: str, severity: str | None) -> None:
    expected = {("iron", ""): severity} if severity else {}
    assert told([a_rule()], facts(a_sheet(value("Fe", text)))) == expected


def test_a_signal_carries_figure_limit_and_margin_in_the_unit_of_the_rule() -> None:
    signal = one_signal(WATER, facts(a_sheet(value("water", "3000", "ppm"))))
    assert (signal.measured, signal.limit, signal.margin, signal.unit) == (
        Decimal("0.3"),
        Decimal("0.1"),
        Decimal("-0.2"),
        "%",
    )
    assert (signal.end, signal.on, signal.since, signal.due_by) == (End.HIGH, ON, ON, None)
    assert [(one.quantity, one.value, one.unit) for one in signal.flagged] == [("water", "3000", "ppm")]


def test_a_figure_that_reaches_its_limit_has_a_margin_of_nothing() -> None:
    signal = one_signal(a_rule(high=Limits(reach("100"))), facts(a_sheet(value("Fe", "100"))))
    assert signal.margin == 0


def test_a_low_limit_is_passed_downwards() -> None:
    rule = a_rule(quantity="tbn", unit="mg KOH/g", low=Limits(alarm=beyond("2.0")), high=Limits())
    signal = one_signal(rule, facts(a_sheet(value("tbn", "1.9"))))
    assert (signal.end, signal.margin) == (End.LOW, Decimal("-0.1"))
    assert one_signal(rule, facts(a_sheet(value("tbn", "<2")))).measured == 2
    assert judge([rule], facts(a_sheet(value("tbn", "2.0")))) == ()


def test_a_bound_is_never_above_a_limit_and_one_beyond_it_is_told_as_open() -> None:
    judged = judge_sheet([WATER], facts(a_sheet(value("water", "<0.2"))))
    assert judged.signals == ()
    assert [one.why for one in judged.not_judged] == [
        "<0.2 does not tell on which side of the alert limit of 0.1 % it is; it keeps inside the alarm limit of 0.5 %"
    ]
    assert [str(verdict) for _, verdict in judged.verdicts] == ["not judged"]


def test_a_bound_beyond_both_limits_names_the_graver() -> None:
    judged = judge_sheet([WATER], facts(a_sheet(value("water", "<0.7"))))
    assert [one.why for one in judged.not_judged] == [
        "<0.7 does not tell on which side of the alarm limit of 0.5 % it is"
    ]


def test_a_value_in_a_unit_of_something_else_is_not_judged() -> None:
    missing = inputs_missing([a_rule()], facts(a_sheet(value("Fe", "300", "kPa"))))
    assert [one.why for one in missing] == ["kPa cannot be compared in ppm"]


@pytest.mark.parametrize("phase", ["wet", "new"])
def test_a_wet_test_and_new_oil_are_not_judged_as_if_they_were_the_sample(phase: str) -> None:
    assert judge([a_rule()], facts(a_sheet(value("Fe", "300", phase=phase)))) == ()


def test_a_rule_may_name_the_phases_and_points_it_judges() -> None:
    rule = a_rule(phases=(Phase.LEFT,), points=("2",))
    values = [value("Fe", "300", point=point, phase=phase) for point in "12" for phase in ("found", "left")]
    (signal,) = judge([rule], facts(a_sheet(*values)))
    assert (signal.subject, signal.flagged[0].phase) == ("2", Phase.LEFT)


def test_silicon_counts_from_new_oil_where_that_is_known_and_as_measured_where_not() -> None:
    rule = a_rule(quantity="Si", shape=Bounds(Basis.LESS_NEW), high=Limits(beyond("20")))
    sheet = a_sheet(value("Si", "26"))
    assert one_signal(rule, facts(sheet)).measured == 26
    assert judge([rule], facts(sheet, fresh=(value("Si", "6", phase="new"),))) == ()
    signal = one_signal(rule, facts(sheet, fresh=(value("Si", "5", phase="new"),)))
    assert (signal.measured, [step.value for step in signal.steps]) == (Decimal(21), [Decimal(26), Decimal(5)])
    assert [one.value for one in signal.used] == ["5"]


LOAD = a_rule(
    id="load",
    kinds=("run",),
    quantity="load",
    unit="%",
    shape=Bounds(Basis.NAMEPLATE),
    low=Limits(beyond("30")),
    high=Limits(),
)


@pytest.mark.parametrize(
    ("load", "unit", "is_out"), [("160", "kW", False), ("150", "kW", False), ("140", "kW", True), ("28", "%", True)]
)
def test_a_load_is_a_share_of_the_nameplate(load: str, unit: str, is_out: bool) -> None:
    assert bool(judge([LOAD], facts(a_sheet(value("load", load, unit), kind="run")))) is is_out


def test_a_load_in_kw_needs_the_rated_kw() -> None:
    about = facts(a_sheet(value("load", "140", "kW"), kind="run"), engine=replace(ENGINE, rated_kw=None))
    assert [one.why for one in inputs_missing([LOAD], about)] == ["the nameplate has no rated kW"]


YEAR = a_rule(
    id="year",
    kinds=("run",),
    quantity="minutes",
    unit="h",
    shape=Bounds(Basis.YEAR),
    high=Limits(alarm=beyond("50")),
    words={"purpose": ("other",)},
)


def test_a_year_counts_its_own_runs_of_the_purpose_asked_for() -> None:
    def ran(minutes: str, days: int, purpose: str = "other") -> object:
        return a_sheet(value("minutes", minutes), kind="run", days=days, words={"purpose": purpose})

    earlier = (ran("2400", 200), ran("1500", 20), ran("900", 10, "emergency"), ran("1500", 5))
    sheet = a_sheet(
        value("minutes", "1", point="1"), value("minutes", "0", point="2"), kind="run", words={"purpose": "other"}
    )
    signal = one_signal(YEAR, facts(sheet, earlier=earlier))
    assert round(signal.measured or 0, 4) == Decimal("50.0167")
    assert [one.value for one in signal.used] == ["1", "1500", "1500"]
    assert [(one.label, one.value, one.unit) for one in signal.steps] == [
        ("runs in 2026", Decimal(3), ""),
        (f"on {(ON - timedelta(days=20)).isoformat()}", Decimal(1500), "min"),
        (f"on {(ON - timedelta(days=5)).isoformat()}", Decimal(1500), "min"),
        ("this run", Decimal(1), "min"),
    ]
    wrong_unit = a_sheet(value("minutes", "1", "kPa"), kind="run", words={"purpose": "other"})
    assert inputs_missing([YEAR], facts(wrong_unit))[0].why == "kPa cannot be compared in h"


@pytest.mark.parametrize(("days", "listed"), [(6, 6), (7, 5)])
def test_many_runs_of_a_year_are_told_as_one_sum_and_the_last_five_by_day(days: int, listed: int) -> None:
    def ran(minutes: str, back: int) -> MeasuredSheet:
        return a_sheet(value("minutes", minutes), kind="run", days=back, words={"purpose": "other"})

    earlier = tuple(ran(str(500 + back), back) for back in range(days, 0, -1))
    signal = one_signal(YEAR, facts(ran("600", 0), earlier=earlier))
    (_, *runs, this) = signal.steps
    assert sum(one.value for one in (*runs, this)) / 60 == signal.measured
    assert [one.label for one in runs[-listed:]] == [f"on {one.on.isoformat()}" for one in earlier[-listed:]]
    older = [f"{days - listed} from {earlier[0].on.isoformat()} to {earlier[days - listed - 1].on.isoformat()}"]
    assert [one.label for one in runs[:-listed]] == (older if days > listed else [])


def test_a_word_that_is_asked_for_must_be_said_and_one_that_bars_must_not() -> None:
    rule = a_rule(words={"tbn_method": ("hydrochloric",)}, unless={"repair": ("sealant",)})
    plain, said = a_sheet(value("Fe", "300")), a_sheet(value("Fe", "300"), words={"tbn_method": " Hydrochloric"})
    assert [one.why for one in inputs_missing([rule], facts(plain))] == ["the sheet does not say tbn method"]
    assert len(judge([rule], facts(said))) == 1
    other = a_sheet(value("Fe", "300"), words={"tbn_method": "perchloric"})
    assert judge_sheet([rule], facts(other)).not_judged == ()
    barred = a_sheet(value("Fe", "300"), words={"tbn_method": "hydrochloric", "repair": "Sealant"})
    assert judge([rule], facts(barred)) == ()


def test_an_empty_word_asks_for_nothing_to_be_said() -> None:
    rule = a_rule(words={"purpose": ("", "test")})
    purposes: list[dict[str, str]] = [{}, {"purpose": "test"}, {"purpose": "other"}]
    assert [len(judge([rule], facts(a_sheet(value("Fe", "300"), words=said)))) for said in purposes] == [1, 1, 0]


def test_a_word_at_a_point_is_said_of_that_point_and_one_without_of_all() -> None:
    sheet = replace(
        a_sheet(), words=(SheetWord("heard", "exhaust", "3"), SheetWord("heard", " ", "2"), SheetWord("heard", "next"))
    )
    assert words_of(sheet, "heard", "3") == {"exhaust", "next"}
    assert words_of(sheet, "heard", "2") == {"next"}


@pytest.mark.parametrize(
    ("received", "by"), [("2026-04-13", "2026-04-15"), ("2026-04-17", "2026-04-21"), ("2026-04-18", "2026-04-21")]
)
def test_business_days_leave_out_the_weekend_and_the_day_itself(received: str, by: str) -> None:
    assert business_days_after(day(received), 2, frozenset()) == day(by)


def test_business_days_leave_out_the_holidays_of_the_shop() -> None:
    assert business_days_after(day("2026-04-30"), 2, frozenset({day("2026-05-01")})) == day("2026-05-05")


def test_a_rule_may_date_its_next_step_from_the_day_the_results_came() -> None:
    rule = a_rule(business_days=2)
    sheet = a_sheet(value("Fe", "300"), days=7)
    assert one_signal(rule, facts(sheet)).due_by == day("2026-04-14")
    assert one_signal(rule, facts(replace(sheet, received_on=ON))).due_by == day("2026-04-21")


def test_rules_for_other_kinds_of_sheet_are_left_aside() -> None:
    assert judge_sheet([a_rule(kinds=("spot",))], facts(a_sheet(value("Fe", "300")))).not_judged == ()
