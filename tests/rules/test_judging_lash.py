"""Verdicts of a lash sheet as signals: each gap once, on its own side."""

from decimal import Decimal

from fleetcare.domain.engines import Side
from fleetcare.domain.rule_book import Basis, Bounds, End, Limits
from fleetcare.domain.sheets import LashSpec, Phase, SheetValue
from fleetcare.rules.judge_engine import Background
from fleetcare.rules.judge_history import judge_history
from fleetcare.rules.judge_lash import judge_value
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import judge, judge_sheet
from tests.builders import START
from tests.rules.measured import ENGINE, a_rule, a_sheet, facts, value

SPEC = LashSpec(START, "mm", "any", {Side.EXHAUST: (Decimal("0.40"), Decimal("0.50"))})
TIGHT = a_rule(id="tight", kinds=("lash",), quantity="lash", unit="", shape=Bounds(Basis.SPEC, End.LOW), high=Limits())
SET = a_rule(
    id="set",
    kinds=("lash",),
    quantity="lash",
    unit="",
    shape=Bounds(Basis.SPEC, is_set=True),
    of_engine=True,
    high=Limits(),
    cause="set",
)
WIDE = a_rule(id="wide", kinds=("lash",), quantity="lash", unit="", shape=Bounds(Basis.SPEC, End.HIGH), high=Limits())


def gauged(*values: SheetValue, days: int = 0, **changes: object) -> MeasuredFacts:
    """A lash sheet with what the spec of the engine says of each of its exhaust gaps."""
    sheet = a_sheet(*values, kind="lash", days=days)
    judged = tuple(judge_value(one, Side.EXHAUST, SPEC, "") for one in values)
    return facts(sheet, lash={sheet.entry: judged}, **changes)


def test_a_gap_out_of_its_range_is_a_signal_on_its_own_side() -> None:
    about = gauged(
        value("lash", "0.35", point="1E", phase="found"),
        value("lash", "0.55", point="2E", phase="left"),
        value("lash", "0.40", point="3E", phase="found"),
    )
    tight, wide = judge([TIGHT, WIDE], about)
    assert (tight.rule.id, tight.subject, str(tight.severity), tight.margin) == (
        "tight",
        "1E",
        "alert",
        Decimal("-0.05"),
    )
    assert (wide.rule.id, wide.subject, str(wide.severity), wide.limit) == ("wide", "2E", "alarm", Decimal("0.50"))
    assert wide.measured == Decimal("0.55")
    assert [str(verdict) for _, verdict in judge_sheet([TIGHT, WIDE], about).verdicts] == ["alert", "alarm", "in"]


def test_an_interval_is_as_far_out_as_it_is_for_certain() -> None:
    (signal,) = judge([TIGHT], gauged(value("lash", "0.30..0.35", point="1E", phase="found")))
    assert (signal.measured, signal.margin) == (Decimal("0.35"), Decimal("-0.05"))


def test_a_gap_that_could_not_be_judged_says_why_and_a_shim_has_no_limit_of_its_own() -> None:
    about = gauged(
        value("lash", "0.35..0.45", point="1E", phase="found"), value("shim", "2.75", point="1E", phase="found")
    )
    judged = judge_sheet([TIGHT, WIDE], about)
    assert judged.signals == ()
    assert [(one.rule.id, one.subject, one.why) for one in judged.not_judged] == [
        ("tight", "1E", "lash: undecided"),
        ("wide", "1E", "lash: undecided"),
    ]


def test_a_closing_valve_is_dated_from_the_first_sheet_that_showed_it() -> None:
    before = gauged(value("lash", "0.38", point="1E", phase="found"), days=90)
    now = gauged(value("lash", "0.35", point="1E", phase="found"), earlier=(before.sheet,))
    (signal,) = judge([TIGHT], MeasuredFacts(now.engine, now.sheet, now.earlier, lash={**before.lash, **now.lash}))
    assert signal.since == before.sheet.on


def found_and_left(point: str, found: str, left: str, phase: str = "left") -> tuple[SheetValue, SheetValue]:
    """What a gap was found and left at."""
    return value("lash", found, point=point, phase="found"), value("lash", left, point=point, phase=phase)


def taken(about: MeasuredFacts) -> list[tuple[str, str, str]]:
    """Rule, point and severity of each signal."""
    return [(one.rule.id, one.subject, str(one.severity)) for one in judge([TIGHT, WIDE, SET], about)]


def test_gaps_found_out_and_left_inside_are_taken_by_the_rule_for_what_was_set_alone() -> None:
    about = gauged(*found_and_left("1E", "0.35", "0.45"), *found_and_left("2E", "0.56", "0.46"))
    assert taken(about) == [("set", "1E", "alert"), ("set", "2E", "alert")]
    low, wide = judge([SET], about)
    assert (low.end, wide.end) == (End.LOW, End.HIGH)
    assert [(one.label, one.value) for one in wide.steps] == [
        ("check range from", Decimal("0.40")),
        ("to", Decimal("0.50")),
        ("out by", Decimal("0.06")),
        ("left", Decimal("0.46")),
    ]
    assert [one.value for one in wide.used] == ["0.46"]


def test_a_gap_left_out_or_not_told_or_not_set_or_closed_to_nothing_stands_as_it_was_found() -> None:
    about = gauged(
        *found_and_left("1E", "0.35", "0.38"),
        *found_and_left("2E", "0.35", "0.38..0.45"),
        value("lash", "0.35", point="3E", phase="found"),
        *found_and_left("4E", "0", "0.45"),
        *found_and_left("5E", "0.45", "0.46"),
    )
    assert taken(about) == [
        ("tight", "1E", "alert"),
        ("tight", "1E", "alarm"),
        ("tight", "2E", "alert"),
        ("tight", "3E", "alert"),
        ("tight", "4E", "alarm"),
    ]


def test_a_shim_that_was_changed_is_no_gap_that_was_left() -> None:
    shim = SheetValue("shim", "1E", Phase.LEFT, Decimal("2.70"), None, None, "mm")
    assert taken(gauged(value("lash", "0.35", point="1E", phase="found"), shim)) == [("tight", "1E", "alert")]
    set_with = gauged(*found_and_left("1E", "0.35", "0.45"), shim)
    assert taken(set_with) == [("set", "1E", "alert")]


def test_what_was_left_between_two_blades_is_said_to_be_at_least_the_thinner() -> None:
    (signal,) = judge([SET], gauged(*found_and_left("1E", "0.35", "0.42..0.45")))
    assert (signal.steps[-1].label, signal.steps[-1].value) == ("left, at least", Decimal("0.42"))


def standings(*sheets: MeasuredFacts) -> list[list[tuple[str, str, list[str]]]]:
    """Cause, subject and points of what stands after each of some sheets."""
    background = Background(lash={key: told for one in sheets for key, told in one.lash.items()})
    found = judge_history([one.sheet for one in sheets], ENGINE, [TIGHT, WIDE, SET], background)
    return [
        [(one.cause, one.subject, [value.point for value in one.evidence]) for one in standing.findings]
        for standing in found
    ]


def test_what_was_set_is_one_finding_until_each_gap_is_measured_again() -> None:
    first = gauged(*found_and_left("1E", "0.35", "0.45"), *found_and_left("2E", "0.56", "0.46"), days=60)
    one_holds = gauged(value("lash", "0.44", point="1E", phase="found"), days=30)
    other_holds = gauged(value("lash", "0.46", point="2E", phase="found"))
    assert standings(first, one_holds, other_holds) == [[("set", "", ["1E", "2E"])], [("set", "", ["2E"])], []]


def test_a_gap_that_was_set_and_is_found_out_again_unset_stands_alone_then() -> None:
    first = gauged(*found_and_left("1E", "0.35", "0.45"), *found_and_left("2E", "0.56", "0.46"), days=60)
    again = gauged(value("lash", "0.38", point="1E", phase="found"))
    assert standings(first, again)[-1] == [("iron wear", "1E", ["1E"]), ("set", "", ["2E"])]


def test_what_was_found_and_what_was_left_out_are_both_evidence() -> None:
    assert standings(gauged(*found_and_left("1E", "0.35", "0.38"))) == [[("iron wear", "1E", ["1E", "1E"])]]
