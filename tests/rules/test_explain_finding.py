"""A finding in words: what was measured, the limit, by how much, how worked out, since when, the source, what to do."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.cautions import GENERAL
from fleetcare.domain.findings import Finding
from fleetcare.domain.rule_book import (
    AgainstSheet,
    Asks,
    Basis,
    Best,
    Bounds,
    By,
    Change,
    Condition,
    Limits,
    Method,
    Pattern,
    Pool,
    Rate,
    Rule,
    Shape,
    Since,
    Statistical,
)
from fleetcare.rules.explain_finding import (
    finding_row,
    say_cause,
    say_evidence,
    say_finding,
    say_measured,
    say_next_step,
    say_signal,
    say_sources,
    say_subject,
    say_unit,
    say_working,
)
from fleetcare.rules.findings import merge
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import judge
from tests.builders import day
from tests.rules.measured import a_rule, a_sheet, beyond, facts, one_signal, pressures, reach, value


def found(about: MeasuredFacts, *rules: Rule) -> Finding:
    """The one finding of some rules."""
    (finding,) = merge("P-01", judge(rules, about))
    return finding


def test_a_finding_is_said_with_its_figure_its_limit_and_since_when() -> None:
    about = facts(a_sheet(value("Fe", "120")), earlier=(a_sheet(value("Fe", "110"), days=30),))
    assert say_finding(found(about, a_rule())) == (
        "iron wear: liners, shafts, gears; iron 120 ppm, 20 ppm above the alert limit of 100 ppm; since 2026-03-18"
    )


def test_what_several_sources_say_alike_is_said_once() -> None:
    told = say_sources(
        ["a preset: over 20: a handbook; 50: a manual", "a law, 1 CFR 2", "a preset: over 30: a handbook; 50: a manual"]
    )
    assert told == "a preset: over 20: a handbook; 50: a manual; over 30: a handbook / a law, 1 CFR 2"


def test_the_row_of_a_finding_has_the_figures_of_its_gravest_signal_and_every_source_once() -> None:
    mild = a_rule(id="preset", source="a handbook", caution="Hot oil burns.")
    grave = a_rule(id="trend", high=Limits(alarm=beyond("90")), source="a manual", caution="Hot oil burns.")
    row = finding_row(found(facts(a_sheet(value("Fe", "120"))), mild, grave))
    assert (row.engine, row.rule, row.severity, row.cause, row.subject) == (
        "P-01",
        "trend",
        "alarm",
        "iron wear",
        "the engine",
    )
    assert (row.measured, row.unit, row.limit, row.margin) == (Decimal(120), "ppm", Decimal(90), Decimal(-30))
    assert row.source == "a manual / a handbook"
    assert row.caution == f"Hot oil burns. {GENERAL}"
    assert row.working == ("iron 120 ppm (trend)", "iron 120 ppm (preset)")
    assert row.evidence == ("iron 120 ppm on 2026-04-17",)
    assert (row.next_step, row.due_by) == ("sample again", None)


def test_a_pattern_alone_has_no_figure_and_one_beside_it_says_what_else_would_fit() -> None:
    asked = (Condition(("Fe",), Asks.WITHIN, low=beyond("50"), unit="ppm", calls_out=True),)
    pattern = a_rule(id="worn", quantity="", unit="", high=Limits(), shape=Pattern(asked), cause="worn liners")
    also = replace(pattern, id="also", cause="dirt")
    about = facts(a_sheet(value("Fe", "60")))
    row = finding_row(found(about, pattern))
    assert (row.measured, row.unit, row.working) == (None, "", ("worn liners (worn) from iron 60 ppm",))
    said = say_finding(found(facts(a_sheet(value("Fe", "120"))), pattern, also, a_rule()))
    assert said == (
        "dirt: liners, shafts, gears; iron 120 ppm, 20 ppm above the alert limit of 100 ppm;"
        " it would also fit worn liners; since 2026-04-17"
    )


def test_the_working_says_where_it_was_measured_if_the_finding_is_of_more() -> None:
    rule = a_rule(kinds=("compression",), quantity="pressure", unit="psi", cause="low", of_engine=True)
    finding = found(facts(pressures("400", "90")), rule)
    assert finding_row(finding).working == ("compression at cylinder 1 400 psi (iron)",)


@pytest.mark.parametrize(
    ("cause", "subject", "said"),
    [
        ("leaking cylinder", "1", "leaking cylinder 1"),
        ("cylinder out of line with the others", "3", "cylinder 3 out of line with the others"),
        ("head gasket between two cylinders", "2-3", "head gasket between cylinders 2 and 3"),
        ("head gasket between two cylinders", "2", "head gasket between two cylinders at cylinder 2"),
        ("leaking valves", "1", "leaking valves at cylinder 1"),
        ("cylinder too hot", "1E", "cylinder too hot at 1E"),
        ("all cylinders low", "", "all cylinders low"),
    ],
)
def test_a_cause_that_speaks_of_its_cylinder_takes_the_number(cause: str, subject: str, said: str) -> None:
    assert say_cause(cause, subject) == said


def test_a_cylinder_is_named_and_a_fall_is_below() -> None:
    rule = a_rule(
        id="r75",
        kinds=("compression",),
        quantity="pressure",
        shape=AgainstSheet(Best.HIGHEST, By.RATIO),
        unit="%",
        low=Limits(alarm=beyond("75")),
        high=Limits(),
        cause="low compression",
    )
    finding = found(facts(pressures("400", "280")), rule)
    assert say_finding(finding).startswith("low compression at cylinder 2: ")
    assert say_signal(finding.lead) == (
        "compression as a share of the highest at cylinder 2 70 %, 5 % below the alarm limit of 75 %"
    )
    assert say_working(finding.lead, "2") == (
        "compression as a share of the highest 70 % (r75) from compression 280 psi, highest 400 psi"
    )


def test_a_figure_that_only_reaches_its_limit_says_so() -> None:
    signal = one_signal(a_rule(high=Limits(reach("100"))), facts(a_sheet(value("Fe", "100"))))
    assert say_signal(signal) == "iron 100 ppm reaches the alert limit"


def test_a_hair_above_a_limit_is_never_rounded_to_nothing() -> None:
    signal = one_signal(a_rule(), facts(a_sheet(value("Fe", "100.000004"))))
    assert say_signal(signal) == "iron 100 ppm, 0.000004 ppm above the alert limit of 100 ppm"


@pytest.mark.parametrize(
    ("iron", "said"),
    [
        ("167.41573", "167.42 ppm, 67.42 ppm above"),
        ("101.23456", "101.23 ppm, 1.235 ppm above"),
        ("100.05084", "100.05 ppm, 0.0508 ppm above"),
        ("167.415", "167.415 ppm, 67.415 ppm above"),
    ],
)
def test_a_figure_has_the_decimals_its_size_asks_for(iron: str, said: str) -> None:
    signal = one_signal(a_rule(), facts(a_sheet(value("Fe", iron))))
    assert say_signal(signal) == f"iron {said} the alert limit of 100 ppm"


@pytest.mark.parametrize(
    ("shape", "said"),
    [
        (Bounds(), "iron"),
        (Bounds(Basis.LESS_NEW), "iron above new oil"),
        (Bounds(Basis.NAMEPLATE), "iron of the nameplate"),
        (Bounds(Basis.YEAR), "iron of the year"),
        (AgainstSheet(Best.MEAN, By.DIFFERENCE), "iron less the mean of all"),
        (AgainstSheet(Best.LOWEST, By.SHARE), "iron against the lowest"),
        (Change(Since.NEW, By.SHARE), "iron against new oil"),
        (Change(Since.BEFORE, By.RATIO), "iron as a share of the last test"),
        (Rate(Since.NEW, 100), "rise of iron"),
        (Statistical(Pool.OWN, Method.ROBUST, 10), "iron"),
    ],
)
def test_what_a_rule_works_out_has_a_name(shape: Shape, said: str) -> None:
    assert say_measured(a_rule(shape=shape)) == said


def test_what_was_taken_off_for_new_oil_is_said_and_also_that_it_is_not_known() -> None:
    rule = a_rule(shape=Bounds(Basis.LESS_NEW))
    sheet = a_sheet(value("Fe", "120"))
    bare = one_signal(rule, facts(sheet))
    assert say_working(bare, "") == "iron (new oil not known, nothing taken off) 120 ppm (iron)"
    known = one_signal(rule, facts(sheet, fresh=(value("Fe", "5", phase="new"),)))
    assert say_signal(known) == "iron above new oil 115 ppm, 15 ppm above the alert limit of 100 ppm"


def test_of_several_steps_the_lead_says_the_next_one() -> None:
    other = a_rule(id="trend", next_step="look at the filter")
    assert say_next_step(found(facts(a_sheet(value("Fe", "120"))), a_rule(), other)) == "sample again"


def test_a_rate_is_per_its_hours() -> None:
    assert say_unit(a_rule(shape=Rate(Since.NEW, 100))) == "ppm per 100 h"
    assert say_unit(a_rule(), "mm") == "mm"


@pytest.mark.parametrize(
    ("subject", "said"),
    [("", "the engine"), ("3", "cylinder 3"), ("2-3", "cylinders 2 and 3"), ("3E", "3E"), ("next", "next")],
)
def test_a_subject_is_named(subject: str, said: str) -> None:
    assert say_subject(subject) == said


def test_evidence_is_said_as_it_was_entered() -> None:
    sheet = a_sheet(value("lash", "0.25..0.30", point="3E", phase="found"), value("ph", "4", ""), kind="lash")
    rules = [
        a_rule(id="lash", kinds=("lash",), quantity="lash", unit="mm", low=Limits(beyond("0.4")), high=Limits()),
        a_rule(id="ph", kinds=("lash",), quantity="ph", unit="", low=Limits(beyond("4.5")), high=Limits()),
    ]
    said = [say_evidence(one.flagged[0]) for one in judge(rules, facts(sheet))]
    assert said == ["valve lash at 3E 0.25..0.30 mm, found on 2026-04-17", "initial pH 4 on 2026-04-17"]


def test_the_step_the_law_dates_comes_first() -> None:
    law = a_rule(id="law", high=Limits(beyond("100")), business_days=2, next_step="change the oil", is_law=True)
    finding = found(facts(a_sheet(value("Fe", "300"))), a_rule(), law)
    assert finding.lead.rule.id == "iron"
    assert say_next_step(finding) == "change the oil, by 2026-04-21; sample again"
    assert finding_row(finding).due_by == day("2026-04-21")
    alone = found(facts(a_sheet(value("Fe", "300"))), law)
    assert say_next_step(alone) == "change the oil, by 2026-04-21"
