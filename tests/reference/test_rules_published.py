"""The shipped rules against published limits and worked examples, each with its source."""

import csv
from dataclasses import replace
from decimal import Decimal
from pathlib import Path

import pytest

from fleetcare.domain.measured import MeasuredSheet, Pools
from fleetcare.rulebook.rules import rule_book, shipped_rules
from fleetcare.rules.findings import merge
from fleetcare.rules.judging.applies import rules_for
from fleetcare.rules.judging.judge import judge
from tests.builders import day
from tests.rules.measured import ENGINE, a_sheet, facts, rules_named, told, value

RULES = {rule.id: rule for rule in shipped_rules()}
PUBLISHED = list(
    csv.DictReader((Path(__file__).parent / "used_oil_limits.csv").read_text(encoding="utf-8").splitlines())
)


@pytest.mark.parametrize("row", PUBLISHED, ids=lambda row: f"{row['rule']} {row['side']} {row['level']}")
def test_a_shipped_limit_is_the_published_one(row: dict[str, str]) -> None:
    rule = RULES[row["rule"]]
    limit = getattr(getattr(rule, row["side"]), row["level"])
    assert (rule.quantity, rule.unit, limit.value) == (row["quantity"], row["unit"], Decimal(row["figure"]))
    assert limit.reach is (row["passes_at"] == "no")


def test_every_other_limit_is_common_practice_or_the_engines_own() -> None:
    """What stands in no published table says so; figures by altitude have tests of their own."""
    published = {(row["rule"], row["side"], row["level"]) for row in PUBLISHED}
    for rule in shipped_rules():
        limits = {(side, level) for side in ("low", "high") for level in ("alert", "alarm")}
        others = {one for one in limits if getattr(getattr(rule, one[0]), one[1]) and (rule.id, *one) not in published}
        told = ("common practice", "the engine's own check range", "for the altitude")
        assert not others or any(words in rule.source for words in told), (rule.id, others)


STANDBY = replace(ENGINE, duty="standby")


def _ran(purpose: str, *stages: tuple[str, str]) -> MeasuredSheet:
    values = [
        one
        for number, (minutes, load) in enumerate(stages, start=1)
        for point in [str(number) if len(stages) > 1 else ""]
        for one in (value("minutes", minutes, point=point), value("load", load, "kW", point))
    ]
    return a_sheet(*values, kind="run", words={"purpose": purpose})


@pytest.mark.parametrize(
    ("sheet", "out"),
    [
        (_ran("test", ("30", "160")), set()),
        (_ran("test", ("30", "140")), {"run-load"}),
        (_ran("test", ("29", "160")), {"run-minutes"}),
        (_ran("supplemental", ("30", "250"), ("60", "375")), set()),
        (_ran("supplemental", ("30", "249"), ("59", "375")), {"run-supplemental-load-1", "run-supplemental-minutes-2"}),
        (_ran("36-month", ("180", "150"), ("60", "375")), set()),
        (_ran("emergency", ("5", "10")), set()),
    ],
)
def test_a_500_kw_set_is_tested_from_30_minutes_and_150_kw_on(sheet: MeasuredSheet, out: set[str]) -> None:
    """NFPA 110 8.4.2 and 8.4.2.3: 160 kW is 32 %, 140 kW 28 %; then 250 kW for 30 min and 375 kW for 60 min."""
    rules = rules_for(rule_book(), STANDBY)
    assert {one.rule.id for one in judge(rules, facts(sheet, engine=STANDBY))} == out


def test_a_load_below_thirty_percent_counts_where_the_makers_exhaust_temperature_was_held() -> None:
    """NFPA 110 8.4.2: either the maker's minimum exhaust temperature, or 30 % of the nameplate."""
    sheet = a_sheet(value("load", "20"), kind="run", words={"purpose": "test", "exhaust_temperature_held": "yes"})
    assert judge(rules_for(rule_book(), STANDBY), facts(sheet, engine=STANDBY)) == ()


@pytest.mark.parametrize(("now", "out"), [("600", set()), ("601", {"run-year-50"})])
def test_fifty_hours_of_other_running_count_in_the_hundred_of_a_calendar_year(now: str, out: set[str]) -> None:
    """40 CFR 63.6640(f): 100 h a calendar year for testing, up to 50 h of them neither testing nor emergency."""

    def run(minutes: str, purpose: str, days: int) -> MeasuredSheet:
        return a_sheet(value("minutes", minutes), kind="run", days=days, words={"purpose": purpose})

    earlier = (
        run("6000", "other", 200),
        run("2400", "other", 30),
        run("2400", "test", 20),
        run("9000", "emergency", 10),
    )
    about = facts(run(now, "other", 0), earlier=earlier)
    assert {one.rule.id for one in judge(rules_named("zzzz-emergency-hours"), about)} == out
    assert judge(rules_named(), about) == ()


NEW_OIL = (value("tbn", "10.0", phase="new"), value("kv100", "14.5", phase="new"))


@pytest.mark.parametrize(("base_number", "out"), [("3.4", set()), ("3.0", set()), ("2.9", {"law-zzzz-ci-base-number"})])
def test_the_worked_sample_of_the_oil_analysis_option_is_condemned_below_thirty_percent(
    base_number: str, out: set[str]
) -> None:
    """40 CFR 63.6625(i): new oil TBN 10.0 and 14.5 mm2/s; sample 12.2 mm2/s (-15.9 %), water 0.1 %."""
    sheet = a_sheet(
        value("tbn", base_number), value("kv100", "12.2"), value("water", "0.1"), received_on=day("2026-04-16")
    )
    law = [one for one in judge(rules_named("zzzz-ci"), facts(sheet, fresh=NEW_OIL)) if one.rule.is_law]
    assert {one.rule.id for one in law} == out
    assert {one.due_by for one in law} == ({day("2026-04-20")} if out else set())
    assert not any(one.rule.is_law for one in judge(rules_named(), facts(sheet, fresh=NEW_OIL)))


@pytest.mark.parametrize(
    ("preset", "quantity", "new", "used", "is_out"),
    [
        ("zzzz-ci", "kv100", "13.15", "10.52", False),
        ("zzzz-ci", "kv100", "13.15", "10.51", True),
        ("zzzz-si", "kv100", "13.15", "15.78", False),
        ("zzzz-si", "tan", "1.19", "4.19", False),
        ("zzzz-si", "tan", "1.19", "4.20", True),
        ("zzzz-ci", "water", "0", "0.5", False),
        ("zzzz-si", "water", "0", "0.51", True),
        ("zzzz-ci", "tbn", "13.15", "3.945", False),
        ("zzzz-ci", "tbn", "13.15", "3.944", True),
    ],
)
def test_law_limits_are_strict_in_decimal_arithmetic(
    preset: str, quantity: str, new: str, used: str, is_out: bool
) -> None:
    """40 CFR 63.6625(i), (j): below 30 %, more than 20 %, 3.0 mg KOH/g, 0.5 %; binary floats fail two of these."""
    about = facts(a_sheet(value(quantity, used)), fresh=(value(quantity, new, phase="new"),))
    assert any(one.rule.is_law for one in judge(rules_named(preset), about)) is is_out


@pytest.mark.parametrize(
    ("aluminium", "potassium", "sodium", "pattern"),
    [
        ("51", "151", "50", "pattern-brazing-flux"),
        ("51", "151", "5", "pattern-brazing-flux"),
        ("50", "151", "50", ""),
        ("51", "151", "4", ""),
        ("51", "151", "51", "pattern-coolant-suspected"),
        ("3", "51", "51", "pattern-coolant-suspected"),
        ("3", "101", "100", "pattern-coolant-suspected"),
        ("90", "151", "101", "pattern-coolant-probable"),
        ("3", "50", "200", ""),
    ],
)
def test_aluminium_potassium_and_sodium_are_read_by_the_gravest_row(
    aluminium: str, potassium: str, sodium: str, pattern: str
) -> None:
    """Detroit Diesel letter 07 TS-37 (26 June 2007), all three columns must match."""
    sheet = a_sheet(value("Al", aluminium), value("K", potassium), value("Na", sodium))
    rows = [one.rule.id for one in judge(rules_named(), facts(sheet)) if getattr(one.rule.shape, "table", "")]
    assert rows == ([pattern] if pattern else [])


@pytest.mark.parametrize(
    ("silica", "alumina", "is_dust"),
    [("66.6", "15.4", True), ("68", "15", True), ("76", "10", True), ("66.6", "25", False)],
)
def test_dust_of_the_earths_crust_and_of_test_dust_is_told_by_its_silicon_and_aluminium(
    silica: str, alumina: str, is_dust: bool
) -> None:
    """Upper crust 66.6 % SiO2, 15.4 % Al2O3 (3.8); ISO 12103-1 68 to 76 %, 10 to 15 % (4.0 to 6.7); molar masses."""
    silicon, aluminium = Decimal(silica) * Decimal("0.4674"), Decimal(alumina) * Decimal("0.5293")
    sheet = a_sheet(value("Si", f"{silicon:f}"), value("Al", f"{aluminium:f}"))
    ids = {one.rule.id for one in judge(rules_named(), facts(sheet))}
    assert ("pattern-dirt-ratio" in ids) is is_dust


@pytest.mark.parametrize("changes", [{"fuel": "landfill gas"}, {"words": {"repair": "sealant"}}, {"new": "20"}])
def test_silicon_is_not_read_as_dust_on_landfill_gas_after_sealant_or_for_a_small_gain(
    changes: dict[str, object],
) -> None:
    """oil of engines on landfill gas: Kohler IO-G-M-25-001e; sealant: TM 38-301-4; a gain under 5 ppm tells nothing."""
    sheet = a_sheet(value("Si", "24"), value("Al", "6"), words=changes.get("words", {}))
    engine = replace(ENGINE, fuel=str(changes.get("fuel", "diesel")))
    fresh = (value("Si", str(changes["new"]), phase="new"),) if "new" in changes else ()
    rules = rules_for(rule_book(), engine)
    assert not any("dirt" in one.rule.id for one in judge(rules, facts(sheet, engine=engine, fresh=fresh)))


IRON = (18, 22, 25, 19, 31, 27, 24, 21, 35, 28, 26, 23, 30, 20, 29, 33, 24, 27, 22, 96)


@pytest.mark.parametrize(
    ("iron", "severity"), [("35.8", None), ("35.9", "alert"), ("41.0", "alert"), ("41.1", "alarm")]
)
def test_one_outlier_in_twenty_samples_does_not_move_the_engines_own_limits(iron: str, severity: str | None) -> None:
    """Median 25.5 and 1.4826 x 3.5, worked by hand: + 2 is 35.88, + 3 is 41.07; with mean and s they were 61.86, 78.30."""
    pools = Pools({"Fe": tuple(Decimal(ppm) for ppm in IRON)})
    rules = [RULES["oil-fe-own"]]
    assert told(rules, facts(a_sheet(value("Fe", iron)), pools=pools)) == (
        {("oil-fe-own", ""): severity} if severity else {}
    )


@pytest.mark.parametrize(
    ("values", "cause"),
    [
        ({"Na": "60", "Cu": "25", "water": "0.2"}, "coolant in the oil"),
        ({"K": "60", "Cu": "25", "water": "0.2"}, "coolant in the oil"),
        ({"Si": "30", "Al": "25", "Fe": "120"}, "dirt"),
        ({"fuel": "3", "kv100": "12.0"}, "leaking injector"),
        ({"Pb": "20", "Sn": "12", "Cu": "25"}, "bearing wear"),
        ({"Fe": "120", "Cr": "12", "Al": "25"}, "ring, liner and piston wear"),
        ({"soot": "3.2", "kv100": "16.5"}, "soot"),
    ],
)
def test_elements_that_rise_together_are_one_finding_of_one_cause(values: dict[str, str], cause: str) -> None:
    """TM 10-6640-233-10 Table 2-13, TM 38-301-4, ASTM D5185; the triple of rings and liners: common practice."""
    sheet = a_sheet(*(value(quantity, text) for quantity, text in values.items()))
    (finding,) = merge("P-01", judge(rules_named(), facts(sheet)))
    assert finding.cause == cause
    assert {one.quantity for one in finding.evidence} == set(values)


@pytest.mark.parametrize(
    ("now", "causes"),
    [
        ({"Fe": "20", "Cu": "6", "Al": "4"}, ["all wear metals fell"]),
        ({"Fe": "21", "Cu": "6", "Al": "4"}, []),
        ({"Fe": "20", "Cu": "6"}, []),
    ],
)
def test_a_sudden_drop_of_all_metals_calls_for_a_second_sample(now: dict[str, str], causes: list[str]) -> None:
    """JOAP Volume III (TM 38-301-3), TF30 page: resample and new baseline; these three, and half: common practice."""
    before = {"Fe": "40", "Cu": "12", "Al": "8"}
    sheets = [
        a_sheet(
            *(value(quantity, text) for quantity, text in metals.items()),
            value("hours_on_oil", hours),
            days=days,
            engine_hours=Decimal(1000) + Decimal(hours),
        )
        for metals, hours, days in ((before, "100", 30), (now, "150", 0))
    ]
    signals = judge(rules_named(), facts(sheets[1], earlier=(sheets[0],)))
    findings = merge("P-01", signals)
    assert [one.cause for one in findings] == causes
    assert {value.quantity for one in findings for value in one.evidence} == ({*now} if causes else set())


def test_sodium_alone_in_a_marine_engine_is_sea_water() -> None:
    """TM 10-6640-233-10: Na with marine equipment."""
    boat = replace(ENGINE, is_marine=True)
    sheet = a_sheet(value("Na", "120"), value("K", "3"))
    (finding,) = merge("B-01", judge(rules_for(rule_book(), boat), facts(sheet, engine=boat)))
    assert finding.cause == "sea water in the oil"
    (ashore,) = merge("P-01", judge(rules_named(), facts(sheet)))
    assert ashore.cause == "sodium"
