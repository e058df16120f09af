"""The shipped rules on compression, leak-down and lash against published texts and worked examples, each with its source."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.engines import Side
from fleetcare.domain.measured import SheetWord
from fleetcare.domain.sheets import LashSpec, SheetValue
from fleetcare.rules.findings import merge
from fleetcare.rules.judge_lash import judge_value
from fleetcare.rules.judging.judge import judge, judge_sheet
from fleetcare.rules.judging.values import values_of
from fleetcare.rules.lash_points import side_of
from tests.rules.measured import ENGINE, a_sheet, facts, pressures, rules_named, told, value


@pytest.mark.parametrize(
    ("preset", "out"), [("", {}), ("compression-s25", {("compression-s25", "3"): "alarm"}), ("compression-a20", {})]
)
def test_the_published_compression_set_is_examined_by_its_own_rule_and_passes_by_two_others(
    preset: str, out: dict[tuple[str, str], str]
) -> None:
    """TM 5-3895-359-14&P table 2: 445, 440, 405, 435 psi, spread 40; R75 0.910 and A20 405 > 345 pass."""
    rules = rules_named(*([preset] if preset else []))
    assert told(rules, facts(pressures("445", "440", "405", "435"))) == out


@pytest.mark.parametrize(
    ("feet", "least"),
    [("500", "515"), ("2500", "480"), ("5000", "440"), ("7500", "410"), ("10000", "380"), ("3750", "460")],
)
def test_each_cylinder_reaches_the_published_least_for_its_altitude(feet: str, least: str) -> None:
    """TM 5-3895-359-14&P table 1, at 600 rpm; half way between two rows half way, which is common practice."""
    engine = replace(ENGINE, altitude=Decimal(feet) * Decimal("0.3048"))
    rules = rules_named("compression-s25")
    assert told(rules, facts(pressures(least, least), engine=engine)) == {}
    low = f"{Decimal(least) - 1}"
    assert told(rules, facts(pressures(least, low), engine=engine)) == {("compression-s25-least", "2"): "alarm"}


def test_the_published_compression_set_is_examined_for_its_spread_although_all_exceed_the_least() -> None:
    """TM 5-3895-359-14&P table 2: 445, 440, 405, 435 psi -> No. 3, here at 10,000 ft, where 380 are the least."""
    engine = replace(ENGINE, altitude=Decimal(3048))
    about = facts(pressures("445", "440", "405", "435"), engine=engine)
    assert told(rules_named("compression-s25"), about) == {("compression-s25", "3"): "alarm"}


@pytest.mark.parametrize(
    ("altitude", "why"),
    [
        ("2", "the altitude of 6.6 ft lies beyond the table, which is from 500 to 10000 ft"),
        ("3049", "the altitude of 10003.3 ft lies beyond the table, which is from 500 to 10000 ft"),
        (None, "the nameplate has no altitude"),
    ],
)
def test_the_published_least_is_told_neither_beyond_its_table_nor_where_the_altitude_is_not_known(
    altitude: str | None, why: str
) -> None:
    engine = replace(ENGINE, altitude=Decimal(altitude) if altitude else None)
    judged = judge_sheet(rules_named("compression-s25"), facts(pressures("100", "100"), engine=engine))
    assert [one.why for one in judged.not_judged if one.rule.id == "compression-s25-least"] == [why]


@pytest.mark.parametrize(
    ("supply", "held", "leak", "severity"),
    [("80", "72", "10", None), ("80", "60", "25", "alert"), ("80", "58", "27.5", "alarm"), ("100", "92", "8", None)],
)
def test_a_differential_reading_is_a_leak_in_percent_and_sixty_over_eighty_is_not_suspect_yet(
    supply: str, held: str, leak: str, severity: str | None
) -> None:
    """FAA AC 43.13-1B 8-14b(5): in excess of 25 % is suspect; 80/72 is 10.0 %, 80/58 27.5 %, 100/92 8.0 %."""
    sheet = a_sheet(value("supply", supply, "psi", "3"), value("held", held, "psi", "3"), kind="leakdown")
    assert [one.span.low for one in values_of(sheet, "leak")] == [Decimal(leak)]
    signals = judge(rules_named(), facts(sheet))
    assert {str(one.severity) for one in signals} == ({severity} if severity else set())
    assert ("leakdown-differential" in {one.rule.id for one in signals}) is (severity == "alarm")
    shared = replace(sheet, values=(value("supply", supply, "psi"), *sheet.values[1:]))
    assert {one.rule.id for one in judge(rules_named(), facts(shared))} == {one.rule.id for one in signals}


@pytest.mark.parametrize(
    ("heard", "cause"),
    [
        ("intake", "leaking intake valve"),
        ("exhaust", "leaking exhaust valve"),
        ("crankcase", "worn rings or bore"),
        ("coolant", "head gasket or crack"),
        ("next", "head gasket between two cylinders"),
        ("", "leaking cylinder"),
    ],
)
def test_where_the_air_comes_out_names_the_cause(heard: str, cause: str) -> None:
    """TM 5-4210-230-14&P-1, Chrysler, Land Rover: intake, tailpipe, oil filler, radiator, next plug hole."""
    sheet = a_sheet(value("supply", "80", "psi", "3"), value("held", "58", "psi", "3"), kind="leakdown")
    (finding,) = merge("P-01", judge(rules_named(), facts(replace(sheet, words=(SheetWord("heard", heard, "3"),)))))
    assert (finding.cause, finding.subject, str(finding.severity)) == (cause, "3", "alarm")


@pytest.mark.parametrize(
    ("wet", "cause"),
    [({3: "310"}, "leaking valves"), ({3: "345"}, "worn rings or bore")],
)
def test_a_wet_test_tells_rings_from_valves(wet: dict[int, str], cause: str) -> None:
    """TM 5-4210-230-14&P-1, GM: clearly better with oil is rings; that 10 % counts is common practice."""
    (finding,) = merge(
        "P-01", judge(rules_named(), facts(pressures("445", "440", "300", "435", "440", "438", wet=wet)))
    )
    assert (finding.cause, finding.subject) == (cause, "3")


def test_two_low_neighbours_are_a_gasket() -> None:
    """TM 5-4210-230-14&P-1, GM: two adjacent cylinders low, oil changes nothing: head gasket between them."""
    sheet = pressures("445", "440", "300", "310", "440", "438", wet={3: "305", 4: "312"})
    (finding,) = merge("P-01", judge(rules_named(), facts(sheet)))
    assert (finding.cause, finding.subject) == ("head gasket between two cylinders", "3-4")


@pytest.mark.parametrize(
    ("point", "wet", "causes"),
    [
        ("3E", "305", {("closing exhaust valve", "3")}),
        ("3I", "305", {("closing intake valve", "3")}),
        ("3E", "345", {("worn rings or bore", "3"), ("closing valve", "3E")}),
        ("2E", "305", {("leaking valves", "3"), ("closing valve", "2E")}),
    ],
)
def test_a_closing_valve_and_a_low_cylinder_that_oil_does_not_raise_are_one_finding_about_it(
    point: str, wet: str, causes: set[tuple[str, str]]
) -> None:
    """TM 5-3820-245-14&P p. 169: too small a gap loses compression; TM 1-1500-204-23-1 step (e): lash first."""
    assert _found_with_a_low_third(wet, value("lash", "0.30", point=point, phase="found")) == causes


def test_a_gap_that_was_set_belongs_to_the_cylinder_it_left_low_and_the_others_to_what_was_set() -> None:
    """As above; "valves found out and set" takes what no pattern does: common practice."""
    gaps = [value("lash", text, point=point, phase=phase) for point in ("2I", "3E") for phase, text in _SET.items()]
    assert _found_with_a_low_third("305", *gaps) == {("closing exhaust valve", "3"), ("valves found out and set", "")}


_SET = {"found": "0.30", "left": "0.45"}


def _found_with_a_low_third(wet: str, *gaps: SheetValue) -> set[tuple[str, str]]:
    """Cause and subject of what is found with some gaps, and a third cylinder that is low and this much when oiled."""
    lash = a_sheet(*gaps, kind="lash", days=9)
    spec = LashSpec(lash.on, "mm", "any", dict.fromkeys(Side, (Decimal("0.40"), Decimal("0.50"))))
    judged = {lash.entry: tuple(judge_value(gap, side_of(gap.point), spec, "") for gap in gaps)}
    standing = judge(rules_named(), facts(lash, lash=judged))
    sheet = pressures("445", "440", "300", "435", "440", "438", wet={3: wet})
    signals = judge(rules_named(), facts(sheet, others=(lash,), standing=standing))
    return {(one.cause, one.subject) for one in merge("P-01", (*standing, *signals))}
