"""What several values say together, at the engine, a cylinder, two neighbours, or every cylinder."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.findings import Signal
from fleetcare.domain.measured import SheetWord
from fleetcare.domain.rule_book import Asks, Condition, End, Limits, Pattern, Rule, Severity, Where
from fleetcare.rules.judging.judge import judge, judge_sheet
from fleetcare.rules.judging.values import evidence_of
from tests.builders import day
from tests.rules.measured import ENGINE, ON, a_rule, a_sheet, beyond, facts, pressures, reach, value


def over(quantity: str, alert: str = "20", alarm: str | None = None) -> Rule:
    """A rule that flags a quantity above a limit."""
    limits = Limits(beyond(alert), beyond(alarm) if alarm else None)
    return a_rule(id=f"{quantity}-high", quantity=quantity, high=limits)


def pattern(*conditions: Condition, kinds: tuple[str, ...] = ("oil",), name: str = "pattern", **shape: object) -> Rule:
    """A pattern of these conditions."""
    made = Pattern(conditions, **shape)  # type: ignore[arg-type]
    return a_rule(id=name, kinds=kinds, quantity="", unit="", high=Limits(), shape=made, cause=name)


def flagged(*quantities: str, **changes: object) -> Condition:
    """Any of these flagged high."""
    return Condition(quantities, Asks.FLAGGED_HIGH, **changes)  # type: ignore[arg-type]


def within(quantity: str, **changes: object) -> Condition:
    """A value that lies within."""
    return Condition((quantity,), Asks.WITHIN, **{"unit": "ppm"} | changes)  # type: ignore[arg-type]


def matched(rules: list[Rule], about: object) -> list[Signal]:
    """The signals of the patterns among the rules."""
    return [one for one in judge(rules, about) if isinstance(one.rule.shape, Pattern)]  # type: ignore[arg-type]


RULES = [over("Na"), over("K"), over("Cu"), over("Fe", "20", "50")]


def test_all_conditions_must_hold_and_any_quantity_of_one_is_enough() -> None:
    rule = pattern(flagged("Na", "K"), flagged("Cu"))
    both = matched([*RULES, rule], facts(a_sheet(value("K", "30"), value("Cu", "30"))))
    assert [one.quantity for one in both[0].flagged] == ["Cu", "K"]
    assert (both[0].subject, both[0].measured, both[0].on) == ("", None, ON)
    assert matched([*RULES, rule], facts(a_sheet(value("K", "30"), value("Cu", "20")))) == []


def test_a_pattern_is_as_grave_as_it_says_or_as_the_gravest_value_it_takes() -> None:
    rule = pattern(flagged("Na"), absorbs=("Fe",))
    mild = matched([*RULES, rule], facts(a_sheet(value("Na", "30"), value("Fe", "30"))))
    grave = matched([*RULES, rule], facts(a_sheet(value("Na", "30"), value("Fe", "60"))))
    assert (str(mild[0].severity), str(grave[0].severity)) == ("alert", "alarm")
    assert [one.quantity for one in grave[0].flagged] == ["Fe", "Na"]
    stated = pattern(flagged("Na"), severity=Severity.ALARM)
    assert matched([*RULES, stated], facts(a_sheet(value("Na", "30"))))[0].severity is Severity.ALARM


def test_clear_asks_that_a_quantity_was_measured_and_not_flagged() -> None:
    asked = Condition(("K",), Asks.CLEAR)
    rule = pattern(flagged("Na"), asked)
    sodium = value("Na", "30")
    assert matched([*RULES, rule], facts(a_sheet(sodium))) == []
    assert matched([*RULES, rule], facts(a_sheet(sodium, value("K", "30")))) == []
    (signal,) = matched([*RULES, rule], facts(a_sheet(sodium, value("K", "3"))))
    assert [one.quantity for one in signal.used] == ["K"]
    optional = pattern(flagged("Na"), replace(asked, is_optional=True))
    assert len(matched([*RULES, optional], facts(a_sheet(sodium)))) == 1


@pytest.mark.parametrize(
    ("figure", "holds"), [("4.9", False), ("5", True), ("50", True), ("50.1", False), ("<60", False)]
)
def test_within_counts_ends_that_are_to_be_reached(figure: str, holds: bool) -> None:
    rule = pattern(flagged("K"), within("Na", low=reach("5"), high=reach("50")))
    assert bool(matched([over("K"), rule], facts(a_sheet(value("K", "30"), value("Na", figure))))) is holds


@pytest.mark.parametrize(("figure", "holds"), [("50", False), ("50.1", True)])
def test_within_leaves_out_an_end_that_is_to_be_gone_beyond(figure: str, holds: bool) -> None:
    rule = pattern(within("K", low=beyond("50"), calls_out=True))
    signals = matched([rule], facts(a_sheet(value("K", figure))))
    assert bool(signals) is holds
    assert all([one.value for one in signal.flagged] == ["50.1"] for signal in signals)


def test_what_was_not_measured_lies_within_nothing_unless_it_is_optional() -> None:
    needed = pattern(flagged("K"), within("Na", high=beyond("5")))
    optional = pattern(flagged("K"), within("Na", high=beyond("5"), is_optional=True))
    about = facts(a_sheet(value("K", "30")))
    assert [len(matched([over("K"), rule], about)) for rule in (needed, optional)] == [0, 1]


def test_a_value_in_the_unit_of_something_else_lies_within_nothing() -> None:
    rule = pattern(flagged("K"), within("Na", high=beyond("5")))
    assert matched([over("K"), rule], facts(a_sheet(value("K", "30"), value("Na", "1", "kPa")))) == []


RATIO = Condition(("Si",), Asks.WITHIN, low=reach("3"), high=reach("7"), over="Al", less_new=True)


@pytest.mark.parametrize(
    ("silicon", "aluminium", "holds"),
    [
        ("75", "25", True),
        ("74", "25", False),
        ("175", "25", True),
        ("176", "25", False),
        ("75", "0", False),
        ("75", None, False),
    ],
)
def test_a_ratio_lies_within_a_window(silicon: str, aluminium: str | None, holds: bool) -> None:
    values = [value("Si", silicon), *([value("Al", aluminium)] if aluminium else [])]
    rules = [over("Si"), pattern(flagged("Si"), RATIO)]
    assert bool(matched(rules, facts(a_sheet(*values)))) is holds


def test_a_ratio_is_one_of_gains_over_new_oil() -> None:
    fresh = (value("Si", "15", phase="new"), value("Al", "5", phase="new"))
    rules = [over("Si"), pattern(flagged("Si"), RATIO)]
    about = facts(a_sheet(value("Si", "75"), value("Al", "25")), fresh=fresh)
    (signal,) = matched(rules, about)  # 60 / 20
    assert {one.value for one in signal.used} == {"25", "15", "5"}
    assert matched(rules, replace(about, fresh=(value("Al", "4", phase="new"), *fresh[:1]))) == []  # 60 / 21


def test_of_a_table_only_the_first_row_that_matches_counts() -> None:
    first = pattern(within("K", low=beyond("100"), calls_out=True), name="probable", table="k", row=1)
    second = pattern(within("K", low=beyond("50"), calls_out=True), name="suspected", table="k", row=2)
    apart = pattern(within("K", low=beyond("50"), calls_out=True), name="apart")
    told = [
        [one.rule.id for one in matched([second, first, apart], facts(a_sheet(value("K", figure))))]
        for figure in ("101", "100", "50")
    ]
    assert told == [["apart", "probable"], ["apart", "suspected"], []]


LOW = a_rule(
    id="low", kinds=("compression",), quantity="pressure", unit="psi", low=Limits(alarm=beyond("300")), high=Limits()
)
IS_LOW = Condition(("pressure",), Asks.FLAGGED_LOW)
NOT_RAISED = Condition(("wet_gain",), Asks.WITHIN, high=beyond("10"), unit="%")


def test_two_low_neighbours_of_a_bank_are_one_pattern_and_two_others_are_none() -> None:
    rule = pattern(IS_LOW, kinds=("compression",), at=Where.NEIGHBOURS)
    neighbours = matched([LOW, rule], facts(pressures("400", "200", "210", "400", "400", "400")))
    assert [(one.subject, [value.point for value in one.flagged]) for one in neighbours] == [("2-3", ["2", "3"])]
    assert matched([LOW, rule], facts(pressures("200", "400", "210", "400", "400", "400"))) == []


def test_two_low_neighbours_stand_out_only_beside_a_cylinder_that_was_measured_and_is_sound() -> None:
    rule = pattern(IS_LOW, kinds=("compression",), at=Where.NEIGHBOURS)
    fallen = a_rule(
        id="low", kinds=("compression",), quantity="pressure", unit="psi", low=Limits(beyond("300")), high=Limits()
    )
    assert [one.subject for one in matched([fallen, rule], facts(pressures("200", "210", "400")))] == ["1-2"]
    assert matched([fallen, rule], facts(pressures("200", "210"))) == []
    high = replace(fallen, id="high", low=Limits(), high=Limits(beyond("500")))
    assert [one.subject for one in matched([fallen, high, rule], facts(pressures("200", "210", "600")))] == ["1-2"]


def test_in_a_v_engine_the_next_in_the_bank_is_the_neighbour() -> None:
    engine = replace(ENGINE, cylinders=8, banks=((1, 3, 5, 7), (2, 4, 6, 8)))
    rule = pattern(IS_LOW, kinds=("compression",), at=Where.NEIGHBOURS)
    sheet = pressures("400", "400", "200", "200", "200", "400", "400", "400")
    assert [one.subject for one in matched([LOW, rule], facts(sheet, engine=engine))] == ["3-5"]


@pytest.mark.parametrize(("wet", "subjects"), [({3: "219"}, ["3"]), ({3: "220"}, []), ({}, [])])
def test_a_low_cylinder_that_oil_does_not_raise_is_told_by_its_wet_test(
    wet: dict[int, str], subjects: list[str]
) -> None:
    rule = pattern(IS_LOW, NOT_RAISED, kinds=("compression",), at=Where.CYLINDER)
    about = facts(pressures("400", "400", "200", "400", "400", "400", wet=wet))
    assert [one.subject for one in matched([LOW, rule], about)] == subjects


def test_every_cylinder_must_be_low_for_all_to_be() -> None:
    rule = pattern(IS_LOW, kinds=("compression",), at=Where.EVERY)
    bare = replace(ENGINE, cylinders=0, banks=())
    assert len(matched([LOW, rule], facts(pressures("200", "210"), engine=bare))) == 1
    assert matched([LOW, rule], facts(pressures("200", "310"), engine=bare)) == []
    assert matched([LOW, rule], facts(pressures("200"), engine=bare)) == []
    assert matched([LOW, rule], facts(pressures("200", "210"))) == []  # six cylinders, two measured


CLOSING = Signal(
    a_rule(id="tight", kinds=("lash",), quantity="lash"), Severity.ALERT, "3E", day("2026-03-01"), (), end=End.LOW
)


@pytest.mark.parametrize(("point", "subjects"), [("3E", ["3"]), ("3E2", ["3"]), ("3I", []), ("2E", [])])
def test_a_closing_exhaust_valve_and_a_low_cylinder_meet_across_sheets(point: str, subjects: list[str]) -> None:
    lash = a_sheet(value("lash", "0.2", point=point), kind="lash", days=30)
    standing = replace(CLOSING, subject=point, flagged=(evidence_of(lash, lash.values[0]),))
    rule = pattern(
        IS_LOW,
        NOT_RAISED,
        Condition(("lash",), Asks.FLAGGED_LOW, side="exhaust"),
        kinds=("compression",),
        at=Where.CYLINDER,
    )
    sheet = pressures("400", "400", "200", "400", "400", "400", wet={3: "205"})
    signals = matched([LOW, rule], facts(sheet, standing=(standing,), others=(lash,)))
    assert [one.subject for one in signals] == subjects
    assert all({value.quantity for value in one.flagged} == {"pressure", "lash"} for one in signals)


def test_values_of_the_newest_other_sheets_count_where_this_one_has_none() -> None:
    wet = pressures("400", "200", wet={2: "205"})
    rule = pattern(NOT_RAISED, Condition(("leak",), Asks.FLAGGED_HIGH), kinds=("leakdown",), at=Where.CYLINDER)
    leak = a_rule(id="leak", kinds=("leakdown",), quantity="leak", unit="%", high=Limits(beyond("25")))
    sheet = a_sheet(value("leak", "30", point="2"), kind="leakdown")
    assert [one.subject for one in matched([leak, rule], facts(sheet, others=(wet,)))] == ["2"]


HEARD = Condition(("heard",), Asks.SAID, words=("Exhaust",))
LEAK = a_rule(id="leak", kinds=("leakdown",), quantity="leak", unit="%", high=Limits(beyond("25")))


@pytest.mark.parametrize(
    ("words", "subjects"),
    [
        ([("exhaust", "2")], ["2"]),
        ([("exhaust", "1")], []),
        ([("intake", "2")], []),
        ([("exhaust", "")], ["2"]),
        ([], []),
    ],
)
def test_where_air_is_heard_is_a_condition_of_its_cylinder(words: list[tuple[str, str]], subjects: list[str]) -> None:
    rule = pattern(Condition(("leak",), Asks.FLAGGED_HIGH), HEARD, kinds=("leakdown",), at=Where.CYLINDER)
    said = tuple(SheetWord("heard", text, point) for text, point in words)
    sheet = replace(a_sheet(value("leak", "30", point="2"), kind="leakdown"), words=said)
    assert [one.subject for one in matched([LEAK, rule], facts(sheet))] == subjects


def test_something_said_may_be_optional() -> None:
    optional = replace(HEARD, is_optional=True)
    rule = pattern(Condition(("leak",), Asks.FLAGGED_HIGH), optional, kinds=("leakdown",))
    sheet = a_sheet(value("leak", "30", point="2"), kind="leakdown")
    assert len(matched([LEAK, rule], facts(sheet))) == 1


def test_absorbed_values_are_those_of_the_same_cylinder() -> None:
    rule = pattern(
        Condition(("pressure",), Asks.FLAGGED_LOW), kinds=("compression",), at=Where.CYLINDER, absorbs=("exhaust",)
    )
    hot = a_rule(id="hot", kinds=("compression",), quantity="exhaust", unit="°C", high=Limits(beyond("500")))
    sheet = pressures("400", "200")
    sheet = replace(
        sheet, values=(*sheet.values, value("exhaust", "600", point="1"), value("exhaust", "600", point="2"))
    )
    (signal,) = matched([LOW, hot, rule], facts(sheet))
    assert [(one.quantity, one.point) for one in signal.flagged] == [("exhaust", "2"), ("pressure", "2")]


def test_a_pattern_is_left_out_where_the_sheet_says_what_bars_it() -> None:
    rule = replace(pattern(flagged("Fe")), unless={"repair": ("sealant",)})
    sheet = a_sheet(value("Fe", "30"), words={"repair": "sealant"})
    assert matched([*RULES, rule], facts(sheet)) == []


def test_the_verdict_of_a_value_is_that_of_its_own_rules_and_of_a_pattern_only_where_it_has_none() -> None:
    grave = pattern(flagged("Cu"), within("Na", low=beyond("5"), calls_out=True), severity=Severity.ALARM)
    judged = judge_sheet([over("Cu"), grave], facts(a_sheet(value("Cu", "30"), value("Na", "10"))))
    assert {one.quantity: str(verdict) for one, verdict in judged.verdicts} == {"Cu": "alert", "Na": "alarm"}


def test_a_sheet_judged_twice_says_the_same_and_the_facts_stay_as_they_were() -> None:
    about = facts(a_sheet(value("K", "30"), value("Cu", "30")), fresh=(value("K", "1", phase="new"),))
    before = repr(about)
    rules = [*RULES, pattern(flagged("Na", "K"), flagged("Cu"))]
    assert judge_sheet(rules, about) == judge_sheet(rules, about)
    assert repr(about) == before


def test_a_value_is_dated_from_the_first_sheet_that_showed_it_without_a_break() -> None:
    def sample(iron: str | None, days: int) -> object:
        return a_sheet(*([value("Fe", iron)] if iron else [value("Cu", "3")]), days=days)

    earlier = (sample("60", 90), sample("10", 60), sample("30", 40), sample(None, 20), sample("30", 10))
    (signal,) = judge([over("Fe")], facts(a_sheet(value("Fe", "60")), earlier=earlier))
    assert signal.since == day("2026-03-08")
    assert Decimal(60) == signal.measured
