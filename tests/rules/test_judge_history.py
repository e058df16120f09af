"""What stands after each sheet of an engine: what a later sheet clears, and what it leaves standing."""

from dataclasses import replace
from datetime import date
from decimal import Decimal

from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import AppliesTo, Bounds, Method, Pool, Rule, RuleBook, Statistical
from fleetcare.rulebook.rules import rule_book
from fleetcare.rules.judge_engine import Background, judge_engine
from fleetcare.rules.judge_history import Judging, in_order, judge_history
from fleetcare.rules.judging.applies import rules_for
from fleetcare.rules.judging.pools import own_pools
from tests.rules.measured import ENGINE, ON, a_rule, a_sheet, beyond, value

IRON = a_rule()
COPPER = a_rule(id="copper", quantity="Cu", cause="copper wear")
SHIPPED = rules_for(rule_book(), ENGINE)


def causes(*sheets: MeasuredSheet, rules: tuple[Rule, ...] = (IRON, COPPER)) -> list[list[str]]:
    """The causes found after each sheet."""
    standings = judge_history(sheets, ENGINE, rules, Background())
    return [sorted(finding.cause for finding in standing.findings) for standing in standings]


def oil(days: int, **figures: str) -> MeasuredSheet:
    """An oil sample some days ago."""
    return a_sheet(*(value(quantity, text) for quantity, text in figures.items()), days=days)


def cylinders(days: int, *dry: str, wet: dict[int, str] | None = None) -> MeasuredSheet:
    """A compression sheet some days ago, in psi."""
    values = [value("pressure", text, "psi", str(number)) for number, text in enumerate(dry, start=1)]
    values += [value("pressure", text, "psi", str(number), "wet") for number, text in (wet or {}).items()]
    return a_sheet(*values, kind="compression", days=days)


def test_a_value_within_its_limits_clears_what_stood() -> None:
    assert causes(oil(60, Fe="120"), oil(30, Fe="90")) == [["iron wear"], []]


def test_a_sheet_that_does_not_measure_a_value_clears_nothing() -> None:
    found = causes(oil(60, Fe="120", Cu="120"), oil(30, Cu="90"), oil(0, Fe="90"))
    assert found == [["copper wear", "iron wear"], ["iron wear"], []]


def test_a_value_that_does_not_tell_clears_nothing() -> None:
    assert causes(oil(60, Fe="120"), oil(30, Fe="<150")) == [["iron wear"], ["iron wear"]]


def test_it_stands_since_the_first_of_its_sheets_without_a_break() -> None:
    sheets = (oil(90, Fe="120"), oil(60, Fe="90"), oil(30, Fe="130"), oil(20, Cu="1"), oil(10, Fe="140"))
    last = judge_history(sheets, ENGINE, (IRON, COPPER), Background())[-1]
    assert last.findings[0].since == date(2026, 3, 18)
    assert last.findings[0].lead.measured == 140


def test_what_is_told_of_the_other_end_takes_the_place_of_what_stood() -> None:
    both = a_rule(low=a_rule().high, high=type(a_rule().high)(beyond("300")))
    sheets = (oil(60, Fe="50"), oil(30, Fe="400"))
    last = judge_history(sheets, ENGINE, (both,), Background())[-1]
    assert [len(finding.signals) for finding in last.findings] == [1]
    assert last.findings[0].lead.measured == 400


def test_a_pattern_goes_once_one_of_its_values_is_measured_again_without_it() -> None:
    coolant = {"Na": "150", "Cu": "60", "water": "0.5"}
    found = causes(oil(60, **coolant), oil(30, Fe="5"), oil(0, Cu="5"), rules=SHIPPED)
    assert found[0] == ["coolant in the oil"]
    assert found[1] == ["coolant in the oil"]
    assert "coolant in the oil" not in found[2]


def test_a_pattern_stands_since_it_was_matched_first() -> None:
    coolant = {"Na": "150", "Cu": "60", "water": "0.5"}
    last = judge_history((oil(60, **coolant), oil(0, **coolant)), ENGINE, SHIPPED, Background())[-1]
    (finding,) = last.findings
    assert finding.lead.since == date(2026, 2, 16)


def test_a_pattern_across_kinds_is_seen_when_the_second_sheet_comes_in_and_speaks_once() -> None:
    low = ("150", "150", "100", "150", "150", "150")
    leaks = a_sheet(value("leak", "30", point="3"), kind="leakdown", days=10)
    history = judge_history((cylinders(20, *low, wet={3: "102"}), leaks), ENGINE, SHIPPED, Background())
    for finding in history[-1].findings:
        ids = [(signal.rule.id, signal.subject) for signal in finding.signals]
        assert len(ids) == len(set(ids))


def test_an_engine_of_unknown_cylinders_has_those_that_were_measured() -> None:
    unknown = type(ENGINE)(tag="P-01")
    low = cylinders(20, "150", "100", wet={2: "102"})
    history = judge_history((low, oil(10, Fe="5")), unknown, rules_for(rule_book(), unknown), Background())
    assert history[-1].findings == history[0].findings
    assert history[0].findings[0].subject == "2"


def test_what_is_found_after_the_last_sheet_is_what_judging_the_newest_sheets_finds() -> None:
    sheets = (
        oil(60, Fe="120", Na="150", Cu="60", water="0.5"),
        cylinders(50, "150", "150", "100", "150", "150", "150"),
        oil(0, Fe="130", Na="150", Cu="60", water="0.5"),
    )
    history = judge_history(sheets, ENGINE, SHIPPED, Background())[-1]
    judged = judge_engine(sheets, ENGINE, rule_book(), Background())
    assert [(one.rule, one.subject, one.severity, one.evidence) for one in history.findings] == [
        (one.rule, one.subject, one.severity, one.evidence) for one in judged.findings
    ]


def test_an_engine_without_sheets_or_rules_has_no_findings() -> None:
    assert judge_history((), ENGINE, SHIPPED, Background()) == ()
    assert causes(oil(0, Fe="500"), rules=()) == [[]]


def test_the_own_pool_of_a_sheet_holds_the_plain_figures_of_the_oil_samples_before_it() -> None:
    first = a_sheet(
        value("Fe", "30"), value("Cu", "<5"), value("Pb", "0.001", "%"), value("Fe", "4", phase="new"), days=9
    )
    second = a_sheet(value("Fe", "40"), value("kv40", "100", "mm"), days=5)
    pools = list(own_pools((first, a_sheet(kind="spot", days=7), second, a_sheet())))
    assert pools == [
        {},
        {"Fe": (Decimal(30),), "Pb": (Decimal(10),)},
        {"Fe": (Decimal(30),), "Pb": (Decimal(10),)},
        {"Fe": (Decimal(30), Decimal(40)), "Pb": (Decimal(10),)},
    ]


def test_each_sample_is_held_against_those_before_it_alone() -> None:
    usual = a_rule(shape=Statistical(Pool.OWN, Method.ROBUST, 3), high=type(IRON.high)(beyond("3")))
    figures = ("10", "11", "12", "50", "10")
    sheets = tuple(oil(50 - 10 * place, Fe=text) for place, text in enumerate(figures))
    history = judge_history(sheets, ENGINE, (usual,), Background())
    assert [bool(standing.findings) for standing in history] == [False, False, False, True, False]
    assert history[0].sheet.on < ON
    assert isinstance(IRON.shape, Bounds)


def test_sheets_of_one_day_are_judged_kind_by_kind_whichever_was_typed_first() -> None:
    """A cylinder heard and then found low is not another than one found low and then heard."""
    low, heard = cylinders(0, "445", "300"), a_sheet(value("leak", "40", point="2"), kind="leakdown")
    first, again = oil(0, Fe="5"), oil(0, Fe="6")
    orders = [
        [replace(sheet, entry=entry) for entry, sheet in enumerate(typed, start=1)]
        for typed in ((first, again, low, heard, oil(9)), (oil(9), heard, low, first, again))
    ]
    for sheets in orders:
        found = in_order(sheets, {})
        assert [(sheet.on, sheet.kind) for sheet in found] == [
            (oil(9).on, "oil"),
            *((ON, kind) for kind in ("compression", "leakdown", "oil", "oil")),
        ]
        assert [str(sheet.values[0]) for sheet in found[3:]] == ["5", "6"]
    corrected = {number: 6 - number for number in range(1, 6)}
    assert [str(sheet.values[0]) for sheet in in_order(orders[0], corrected)[3:]] == ["6", "5"]


def test_a_book_judges_engines_alike_and_apart_by_the_rules_for_each() -> None:
    sheets, other = (oil(30, Fe="120", Cu="120"),), replace(ENGINE, tag="P-02")
    for book in (RuleBook((IRON, COPPER)), RuleBook((IRON, replace(COPPER, applies=AppliesTo(engines=("P-02",)))))):
        judging = Judging(book)
        for engine in (ENGINE, other, ENGINE):
            assert judging.judge_history(sheets, engine, Background()) == judge_history(
                sheets, engine, rules_for(book, engine), Background()
            )


def test_a_pattern_on_values_far_from_it_matches_nothing_and_one_within_does() -> None:
    coolant = tuple(rule for rule in SHIPPED if "coolant-" in rule.id)
    assert causes(oil(0, K="120", Na="120"), rules=coolant) == [["coolant in the oil"]]
    assert causes(oil(0, K="10", Na="10"), rules=coolant) == [[]]
