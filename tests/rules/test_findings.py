"""Signals put together: one finding a cause, every flagged value in exactly one, none milder than its evidence."""

from dataclasses import replace
from datetime import date
from itertools import permutations

from fleetcare.domain.findings import Evidence, Finding, Signal
from fleetcare.domain.rule_book import Asks, Condition, Pattern, Rule, Severity, Where
from fleetcare.domain.sheets import Phase
from fleetcare.rules.findings import merge
from tests.rules.measured import ON, a_rule

ALERT, ALARM = Severity.ALERT, Severity.ALARM


def seen(quantity: str, point: str = "") -> Evidence:
    """A value of today's sheet."""
    return Evidence(ON, 1, quantity, point, Phase.NONE, "30", "ppm")


def says(rule: str, quantity: str, cause: str, severity: Severity = ALERT, point: str = "") -> Signal:
    """What one rule says of one value."""
    return Signal(a_rule(id=rule, quantity=quantity, cause=cause), severity, point, ON, (seen(quantity, point),))


def fits(name: str, *quantities: str, severity: Severity = ALERT, conditions: int = 2, subject: str = "") -> Signal:
    """A pattern that matched, with the values it flags."""
    asked = tuple(Condition((quantity,), Asks.FLAGGED_HIGH) for quantity in "abcdef"[:conditions])
    rule: Rule = a_rule(id=name, quantity="", cause=name, shape=Pattern(asked))
    return Signal(rule, severity, subject, ON, tuple(seen(quantity) for quantity in quantities))


def put(*signals: Signal) -> list[tuple[str, str, list[str]]]:
    """Cause, severity and flagged quantities of each finding."""
    return [
        (one.cause, str(one.severity), sorted(value.quantity for value in one.evidence))
        for one in merge("P-01", signals)
    ]


def test_no_signal_is_no_finding() -> None:
    assert merge("P-01", ()) == ()


def test_several_rules_on_one_value_are_one_finding_led_by_the_gravest() -> None:
    (finding,) = merge("P-01", (says("a", "Fe", "iron"), says("b", "Fe", "steady iron", ALARM)))
    assert (finding.cause, finding.rule, len(finding.signals)) == ("steady iron", "b", 2)


def test_a_law_leads_a_preset_that_is_as_grave() -> None:
    law = says("z-law", "tbn", "condemned", ALARM)
    law = replace(law, rule=replace(law.rule, is_law=True))
    (finding,) = merge("P-01", (says("a", "tbn", "spent", ALARM), law))
    assert finding.cause == "condemned"


def test_values_of_one_cause_and_place_are_one_finding_and_of_two_places_two() -> None:
    assert put(says("a", "tbn", "condemned"), says("b", "water", "condemned", ALARM)) == [
        ("condemned", "alarm", ["tbn", "water"])
    ]
    cylinders = merge("P-01", (says("a", "pressure", "low", point="2"), says("a", "pressure", "low", point="3")))
    assert [(one.subject, one.engine) for one in cylinders] == [("2", "P-01"), ("3", "P-01")]


def test_what_a_rule_of_the_engine_says_of_several_points_is_one_finding_of_the_engine() -> None:
    signals = [says("set", "lash", "set", point=point) for point in ("1E", "2I")]
    whole = [replace(one, rule=replace(one.rule, of_engine=True)) for one in signals]
    (finding,) = merge("P-01", whole)
    assert (finding.cause, finding.subject, [one.point for one in finding.evidence]) == ("set", "", ["1E", "2I"])


def test_a_pattern_takes_the_values_it_flags_and_names_the_cause() -> None:
    found = put(
        says("a", "Na", "sodium", ALARM),
        says("b", "Cu", "copper"),
        says("c", "Fe", "iron"),
        fits("coolant", "Na", "Cu"),
    )
    assert found == [("coolant", "alarm", ["Cu", "Na"]), ("iron", "alert", ["Fe"])]


def test_a_value_two_patterns_flag_is_evidence_of_one_and_used_by_the_other() -> None:
    dirt, rings = fits("dirt", "Si", "Al", "Fe", conditions=3), fits("rings", "Al", "Cr", "Fe", conditions=3)
    findings = merge("P-01", (rings, dirt, says("a", "Cr", "chromium", ALARM)))
    assert [(one.cause, [value.quantity for value in one.evidence]) for one in findings] == [
        ("rings", ["Cr"]),
        ("dirt", ["Al", "Fe", "Si"]),
    ]
    assert [value.quantity for value in findings[0].lead.used] == ["Al", "Fe"]


def test_the_graver_pattern_chooses_first_then_the_one_of_more_conditions_then_of_more_values() -> None:
    assert put(fits("wide", "Na", "K", conditions=3), fits("grave", "Na", severity=ALARM))[0] == (
        "grave",
        "alarm",
        ["Na"],
    )
    assert put(fits("a", "Na", conditions=2), fits("b", "Na", conditions=3))[0] == ("b", "alert", ["Na"])
    assert put(fits("a", "Na"), fits("b", "Na", "K"))[0] == ("b", "alert", ["K", "Na"])


def test_a_pattern_that_puts_together_what_others_say_comes_before_one_that_holds_values_against_limits() -> None:
    bare = fits("a bare limit", "held", conditions=3)
    bare = replace(bare, rule=replace(bare.rule, shape=Pattern((Condition(("held",), Asks.WITHIN),) * 3)))
    assert put(bare, fits("heard at the exhaust", "held"))[0] == ("heard at the exhaust", "alert", ["held"])


def test_a_pattern_whose_values_all_belong_to_another_speaks_for_that_finding() -> None:
    (finding,) = merge("P-01", (fits("coolant", "Na", "K", conditions=3), fits("sea water", "Na")))
    assert [one.rule.id for one in finding.signals] == ["coolant", "sea water"]
    assert [value.quantity for value in finding.evidence] == ["K", "Na"]


def test_a_pattern_seen_again_from_the_sheet_of_another_kind_speaks_once() -> None:
    valve = fits("closing valve", "lash", "pressure", subject="3")
    (finding,) = merge("P-01", (valve, replace(valve, on=date(2026, 4, 1))))
    assert len(finding.signals) == 1


def test_two_patterns_of_one_cause_are_one_finding() -> None:
    table = fits("suspected", "K", "Na", severity=ALARM)
    table = replace(table, rule=replace(table.rule, cause="coolant"))
    assert put(fits("coolant", "Na", "Cu"), table) == [("coolant", "alarm", ["Cu", "K", "Na"])]


def test_a_pattern_that_flags_nothing_is_no_finding() -> None:
    assert merge("P-01", (fits("nothing"),)) == ()


def test_the_gravest_finding_stands_first_and_the_order_of_the_signals_never_matters() -> None:
    signals = (
        says("a", "Fe", "iron"),
        says("b", "Na", "sodium", ALARM),
        says("c", "Fe", "iron trend"),
        fits("coolant", "Na", "Cu"),
    )
    first = merge("P-01", signals)
    assert [one.severity for one in first] == [ALARM, ALERT]
    assert {merge("P-01", order) for order in permutations(signals)} == {first}


def test_a_finding_is_as_old_as_its_oldest_signal() -> None:
    old = replace(says("a", "Fe", "iron"), since=date(2026, 1, 3))
    (finding,) = merge("P-01", (old, says("b", "Fe", "iron", ALARM)))
    assert isinstance(finding, Finding)
    assert finding.since == date(2026, 1, 3)


def test_what_is_so_at_every_cylinder_comes_before_what_is_so_at_some_of_them() -> None:
    """All cylinders low are one wear, not a gasket between each two."""
    gasket = fits("gasket", "a", "b", subject="1-2")
    low = Pattern((Condition(("a",), Asks.FLAGGED_LOW),), at=Where.EVERY)
    every = fits("all low", "a", "b", "c")
    every = replace(every, rule=replace(every.rule, shape=low))
    assert put(gasket, every) == [("all low", "alert", ["a", "b", "c"])]
